//! Every example, and every number in it.

use ampledger::build::SourceKind;
use ampledger::catalog::Catalogs;
use ampledger::resolve::resolve;

#[test]
fn every_example_resolves() {
    let mut seen = 0;
    for file in std::fs::read_dir("examples").unwrap() {
        let path = file.unwrap().path();
        let text = std::fs::read_to_string(&path).unwrap_or_default();
        if !text.contains("\nbuild:") {
            continue;
        }
        assert!(text.starts_with("# Invented setting"), "{}", path.display());
        let (description, _) =
            ampledger::description::read_file(&path, &[]).unwrap_or_else(|e| panic!("{e}"));
        let build = resolve(&description, &Catalogs::builtin());
        build.unwrap_or_else(|e| panic!("{}: {e:?}", path.display()));
        seen += 1;
    }
    assert!(seen >= 13, "{seen}");
}

/// Every number of every example in turn made nothing, tiny, huge and negative: an answer or a refusal, never a panic,
/// and never a figure that is not finite.
#[test]
fn no_number_can_break_it() {
    let mut tried = 0;
    let catalogs = Catalogs::builtin();
    for file in std::fs::read_dir("examples").unwrap() {
        let path = file.unwrap().path();
        let text = std::fs::read_to_string(&path).unwrap_or_default();
        for (from, to) in numbers(&text) {
            for other in ["0", "1e-6", "1e6"] {
                let changed = format!("{}{other}{}", &text[..from], &text[to..]);
                let Ok((description, _)) =
                    ampledger::description::read("changed", changed.as_bytes())
                else {
                    continue;
                };
                if let Ok(build) = resolve(&description, &catalogs) {
                    tried += 1;
                    for source in &build.sources {
                        if let SourceKind::Winding(w) = &source.kind {
                            assert!(w.constants.inductance().is_finite(), "{changed}");
                            assert!(w.resistance.value.is_finite(), "{changed}");
                        }
                    }
                }
            }
        }
    }
    assert!(tried > 100, "{tried}");
}

/// Where the numbers stand that begin a value.
fn numbers(text: &str) -> Vec<(usize, usize)> {
    let bytes = text.as_bytes();
    let part = |b: u8| b.is_ascii_digit() || b == b'.';
    let mut found = Vec::new();
    let mut at = 0;
    while at < bytes.len() {
        let begins = bytes[at].is_ascii_digit() && at > 0 && matches!(bytes[at - 1], b' ' | b'-');
        let mut end = at + 1;
        if begins {
            while end < bytes.len() && part(bytes[end]) {
                end += 1;
            }
            found.push((at, end));
        }
        at = end;
    }
    found
}
