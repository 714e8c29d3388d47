//! Single values that are not what their key wants.

use super::shape::words_here;
use super::words::nearest;
use crate::quantity::bounds::OutOfBounds;
use crate::quantity::parse::ParseError;
use std::fmt;

/// A value that is not what its key wants.
#[derive(Clone, Debug, PartialEq)]
pub enum ValueProblem {
    /// Not the quantity.
    Quantity(ParseError),
    /// The quantity, outside its bounds.
    OutOfBounds {
        /// As written.
        found: String,
        /// The bound broken.
        bounds: OutOfBounds,
    },
    /// None of the words a key takes.
    Word {
        /// As written.
        found: String,
        /// What messages call it.
        what: &'static str,
        /// The words that would do.
        words: Vec<&'static str>,
    },
    /// A whole number outside its bounds.
    Count {
        /// As written.
        found: u32,
        /// What messages call it.
        what: &'static str,
        /// What would do.
        wanted: &'static str,
    },
    /// A name with nothing in it.
    EmptyName,
}

impl fmt::Display for ValueProblem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            ValueProblem::Quantity(e) => e.fmt(f),
            ValueProblem::OutOfBounds { found, bounds } => write!(f, "`{found}`: {bounds}"),
            ValueProblem::Word { found, what, .. } => write!(f, "`{found}` is no {what}"),
            ValueProblem::Count { found, what, .. } => write!(f, "{what} may not be {found}"),
            ValueProblem::EmptyName => f.write_str("a name may not be empty"),
        }
    }
}

impl ValueProblem {
    /// What to write beside the mark on the line.
    pub(super) fn label(&self) -> String {
        match self {
            ValueProblem::Quantity(e) => e.label(),
            ValueProblem::OutOfBounds { bounds, .. } => bounds.label(),
            ValueProblem::Word { found, words, .. } => {
                match nearest(found, words.iter().copied()) {
                    Some(near) => format!("did you mean `{near}`?"),
                    None => "not one of the words here".into(),
                }
            }
            ValueProblem::Count { wanted, .. } => format!("must be {wanted}"),
            ValueProblem::EmptyName => "nothing between the quotation marks".into(),
        }
    }

    /// What would do.
    pub(super) fn help(&self) -> Option<String> {
        match self {
            ValueProblem::Quantity(e) => Some(e.help()),
            ValueProblem::Word { words, .. } => Some(words_here(words)),
            ValueProblem::OutOfBounds { .. }
            | ValueProblem::Count { .. }
            | ValueProblem::EmptyName => None,
        }
    }
}
