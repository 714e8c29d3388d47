//! Any text as a bench table; a table that reads is solved.
#![no_main]

#[path = "../../hostile/numbers.rs"]
mod numbers;

use ampledger::identify::{identify, read_csv};
use libfuzzer_sys::fuzz_target;

fuzz_target!(|text: &str| {
    let Ok(readings) = read_csv("fuzz.csv", text) else {
        return;
    };
    if let Ok(found) = identify(&readings) {
        let text = serde_yaml::to_string(&found).expect("an answer can be written");
        assert_eq!(numbers::none_in(&text), None, "{text}");
    }
});
