//! libFuzzer on the target `mps`.
#![no_main]

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| hullward_tests_fuzz::targets::mps(bytes));
