//! Reads a quantity from left to right: number, unit, more of a compound duration, tolerance.

use super::error::{ParseError, ParseErrorKind};
use crate::quantity::unit::{self, Conversion, Dimension};
use crate::quantity::{Fraction, Tolerance};
use std::ops::Range;

/// Marks that begin a tolerance, the longest first.
pub(super) const PLUS_MINUS: [&str; 4] = ["+/-", "+-", "+\u{2212}", "±"];

/// A place in a text, and what is wanted of it.
pub(super) struct Reader<'a> {
    text: &'a str,
    at: usize,
    wanted: Dimension,
}

/// A number and where it stands.
struct Number {
    value: f64,
    range: Range<usize>,
}

impl<'a> Reader<'a> {
    /// At the beginning of a text.
    pub(super) fn new(text: &'a str, wanted: Dimension) -> Self {
        Reader {
            text,
            at: 0,
            wanted,
        }
    }

    /// What is not yet read.
    fn rest(&self) -> &'a str {
        &self.text[self.at..]
    }

    fn skip_space(&mut self) {
        self.at += self.rest().len() - self.rest().trim_start().len();
    }

    /// What is left, without the space around it.
    fn left(&self) -> Range<usize> {
        let rest = self.rest();
        let start = self.at + rest.len() - rest.trim_start().len();
        start..start.max(self.at + rest.trim_end().len())
    }

    fn fail<T>(
        &self,
        range: Range<usize>,
        kind: impl FnOnce(String) -> ParseErrorKind,
    ) -> Result<T, ParseError> {
        let found = self.text.get(range.clone()).unwrap_or_default().to_string();
        Err(ParseError {
            range,
            kind: kind(found),
            wanted: self.wanted,
        })
    }

    /// A number with its unit, in the quantity's own unit.
    pub(super) fn quantity(&mut self) -> Result<f64, ParseError> {
        if self.wanted == Dimension::Section
            && let Some(section) = self.gauge()?
        {
            return Ok(section);
        }
        let number = self.number()?;
        let (unit, word) = self.unit(&number)?;
        let mut value = unit.apply(number.value);
        if self.wanted == Dimension::Duration {
            value = self.more_time(value, unit.apply(1.0))?;
        }
        if !value.is_finite() {
            return self.fail(number.range.start..word.end, |found| {
                ParseErrorKind::TooLarge { found }
            });
        }
        Ok(value)
    }

    /// `AWG 14`, `2/0 AWG`: the spellings where the number is not a plain one before its unit.
    fn gauge(&mut self) -> Result<Option<f64>, ParseError> {
        self.skip_space();
        if let Some(after) = self.rest().strip_prefix("AWG") {
            self.at = self.text.len() - after.len();
            let number = self.number()?;
            return Ok(Some(Conversion::Gauge.apply(number.value)));
        }
        let ought = self.rest().get(1..3) == Some("/0");
        let count = self.rest().bytes().next().filter(u8::is_ascii_digit);
        if let (true, Some(count @ b'1'..=b'4')) = (ought, count) {
            self.at += 3;
            self.skip_space();
            if let Some(after) = self.rest().strip_prefix("AWG") {
                self.at = self.text.len() - after.len();
                return Ok(Some(Conversion::Gauge.apply(1.0 - f64::from(count - b'0'))));
            }
            return self.fail(self.left(), |found| ParseErrorKind::UnknownUnit {
                found,
                near: Some("AWG"),
            });
        }
        Ok(None)
    }

    /// The rest of `1 h 20 min 5 s`: each unit smaller than the one before.
    fn more_time(&mut self, mut hours: f64, mut last: f64) -> Result<f64, ParseError> {
        loop {
            self.skip_space();
            if !self.rest().starts_with(|c: char| c.is_ascii_digit()) {
                return Ok(hours);
            }
            let number = self.number()?;
            let (unit, word) = self.unit(&number)?;
            let factor = unit.apply(1.0);
            if factor >= last {
                return self.fail(word, |found| ParseErrorKind::Order { found });
            }
            hours += unit.apply(number.value);
            last = factor;
        }
    }

    /// A decimal number with sign and exponent.
    fn number(&mut self) -> Result<Number, ParseError> {
        self.skip_space();
        if self.rest().is_empty() {
            return self.fail(0..self.text.trim_end().len(), |_| ParseErrorKind::Empty);
        }
        let start = self.at;
        let (digits, length) = decimal(self.rest());
        self.at += length;
        if digits.is_empty() {
            return self.no_number(start);
        }
        self.grouping(start)?;
        let range = start..self.at;
        match digits.parse::<f64>() {
            Ok(value) if value.is_finite() => Ok(Number { value, range }),
            _ => self.fail(range, |found| ParseErrorKind::TooLarge { found }),
        }
    }

    /// Says what stands where a number should.
    fn no_number<T>(&mut self, start: usize) -> Result<T, ParseError> {
        self.at = start;
        let word = self.rest().split_whitespace().next().unwrap_or_default();
        let bare = word
            .trim_start_matches(['+', '-', '\u{2212}', '.'])
            .to_lowercase();
        if matches!(bare.as_str(), "nan" | "inf" | "infinity") {
            return self.fail(start..start + word.len(), |found| {
                ParseErrorKind::NotFinite { found }
            });
        }
        self.fail(self.left(), |found| ParseErrorKind::NotNumber { found })
    }

    /// Refuses `5,5`, `1 000`, `1_000`.
    fn grouping(&self, start: usize) -> Result<(), ParseError> {
        let rest = self.rest();
        let apart = rest.len() - rest.trim_start_matches([',', '_', ' ', '\'']).len();
        let digits = rest[apart..].bytes().take_while(u8::is_ascii_digit).count();
        let mark = rest[..apart].chars().next();
        if apart != 1 || digits == 0 || (mark == Some(' ') && digits != 3) {
            return Ok(());
        }
        let more = rest[apart + digits..]
            .bytes()
            .take_while(|b| matches!(b, b'0'..=b'9' | b'.'))
            .count();
        let range = start..self.at + apart + digits + more;
        let written = &self.text[range.clone()];
        let decimal = mark == Some(',')
            && !written.contains('.')
            && (digits != 3 || written.starts_with("0,"));
        let joint = if decimal { "." } else { "" };
        let plain = written.replace([',', '_', ' ', '\''], joint);
        self.fail(range, |found| ParseErrorKind::Grouping { found, plain })
    }

    /// The unit after a number, for the dimension wanted.
    fn unit(&mut self, number: &Number) -> Result<(Conversion, Range<usize>), ParseError> {
        self.skip_space();
        let start = self.at;
        let written = unit_word(self.rest());
        let range = start..start + written.len();
        if written.is_empty() {
            if self.wanted == Dimension::Factor {
                return Ok((Conversion::Times(1.0), number.range.clone()));
            }
            let end = number.range.clone();
            return self.fail(end, |found| ParseErrorKind::UnitMissing { found });
        }
        let word = unit::plain(written);
        let wanted = if self.wanted == Dimension::Factor {
            Dimension::Times
        } else {
            self.wanted
        };
        if let Some(row) = unit::find(&word, wanted) {
            self.at = range.end;
            return Ok((row.conversion, range));
        }
        let near = unit::nearest(&word, self.wanted);
        match unit::measured_by(&word) {
            Some(measures) => self.fail(range, |found| ParseErrorKind::WrongUnit {
                found,
                measures,
                near,
            }),
            None => self.fail(range, |found| ParseErrorKind::UnknownUnit { found, near }),
        }
    }

    /// `± 8 %`, `+- 3 W`, or nothing.
    pub(super) fn tolerance(&mut self, value: f64) -> Result<Option<Tolerance>, ParseError> {
        self.skip_space();
        let Some(mark) = PLUS_MINUS.iter().find(|m| self.rest().starts_with(**m)) else {
            return Ok(None);
        };
        let start = self.at;
        self.at += mark.len();
        let number = self.number()?;
        self.skip_space();
        let wanted = self.wanted;
        let relative = if unit_word(self.rest()) == "%" && wanted != Dimension::Temperature {
            self.at += 1;
            number.value / 100.0
        } else {
            if wanted == Dimension::Temperature {
                self.wanted = Dimension::Difference;
            }
            let (unit, _) = self.unit(&number)?;
            self.wanted = wanted;
            unit.apply(number.value) / value.abs()
        };
        let range = start..self.at;
        if value == 0.0 {
            return self.fail(range, |_| ParseErrorKind::ToleranceOfZero);
        }
        let widest = if wanted == Dimension::Temperature {
            f64::MAX
        } else {
            1.0
        };
        if !(0.0..widest).contains(&relative) {
            return self.fail(range, |found| ParseErrorKind::ToleranceTooWide { found });
        }
        Ok(Some(Tolerance {
            relative: Fraction(relative),
        }))
    }

    /// Nothing may be left.
    pub(super) fn end(&self) -> Result<(), ParseError> {
        let left = self.left();
        if left.is_empty() {
            Ok(())
        } else {
            self.fail(left, |found| ParseErrorKind::Trailing { found })
        }
    }
}

/// The number at the beginning of a text, with a plain minus sign, and how many bytes of the text it takes; empty if there is none.
fn decimal(text: &str) -> (String, usize) {
    let mut number = String::new();
    let mut rest = text;
    if let Some(after) = rest.strip_prefix(['-', '\u{2212}']) {
        number.push('-');
        rest = after;
    } else if let Some(after) = rest.strip_prefix('+') {
        rest = after;
    }
    let mantissa = rest
        .bytes()
        .take_while(|b| b.is_ascii_digit() || *b == b'.')
        .count();
    let (written, mut rest) = rest.split_at(mantissa);
    if !written.bytes().any(|b| b.is_ascii_digit()) || written.matches('.').count() > 1 {
        return (String::new(), 0);
    }
    number.push_str(written);
    if let Some(after) = rest.strip_prefix(['e', 'E']) {
        let sign = usize::from(after.starts_with(['+', '-']));
        let digits = after[sign..].bytes().take_while(u8::is_ascii_digit).count();
        if digits > 0 {
            number.push('e');
            number.push_str(&after[..sign + digits]);
            rest = &after[sign + digits..];
        }
    }
    (number, text.len() - rest.len())
}

/// The unit after the number that a text begins with; empty if there is none.
pub(super) fn unit_written(text: &str) -> &str {
    let text = text.trim_start();
    let (_, number) = decimal(text);
    unit_word(text[number..].trim_start())
}

/// The unit at the beginning of a text: letters and signs up to a space, a digit or a tolerance; `mm2` keeps its digit.
fn unit_word(text: &str) -> &str {
    let stop = |c: char| {
        c.is_whitespace() || c.is_ascii_digit() || matches!(c, '±' | '+' | ',' | '-' | '\u{2212}')
    };
    let end = text.find(stop).unwrap_or(text.len());
    let square = text[..end].eq_ignore_ascii_case("mm") && text[end..].starts_with('2');
    &text[..end + usize::from(square)]
}
