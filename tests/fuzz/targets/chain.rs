//! The examples with their numbers and lines changed, through the whole chain.
#![no_main]
#![allow(dead_code)] // the other targets'

#[path = "../../hostile/edits.rs"]
mod edits;
#[path = "../../hostile/numbers.rs"]
mod numbers;
#[path = "../../hostile/tried.rs"]
mod tried;

use std::sync::LazyLock;

static EXAMPLES: LazyLock<Vec<String>> = LazyLock::new(edits::examples);

libfuzzer_sys::fuzz_target!(|bytes: &[u8]| {
    if let Some((first, recipe)) = bytes.split_first() {
        let example = &EXAMPLES[usize::from(*first) % EXAMPLES.len()];
        tried::chain(edits::edited(example, recipe).as_bytes());
    }
});
