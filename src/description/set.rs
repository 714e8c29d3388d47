//! `--set PATH=VALUE`: puts a value into the text where its path stands, so that all else is read as if it were written there.

use super::path::{self, Step};
use super::places::{Child, Content, Found};
use super::{open, scan};
use crate::problem::{Problem, Problems, Refusal, SetKind, SetProblem, Shape, Source, Splice};
use std::ops::Range;

/// One `--set`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Assignment {
    /// As given: `engine.speeds.idle=1900 rpm`.
    pub text: String,
    path: Vec<Step>,
    /// The value, fit to stand anywhere.
    value: String,
    /// The same in braces, where it may be one key and its value.
    pair: Option<String>,
}

impl Assignment {
    /// Takes `PATH=VALUE` apart.
    ///
    /// # Errors
    /// [`SetProblem`]: no `=`, not a path, not a value.
    pub fn parse(text: &str) -> Result<Assignment, SetProblem> {
        let fail = |kind| SetProblem {
            assignment: text.to_owned(),
            kind,
        };
        let at = equals(text).ok_or_else(|| fail(SetKind::NoEquals))?;
        let (path, value) = (text[..at].trim(), text[at + 1..].trim());
        let steps = path::steps(path).ok().filter(|s| !s.is_empty());
        let steps = steps.ok_or_else(|| {
            fail(SetKind::NotAPath {
                path: path.to_owned(),
            })
        })?;
        let pair = is_pair(value).then(|| format!("{{{value}}}"));
        let value = flow(value).ok_or_else(|| {
            fail(SetKind::NotAValue {
                value: value.to_owned(),
            })
        })?;
        Ok(Assignment {
            text: text.to_owned(),
            path: steps,
            value,
            pair,
        })
    }
}

/// The first `=` that is not within quotation marks.
fn equals(text: &str) -> Option<usize> {
    let mut quoted = false;
    text.char_indices().find_map(|(at, c)| {
        quoted ^= c == '"';
        (c == '=' && !quoted).then_some(at)
    })
}

/// A value as it may stand anywhere in a file, in one line: YAML in brackets or quotes as it is, other text quoted where it must be.
fn flow(value: &str) -> Option<String> {
    if value.contains('\n') || open::text(value.as_bytes()).is_err() {
        return None;
    }
    let wrapped = format!("[{value}]");
    let bracketed = value.starts_with(['[', '{', '"', '\'']);
    let alone = scan::scan(&wrapped)
        .ok()
        .filter(|(_, problems)| problems.is_empty())
        .and_then(|(places, _)| {
            let entry = places.find("[0]")?;
            let single = places.find("[1]").is_none() && entry.value == (1..1 + value.len());
            let same = match places.scalar(&entry) {
                _ if bracketed => true,
                Some((text, plain)) => plain && text == value,
                None => false,
            };
            (single && same).then_some(())
        });
    match (alone, bracketed) {
        (Some(()), _) if serde_yaml::from_str::<serde::de::IgnoredAny>(&wrapped).is_ok() => {
            Some(value.to_owned())
        }
        (_, true) => None,
        _ if value.is_empty() => Some("\"\"".to_owned()),
        _ => Some(format!(
            "\"{}\"",
            value
                .replace('\\', "\\\\")
                .replace('"', "\\\"")
                .replace('\t', "\\t")
        )),
    }
}

/// Whether a text is one key and its value.
fn is_pair(value: &str) -> bool {
    let scanned = scan::scan(&format!("{{{value}}}"));
    let pair = scanned.is_ok_and(|(places, _)| {
        let one = places
            .find("")
            .is_some_and(|root| places.keys(root.place).count() == 1);
        one && value.contains(": ")
    });
    pair && !value.starts_with(['[', '{', '"', '\''])
}

/// Puts every assignment in, one after the other.
///
/// # Errors
/// [`Refusal`] with those that cannot be done.
pub(super) fn set(
    mut source: Source,
    assignments: &[Assignment],
) -> Result<(Source, Problems), Refusal> {
    let mut failed = Problems::default();
    let mut left = Problems::default();
    for assignment in assignments {
        match put(&source, assignment) {
            Ok((next, problems)) => (source, left) = (next, problems),
            Err(problem) => failed.push(*problem),
        }
    }
    if failed.is_empty() {
        Ok((source, left))
    } else {
        Err(Refusal::new(source, failed))
    }
}

/// Text to put in place of bytes.
struct Edit {
    bytes: Range<usize>,
    text: String,
}

/// What one assignment works on.
struct Target<'a> {
    source: &'a Source,
    assignment: &'a Assignment,
    /// What its path reached.
    found: Found,
    /// The path of that.
    at: String,
    /// The steps beyond it.
    rest: &'a [Step],
}

/// Puts one assignment in.
fn put(source: &Source, assignment: &Assignment) -> Result<(Source, Problems), Box<Problem>> {
    let Some((found, left)) = source.places.walk(&assignment.path) else {
        return Ok((source.clone(), Problems::default()));
    };
    let (reached, rest) = assignment.path.split_at(assignment.path.len() - left);
    let target = Target {
        source,
        assignment,
        found,
        at: spelled(reached),
        rest,
    };
    if target.is_shared() {
        return Err(target.fail(SetKind::Shared {
            at: target.at.clone(),
        }));
    }
    let edit = match rest.split_first() {
        None => target.replace(target.value()),
        Some((step, deeper)) => target.insert(step, deeper)?,
    };
    target.spliced(&edit)
}

impl Target<'_> {
    fn fail(&self, kind: SetKind) -> Box<Problem> {
        let assignment = self.assignment.text.clone();
        let problem = SetProblem { assignment, kind };
        Box::new(Problem::value(self.at.as_str(), problem))
    }

    /// The value: in braces where a mapping stands, or an entry of a list, which is written `state: time` in the file.
    fn value(&self) -> &str {
        let Assignment {
            path, value, pair, ..
        } = self.assignment;
        let content = self
            .source
            .places
            .places
            .get(self.found.place)
            .map(|p| &p.content);
        let mapping = self.rest.is_empty() && matches!(content, Some(Content::Mapping { .. }));
        let entry = matches!(path.last(), Some(Step::Index(_) | Step::Named(_)));
        pair.as_deref()
            .filter(|_| mapping || entry)
            .unwrap_or(value)
    }

    /// Whether another part of the file would change with it. Putting a value in place of an alias changes nothing else.
    fn is_shared(&self) -> bool {
        let Found {
            alias,
            shared,
            place,
            ..
        } = &self.found;
        let repeated = self
            .source
            .places
            .places
            .get(*place)
            .is_some_and(|p| p.repeated);
        match alias {
            Some(_) => *shared || !self.rest.is_empty(),
            None => *shared || repeated,
        }
    }

    /// The value in place of what stands there.
    fn replace(&self, value: &str) -> Edit {
        let Found {
            key,
            value: bytes,
            alias,
            ..
        } = &self.found;
        if let Some(alias) = alias {
            return Edit {
                bytes: alias.clone(),
                text: value.to_owned(),
            };
        }
        if !bytes.is_empty() {
            // within brackets or quotes a value may not stand at its key's own column
            let space = if self.source.places.is_block(&self.found) {
                " "
            } else {
                ""
            };
            return Edit {
                bytes: bytes.clone(),
                text: format!("{space}{value}"),
            };
        }
        let colon = key
            .as_ref()
            .and_then(|k| Some(k.end + self.source.text.get(k.end..)?.find(':')? + 1));
        let at = colon.unwrap_or(bytes.start);
        Edit {
            bytes: at..at,
            text: format!(" {value}"),
        }
    }

    /// A key or an entry that is not there yet.
    fn insert(&self, step: &Step, deeper: &[Step]) -> Result<Edit, Box<Problem>> {
        let value = nested(deeper, self.value());
        let value = value.ok_or_else(|| self.no_entry(deeper.first().unwrap_or(step)))?;
        let content = self
            .source
            .places
            .places
            .get(self.found.place)
            .map(|p| &p.content);
        match (content, step) {
            (Some(Content::Mapping { flow, entries }), Step::Key(key)) => {
                let last = self.end_of(entries.last().map(|(_, child)| child));
                Ok(self.new_entry(*flow, last, &format!("{}: {value}", quoted(key))))
            }
            (Some(Content::List { flow, entries }), Step::Index(index))
                if *index == entries.len() =>
            {
                let entry = if *flow { value } else { format!("- {value}") };
                Ok(self.new_entry(*flow, self.end_of(entries.last()), &entry))
            }
            (Some(Content::Scalar { text, plain: true }), _)
                if matches!(text.as_str(), "" | "~" | "null") =>
            {
                let value = nested(std::slice::from_ref(step), &value)
                    .ok_or_else(|| self.no_entry(step))?;
                Ok(self.replace(&value))
            }
            (Some(Content::List { .. }), Step::Index(_) | Step::Named(_)) => {
                Err(self.no_entry(step))
            }
            (Some(Content::List { .. }), _) => Err(self.no_way(Shape::List)),
            (Some(Content::Mapping { .. }), _) => Err(self.no_way(Shape::Mapping)),
            _ => Err(self.no_way(Shape::Single)),
        }
    }

    /// Where the last entry of what was found ends.
    fn end_of(&self, last: Option<&Child>) -> Option<usize> {
        let child = last?;
        match &child.alias {
            Some(alias) => Some(alias.end),
            None => self
                .source
                .places
                .places
                .get(child.place)
                .map(|p| p.span.end),
        }
    }

    /// A further entry, after the last one; within brackets behind a comma, else on a line of its own.
    fn new_entry(&self, flow: bool, last: Option<usize>, entry: &str) -> Edit {
        let start = self.found.value.start;
        match (flow, last) {
            (true, None) => Edit {
                bytes: start + 1..start + 1,
                text: entry.to_owned(),
            },
            (true, Some(end)) => Edit {
                bytes: end..end,
                text: format!(", {entry}"),
            },
            (false, _) => {
                let end = last.unwrap_or(start);
                let text = &self.source.text;
                let line_end = text
                    .get(end..)
                    .and_then(|t| t.find('\n'))
                    .map_or(text.len(), |n| end + n);
                Edit {
                    bytes: line_end..line_end,
                    text: format!("\n{}{entry}", self.indent()),
                }
            }
        }
    }

    /// Spaces up to the column of what was found.
    fn indent(&self) -> String {
        let (_, column) = self.source.line_column(self.found.value.start);
        " ".repeat(column - 1)
    }

    fn no_entry(&self, step: &Step) -> Box<Problem> {
        let found = match step {
            Step::Key(key) => key.clone(),
            Step::Index(index) => index.to_string(),
            Step::Named(name) => name.clone(),
        };
        let places = &self.source.places;
        let entries = match places.places.get(self.found.place).map(|p| &p.content) {
            Some(Content::List { entries, .. }) => entries.as_slice(),
            _ => &[],
        };
        let names = entries
            .iter()
            .filter_map(|child| places.names(child.place).next().map(str::to_owned))
            .collect();
        self.fail(SetKind::NoEntry {
            found,
            list: self.at.clone(),
            names,
            count: entries.len(),
        })
    }

    fn no_way(&self, shape: Shape) -> Box<Problem> {
        self.fail(SetKind::NoWay {
            at: self.at.clone(),
            shape,
        })
    }

    /// The source with the edit made, read again; the value must then stand at the path.
    fn spliced(&self, edit: &Edit) -> Result<(Source, Problems), Box<Problem>> {
        let Source {
            name,
            text,
            splices,
            ..
        } = self.source;
        let mut next = text.clone();
        next.replace_range(edit.bytes.clone(), &edit.text);
        let start = edit.bytes.start + edit.text.len()
            - edit.text.trim_start_matches([',', ' ', '\n', '-']).len();
        let bytes = start..edit.bytes.start + edit.text.trim_end().len();
        let mut kept: Vec<Splice> = splices.iter().filter_map(|s| s.after(edit)).collect();
        let (places, problems) = scan::scan(&next).map_err(|problems| self.unplaced(&problems))?;
        let found = places.walk(&self.by_index()).filter(|(_, left)| *left == 0);
        if found.is_none_or(|(found, _)| {
            found.value.start < edit.bytes.start || found.value.end > bytes.end
        }) {
            return Err(self.unplaced(&problems));
        }
        let breaks = |text: &str| isize::try_from(text.matches('\n').count()).unwrap_or(isize::MAX);
        let lines = breaks(&edit.text) - text.get(edit.bytes.clone()).map_or(0, breaks);
        kept.push(Splice {
            bytes,
            assignment: self.assignment.text.clone(),
            lines,
        });
        Ok((
            Source {
                name: name.clone(),
                text: next,
                places,
                splices: kept,
            },
            problems,
        ))
    }

    /// The path with the entries that it names counted instead: the edit may give one another name.
    fn by_index(&self) -> Vec<Step> {
        let places = &self.source.places;
        let mut steps: Vec<Step> = Vec::new();
        for step in &self.assignment.path {
            let list = places.walk(&steps).filter(|(_, left)| *left == 0);
            let index = list.and_then(|(list, _)| places.index_of(&list, step));
            steps.push(index.map_or_else(|| step.clone(), Step::Index));
        }
        steps
    }

    fn unplaced(&self, problems: &Problems) -> Box<Problem> {
        let what = problems.iter().last().map_or_else(
            || "the place cannot take it".to_owned(),
            |p| p.kind.to_string(),
        );
        self.fail(SetKind::Unplaced { what })
    }
}

impl Splice {
    /// The same splice after a later edit; none where that has changed it.
    fn after(&self, edit: &Edit) -> Option<Splice> {
        let grown = |at: usize| at - edit.bytes.len() + edit.text.len();
        let Range { start, end } = self.bytes.clone();
        let bytes = if edit.bytes.start >= end {
            start..end
        } else if edit.bytes.end <= start {
            grown(start)..grown(end)
        } else {
            return None;
        };
        Some(Splice {
            bytes,
            ..self.clone()
        })
    }
}

/// A value below steps that are not there, in brackets: `a.b` and `1 V` to `{a: {b: 1 V}}`.
fn nested(steps: &[Step], value: &str) -> Option<String> {
    steps
        .iter()
        .rev()
        .try_fold(value.to_owned(), |inner, step| match step {
            Step::Key(key) => Some(format!("{{{}: {inner}}}", quoted(key))),
            Step::Index(0) => Some(format!("[{inner}]")),
            Step::Index(_) | Step::Named(_) => None,
        })
}

/// A key as it may stand anywhere.
fn quoted(key: &str) -> String {
    let plain = key
        .chars()
        .all(|c| c.is_alphanumeric() || matches!(c, '_' | '-' | ' '));
    if plain && key.starts_with(char::is_alphabetic) {
        key.to_owned()
    } else {
        format!("\"{}\"", key.replace('\\', "\\\\").replace('"', "\\\""))
    }
}

/// Steps as a path.
fn spelled(steps: &[Step]) -> String {
    steps.iter().fold(String::new(), |path, step| match step {
        Step::Key(key) => path::key(&path, key),
        Step::Index(index) => path::index(&path, *index),
        Step::Named(name) => format!("{path}[{name}]"),
    })
}
