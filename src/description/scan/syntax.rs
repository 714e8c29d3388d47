//! Syntax errors: what the YAML reader says, where, and what would put it right.

use super::Scan;
use crate::problem::{Problem, TextProblem};
use saphyr_parser::ScanError;
use std::ops::Range;

/// What the YAML reader says where brackets nest beyond its own limit, before it comes to tell of the outer ones.
const RECURSION: &str = "recursion limit exceeded";

impl Scan<'_> {
    /// A syntax error, told as a tab where it is one.
    pub(super) fn syntax(&self, e: &ScanError) -> Problem {
        let at = self.byte(e.marker().index());
        if let Some(tab) = tab_near(self.text, at) {
            return Problem::text(TextProblem::Tab, tab);
        }
        let end = self.text[at..]
            .char_indices()
            .nth(1)
            .map_or(self.text.len(), |(i, _)| at + i);
        if e.info() == RECURSION {
            return Problem::text(TextProblem::TooDeep, at..end);
        }
        let what = e.info().replace(['`', '\''], "\"");
        let opened = self
            .open
            .iter()
            .rev()
            .find(|f| f.flow)
            .map(|f| f.start..f.start + 1);
        let bracket = opened.as_ref().and_then(|o| self.text.get(o.clone()));
        let hint = hint(self.text, at, &what, bracket);
        // a bracket on a line of its own above says more than the line where the reader gave up
        let opened = opened.filter(|o| self.text[o.start..at.max(o.start)].contains('\n'));
        Problem::text(TextProblem::Syntax { what, hint, opened }, at..end)
    }
}

/// A tab in the indentation of the line of an error, or of the next.
pub(in crate::description) fn tab_near(text: &str, at: usize) -> Option<Range<usize>> {
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

/// What would put a common slip right.
fn hint(text: &str, at: usize, what: &str, bracket: Option<&str>) -> Option<&'static str> {
    let start = text[..at].rfind('\n').map_or(0, |n| n + 1);
    let line = text[start..].lines().next().unwrap_or_default();
    let above = text[..start].lines().next_back().unwrap_or_default();
    let joined = |line: &str| {
        let key = line.trim_start_matches([' ', '-']);
        key.split_once(':').is_some_and(|(k, v)| {
            !v.is_empty()
                && !v.starts_with(char::is_whitespace)
                && k.chars().all(|c| c.is_alphanumeric() || c == '_')
        })
    };
    match what {
        _ if joined(line) || joined(above) => Some("put a space after the colon: `key: value`"),
        w if w.contains("mapping values") => {
            Some("check the indentation, and put a text that holds `: ` into quotes")
        }
        w if w.contains("quoted scalar") => Some("close the quotation mark"),
        _ if bracket == Some("[") => {
            Some("close the bracket `[` with `]`, and put a comma between entries")
        }
        _ if bracket == Some("{") => {
            Some("close the brace `{` with `}`, and put a comma between entries")
        }
        w if w.contains("unexpected character") => {
            Some("put a text that begins with this character into quotes")
        }
        w if w.contains("unknown anchor") => {
            Some("an alias `*name` needs an anchor `&name` before it")
        }
        _ => Some("check the indentation and the brackets of this line"),
    }
}
