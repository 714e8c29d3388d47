//! The examples with their numbers and lines changed, through the whole chain: an answer in numbers, or a refusal.
#![no_main]

#[path = "../../hostile/edits.rs"]
mod edits;
#[path = "../../hostile/numbers.rs"]
mod numbers;

use ampledger::catalog::Catalogs;
use ampledger::check::{Wanted, check};
use ampledger::description::read;
use ampledger::resolve::resolve;
use libfuzzer_sys::fuzz_target;
use std::sync::LazyLock;

static CATALOGS: LazyLock<Catalogs> = LazyLock::new(Catalogs::builtin);
static EXAMPLES: LazyLock<Vec<String>> = LazyLock::new(edits::examples);

fuzz_target!(|bytes: &[u8]| {
    let Some((first, edits)) = bytes.split_first() else {
        return;
    };
    let text = edits::edited(&EXAMPLES[usize::from(*first) % EXAMPLES.len()], edits);
    let Ok((description, _)) = read("fuzz.yaml", text.as_bytes()) else {
        return;
    };
    let Ok(build) = resolve(&description, &CATALOGS) else {
        return;
    };
    if let Ok(checked) = check(&build, Wanted::default()) {
        let answer = serde_yaml::to_string(&checked.check).expect("an answer can be written");
        assert_eq!(numbers::none_in(&answer), None, "{text}\n{answer}");
    }
});
