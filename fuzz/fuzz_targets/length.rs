//! libFuzzer on the reader of typed lengths; what must hold stands in `src/targets.rs`.
#![no_main]

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| tubewright_fuzz::targets::length(bytes));
