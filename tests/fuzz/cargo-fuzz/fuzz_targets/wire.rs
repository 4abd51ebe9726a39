//! libFuzzer on the target `wire`.
#![no_main]

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| hullward_tests_fuzz::targets::wire(bytes));
