//! Any bytes as a build file.
#![no_main]
#![allow(dead_code)] // the other targets'

#[path = "../../hostile/numbers.rs"]
mod numbers;
#[path = "../../hostile/tried.rs"]
mod tried;

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| tried::build_file(bytes));
