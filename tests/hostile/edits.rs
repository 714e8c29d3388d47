//! Build files a little or a lot off: the examples with numbers, words and lines changed by a recipe of bytes.
//!
//! Used by the seeded test and by the fuzzing targets; the same recipe always gives the same text.

use std::path::Path;

/// The text of every example build.
pub fn examples() -> Vec<String> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR"));
    let folder = folder.ancestors().find(|f| f.join("catalogs").is_dir());
    let folder = folder.expect("the folder of examples").join("examples");
    let entries = std::fs::read_dir(folder).expect("the examples");
    let mut paths: Vec<_> = entries.map(|e| e.expect("an example").path()).collect();
    paths.retain(|p| p.extension().is_some_and(|e| e == "yaml"));
    paths.sort();
    let texts = paths
        .iter()
        .map(|p| std::fs::read_to_string(p).expect("its text"));
    texts.collect()
}

/// What a number may become: as written, times a factor, or another text.
const FACTORS: [f64; 12] = [
    0.0, 1e-9, 0.001, 0.1, 0.5, 0.9, 1.1, 2.0, 10.0, 1000.0, 1e9, -1.0,
];
const TEXTS: [&str; 8] = [
    "1e308",
    "1e-308",
    ".nan",
    ".inf",
    "-0",
    "99999999999999999999",
    "",
    "1e400",
];

/// A text with edits, four bytes each: which, where (two bytes), how.
pub fn edited(text: &str, recipe: &[u8]) -> String {
    let mut text = text.to_owned();
    for edit in recipe.chunks_exact(4).take(16) {
        let place = usize::from(u16::from_be_bytes([edit[1], edit[2]]));
        text = match edit[0] % 8 {
            0..=4 => number(&text, place, edit[3]),
            5 => lines(&text, |all| {
                let at = place % all.len();
                all.remove(at);
            }),
            6 => lines(&text, |all| {
                let (from, to) = (place % all.len(), usize::from(edit[3]) % all.len());
                let line = all[from];
                all.insert(to, line);
            }),
            _ => lines(&text, |all| {
                let (a, b) = (place % all.len(), usize::from(edit[3]) % all.len());
                all.swap(a, b);
            }),
        };
    }
    text
}

/// The text with its lines changed.
fn lines(text: &str, change: impl FnOnce(&mut Vec<&str>)) -> String {
    let mut all: Vec<&str> = text.lines().collect();
    if !all.is_empty() {
        change(&mut all);
    }
    all.join("\n") + "\n"
}

/// The text with one of its numbers changed.
fn number(text: &str, place: usize, how: u8) -> String {
    let spans = numbers(text);
    if spans.is_empty() {
        return text.to_owned();
    }
    let (start, end) = spans[place % spans.len()];
    let value: f64 = text[start..end].parse().unwrap_or(1.0);
    let how = usize::from(how) % (FACTORS.len() + TEXTS.len());
    let new = match FACTORS.get(how) {
        Some(factor) => format!("{}", value * factor),
        None => TEXTS[how - FACTORS.len()].to_owned(),
    };
    format!("{}{new}{}", &text[..start], &text[end..])
}

/// Where the numbers of a text stand, those of comments and names left out.
fn numbers(text: &str) -> Vec<(usize, usize)> {
    let bytes = text.as_bytes();
    let (mut spans, mut at, mut comment) = (Vec::new(), 0, false);
    while at < bytes.len() {
        match bytes[at] {
            b'#' => comment = true,
            b'\n' => comment = false,
            b'0'..=b'9' if !comment && (at == 0 || !bytes[at - 1].is_ascii_alphanumeric()) => {
                let is_part = |b: &&u8| b.is_ascii_digit() || **b == b'.';
                let end = at + bytes[at..].iter().take_while(is_part).count();
                spans.push((at, end));
                at = end;
                continue;
            }
            _ => {}
        }
        at += 1;
    }
    spans
}
