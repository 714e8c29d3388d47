//! A `--set` that cannot be done.

use super::Shape;
use super::words::{list, nearest};
use std::fmt;

/// A `--set PATH=VALUE` that cannot be done.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SetProblem {
    /// The assignment as given.
    pub assignment: String,
    /// Why not.
    pub kind: SetKind,
}

/// Why a `--set` cannot be done.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum SetKind {
    /// No `=` between path and value.
    NoEquals,
    /// Not a path.
    NotAPath {
        /// As written.
        path: String,
    },
    /// An entry beyond the end of a list.
    NoEntry {
        /// As written.
        found: String,
        /// Path of the list.
        list: String,
        /// Names of the entries there are, or how many there are.
        names: Vec<String>,
        /// How many there are.
        count: usize,
    },
    /// A step into a single value, or into a collection of the other kind.
    NoWay {
        /// Path of what stands in the way.
        at: String,
        /// What it is.
        shape: Shape,
    },
    /// A value that an anchor and its aliases share.
    Shared {
        /// Path of it.
        at: String,
    },
    /// A value that is not YAML in one line.
    NotAValue {
        /// As written.
        value: String,
    },
    /// A place that cannot take the value.
    Unplaced {
        /// What the reader says of the text with the value in it.
        what: String,
    },
}

impl fmt::Display for SetProblem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        use SetKind as P;
        write!(f, "`--set {}`: ", self.assignment)?;
        match &self.kind {
            P::NoEquals => f.write_str("`=` is missing between path and value"),
            P::NotAPath { path } => write!(f, "`{path}` is not a path"),
            P::NoEntry { found, list, .. } => write!(f, "`{list}` has no entry `{found}`"),
            P::NoWay { at, shape } if at.is_empty() => {
                write!(f, "the file is {shape}: the path does not begin so")
            }
            P::NoWay { at, shape } => write!(f, "`{at}` is {shape}: the path leads no further"),
            P::Shared { at } => write!(f, "`{at}` is shared by an anchor and its aliases"),
            P::NotAValue { value } => write!(f, "`{value}` is not a value"),
            P::Unplaced { what } => write!(f, "the value cannot be put there: {what}"),
        }
    }
}

impl SetProblem {
    /// What to write beside the mark on the line.
    pub(super) fn label(&self) -> String {
        match self.kind {
            SetKind::Shared { .. } => "changing it here would change it elsewhere".into(),
            SetKind::NoEntry { .. } | SetKind::NoWay { .. } => "this is what the file has".into(),
            _ => String::new(),
        }
    }

    /// What would do.
    #[must_use]
    pub fn help(&self) -> Option<String> {
        use SetKind as P;
        Some(match &self.kind {
            P::NoEquals => "write it like `--set 'engine.speeds.idle=1900 rpm'`".into(),
            P::NotAPath { .. } => {
                "paths look like `engine.speeds.idle` or `accessories[2].duty.governed`".into()
            }
            P::NoEntry { found, names, .. }
                if nearest(found, names.iter().map(String::as_str)).is_some() =>
            {
                let near = nearest(found, names.iter().map(String::as_str)).unwrap_or_default();
                format!("did you mean `{near}`?")
            }
            P::NoEntry { names, count, .. } if names.len() == *count && *count > 0 => {
                format!("entries here: {}; a new one is `[{count}]`", list(names))
            }
            P::NoEntry { count: 0, .. } => "it is empty; a new one is `[0]`".into(),
            P::NoEntry { count, .. } => format!(
                "entries are counted from 0 to {}; a new one is `[{count}]`",
                count - 1
            ),
            P::NoWay { at, shape } => match shape {
                Shape::Single => format!("set the whole of `{at}`"),
                Shape::List => format!("name an entry of it in brackets, like `{at}[0]`"),
                Shape::Mapping => "name a key of it behind a point, like `battery.capacity`".into(),
            },
            P::Unplaced { .. } => "change the value in the file itself".into(),
            P::Shared { .. } => "write the value out in the file".into(),
            P::NotAValue { .. } => {
                "write a value as in the file, in one line: `40 %`, `{idle: 40 %}`, `[a, b]`".into()
            }
        })
    }
}
