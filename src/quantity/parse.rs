//! Text to typed quantities: `55 W ± 8 %`, `1 h 20 min`, `-10 °C`, `16 A at 3600 rpm into 14 V`.
//!
//! Every error carries the byte range of what is wrong, so that a message can mark it on the line.

mod error;
mod phrase;
mod reader;

pub use error::{ParseError, ParseErrorKind};
pub use phrase::{at_speed, between, rated, surge};

use super::unit::{self, Dimension, Unit};
use super::{Amps, Fraction, Ohms, Tolerance, Watts};
use reader::Reader;

/// A quantity as written, with the tolerance written beside it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Measured<T> {
    /// The value.
    pub value: T,
    /// How far it may lie from the value; `± 8 %` is always a share of the value.
    pub tolerance: Option<Tolerance>,
}

impl<T> Measured<T> {
    /// The same tolerance about another form of the value.
    pub(crate) fn map<U>(self, form: impl FnOnce(T) -> U) -> Measured<U> {
        Measured {
            value: form(self.value),
            tolerance: self.tolerance,
        }
    }
}

/// Reads a quantity with its unit and, where one is written, its tolerance.
///
/// ```
/// use ampledger::quantity::{Fraction, Watts, parse::parse};
/// let lamp = parse::<Watts>("55 W ± 8 %").unwrap();
/// assert_eq!(lamp.value, Watts(55.0));
/// assert_eq!(lamp.tolerance.unwrap().relative, Fraction(0.08));
/// assert_eq!(parse::<Watts>("55 V").unwrap_err().range, 3..4);
/// ```
///
/// # Errors
/// [`ParseError`]: not a number, too large, no unit, an unknown unit or one that measures something else, text left over.
pub fn parse<T: Unit>(text: &str) -> Result<Measured<T>, ParseError> {
    Ok(measure(text, T::DIMENSION)?.map(T::of))
}

/// Reads a plain number without a unit: a pulley ratio, a scale, lumens. `x` after it is allowed.
///
/// # Errors
/// [`ParseError`], as [`parse`].
pub fn factor(text: &str) -> Result<Measured<Fraction>, ParseError> {
    Ok(measure(text, Dimension::Factor)?.map(Fraction))
}

/// What an accessory draws, by the unit written.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Draw {
    /// `A`.
    Current(Amps),
    /// `ohm`.
    Resistance(Ohms),
    /// `W`.
    Power(Watts),
}

/// Reads a power, a current or a resistance: `55 W`, `5 A`, `3.1 ohm`.
///
/// # Errors
/// [`ParseError`]; of the three readings, that of the one which came furthest.
pub fn draw(text: &str) -> Result<Measured<Draw>, ParseError> {
    let readings = [Dimension::Power, Dimension::Current, Dimension::Resistance];
    let form = |dimension, amount| match dimension {
        Dimension::Current => Draw::Current(Amps(amount)),
        Dimension::Resistance => Draw::Resistance(Ohms(amount)),
        _ => Draw::Power(Watts(amount)),
    };
    let unit = unit::plain(reader::unit_written(text));
    let named = |dimension: &&Dimension| unit::find(&unit, **dimension).is_some();
    if let Some(dimension) = readings.iter().find(named) {
        let measured = measure(text, *dimension).map_err(of_draw)?;
        return Ok(measured.map(|x| form(*dimension, x)));
    }
    let failed = readings.map(|dimension| measure(text, dimension).err());
    let furthest = failed.into_iter().flatten().reduce(|worst, e| {
        if e.range.start > worst.range.start {
            e
        } else {
            worst
        }
    });
    Err(of_draw(furthest.unwrap_or(ParseError {
        range: 0..0,
        kind: ParseErrorKind::Empty,
        wanted: Dimension::Draw,
    })))
}

/// An error of the first of the readings, told of all three.
fn of_draw(mut error: ParseError) -> ParseError {
    if error.wanted == Dimension::Power {
        error.wanted = Dimension::Draw;
        if let ParseErrorKind::UnknownUnit { found, near } = &mut error.kind {
            *near = unit::nearest(&unit::plain(found), Dimension::Draw);
        }
    }
    error
}

/// Reads a whole number: poles, a count.
///
/// # Errors
/// [`ParseErrorKind::NotWhole`] for anything but digits; [`ParseErrorKind::TooLarge`] beyond `u32`.
pub fn whole(text: &str) -> Result<u32, ParseError> {
    let trimmed = text.trim();
    let start = text.len() - text.trim_start().len();
    let range = start..start + trimmed.len();
    let digits = trimmed.strip_prefix('+').unwrap_or(trimmed);
    let kind = if digits.is_empty() || !digits.bytes().all(|b| b.is_ascii_digit()) {
        ParseErrorKind::NotWhole {
            found: trimmed.into(),
        }
    } else {
        match digits.parse() {
            Ok(number) => return Ok(number),
            Err(_) => ParseErrorKind::TooLarge {
                found: trimmed.into(),
            },
        }
    };
    Err(ParseError {
        range,
        kind,
        wanted: Dimension::Whole,
    })
}

/// Reads a whole text as a quantity of a dimension, in the quantity's own unit.
fn measure(text: &str, wanted: Dimension) -> Result<Measured<f64>, ParseError> {
    let mut reader = Reader::new(text, wanted);
    let value = reader.quantity()?;
    let tolerance = reader.tolerance(value)?;
    reader.end()?;
    Ok(Measured { value, tolerance })
}

#[cfg(test)]
mod tests;
