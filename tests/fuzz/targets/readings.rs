//! Any text as a bench table.
#![no_main]
#![allow(dead_code)] // the other targets'

#[path = "../../hostile/numbers.rs"]
mod numbers;
#[path = "../../hostile/tried.rs"]
mod tried;

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| tried::readings(bytes));
