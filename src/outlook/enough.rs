//! A current that is enough: one with which a build keeps up from a charge, beginning with that of the touching cycle.

use crate::battery::Charge;
use crate::ledger::Machine;
use crate::quantity::{Amps, Fraction};

/// A current beyond any source's: held at the highest setpoint whatever is drawn.
pub(super) const BEYOND: f64 = 1e5;
/// Width to which the current is found, A; the answer is taken on the side that holds.
const CLOSE: f64 = 1e-7;
/// Width, as a share of the current, to which it is found.
pub(super) const FOUND_TO: f64 = 2e-5;

/// Width, at a current of about this size, that is a share of it.
pub(super) fn width(current: f64, share: f64) -> f64 {
    CLOSE.max(share * current.abs())
}

/// The least current that holds, between one that does not and one that does, to a width that may hang on it.
pub(super) fn halved(
    mut low: f64,
    mut high: f64,
    width: impl Fn(f64) -> f64,
    mut holds: impl FnMut(f64) -> bool,
) -> f64 {
    while high - low > width(high) {
        let middle = 0.5 * (low + high);
        if holds(middle) {
            high = middle
        } else {
            low = middle
        }
    }
    high
}

impl Machine {
    /// The current at the edge, raised where it does not keep up from the start: where the first shifts from a lower
    /// charge need more, or the lowest charge lies between two points of the cycle. None where no current is enough.
    pub(super) fn enough_from(&self, start: Charge, reserve: Fraction, edge: Amps) -> Option<Amps> {
        let mut machine = self.clone();
        let mut holds = |current: f64| {
            machine.set_extra(Amps(current));
            machine.keeps_up(start, reserve)
        };
        let mut high = edge.0 + (FOUND_TO * edge.0 + CLOSE);
        if holds(high) {
            return Some(if edge > Amps::ZERO { edge } else { Amps(high) });
        }
        let mut step = FOUND_TO * edge.0 + CLOSE;
        let low = loop {
            step *= 4.0;
            let below = high;
            high += step;
            if holds(high) {
                break below;
            }
            if high > BEYOND {
                return None;
            }
        };
        Some(Amps(halved(low, high, |x| width(x, FOUND_TO), holds)))
    }
}
