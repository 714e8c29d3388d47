//! Amounts that a tolerance belongs to: how one is varied, and how it is written.

use crate::description::{DrawText, RatedText};
use crate::quantity::bounds::{self, Bounds};
use crate::quantity::format::{Written as Number, precise, precise_duration};
use crate::quantity::{
    AmpHours, Amps, Celsius, Fraction, Henries, Hours, Ohms, Rpm, Volts, VoltsPerKelvin,
};

/// Digits that a drawn value keeps: as a person could write it, and far finer than any tolerance.
const DIGITS: usize = 6;

/// An amount with a tolerance.
pub(super) trait Amount: Copy {
    /// What it may be.
    type Bounds;
    /// A factor on it, rounded to what can be written and held within its bounds.
    fn drawn(self, factor: f64, bounds: &Self::Bounds) -> Self;
    /// As a build file has it.
    fn typed(self) -> String;
}

/// A number of six digits.
fn rounded(number: f64) -> f64 {
    format!("{number:.*e}", DIGITS - 1)
        .parse()
        .unwrap_or(number)
}

macro_rules! amounts {
    ($($quantity:ident by $typed:ident;)*) => { $(
        impl Amount for $quantity {
            type Bounds = Bounds<$quantity>;
            fn drawn(self, factor: f64, bounds: &Bounds<$quantity>) -> $quantity {
                bounds.held($quantity::of(rounded(self.number() * factor)))
            }
            fn typed(self) -> String {
                $typed(self)
            }
        }
    )* };
}
amounts! {
    Volts by precise;
    Amps by precise;
    Ohms by precise;
    Henries by precise;
    Rpm by precise;
    AmpHours by precise;
    Celsius by precise;
    VoltsPerKelvin by precise;
    Fraction by precise;
    Hours by precise_duration;
}

/// A plain number, as a scale is.
pub(super) fn typed_factor(factor: Fraction) -> String {
    format!("{}", rounded(factor.0))
}

/// Volts or amps at a speed: the speed is exact.
impl<Q: Amount<Bounds = Bounds<Q>>> Amount for (Q, Rpm) {
    type Bounds = Bounds<Q>;
    fn drawn(self, factor: f64, bounds: &Bounds<Q>) -> Self {
        (self.0.drawn(factor, bounds), self.1)
    }
    fn typed(self) -> String {
        format!("{} at {}", self.0.typed(), self.1.typed())
    }
}

/// A rating: the tolerance is that of the amps.
impl Amount for RatedText {
    type Bounds = Bounds<Amps>;
    fn drawn(self, factor: f64, bounds: &Bounds<Amps>) -> Self {
        RatedText {
            amps: self.amps.drawn(factor, bounds),
            ..self
        }
    }
    fn typed(self) -> String {
        let into = self
            .volts
            .map_or(String::new(), |volts| format!(" into {}", volts.typed()));
        format!("{} at {}{into}", self.amps.typed(), self.rpm.typed())
    }
}

/// A draw, in the unit it is written in.
impl Amount for DrawText {
    type Bounds = ();
    fn drawn(self, factor: f64, (): &()) -> Self {
        match self {
            DrawText::Current(amps) => DrawText::Current(amps.drawn(factor, &bounds::DRAW_CURRENT)),
            DrawText::Resistance(ohms) => {
                DrawText::Resistance(ohms.drawn(factor, &bounds::DRAW_RESISTANCE))
            }
            DrawText::Power(watts) => {
                let number = rounded(watts.number() * factor);
                DrawText::Power(bounds::DRAW_POWER.held(crate::quantity::Watts::of(number)))
            }
        }
    }
    fn typed(self) -> String {
        match self {
            DrawText::Current(amps) => precise(amps),
            DrawText::Resistance(ohms) => precise(ohms),
            DrawText::Power(watts) => precise(watts),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::parse;

    /// What is written reads as the number that was drawn (the unit's own rounding apart: one part in 10¹⁵).
    #[test]
    fn written_reads_as_drawn() {
        let mut factor = 0.7;
        while factor < 1.3 {
            let close = |a: f64, b: f64| (a - b).abs() <= 4e-16 * a.abs();
            let henries = Henries(0.35e-3).drawn(factor, &bounds::INDUCTANCE);
            let read = parse::parse::<Henries>(&henries.typed()).map(|m| m.value);
            assert!(close(read.unwrap().0, henries.0), "{}", henries.typed());
            let time = Hours::from_minutes(95.0).drawn(factor, &bounds::STEP_TIME);
            let read = parse::parse::<Hours>(&time.typed()).map(|m| m.value);
            assert!(close(read.unwrap().0, time.0), "{}", time.typed());
            let duty = Fraction(0.85).drawn(factor, &bounds::DUTY);
            let read = parse::parse::<Fraction>(&duty.typed()).map(|m| m.value);
            assert!(
                close(read.unwrap().0, duty.0) && duty.0 <= 1.0,
                "{}",
                duty.typed()
            );
            let rated = RatedText {
                amps: Amps(16.0),
                rpm: Rpm(3600.0),
                volts: Some(Volts(14.0)),
            };
            let rated = rated.drawn(factor, &bounds::RATED_CURRENT);
            let (amps, rpm, volts) = parse::rated(&rated.typed()).unwrap().value;
            assert!(close(amps.0, rated.amps.0) && rpm == rated.rpm && volts == rated.volts);
            let air = Celsius(-10.0).drawn(factor, &bounds::AIR);
            let read = parse::parse::<Celsius>(&air.typed()).map(|m| m.value);
            assert!(close(read.unwrap().0, air.0), "{}", air.typed());
            factor += 0.013_7;
        }
    }

    #[test]
    fn six_digits_as_a_person_writes_them() {
        let lamp = DrawText::Power(crate::quantity::Watts(172.0)).drawn(1.012_345_678, &());
        assert_eq!(lamp.typed(), "174.123 W");
        let volts = (Volts(28.0), Rpm(3600.0)).drawn(0.951, &bounds::OPEN_CIRCUIT);
        assert_eq!(volts.typed(), "26.628 V at 3600 rpm");
        assert_eq!(typed_factor(Fraction(1.05)), "1.05");
    }
}
