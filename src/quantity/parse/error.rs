//! What can be wrong with a written quantity, and how it is said.

use crate::quantity::unit::Dimension;
use std::fmt;
use std::ops::Range;

/// A text that is not the quantity wanted.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ParseError {
    /// Bytes of the text that are wrong.
    pub range: Range<usize>,
    /// What is wrong with them.
    pub kind: ParseErrorKind,
    /// What was wanted.
    pub wanted: Dimension,
}

/// Kinds of [`ParseError`].
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ParseErrorKind {
    /// No text at all.
    Empty,
    /// No number where one is needed.
    NotNumber {
        /// What stands there.
        found: String,
    },
    /// Not-a-number or infinity, spelled out.
    NotFinite {
        /// As written.
        found: String,
    },
    /// A number beyond what can be held.
    TooLarge {
        /// As written.
        found: String,
    },
    /// A comma, space or underscore inside a number.
    Grouping {
        /// As written.
        found: String,
        /// The same number written plainly.
        plain: String,
    },
    /// A fraction, a sign or a unit where a whole number is needed.
    NotWhole {
        /// As written.
        found: String,
    },
    /// A number without its unit.
    UnitMissing {
        /// The number as written.
        found: String,
    },
    /// A word that is no unit.
    UnknownUnit {
        /// As written.
        found: String,
        /// The unit meant, it seems.
        near: Option<&'static str>,
    },
    /// A unit of something else.
    WrongUnit {
        /// As written.
        found: String,
        /// What it measures.
        measures: Dimension,
        /// The unit meant, it seems.
        near: Option<&'static str>,
    },
    /// Text after the quantity.
    Trailing {
        /// As written.
        found: String,
    },
    /// Units of a compound duration that do not fall: `20 min 1 h`.
    Order {
        /// The later, larger unit.
        found: String,
    },
    /// A tolerance as large as the value, or negative.
    ToleranceTooWide {
        /// As written.
        found: String,
    },
    /// A tolerance about zero, which has no share.
    ToleranceOfZero,
    /// A tolerance where none is understood.
    ToleranceHere,
    /// A phrase without one of its words.
    Phrase {
        /// The word: `at`, `to`, `for`.
        word: &'static str,
        /// How the phrase is written.
        example: &'static str,
    },
}

impl fmt::Display for ParseError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        use ParseErrorKind as K;
        let wanted = self.wanted;
        match &self.kind {
            K::Empty => write!(f, "nothing is written where {wanted} is needed"),
            K::NotNumber { found } => write!(f, "`{found}` is not {wanted}"),
            K::NotFinite { found } => {
                write!(f, "`{found}` is not {wanted}: a finite number is needed")
            }
            K::TooLarge { found } => write!(f, "number `{found}` is too large"),
            K::Grouping { found, .. } => write!(f, "`{found}` is not written as a plain number"),
            K::NotWhole { found } => write!(f, "`{found}` is not a whole number"),
            K::UnitMissing { found } => write!(f, "unit missing: `{found}` must be {wanted}"),
            K::UnknownUnit { found, .. } if wanted == Dimension::Factor => {
                write!(f, "unit `{found}` where a plain number is needed")
            }
            K::UnknownUnit { found, .. } => {
                write!(f, "unknown unit `{found}` where {wanted} is needed")
            }
            K::WrongUnit {
                found, measures, ..
            } => {
                write!(
                    f,
                    "wrong unit: `{found}` is {measures} where {wanted} is needed"
                )
            }
            K::Trailing { found } => write!(f, "`{found}` is left over after the value"),
            K::Order { found } => write!(f, "`{found}` comes after a smaller unit"),
            K::ToleranceTooWide { found } => write!(
                f,
                "tolerance `{found}` is not between 0 and the value itself"
            ),
            K::ToleranceOfZero => f.write_str("zero takes no tolerance"),
            K::ToleranceHere => f.write_str("no tolerance is understood here"),
            K::Phrase { word, .. } => write!(f, "`{word}` is missing"),
        }
    }
}

impl ParseError {
    /// What to write beside the mark on the line.
    #[must_use]
    pub fn label(&self) -> String {
        use ParseErrorKind as K;
        match &self.kind {
            K::Empty | K::NotNumber { .. } | K::NotFinite { .. } => {
                format!("must be {}", self.wanted)
            }
            K::TooLarge { .. } => "too large".into(),
            K::Grouping { plain, .. } => format!("write `{plain}`"),
            K::NotWhole { .. } => "must be a whole number, 0 or more".into(),
            K::UnitMissing { .. } => format!("a number without a unit: {}", self.units()),
            K::UnknownUnit {
                near: Some(near), ..
            }
            | K::WrongUnit {
                near: Some(near), ..
            } => {
                format!("did you mean `{near}`?")
            }
            K::UnknownUnit { .. } if self.wanted == Dimension::Factor => {
                "no unit belongs here".into()
            }
            K::UnknownUnit { .. } => format!("units here: {}", self.units()),
            K::WrongUnit { measures, .. } => format!("{measures}"),
            K::Trailing { .. } => "not understood".into(),
            K::Order { .. } => "write the larger unit first".into(),
            K::ToleranceTooWide { .. } => "too wide".into(),
            K::ToleranceOfZero | K::ToleranceHere => "leave this out".into(),
            K::Phrase { .. } => "incomplete".into(),
        }
    }

    /// What to write instead.
    #[must_use]
    pub fn help(&self) -> String {
        match &self.kind {
            ParseErrorKind::Grouping { plain, .. } => {
                format!(
                    "numbers have a point for decimals and nothing between thousands: `{plain}`"
                )
            }
            ParseErrorKind::ToleranceTooWide { .. }
            | ParseErrorKind::ToleranceOfZero
            | ParseErrorKind::ToleranceHere => {
                format!(
                    "a tolerance is written like `{} ± 8 %`",
                    Dimension::Power.example()
                )
            }
            ParseErrorKind::Phrase { example, .. } => format!("write it like `{example}`"),
            _ => format!("write it like `{}`", self.wanted.example()),
        }
    }

    /// The units that would do, as a list in words.
    fn units(&self) -> String {
        let words: Vec<String> = self.wanted.units().map(|u| format!("`{u}`")).collect();
        match words.split_last() {
            None => "none".into(),
            Some((last, [])) => last.clone(),
            Some((last, rest)) => format!("{} or {last}", rest.join(", ")),
        }
    }
}

impl std::error::Error for ParseError {}
