//! Keys and collections that do not belong, or are missing.

use super::words::{any_of, list, nearest, space_after_colon};
use std::fmt;

/// What a value is made of.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Shape {
    /// A single value.
    Single,
    /// A list.
    List,
    /// A mapping of keys to values.
    Mapping,
}

impl fmt::Display for Shape {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Shape::Single => "a single value",
            Shape::List => "a list",
            Shape::Mapping => "a mapping of keys",
        })
    }
}

/// A key or a collection that does not belong, or is missing.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ShapeProblem {
    /// A key that means nothing here.
    UnknownKey {
        /// The key.
        found: String,
        /// The keys that do.
        known: Vec<&'static str>,
    },
    /// A key that must be there.
    Missing {
        /// The key.
        key: &'static str,
        /// How it is written.
        example: &'static str,
    },
    /// A key with nothing behind it.
    NoValue {
        /// What would do.
        wanted: &'static str,
    },
    /// A list for a single value and the like.
    WrongShape {
        /// What stands there.
        found: Shape,
        /// What would do.
        wanted: &'static str,
    },
}

impl fmt::Display for ShapeProblem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            ShapeProblem::UnknownKey { found, .. } => write!(f, "unknown key `{found}`"),
            ShapeProblem::Missing { key, .. } => write!(f, "missing key `{key}`"),
            ShapeProblem::NoValue { .. } => f.write_str("nothing is written after the colon"),
            ShapeProblem::WrongShape { found, wanted } => {
                write!(f, "{found} where {wanted} is needed")
            }
        }
    }
}

impl ShapeProblem {
    /// What to write beside the mark on the line.
    pub(super) fn label(&self) -> String {
        match self {
            ShapeProblem::UnknownKey { found, known } => {
                match nearest(found, known.iter().copied()) {
                    Some(near) => format!("did you mean `{near}`?"),
                    None => "no such key here".into(),
                }
            }
            ShapeProblem::Missing { key, .. } => format!("this has no `{key}`"),
            ShapeProblem::NoValue { wanted } | ShapeProblem::WrongShape { wanted, .. } => {
                format!("must be {wanted}")
            }
        }
    }

    /// What would do.
    pub(super) fn help(&self) -> Option<String> {
        match self {
            ShapeProblem::UnknownKey { found, known } => match found.split_once(':') {
                Some((key, _)) if known.contains(&key.trim()) => space_after_colon(found),
                _ if nearest(found, known.iter().copied()).is_some() => None,
                _ => Some(format!("keys here: {}", list(known))),
            },
            ShapeProblem::Missing { example, .. } => Some(format!("add `{example}`")),
            ShapeProblem::NoValue { wanted } => Some(match *wanted {
                // most often a block that lost its indentation
                w if w.starts_with("a mapping") || w.starts_with("a list") => {
                    "what belongs to it stands below, further to the right; or leave the key out"
                        .into()
                }
                _ => "write a value, or leave the key out".into(),
            }),
            ShapeProblem::WrongShape { .. } => None,
        }
    }
}

/// The words a key takes, as a help.
pub(super) fn words_here(words: &[&'static str]) -> String {
    format!("write {}", any_of(words))
}
