//! Any bytes as a file of a catalog.
#![no_main]
#![allow(dead_code)] // the other targets'

#[path = "../../hostile/numbers.rs"]
mod numbers;
#[path = "../../hostile/tried.rs"]
mod tried;

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| tried::catalog(bytes));
