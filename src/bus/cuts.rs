//! Accessories that drop out below their lower working limit.
//!
//! What goes out is no help: in the ledger an accessory under its limit asks for the current that it takes at the limit,
//! as if it went on. Otherwise a machine whose lamps go out would be judged to keep up because they do, and more load
//! would leave more charge. What it misses is told beside ([`Cuts::taken`]).

use super::point::Drawn;
use crate::load::{At, LoadSum};
use crate::quantity::{Fraction, Volts};

/// Volts a cell over which an accessory lets go: as it drops out the bus recovers and it comes
/// back, so at its limit it gets the share of its current that the bus can hold.
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

    /// Share of its current that an accessory gets at some volts, by its class.
    #[must_use]
    pub fn taken(&self, class: usize, volts: Volts) -> Fraction {
        let share = |limit: f64| (1.0 + (volts.0 - limit) / self.width).clamp(0.0, 1.0);
        Fraction(self.limit(class).map_or(1.0, share))
    }

    /// The volts at which an accessory's draw is reckoned: those of the bus, and no less than its limit.
    #[must_use]
    pub fn asked_at(&self, class: usize, volts: Volts) -> Volts {
        Volts(volts.0.max(self.limit(class).unwrap_or(volts.0)))
    }

    fn limit(&self, class: usize) -> Option<f64> {
        let class = class.checked_sub(1)?;
        self.limits.get(class).copied()
    }

    /// A draw that goes on below the limits of its classes.
    pub(super) fn asked<'a>(&'a self, sums: &'a [LoadSum]) -> Asked<'a> {
        Asked { cuts: self, sums }
    }
}

/// Sums by class, each as at its limit below that.
pub(super) struct Asked<'a> {
    cuts: &'a Cuts,
    sums: &'a [LoadSum],
}

impl Drawn for Asked<'_> {
    fn drawn(&self, volts: f64, filaments: bool) -> (f64, f64) {
        let bus = At::new(Volts(volts), filaments);
        let (mut amps, mut slope) = (0.0, 0.0);
        for (class, sum) in self.sums.iter().enumerate() {
            match self.cuts.limit(class).filter(|limit| volts < *limit) {
                None => {
                    amps += sum.current(bus).0;
                    slope += sum.slope(bus);
                }
                Some(limit) => amps += sum.current(At::new(Volts(limit), filaments)).0,
            }
        }
        (amps, slope)
    }
}
