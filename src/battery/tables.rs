//! Printed tables the battery equations rest on, each with its source and how
//! sure each of its points is. Between points straight lines; beyond the ends
//! the end's value.

use crate::quantity::{Celsius, Fraction};

/// How sure a printed figure is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Certainty {
    /// Read in the source itself.
    Read,
    /// From memory of a published work.
    Memory,
    /// Own extrapolation.
    OwnChoice,
}

/// A table of one quantity against another.
#[derive(Debug)]
pub struct Table {
    /// What it gives, against what.
    pub what: &'static str,
    /// Where it was printed, and what was done to it.
    pub source: &'static str,
    /// Rising arguments, values, and how sure each is.
    points: &'static [(f64, f64, Certainty)],
}

impl Table {
    /// The value on the straight line between the two nearest points.
    fn value(&self, at: f64) -> f64 {
        let above = self.points.partition_point(|p| p.0 <= at);
        match (
            above.checked_sub(1).and_then(|i| self.points.get(i)),
            self.points.get(above),
        ) {
            (Some(&(x0, y0, _)), Some(&(x1, y1, _))) => y0 + (y1 - y0) * (at - x0) / (x1 - x0),
            (Some(&(_, end, _)), None) | (None, Some(&(_, end, _))) => end,
            (None, None) => 0.0,
        }
    }
}

use Certainty::{Memory, OwnChoice, Read};

/// Capacity against air temperature, 1 at 25 °C.
pub static CAPACITY: Table = Table {
    what: "capacity over that at 25 °C, against air temperature",
    source: "reciprocals of the cell-size factors of IEEE 485 (from memory); below -3.9 °C extrapolated",
    points: &[
        (-40.0, 0.25, OwnChoice),
        (-18.0, 0.47, OwnChoice),
        (-3.9, 0.658, Memory),
        (0.0, 0.719, Memory),
        (4.4, 0.769, Memory),
        (10.0, 0.840, Memory),
        (15.6, 0.901, Memory),
        (21.1, 0.962, Memory),
        (25.0, 1.0, Memory),
        (32.2, 1.064, Memory),
        (37.8, 1.099, Memory),
        (43.3, 1.136, Memory),
        (48.9, 1.163, Memory),
        (51.7, 1.176, Memory),
    ],
};

/// Freezing point of the acid against its specific gravity.
pub static FREEZING: Table = Table {
    what: "freezing point of the acid (°C), against specific gravity at 25 °C",
    source: "vehicle owner's manual: -75, -35, -17, 5, 18, 27 °F at 1.265 to 1.050; pure water freezes at 0 °C",
    points: &[
        (1.000, 0.0, Read),
        (1.050, -2.8, Read),
        (1.100, -7.8, Read),
        (1.150, -15.0, Read),
        (1.200, -27.2, Read),
        (1.225, -37.2, Read),
        (1.265, -59.4, Read),
    ],
};

/// Cranking power an engine needs against air temperature, 1 at 27 °C.
pub static CRANKING: Table = Table {
    what: "cranking power an engine needs over that at 27 °C, against air temperature",
    source: "printed \"power required\" table of a public manual; used here as a ratio of currents, which is own choice",
    points: &[
        (-29.0, 3.50, Read),
        (-18.0, 2.10, Read),
        (0.0, 1.55, Read),
        (27.0, 1.00, Read),
    ],
};

/// Capacity at an air temperature over that at 25 °C.
#[must_use]
pub fn capacity_factor(air: Celsius) -> Fraction {
    Fraction(CAPACITY.value(air.0))
}

/// How sure [`capacity_factor`] is at an air temperature: that of the less
/// certain of the two points it lies between.
#[must_use]
pub fn capacity_certainty(air: Celsius) -> Certainty {
    let extrapolated = CAPACITY
        .points
        .iter()
        .any(|&(at, _, c)| c == OwnChoice && air.0 <= at);
    let between = CAPACITY
        .points
        .windows(2)
        .any(|pair| pair[0].2 == OwnChoice && pair[0].0 < air.0 && air.0 < pair[1].0);
    if extrapolated || between {
        OwnChoice
    } else {
        Memory
    }
}

/// Freezing point of acid of a specific gravity (ratio to water at 25 °C).
#[must_use]
pub fn freezing_point(specific_gravity: Fraction) -> Celsius {
    Celsius(FREEZING.value(specific_gravity.0))
}

/// Starter current at an air temperature over that at 27 °C.
#[must_use]
pub fn cranking_factor(air: Celsius) -> Fraction {
    Fraction(CRANKING.value(air.0))
}
