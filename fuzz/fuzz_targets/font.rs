//! libFuzzer on the font reader; what must hold stands in `src/targets.rs`.
#![no_main]

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| tubewright_fuzz::targets::font(bytes));
