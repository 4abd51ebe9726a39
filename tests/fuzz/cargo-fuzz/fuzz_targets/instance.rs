//! libFuzzer on the target `instance`.
#![no_main]

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| hullward_tests_fuzz::targets::instance(bytes));
