//! A belt-driven alternator, by its output curve.

use crate::quantity::{Amps, Fraction, Kelvins, Rpm};
use serde::Serialize;
use std::fmt;

/// Loss of output per kelvin above the curve's temperature. Common practice, no source.
pub const HOT_DERATING_PER_KELVIN: Fraction = Fraction(-0.002);

/// Amps against alternator speed at a stated voltage and temperature: straight lines between points, nothing below the
/// first, the last value beyond the last. The current at another bus voltage below the setpoint is the same, to first
/// order.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(transparent)]
pub struct OutputCurve(Vec<(Rpm, Amps)>);

/// Why points do not make an output curve.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum CurveError {
    /// There is no point.
    Empty,
    /// A speed or current is negative or not finite.
    OutOfRange {
        /// Which point, from 0.
        point: usize,
    },
    /// A point's speed is not above the one before.
    NotRising {
        /// Which point, from 0.
        point: usize,
    },
}

impl fmt::Display for CurveError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            CurveError::Empty => write!(f, "the output curve has no point"),
            CurveError::OutOfRange { point } => {
                write!(
                    f,
                    "point {} of the output curve is not a speed and a current",
                    point + 1
                )
            }
            CurveError::NotRising { point } => {
                write!(
                    f,
                    "point {} of the output curve is not faster than the one before",
                    point + 1
                )
            }
        }
    }
}

impl std::error::Error for CurveError {}

impl OutputCurve {
    /// From points (alternator speed, amps) in rising order of speed.
    ///
    /// # Errors
    /// [`CurveError`]: no point, a figure out of range, speeds that do not rise.
    pub fn new(points: Vec<(Rpm, Amps)>) -> Result<OutputCurve, CurveError> {
        if points.is_empty() {
            return Err(CurveError::Empty);
        }
        let lawful = |x: f64| x.is_finite() && x >= 0.0;
        for (point, (rpm, amps)) in points.iter().enumerate() {
            if !lawful(rpm.0) || !lawful(amps.0) {
                return Err(CurveError::OutOfRange { point });
            }
            if point > 0 && points.get(point - 1).is_some_and(|before| before.0 >= *rpm) {
                return Err(CurveError::NotRising { point });
            }
        }
        Ok(OutputCurve(points))
    }

    /// The points.
    #[must_use]
    pub fn points(&self) -> &[(Rpm, Amps)] {
        &self.0
    }

    /// Output at an alternator speed, at the curve's voltage and temperature.
    #[must_use]
    pub fn at(&self, alternator: Rpm) -> Amps {
        let after = self.0.partition_point(|(rpm, _)| *rpm <= alternator);
        match (
            after.checked_sub(1).and_then(|before| self.0.get(before)),
            self.0.get(after),
        ) {
            (None, _) => Amps::ZERO,
            (Some((_, last)), None) => *last,
            (Some((n0, i0)), Some((n1, i1))) => {
                *i0 + (*i1 - *i0) * ((alternator - *n0) / (*n1 - *n0))
            }
        }
    }

    /// Output of an alternator that turns `ratio` times for one turn of the engine and works `hotter` than its curve.
    ///
    /// Equation: I = I_curve(ratio · n) · (1 − 0.002 ΔT), where n engine speed, rpm; ΔT kelvins above the curve's
    /// temperature. Valid for ΔT from 0 to 100 K; a colder alternator is not credited. Source: common practice.
    #[must_use]
    pub fn driven(&self, engine: Rpm, ratio: Fraction, hotter: Kelvins) -> Amps {
        let left = 1.0 + HOT_DERATING_PER_KELVIN.0 * hotter.0.max(0.0);
        self.at(engine * ratio.0) * left.max(0.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn curve() -> OutputCurve {
        let points = [
            (1500.0, 0.0),
            (2000.0, 22.0),
            (4000.0, 50.0),
            (6000.0, 60.0),
        ];
        OutputCurve::new(points.map(|(n, i)| (Rpm(n), Amps(i))).to_vec()).unwrap()
    }

    #[test]
    fn straight_lines_between_points() {
        // Invented curve: 3000 rpm lies midway between 22 and 50 A: 36 A (arithmetic).
        assert_eq!(curve().at(Rpm(3000.0)), Amps(36.0));
        assert_eq!(curve().at(Rpm(4000.0)), Amps(50.0));
        assert_eq!(curve().at(Rpm(1499.0)), Amps(0.0));
        assert_eq!(curve().at(Rpm(9000.0)), Amps(60.0));
        assert_eq!(curve().at(Rpm(f64::NAN)), Amps(0.0));
    }

    #[test]
    fn pulley_and_heat() {
        // 1200 rpm · 2.5 = 3000 rpm: 36 A, less 0.2 % a kelvin over 60 K: 36 · 0.88 = 31.68 A (arithmetic).
        let amps = curve().driven(Rpm(1200.0), Fraction(2.5), Kelvins(60.0));
        assert!((amps - Amps(31.68)).abs() < Amps(1e-12));
        assert_eq!(
            curve().driven(Rpm(1200.0), Fraction(2.5), Kelvins(-20.0)),
            Amps(36.0)
        );
    }

    #[test]
    fn refuses_what_is_no_curve() {
        assert_eq!(OutputCurve::new(vec![]), Err(CurveError::Empty));
        let falling = vec![(Rpm(2000.0), Amps(1.0)), (Rpm(2000.0), Amps(2.0))];
        assert_eq!(
            OutputCurve::new(falling),
            Err(CurveError::NotRising { point: 1 })
        );
        let negative = vec![(Rpm(2000.0), Amps(-1.0))];
        assert_eq!(
            OutputCurve::new(negative),
            Err(CurveError::OutOfRange { point: 0 })
        );
    }
}
