//! Whatever comes from outside gives an answer: no panic, places inside the text, an end.
//!
//! | module | holds |
//! |---|---|
//! | [`targets`] | what takes bytes from outside, each as a plain function that asserts what must hold |
//! | [`mutate`] | seeded mutations of texts; the same on every machine |
//! | [`seeds`] | texts to begin with: the catalogue, help, generated instances, scenarios, `corpus/` |
//!
//! `tests/mutations.rs` runs every target on a fixed number of mutations, as CI does.
//! `cargo-fuzz/` hands the same functions to a coverage-guided fuzzer (libFuzzer).

pub mod mutate;
pub mod seeds;
pub mod targets;
