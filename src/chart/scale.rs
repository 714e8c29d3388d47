//! From an axis to places along it, with ticks at round numbers.

use super::Axis;

/// An axis laid along a length, with its ticks.
#[derive(Clone, Debug, PartialEq)]
pub struct Scale {
    /// Number at the beginning.
    pub low: f64,
    /// Number at the end.
    pub high: f64,
    /// Place of the beginning.
    pub start: f64,
    /// Place of the end.
    pub end: f64,
    /// Ticks: number and text; the last has the unit.
    pub ticks: Vec<(f64, String)>,
}

impl Scale {
    /// Lays an axis from a place to a place with at most so many ticks. With `round`, the range is
    /// widened to the ticks beyond its ends.
    #[must_use]
    pub fn new(axis: &Axis, start: f64, end: f64, most: usize, round: bool) -> Scale {
        let span = (axis.high - axis.low).max(f64::MIN_POSITIVE);
        let step = step(axis.unit, span, most.max(2));
        let first = axis.low / step;
        let last = axis.high / step;
        let (first, last) = if round {
            ((first + 1e-9).floor(), (last - 1e-9).ceil())
        } else {
            ((first - 1e-9).ceil(), (last + 1e-9).floor())
        };
        let decimals = decimals(step);
        let mut ticks = Vec::new();
        let mut at = first;
        while at <= last && ticks.len() <= most + 2 {
            ticks.push((at * step, number(at * step, decimals)));
            at += 1.0;
        }
        if let Some(tick) = ticks.last_mut().filter(|_| !axis.unit.is_empty()) {
            tick.1 = format!("{} {}", tick.1, axis.unit);
        }
        let (low, high) = if round {
            (first * step, last * step)
        } else {
            (axis.low, axis.high)
        };
        Scale {
            low,
            high,
            start,
            end,
            ticks,
        }
    }

    /// Place of a number.
    #[must_use]
    pub fn place(&self, number: f64) -> f64 {
        let share = (number - self.low) / (self.high - self.low);
        self.start + share * (self.end - self.start)
    }

    /// Number at a place.
    #[must_use]
    pub fn number(&self, place: f64) -> f64 {
        let share = (place - self.start) / (self.end - self.start);
        self.low + share * (self.high - self.low)
    }
}

/// The least round step that needs at most so many ticks. Hours go by quarters and days of them,
/// days by whole ones.
fn step(unit: &str, span: f64, most: usize) -> f64 {
    const HOURS: [f64; 12] = [
        0.25, 0.5, 1.0, 2.0, 3.0, 4.0, 6.0, 8.0, 12.0, 24.0, 48.0, 96.0,
    ];
    let fits = |step: f64| span / step <= most as f64 - 1.0 + 1e-9;
    let hours = HOURS
        .into_iter()
        .filter(|_| unit == "h" && span > 1.0)
        .find(|s| fits(*s));
    if let Some(step) = hours {
        return step;
    }
    let least = if unit == "d" { 1.0 } else { 0.0 };
    let mut decade = 10f64.powf(span.log10().floor() - 2.0);
    loop {
        for round in [1.0, 2.0, 5.0] {
            let step: f64 = round * decade;
            if step >= least && fits(step) {
                return step;
            }
        }
        decade *= 10.0;
    }
}

/// Decimals that a multiple of the step needs.
fn decimals(step: f64) -> usize {
    (0..6)
        .find(|d| {
            let scaled = step * 10f64.powi(*d);
            (scaled - scaled.round()).abs() < 1e-6 * scaled.abs().max(1.0)
        })
        .and_then(|d| usize::try_from(d).ok())
        .unwrap_or(6)
}

/// A tick's number: true minus, no negative zero.
fn number(value: f64, decimals: usize) -> String {
    crate::quantity::format::fixed(crate::quantity::Amps(value), decimals)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(unit: &'static str, low: f64, high: f64, most: usize, round: bool) -> Vec<String> {
        let scale = Scale::new(&Axis { unit, low, high }, 0.0, 100.0, most, round);
        scale.ticks.into_iter().map(|(_, text)| text).collect()
    }

    #[test]
    fn ticks_are_round_and_the_last_has_the_unit() {
        assert_eq!(
            texts("A", 0.0, 45.3, 6, true),
            ["0", "10", "20", "30", "40", "50 A"]
        );
        assert_eq!(texts("h", 0.0, 4.25, 6, false), ["0", "1", "2", "3", "4 h"]);
        assert_eq!(
            texts("h", 0.0, 1.5, 8, false),
            ["0.00", "0.25", "0.50", "0.75", "1.00", "1.25", "1.50 h"]
        );
        assert_eq!(texts("d", 0.0, 1.2, 6, false), ["0", "1 d"]);
        assert_eq!(
            texts("°C", -20.0, 30.0, 6, false),
            ["−20", "−10", "0", "10", "20", "30 °C"]
        );
        assert_eq!(
            texts("A", -3.0, 4.0, 6, true),
            ["−4", "−2", "0", "2", "4 A"]
        );
    }

    #[test]
    fn places_and_numbers_are_each_others_inverse() {
        let scale = Scale::new(
            &Axis {
                unit: "A",
                low: 0.0,
                high: 47.0,
            },
            200.0,
            20.0,
            6,
            true,
        );
        assert_eq!((scale.low, scale.high), (0.0, 50.0));
        assert!((scale.place(0.0) - 200.0).abs() < 1e-12);
        assert!((scale.place(50.0) - 20.0).abs() < 1e-12);
        assert!((scale.number(scale.place(31.0)) - 31.0).abs() < 1e-9);
    }

    #[test]
    fn any_range_gets_a_few_ticks() {
        for exponent in -5..9 {
            for base in [1.0, 1.7, 3.3, 9.9] {
                let high = base * 10f64.powi(exponent);
                for most in 3..9 {
                    let ticks = texts("A", 0.0, high, most, true).len();
                    assert!((2..=most + 1).contains(&ticks), "{high} {most}: {ticks}");
                }
            }
        }
    }
}
