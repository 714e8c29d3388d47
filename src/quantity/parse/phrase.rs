//! Phrases of several quantities: `16 A at 3600 rpm into 14 V`, `10.5 V to 16 V`, `8 x for 0.2 s`.

use super::error::{ParseError, ParseErrorKind};
use super::reader::{PLUS_MINUS, Reader};
use super::{Measured, measure};
use crate::quantity::unit::{Dimension, Unit};
use crate::quantity::{Amps, Fraction, Hours, Rpm, Volts};

/// A part of a text and where it begins.
#[derive(Clone, Copy)]
struct Part<'a> {
    text: &'a str,
    start: usize,
}

impl<'a> Part<'a> {
    /// Splits at a word that stands by itself.
    fn split(self, word: &str) -> Option<(Part<'a>, Part<'a>)> {
        let mut from = 0;
        while let Some(found) = self.text[from..].find(word) {
            let (start, end) = (from + found, from + found + word.len());
            let alone = |c: Option<char>| c.is_none_or(|c| !c.is_alphabetic());
            if alone(self.text[..start].chars().next_back())
                && alone(self.text[end..].chars().next())
            {
                let after = Part {
                    text: &self.text[end..],
                    start: self.start + end,
                };
                return Some((
                    Part {
                        text: &self.text[..start],
                        start: self.start,
                    },
                    after,
                ));
            }
            from = end;
        }
        None
    }

    /// Splits before a tolerance at its end.
    fn split_tolerance(self) -> (Part<'a>, Option<Part<'a>>) {
        let mark = PLUS_MINUS.iter().filter_map(|m| self.text.find(m)).min();
        match mark {
            None => (self, None),
            Some(at) => {
                let tail = Part {
                    text: &self.text[at..],
                    start: self.start + at,
                };
                (
                    Part {
                        text: &self.text[..at],
                        start: self.start,
                    },
                    Some(tail),
                )
            }
        }
    }

    fn read(self, wanted: Dimension) -> Result<Measured<f64>, ParseError> {
        measure(self.text, wanted).map_err(|e| e.moved(self.start))
    }

    /// The error of a tolerance that is not understood here.
    fn no_tolerance(self, wanted: Dimension) -> ParseError {
        let range = self.start..self.start + self.text.trim_end().len();
        ParseError {
            range,
            kind: ParseErrorKind::ToleranceHere,
            wanted,
        }
    }

    /// A number of a phrase that takes no tolerance of its own.
    fn exactly(self, wanted: Dimension) -> Result<f64, ParseError> {
        match self.split_tolerance() {
            (_, Some(tail)) => Err(tail.no_tolerance(wanted)),
            (value, None) => Ok(value.read(wanted)?.value),
        }
    }

    /// A quantity of a phrase that takes no tolerance of its own.
    fn exact<T: Unit>(self) -> Result<T, ParseError> {
        self.exactly(T::DIMENSION).map(T::of)
    }
}

impl ParseError {
    /// The same error in a longer text.
    fn moved(mut self, by: usize) -> ParseError {
        self.range = self.range.start + by..self.range.end + by;
        self
    }
}

/// A first quantity whose tolerance may stand beside it or at the phrase's end, and the last part without it.
fn head_and_tail<'a, T: Unit>(
    head: Part<'a>,
    last: Part<'a>,
) -> Result<(Measured<T>, Part<'a>), ParseError> {
    let mut first = head.read(T::DIMENSION)?;
    let (last, tolerance) = last.split_tolerance();
    if let Some(tail) = tolerance {
        if first.tolerance.is_some() {
            return Err(tail.no_tolerance(T::DIMENSION));
        }
        let mut reader = Reader::new(tail.text, T::DIMENSION);
        let read = reader
            .tolerance(first.value)
            .and_then(|t| reader.end().map(|()| t));
        first.tolerance = read.map_err(|e| e.moved(tail.start))?;
    }
    Ok((first.map(T::of), last))
}

fn missing<T>(
    text: &str,
    word: &'static str,
    example: &'static str,
    wanted: Dimension,
) -> Result<T, ParseError> {
    let start = text.len() - text.trim_start().len();
    let range = match measure(text, wanted) {
        // what is left over stands where the word should
        Err(e) if matches!(e.kind, ParseErrorKind::Trailing { .. }) => e.range,
        // a first part that is wrong in itself says more than the missing word
        Err(e) => return Err(e),
        Ok(_) => start..start.max(text.trim_end().len()),
    };
    Err(ParseError {
        range,
        kind: ParseErrorKind::Phrase { word, example },
        wanted,
    })
}

/// `28 V at 3600 rpm ± 6 %`: the tolerance is that of the first quantity.
///
/// # Errors
/// [`ParseError`], its range within the whole text.
pub fn at_speed<T: Unit>(text: &str) -> Result<Measured<(T, Rpm)>, ParseError> {
    let whole = Part { text, start: 0 };
    let Some((head, speed)) = whole.split("at") else {
        let example = match T::DIMENSION {
            Dimension::Current => "16 A at 3600 rpm",
            _ => "28 V at 3600 rpm",
        };
        return missing(text, "at", example, T::DIMENSION);
    };
    let (first, speed) = head_and_tail::<T>(head, speed)?;
    let rpm = speed.exact()?;
    Ok(first.map(|value| (value, rpm)))
}

/// `16 A at 3600 rpm into 14 V`; the last part may be left out.
///
/// # Errors
/// [`ParseError`], its range within the whole text.
pub fn rated(text: &str) -> Result<Measured<(Amps, Rpm, Option<Volts>)>, ParseError> {
    let whole = Part { text, start: 0 };
    let Some((head, rest)) = whole.split("at") else {
        return missing(text, "at", "16 A at 3600 rpm into 14 V", Dimension::Current);
    };
    match rest.split("into") {
        None => {
            let (amps, speed) = head_and_tail::<Amps>(head, rest)?;
            let rpm = speed.exact()?;
            Ok(amps.map(|a| (a, rpm, None)))
        }
        Some((speed, volts)) => {
            let (amps, volts) = head_and_tail::<Amps>(head, volts)?;
            let (rpm, volts) = (speed.exact()?, volts.exact()?);
            Ok(amps.map(|a| (a, rpm, Some(volts))))
        }
    }
}

/// `10.5 V to 16 V`.
///
/// # Errors
/// [`ParseError`], its range within the whole text.
pub fn between(text: &str) -> Result<(Volts, Volts), ParseError> {
    let whole = Part { text, start: 0 };
    match whole.split("to") {
        None => missing(text, "to", "10.5 V to 16 V", Dimension::Voltage),
        Some((low, high)) => Ok((low.exact()?, high.exact()?)),
    }
}

/// `8 x for 0.2 s`.
///
/// # Errors
/// [`ParseError`], its range within the whole text.
pub fn surge(text: &str) -> Result<(Fraction, Hours), ParseError> {
    let whole = Part { text, start: 0 };
    match whole.split("for") {
        None => missing(text, "for", "8 x for 0.2 s", Dimension::Times),
        Some((times, time)) => Ok((Fraction(times.exactly(Dimension::Times)?), time.exact()?)),
    }
}
