//! Accessories that drop out below their lower working limit.

use super::point::Drawn;
use crate::load::{At, LoadSum};
use crate::quantity::Volts;

/// Volts a cell over which an accessory lets go: as it drops out the bus recovers and it comes
/// back, so at its limit it takes the share of its current that the bus can hold.
const LETTING_GO_CELL: f64 = 0.05 / 6.0;

/// Lower working limits on the bus: classes of accessories that share one.
#[derive(Clone, Debug, Default)]
pub struct Cuts {
    /// Volts by class; class 0 has none.
    limits: Vec<f64>,
    width: f64,
}

impl Cuts {
    /// From the lower limits of the accessories on the bus.
    #[must_use]
    pub fn new(limits: impl Iterator<Item = Volts>, cells: u32) -> Cuts {
        let mut all: Vec<f64> = limits.map(|v| v.0).collect();
        all.sort_by(f64::total_cmp);
        all.dedup();
        Cuts {
            limits: all,
            width: LETTING_GO_CELL * f64::from(cells),
        }
    }

    /// Number of classes, the one without a limit counted.
    #[must_use]
    pub fn classes(&self) -> usize {
        self.limits.len() + 1
    }

    /// The class of a lower limit.
    #[must_use]
    pub fn class(&self, limit: Option<Volts>) -> usize {
        limit
            .and_then(|v| self.limits.binary_search_by(|l| l.total_cmp(&v.0)).ok())
            .map_or(0, |k| k + 1)
    }

    /// The volts from which nothing drops out.
    pub(super) fn highest(&self) -> Option<f64> {
        self.limits.last().copied()
    }

    /// Share of its current that an accessory takes at some volts, by its class.
    #[must_use]
    pub fn taken(&self, class: usize, volts: Volts) -> crate::quantity::Fraction {
        crate::quantity::Fraction(self.gate(class, volts.0))
    }

    fn gate(&self, class: usize, volts: f64) -> f64 {
        match class.checked_sub(1).and_then(|k| self.limits.get(k)) {
            None => 1.0,
            Some(limit) => (1.0 + (volts - limit) / self.width).clamp(0.0, 1.0),
        }
    }

    /// A draw whose classes let go at their limits.
    pub(super) fn gated<'a>(&'a self, sums: &'a [LoadSum]) -> Gated<'a> {
        Gated { cuts: self, sums }
    }
}

/// Sums by class, gated by volts.
pub(super) struct Gated<'a> {
    cuts: &'a Cuts,
    sums: &'a [LoadSum],
}

impl Drawn for Gated<'_> {
    fn drawn(&self, volts: f64, filaments: bool) -> (f64, f64) {
        let at = At::new(Volts(volts), filaments);
        let (mut amps, mut slope) = (0.0, 0.0);
        for (class, sum) in self.sums.iter().enumerate() {
            let gate = self.cuts.gate(class, volts);
            let full = sum.current(at).0;
            amps += gate * full;
            slope += gate * sum.slope(at);
            if gate > 0.0 && gate < 1.0 {
                slope += full / self.cuts.width;
            }
        }
        (amps, slope)
    }
}
