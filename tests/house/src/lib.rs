//! Checks that live outside the crates: see `tests/`.
