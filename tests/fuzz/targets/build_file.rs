//! Any bytes as a build file: accepted, or refused in a message that points into the text.
#![no_main]

use ampledger::catalog::Catalogs;
use ampledger::description::read;
use ampledger::problem::Refusal;
use ampledger::resolve::resolve;
use libfuzzer_sys::fuzz_target;
use std::sync::LazyLock;

static CATALOGS: LazyLock<Catalogs> = LazyLock::new(Catalogs::builtin);

fuzz_target!(|bytes: &[u8]| {
    match read("fuzz.yaml", bytes) {
        Err(refusal) => told(&refusal),
        Ok((description, source)) => {
            if let Err(problems) = resolve(&description, &CATALOGS) {
                told(&Refusal::new(source, problems));
            }
        }
    }
});

/// Something is said, in plain text, and every place lies in the file.
fn told(refusal: &Refusal) {
    assert!(!refusal.problems().is_empty());
    let text = refusal.render(false);
    assert!(
        text.starts_with("error: ") && !text.contains('\u{1b}'),
        "{text}"
    );
    let lines = refusal.source().text.split('\n').count().max(1);
    for problem in refusal.problems().iter() {
        if let Some((line, column)) = refusal.source().place(problem) {
            assert!(
                (1..=lines).contains(&line) && column >= 1,
                "{line}:{column} of {lines} lines"
            );
        }
    }
}
