//! Problems drawn on the lines of their file.

use super::{MOST_KEPT, Part, Problem, ProblemKind, Problems, SenseProblem, TextProblem};
use crate::description::places::Places;
use annotate_snippets::{Annotation, AnnotationKind, Group, Level, Origin, Renderer, Snippet};
use std::ops::Range;

/// A text, what it is called, and where its values stand.
#[derive(Clone, Debug, Default)]
pub struct Source {
    /// Name in messages: the path as given, or `standard input`.
    pub name: String,
    /// The text, with plain line ends, `--set` values in their places.
    pub text: String,
    /// Where its values stand.
    pub places: Places,
    /// What `--set` put in.
    pub splices: Vec<Splice>,
}

/// A part of a text that `--set` put there.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Splice {
    /// Bytes of the text.
    pub bytes: Range<usize>,
    /// The assignment, as given.
    pub assignment: String,
    /// Lines that the text has gained by it (or lost).
    pub lines: isize,
}

/// Longest line that is drawn; of a longer one only the place is told.
const LONGEST_LINE: usize = 1000;

impl Source {
    /// The bytes that a problem marks.
    pub(super) fn bytes(&self, problem: &Problem) -> Option<Range<usize>> {
        if let Part::Bytes(bytes) = &problem.part {
            return Some(self.within(bytes.clone()));
        }
        if problem.part == Part::Nothing {
            return None;
        }
        let found = self.places.nearest(&problem.path)?;
        let exact = self.places.find(&problem.path).is_some();
        let bytes = match &problem.part {
            Part::Key => found
                .key
                .clone()
                .unwrap_or_else(|| self.first_line(found.value.clone())),
            Part::Within(part) if exact => {
                self.narrowed(&found.value, self.places.scalar(&found), part)
            }
            _ if self.places.is_block(&found) && found.key.is_some() => {
                found.key.clone().unwrap_or_default()
            }
            _ if found.value.is_empty() => found.key.clone().unwrap_or(found.value),
            _ => self.first_line(found.value.clone()),
        };
        Some(self.within(bytes))
    }

    /// A part of a single value, where its text stands in the file as it is meant.
    fn narrowed(
        &self,
        value: &Range<usize>,
        scalar: Option<(&str, bool)>,
        part: &Range<usize>,
    ) -> Range<usize> {
        let written = self.text.get(value.clone()).unwrap_or_default();
        let (text, plain) = scalar.unwrap_or(("", true));
        let quote = usize::from(!plain);
        if written.get(quote..written.len().saturating_sub(quote)) != Some(text) || part.is_empty()
        {
            return self.first_line(value.clone());
        }
        let start = value.start + quote;
        start + part.start..start + part.end
    }

    /// The bytes up to the end of their first line, without a comment.
    fn first_line(&self, bytes: Range<usize>) -> Range<usize> {
        let written = self.text.get(bytes.clone()).unwrap_or_default();
        let line = written.lines().next().unwrap_or_default();
        let line = line.split(" #").next().unwrap_or(line);
        bytes.start..bytes.start + line.trim_end().len()
    }

    /// Bytes that lie within the text, on whole characters.
    fn within(&self, bytes: Range<usize>) -> Range<usize> {
        let floor = |mut at: usize| {
            at = at.min(self.text.len());
            while !self.text.is_char_boundary(at) {
                at -= 1;
            }
            at
        };
        let start = floor(bytes.start);
        start..floor(bytes.end).max(start)
    }

    /// Line and column of a byte, both from 1, the column in characters.
    #[must_use]
    pub fn line_column(&self, byte: usize) -> (usize, usize) {
        let before = &self.text[..self.within(0..byte).end];
        // lines are counted as the file has them, without those that `--set` brought
        let brought: isize = self
            .splices
            .iter()
            .filter(|s| s.bytes.start < byte)
            .map(|s| s.lines)
            .sum();
        let line = before
            .matches('\n')
            .count()
            .saturating_add_signed(brought.saturating_neg())
            + 1;
        let start = before.rfind('\n').map_or(0, |n| n + 1);
        (line, before[start..].chars().count() + 1)
    }

    /// Line of a value, from 1; of one that is not there, the nearest above it.
    #[must_use]
    pub fn line_of(&self, path: &str) -> usize {
        let found = self.places.nearest(path);
        self.line_column(found.map_or(0, |f| f.value.start)).0
    }

    /// Line and column of a problem, where it has a place.
    #[must_use]
    pub fn place(&self, problem: &Problem) -> Option<(usize, usize)> {
        self.bytes(problem).map(|b| self.line_column(b.start))
    }

    /// What another place of the problem says.
    fn second(&self, problem: &Problem) -> Option<(Range<usize>, &'static str)> {
        match &problem.kind {
            ProblemKind::Text(TextProblem::DuplicateKey { first, .. }) => {
                Some((self.within(first.clone()), "first given here"))
            }
            ProblemKind::Text(TextProblem::Syntax {
                opened: Some(opened),
                ..
            }) => Some((self.within(opened.clone()), "not closed")),
            ProblemKind::Sense(SenseProblem::DuplicateName { first, .. }) => {
                let found = self.places.find(first)?;
                Some((
                    self.within(self.first_line(found.value)),
                    "first given here",
                ))
            }
            _ => None,
        }
    }
}

/// Every problem on its line, in order; at the end how many there are, where there is more than one.
#[must_use]
pub fn render(source: &Source, problems: &Problems, colour: bool) -> String {
    let renderer = if colour {
        Renderer::styled()
    } else {
        Renderer::plain()
    };
    let mut out = String::new();
    let mut drawn = Vec::new();
    for problem in problems.iter() {
        // one value behind an anchor is wrong once, however often it is used
        let once = (source.bytes(problem), &problem.kind);
        if once.0.is_none() || !drawn.contains(&once) {
            out.push_str(&draw(source, problem, &renderer));
            out.push_str("\n\n");
            drawn.push(once);
        }
    }
    let count = drawn.len();
    if problems.more() {
        out.push_str(&format!(
            "more than {MOST_KEPT} problems in {}, {count} shown\n",
            source.name
        ));
    } else if count > 1 {
        out.push_str(&format!("{count} problems in {}\n", source.name));
    }
    out
}

/// One problem.
fn draw(source: &Source, problem: &Problem, renderer: &Renderer) -> String {
    let title = annotate_snippets::normalize_untrusted_str(&problem.kind.to_string());
    let mut group = Group::with_title(Level::ERROR.primary_title(title));
    let bytes = source.bytes(problem);
    let label = annotate_snippets::normalize_untrusted_str(&problem.kind.label());
    group = match &bytes {
        None if source.name.is_empty() => group,
        None => group.element(Origin::path(source.name.as_str())),
        Some(bytes) => {
            let second = source.second(problem);
            let first = second
                .as_ref()
                .map_or(bytes.start, |(b, _)| b.start.min(bytes.start));
            let last = second
                .as_ref()
                .map_or(bytes.end, |(b, _)| b.end.max(bytes.end));
            let start = source.text[..first].rfind('\n').map_or(0, |n| n + 1);
            let end = source.text[last..]
                .find('\n')
                .map_or(source.text.len(), |n| last + n);
            let lines = &source.text[start..end];
            let (line, column) = source.line_column(bytes.start);
            if lines.is_empty() || lines.lines().any(|l| l.len() > LONGEST_LINE) {
                group.element(
                    Origin::path(source.name.as_str())
                        .line(line)
                        .char_column(column),
                )
            } else {
                let mark = |b: &Range<usize>| b.start - start..b.end - start;
                let mut snippet = Snippet::<Annotation<'_>>::source(lines)
                    .path(source.name.as_str())
                    .line_start(source.line_column(start).0)
                    .annotation(AnnotationKind::Primary.span(mark(bytes)).label(label));
                if let Some((other, says)) = &second {
                    snippet =
                        snippet.annotation(AnnotationKind::Context.span(mark(other)).label(*says));
                }
                group.element(snippet)
            }
        }
    };
    for note in notes(source, problem, bytes.as_ref()) {
        group =
            group.element(Level::NOTE.message(annotate_snippets::normalize_untrusted_str(&note)));
    }
    if let Some(help) = problem.help.clone().or_else(|| problem.kind.help()) {
        group =
            group.element(Level::HELP.message(annotate_snippets::normalize_untrusted_str(&help)));
    }
    renderer.render(&[group])
}

/// The field, and the `--set` that the marked text came from.
fn notes(source: &Source, problem: &Problem, bytes: Option<&Range<usize>>) -> Vec<String> {
    let mut notes = Vec::new();
    if !problem.path.is_empty() {
        notes.push(format!("field `{}`", problem.path));
    }
    if let Some(bytes) = bytes {
        let touches = |s: &&Splice| {
            s.bytes.start <= bytes.start && bytes.end <= s.bytes.end && !s.bytes.is_empty()
        };
        if let Some(splice) = source.splices.iter().find(touches) {
            notes.push(format!("from `--set {}`", splice.assignment));
        }
    }
    notes
}
