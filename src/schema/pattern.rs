//! Regular expressions for written quantities, made from the table of units.
//!
//! They let an editor mark a missing or wrong unit while it is being typed. They use only what every dialect has.

use crate::quantity::unit::{Dimension, UNITS};

/// A decimal number with sign and exponent.
const NUMBER: &str = r"[-+\u{2212}]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][-+]?[0-9]+)?";
/// The marks of a tolerance.
const PLUS_MINUS: &str = r"(±|\+/-|\+-|\+\u{2212})";

/// A number as a pattern; the minus sign of typesetters is written as itself, since dialects differ in escapes.
fn number() -> String {
    NUMBER.replace(r"\u{2212}", "\u{2212}")
}

/// A whole text of one quantity.
pub(super) fn quantity(dimension: Dimension) -> String {
    whole(&format!("{}{}", bare(dimension), tolerance(dimension)))
}

/// A whole text.
pub(super) fn whole(inner: &str) -> String {
    format!(r"^\s*{inner}\s*$")
}

/// A quantity of a dimension without a tolerance.
pub(super) fn bare(dimension: Dimension) -> String {
    let number = number();
    match dimension {
        Dimension::Factor => format!(r"{number}(\s*{})?", units(Dimension::Times)),
        Dimension::Duration => format!(r"({number}\s*{}\s*)+", units(dimension)),
        _ => format!(r"{number}\s*{}", units(dimension)),
    }
}

/// `± 8 %`, `+- 3 W`, or nothing.
pub(super) fn tolerance(dimension: Dimension) -> String {
    let of = match dimension {
        Dimension::Temperature => units(Dimension::Difference),
        Dimension::Factor => format!("(%|{})?", units(Dimension::Times)),
        _ => format!("(%|{})", units(dimension)),
    };
    format!(
        r"(\s*{}\s*{}\s*{of})?",
        PLUS_MINUS.replace(r"\u{2212}", "\u{2212}"),
        number()
    )
}

/// Every spelling of a dimension's units, those that look alike included.
fn units(dimension: Dimension) -> String {
    let words: Vec<String> = UNITS
        .iter()
        .filter(|u| dimension.covers(u.dimension))
        .map(|u| alike(u.word))
        .collect();
    format!("({})", words.join("|"))
}

/// A unit and the code points that are read as its own: both micro signs, both ohm signs, `º`, `×`, `²`.
fn alike(word: &str) -> String {
    let word = match word.strip_prefix('u') {
        Some(rest) => format!("[u\u{b5}\u{3bc}]{rest}"),
        None => word.to_owned(),
    };
    let word = if word == "x" { "[x×]" } else { &word };
    word.replace('Ω', "[Ω\u{2126}]")
        .replace('°', "[°\u{ba}]")
        .replace('2', "[2²]")
}
