//! One pass over a file's YAML events: where every value stands, and everything that is refused before a key means anything.

mod seen;
mod syntax;

use super::open::unprintable;
use super::places::{Child, Content, Key, Place, Places};
use crate::problem::text::{MOST_ANCHORS, MOST_DEEP, MOST_VALUES};
use crate::problem::{Problem, Problems, TextProblem};
use saphyr_parser::{Event, Parser, ScalarStyle, Span};
use seen::Seen;
use std::collections::BTreeMap;
use std::ops::Range;

/// The tree of a text, with the problems that did not stop the pass (keys given twice, tags).
///
/// Work and memory are bounded by the text's length; nothing recurses.
///
/// # Errors
/// Not YAML, a second document, `<<`, keys that are not text, too deep, too many values, an alias loop: all problems up to there. And more problems than are kept.
pub(super) fn scan(text: &str) -> Result<(Places, Problems), Problems> {
    let mut scan = Scan::new(text);
    for event in Parser::new_from_str(text) {
        let step = match event {
            Ok((event, span)) => scan.event(event, span),
            Err(e) => Err(Box::new(scan.syntax(&e))),
        };
        if let Err(problem) = step {
            scan.problems.push(*problem);
            return Err(scan.problems);
        }
        if scan.problems.more() {
            return Err(scan.problems);
        }
    }
    if scan.places.places.is_empty() {
        scan.problems.push(Problem::text(TextProblem::Empty, 0..0));
        return Err(scan.problems);
    }
    Ok((scan.places, scan.problems))
}

/// A list or mapping that is not yet closed.
struct Frame {
    start: usize,
    anchor: usize,
    /// Values counted before it.
    before: u64,
    /// Levels of lists and mappings below it, itself included.
    height: usize,
    flow: bool,
    kind: FrameKind,
}

enum FrameKind {
    List(Vec<Child>),
    Mapping {
        entries: Vec<(Key, Child)>,
        seen: Seen,
        key: Option<(Key, bool)>,
    },
}

/// A finished value behind an anchor.
struct Anchor {
    place: usize,
    size: u64,
    height: usize,
}

struct Scan<'a> {
    text: &'a str,
    /// Byte of each character, where the text is not plain ASCII.
    bytes: Option<Vec<usize>>,
    open: Vec<Frame>,
    places: Places,
    anchors: BTreeMap<usize, Anchor>,
    count: u64,
    documents: u32,
    problems: Problems,
}

impl<'a> Scan<'a> {
    fn new(text: &'a str) -> Self {
        let table = || {
            text.char_indices()
                .map(|(at, _)| at)
                .chain([text.len()])
                .collect()
        };
        Scan {
            text,
            bytes: (!text.is_ascii()).then(table),
            open: Vec::new(),
            places: Places::default(),
            anchors: BTreeMap::new(),
            count: 0,
            documents: 0,
            problems: Problems::default(),
        }
    }

    /// The byte of a character.
    fn byte(&self, character: usize) -> usize {
        match &self.bytes {
            None => character.min(self.text.len()),
            Some(table) => table.get(character).copied().unwrap_or(self.text.len()),
        }
    }

    fn range(&self, span: Span) -> Range<usize> {
        self.byte(span.start.index())..self.byte(span.end.index())
    }

    fn event(&mut self, event: Event<'_>, span: Span) -> Result<(), Box<Problem>> {
        let range = self.range(span);
        if anchor_of(&event) > MOST_ANCHORS {
            return Err(refused(TextProblem::TooManyAnchors, range));
        }
        match event {
            Event::DocumentStart(_) => {
                self.documents += 1;
                if self.documents > 1 {
                    return Err(refused(TextProblem::SecondDocument, range));
                }
            }
            Event::Scalar(text, style, anchor, tag) => {
                if tag.is_some() {
                    self.problems
                        .push(Problem::text(TextProblem::Tag, range.clone()));
                }
                // what no file may hold may not come as an escape either
                if let Some(found) = text.chars().find(|c| unprintable(*c)) {
                    let problem = TextProblem::Unprintable { found };
                    self.problems.push(Problem::text(problem, range.clone()));
                }
                return self.scalar(text.into_owned(), style, anchor, range);
            }
            Event::Alias(anchor) => return self.alias(anchor, range),
            Event::SequenceStart(anchor, tag) => {
                return self.begin(FrameKind::List(Vec::new()), anchor, tag.is_some(), range);
            }
            Event::MappingStart(anchor, tag) => {
                let kind = FrameKind::Mapping {
                    entries: Vec::new(),
                    seen: Seen::default(),
                    key: None,
                };
                return self.begin(kind, anchor, tag.is_some(), range);
            }
            Event::SequenceEnd | Event::MappingEnd => self.end(range.start),
            Event::Nothing | Event::StreamStart | Event::StreamEnd | Event::DocumentEnd => {}
        }
        Ok(())
    }

    /// Counts a value, or the values behind an alias.
    fn more(&mut self, values: u64, at: &Range<usize>) -> Result<(), Box<Problem>> {
        self.count = self.count.saturating_add(values);
        if self.count > MOST_VALUES {
            return Err(refused(TextProblem::TooMany, at.clone()));
        }
        Ok(())
    }

    /// Whether the next value is a key.
    fn wants_key(&self) -> bool {
        matches!(
            self.open.last(),
            Some(Frame {
                kind: FrameKind::Mapping { key: None, .. },
                ..
            })
        )
    }

    fn scalar(
        &mut self,
        text: String,
        style: ScalarStyle,
        anchor: usize,
        range: Range<usize>,
    ) -> Result<(), Box<Problem>> {
        self.more(1, &range)?;
        let plain = style == ScalarStyle::Plain;
        if self.wants_key() {
            return self.key(text, plain, range);
        }
        let range = self.value_only(range, style, anchor > 0);
        let content = Content::Scalar { text, plain };
        let place = self.placed(range, content, anchor, 1, 0);
        self.attach(Child { place, alias: None });
        Ok(())
    }

    /// The value alone: without an anchor before it, and without space or a remark after it.
    fn value_only(&self, range: Range<usize>, style: ScalarStyle, anchored: bool) -> Range<usize> {
        let written = self.text.get(range.clone()).unwrap_or_default();
        let anchor = if anchored && written.starts_with('&') {
            let name = written.find(char::is_whitespace).unwrap_or(written.len());
            written.len() - written[name..].trim_start().len()
        } else {
            0
        };
        let value = &written[anchor..];
        let length = match style {
            ScalarStyle::SingleQuoted => quoted_length(value, '\'').unwrap_or(value.len()),
            ScalarStyle::DoubleQuoted => quoted_length(value, '"').unwrap_or(value.len()),
            _ => value.trim_end().len(),
        };
        range.start + anchor..range.start + anchor + length
    }

    fn key(&mut self, text: String, plain: bool, range: Range<usize>) -> Result<(), Box<Problem>> {
        if text == "<<" && plain {
            return Err(refused(TextProblem::MergeKey, range));
        }
        if text.is_empty() && plain {
            return Err(refused(TextProblem::KeyNotText, range));
        }
        let Some(Frame {
            kind: FrameKind::Mapping { entries, seen, key },
            ..
        }) = self.open.last_mut()
        else {
            return Ok(());
        };
        let first = seen.first(&text, entries);
        if let Some(first) = first.clone() {
            let key = text.clone();
            let twice = TextProblem::DuplicateKey { key, first };
            self.problems.push(Problem::text(twice, range.clone()));
        }
        *key = Some((Key { text, span: range }, first.is_some()));
        Ok(())
    }

    fn alias(&mut self, anchor: usize, range: Range<usize>) -> Result<(), Box<Problem>> {
        if self.wants_key() {
            return Err(refused(TextProblem::KeyNotText, range));
        }
        let Some(&Anchor {
            place,
            size,
            height,
        }) = self.anchors.get(&anchor)
        else {
            return Err(refused(TextProblem::AliasLoop, range));
        };
        self.more(size, &range)?;
        if self.open.len() + height > MOST_DEEP {
            return Err(refused(TextProblem::TooDeep, range));
        }
        if let Some(frame) = self.open.last_mut() {
            frame.height = frame.height.max(height + 1);
        }
        if let Some(repeated) = self.places.places.get_mut(place) {
            repeated.repeated = true;
        }
        self.attach(Child {
            place,
            alias: Some(range),
        });
        Ok(())
    }

    fn begin(
        &mut self,
        kind: FrameKind,
        anchor: usize,
        tagged: bool,
        range: Range<usize>,
    ) -> Result<(), Box<Problem>> {
        self.more(1, &range)?;
        if self.wants_key() {
            return Err(refused(TextProblem::KeyNotText, range));
        }
        if tagged {
            self.problems
                .push(Problem::text(TextProblem::Tag, range.clone()));
        }
        if self.open.len() >= MOST_DEEP {
            return Err(refused(TextProblem::TooDeep, range));
        }
        // an anchor's or tag's span reaches to the bracket, or to the first entry
        let bracket = range.end.checked_sub(1).filter(|_| !range.is_empty());
        let flow =
            bracket.is_some_and(|b| matches!(self.text.as_bytes().get(b), Some(b'[' | b'{')));
        let dash = || match (&kind, self.open.last().map(|f| &f.kind)) {
            (
                FrameKind::List(_),
                Some(FrameKind::Mapping {
                    key: Some((key, _)),
                    ..
                }),
            ) => self.first_dash(&key.span, range.end),
            _ => None,
        };
        let start = bracket.filter(|_| flow).or_else(dash).unwrap_or(range.end);
        self.open.push(Frame {
            start,
            anchor,
            before: self.count - 1,
            height: 1,
            flow,
            kind,
        });
        Ok(())
    }

    /// Notes a node's place, and the anchor on it if it bears one (numbers from 1).
    fn placed(
        &mut self,
        span: Range<usize>,
        content: Content,
        anchor: usize,
        size: u64,
        height: usize,
    ) -> usize {
        self.places.places.push(Place {
            span,
            content,
            repeated: false,
        });
        let place = self.places.places.len() - 1;
        if anchor > 0 {
            let anchored = Anchor {
                place,
                size,
                height,
            };
            self.anchors.insert(anchor, anchored);
        }
        place
    }

    /// The dash of a list's first entry, which stands on a line of its own after the key; the event tells of the entry.
    fn first_dash(&self, key: &Range<usize>, entry: usize) -> Option<usize> {
        let between = self.text.get(key.end..entry)?;
        let mut at = key.end;
        for line in between.split_inclusive('\n') {
            let indent = line.len() - line.trim_start().len();
            if at > key.end && line[indent..].starts_with('-') {
                return Some(at + indent);
            }
            at += line.len();
        }
        None
    }

    fn end(&mut self, bracket: usize) {
        let Some(frame) = self.open.pop() else { return };
        let Frame {
            start,
            anchor,
            before,
            height,
            flow,
            kind,
        } = frame;
        let (content, last) = match kind {
            FrameKind::List(entries) => {
                let last = entries.last().cloned();
                (Content::List { flow, entries }, last)
            }
            FrameKind::Mapping { entries, .. } => {
                let last = entries.last().map(|(_, child)| child.clone());
                (Content::Mapping { flow, entries }, last)
            }
        };
        let end = match last {
            _ if flow => bracket + 1,
            Some(Child {
                alias: Some(alias), ..
            }) => alias.end,
            Some(Child { place, .. }) => {
                self.places.places.get(place).map_or(start, |p| p.span.end)
            }
            None => start,
        };
        let size = self.count - before;
        let place = self.placed(start..end.max(start), content, anchor, size, height);
        if let Some(above) = self.open.last_mut() {
            above.height = above.height.max(height + 1);
        }
        self.attach(Child { place, alias: None });
    }

    /// Puts a finished value into what holds it.
    fn attach(&mut self, child: Child) {
        match self.open.last_mut().map(|f| &mut f.kind) {
            None => {}
            Some(FrameKind::List(entries)) => entries.push(child),
            Some(FrameKind::Mapping { entries, key, .. }) => {
                if let Some((key, false)) = key.take() {
                    entries.push((key, child));
                }
            }
        }
    }
}

/// The number of the anchor on a value, from 1; 0 without one.
fn anchor_of(event: &Event<'_>) -> usize {
    match event {
        Event::Scalar(_, _, anchor, _)
        | Event::SequenceStart(anchor, _)
        | Event::MappingStart(anchor, _) => *anchor,
        _ => 0,
    }
}

/// A problem that ends the pass.
fn refused(kind: TextProblem, bytes: Range<usize>) -> Box<Problem> {
    Box::new(Problem::text(kind, bytes))
}

/// Bytes from a quotation mark to the one that ends it: `\'\'` and `\\"` do not.
pub(super) fn quoted_length(text: &str, mark: char) -> Option<usize> {
    let mut chars = text.char_indices().skip(1).peekable();
    while let Some((at, c)) = chars.next() {
        match c {
            '\\' if mark == '"' => _ = chars.next(),
            c if c == mark => match chars.peek() {
                Some((_, '\'')) if mark == '\'' => _ = chars.next(),
                _ => return Some(at + 1),
            },
            _ => {}
        }
    }
    None
}

#[cfg(test)]
mod tests;
