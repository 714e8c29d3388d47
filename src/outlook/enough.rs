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

/// Width, as a share of the current, to which it is found where loads drop out.
const ROUGH: f64 = 1e-3;
/// Times a current that is enough at which it is asked whether more is, where loads drop out.
const FURTHER: [f64; 4] = [1.005, 1.02, 1.05, 1.3];
/// Times a greater current is begun with where one was not enough.
const MOST_POCKETS: u32 = 8;

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
    /// It is found to a share of it. (A build that holds itself up at a low charge alone, because loads drop out there,
    /// has its edge at nought and breaks the reserve.)
    pub(super) fn enough_from(
        &self,
        start: Charge,
        reserve: Fraction,
        edge: Amps,
        found_to: f64,
    ) -> Option<Amps> {
        let mut machine = self.clone();
        let mut holds = |current: f64| {
            machine.set_extra(Amps(current));
            machine.keeps_up(start, reserve)
        };
        let mut high = edge.0 + (FOUND_TO * edge.0 + CLOSE);
        if holds(high) {
            return Some(if edge > Amps::ZERO { edge } else { Amps(high) });
        }
        let mut step = found_to * edge.0 + CLOSE;
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
        Some(Amps(halved(low, high, |x| width(x, found_to), holds)))
    }

    /// The same where loads drop out at a low charge. There the touching cycle is no proof, and a current may be enough
    /// while a little more, with which they hold on for longer, is not: the current is one from which on it keeps up,
    /// as far as a few greater ones tell.
    pub(super) fn enough_and_more(
        &self,
        start: Charge,
        reserve: Fraction,
        edge: Amps,
    ) -> Option<Amps> {
        let mut machine = self.clone();
        let mut fails = |current: f64| {
            machine.set_extra(Amps(current));
            !machine.keeps_up(start, reserve)
        };
        let mut enough = edge;
        for _ in 0..MOST_POCKETS {
            enough = self.enough_from(start, reserve, enough, ROUGH)?;
            let greater = FURTHER.iter().map(|times| times * enough.0);
            match greater.rev().find(|x| fails(*x)) {
                None => break,
                Some(not_enough) => enough = Amps(not_enough),
            }
        }
        Some(enough)
    }
}
