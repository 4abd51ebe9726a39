//! Placeholder until the crate is written.
fn main() {}
