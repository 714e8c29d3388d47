//! The slip behind a text that is no YAML: where the hand went wrong, which is often above the place where a reader gives up.

mod bracket;
mod line;
mod near;

use crate::problem::{Problem, TextProblem};
use bracket::{Open, open_at};
use near::Near;
use std::ops::Range;

/// What is said of a text on which a reader gave up at `at`, in its words `what`.
pub(super) fn told(text: &str, at: Range<usize>, what: &str) -> Problem {
    if let Some(tab) = tab_near(text, at.start) {
        return Problem::text(TextProblem::Tab, tab);
    }
    let near = Near::new(text, at.start);
    let open = open_at(text, at.start);
    let slip = near
        .slip(what)
        .or_else(|| open.as_ref().filter(|o| !o.closed_later).map(Open::slip))
        .or_else(|| near.of_lines(what).filter(|_| open.is_none()));
    if let Some(Slip { at, what, hint }) = slip {
        return Problem::text(not_yaml(what, hint, None), at);
    }
    let hint = hint(what, open.as_ref()).to_owned();
    // a bracket on a line of its own above says more than the line where the reader gave up
    let opened = open
        .map(|o| o.at..o.at + 1)
        .filter(|o| o.start < near.line.start);
    let what = what.replace("``'", "a backtick").replace(['`', '\''], "\"");
    Problem::text(not_yaml(what, hint, opened), at)
}

fn not_yaml(what: String, hint: String, opened: Option<Range<usize>>) -> TextProblem {
    let (of, hint) = ("YAML", Some(hint));
    TextProblem::Syntax {
        of,
        what,
        hint,
        opened,
    }
}

/// A tab in the indentation of the line of an error, or of the next.
fn tab_near(text: &str, at: usize) -> Option<Range<usize>> {
    let start = text[..at].rfind('\n').map_or(0, |n| n + 1);
    let mut line_start = start;
    for line in text[start..].split('\n').take(2) {
        let indent = line.len() - line.trim_start_matches([' ', '\t']).len();
        if let Some(tab) = line[..indent].find('\t') {
            let end = tab + line[tab..indent].len();
            return Some(line_start + tab..line_start + end);
        }
        line_start += line.len() + 1;
    }
    None
}

/// A slip that is known: its bytes, what it is, what would do.
struct Slip {
    at: Range<usize>,
    what: String,
    hint: String,
}

impl Slip {
    fn new(at: Range<usize>, what: &str, hint: String) -> Slip {
        let what = what.to_owned();
        Slip { at, what, hint }
    }
}

/// What would put right what is no slip of a known kind.
fn hint(what: &str, open: Option<&Open>) -> &'static str {
    match (what, open.map(|o| o.bracket)) {
        (w, _) if w.contains("trailing content") => "put the whole of the text into quotes",
        (w, _) if w.contains("quoted scalar") => "close the quotation mark",
        (w, _) if w.contains("misplaced bracket") => "take it out, it closes nothing",
        (_, Some(b'[')) => "put a comma between the entries of the bracket `[`",
        (_, Some(_)) => {
            "put a comma between the entries of the brace `{`, and a space after each colon"
        }
        (w, _) if w.contains("unexpected character") => {
            "put a text that begins with this character into quotes"
        }
        (w, _) if w.contains("unknown anchor") => {
            "an alias `*name` needs an anchor `&name` before it"
        }
        _ => "check the indentation and the brackets of this line",
    }
}

#[cfg(test)]
mod tests;
