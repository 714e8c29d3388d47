//! Amounts as numbers a person writes, rounded to the side that holds.

use crate::build::{Build, WindingSource};
use crate::quantity::{Amps, Fraction, Rpm, Volts};
use crate::source::{Winding, rectified_dc};

/// To which side a number is rounded.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Round {
    /// Up: the least that keeps up.
    Up,
    /// Down: the most that keeps up.
    Down,
}

/// Rounds a positive number to significant digits, to one side. Four digits move it by at most
/// 0.1 %.
pub(super) fn rounded(x: f64, digits: i32, side: Round) -> f64 {
    if !(x.is_finite() && x > 0.0) {
        return x;
    }
    let decimals = decimals(x, digits);
    let scale = 10f64.powi(decimals);
    // A number that already has these digits stays itself despite its binary rounding.
    let parts = x * scale;
    let whole = match side {
        Round::Up => (parts - 1e-9 * parts).ceil(),
        Round::Down => (parts + 1e-9 * parts).floor(),
    };
    whole / scale
}

/// Decimals (below zero: tens, hundreds) that show so many significant digits.
fn decimals(x: f64, digits: i32) -> i32 {
    digits - 1 - x.abs().log10().floor() as i32
}

/// A number with its unit, as `--set` takes it: `1.27`, `2140 rpm`.
pub(super) fn written(x: f64, unit: &str) -> String {
    // Six decimals and no binary residue: rounded numbers have fewer.
    let text = format!("{x:.6}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if unit.is_empty() {
        text.to_owned()
    } else {
        format!("{text} {unit}")
    }
}

/// The rated output of a winding as a function of its scale.
pub(super) struct Rated {
    /// At scale 1, where the winding has a rating.
    rated: Option<Amps>,
    constants: Winding,
    rectifier: Option<crate::source::Rectifier>,
    scale: Fraction,
    rpm: Rpm,
    bus: Volts,
}

impl Rated {
    /// Of a winding: its rating's amps, speed and volts, or, where it has none, what it gives at the
    /// highest named speed into 14 V for each 12 V of the system.
    pub(super) fn of(build: &Build, winding: &WindingSource) -> Rated {
        let rated = winding.rated.as_ref().map(|r| r.value);
        let bus = Volts(14.0 * f64::from(build.cells()) / 6.0);
        Rated {
            rated: rated.map(|(amps, _, _)| amps),
            constants: winding.constants,
            rectifier: winding.rectifier,
            scale: winding.scale.value,
            rpm: rated.map_or(Rpm(super::knob::top_speed(build)), |(_, rpm, _)| rpm),
            bus: rated.map_or(bus, |(_, _, volts)| volts),
        }
    }

    /// Speed and volts the amps are stated at.
    pub(super) fn point(&self) -> (Rpm, Volts) {
        (self.rpm, self.bus)
    }

    /// Amps at a scale.
    pub(super) fn at(&self, scale: Fraction) -> Amps {
        if let Some(rated) = self.rated {
            return rated * scale;
        }
        let Some(rectifier) = &self.rectifier else {
            return Amps(f64::NAN);
        };
        self.constants
            .scaled(Fraction(scale.0 / self.scale.0))
            .map_or(Amps(f64::NAN), |winding| {
                rectified_dc(&winding, rectifier, self.rpm, self.bus)
            })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rounds_to_the_safe_side_only() {
        for (x, digits, up, down) in [
            (1.27, 4, 1.27, 1.27),
            (1.270_04, 4, 1.271, 1.27),
            (2139.2, 4, 2140.0, 2139.0),
            (2139.2, 3, 2140.0, 2130.0),
            (12_345.0, 4, 12_350.0, 12_340.0),
            (0.012_345, 4, 0.012_35, 0.012_34),
            (100.0, 4, 100.0, 100.0),
            (0.1 + 0.2, 4, 0.3, 0.3),
        ] {
            assert!(
                (rounded(x, digits, Round::Up) - up).abs() < 1e-9 * up,
                "{x}"
            );
            assert!(
                (rounded(x, digits, Round::Down) - down).abs() < 1e-9 * down,
                "{x}"
            );
        }
        // At most 0.1 % off with four digits, over six decades.
        let mut x = 1e-3;
        while x < 1e3 {
            for side in [Round::Up, Round::Down] {
                let off = rounded(x, 4, side) / x - 1.0;
                assert!(off.abs() < 1.001e-3, "{x}");
                assert!(
                    if side == Round::Up {
                        off > -1e-8
                    } else {
                        off < 1e-8
                    },
                    "{x}"
                );
            }
            x *= 1.037;
        }
    }

    #[test]
    fn writes_what_set_takes() {
        assert_eq!(written(2140.0, "rpm"), "2140 rpm");
        assert_eq!(written(1.27, ""), "1.27");
        assert_eq!(written(0.1 + 0.2, "%"), "0.3 %");
        assert_eq!(written(100.0, "%"), "100 %");
    }
}
