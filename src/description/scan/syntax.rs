//! Syntax errors of the first reader.

use super::Scan;
use crate::description::slip;
use crate::problem::{Problem, TextProblem};
use saphyr_parser::ScanError;

/// What the YAML reader says where brackets nest beyond its own limit, before it comes to tell of the outer ones.
const RECURSION: &str = "recursion limit exceeded";

impl Scan<'_> {
    /// What is said where the reader gave up.
    pub(super) fn syntax(&self, e: &ScanError) -> Problem {
        let at = self.byte(e.marker().index());
        let end = self.text[at..]
            .char_indices()
            .nth(1)
            .map_or(self.text.len(), |(i, _)| at + i);
        if e.info() == RECURSION {
            return Problem::text(TextProblem::TooDeep, at..end);
        }
        slip::told(self.text, at..end, e.info())
    }
}
