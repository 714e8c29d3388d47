//! How far a build is from the edge of keeping up, as a number that searches can follow.

use super::keeps_up;
use super::knob::Knob;
use super::value::{Round, rounded};
use crate::build::Build;
use crate::check::reserve;
use crate::ledger::Machine;
use crate::outlook::Turn;
use crate::quantity::Fraction;
use crate::root::bracketed;

/// Times a rounded amount that does not hold is moved on by its last digit.
const MOST_NUDGES: u32 = 3;

/// Follows a build's margin while one number of it is varied.
pub(super) struct Margin<'b> {
    build: &'b Build,
    turn: Turn,
    /// The margin of the build as it is.
    pub(super) now: f64,
}

impl<'b> Margin<'b> {
    /// Of a build with a battery; the margin of one without is far below zero.
    pub(super) fn new(build: &'b Build) -> Margin<'b> {
        let mut margin = Margin {
            build,
            turn: Turn::default(),
            now: 0.0,
        };
        // Twice: the second begins at the cycle's lowest point as the first found it.
        margin.of(build);
        margin.now = margin.of(build);
        margin
    }

    /// Charge gained over the cycle that just touches the reserve, as a share of full: at zero or
    /// above a build keeps up from a full battery. −1 where even a full battery does not start.
    pub(super) fn of(&mut self, build: &Build) -> f64 {
        let Some(machine) = Machine::new(build) else {
            return -1.0;
        };
        let reserve = reserve(build, &machine).soc;
        if reserve > Fraction::ONE || machine.cycle.is_empty() {
            return -1.0;
        }
        self.turn.gain(&machine, reserve).0
    }

    /// The margin with a knob at an amount.
    pub(super) fn at(&mut self, knob: &Knob, x: f64) -> f64 {
        self.of(&knob.apply(self.build, x))
    }

    /// The amount at which the margin is nought, between one end where the build falls short and
    /// another where it holds, each with its margin. The share of the amount left open is
    /// `closeness`; the amount given is on the holding side.
    pub(super) fn edge(
        &mut self,
        knob: &Knob,
        short: (f64, f64),
        holds: (f64, f64),
        closeness: f64,
    ) -> Option<f64> {
        if short.1 >= 0.0 || holds.1 < 0.0 {
            return None;
        }
        let tolerance = closeness * holds.0.abs().max(short.0.abs()).max(1e-9);
        let known = [short, holds];
        let at = |x: f64| {
            let found = known.iter().find(|(end, _)| *end == x);
            found.map_or_else(|| self.at(knob, x), |(_, margin)| *margin)
        };
        let root = bracketed(at, short.0, holds.0, tolerance).ok()?;
        let (low, high) = (short.0.min(holds.0), short.0.max(holds.0));
        let towards = tolerance * (holds.0 - short.0).signum();
        Some((root + 0.5 * towards).clamp(low, high))
    }

    /// An amount rounded to a few digits towards the side that holds, proved to hold.
    pub(super) fn proved(&mut self, knob: &Knob, x: f64, digits: i32, side: Round) -> Option<f64> {
        let mut amount = rounded(x, digits, side);
        for _ in 0..MOST_NUDGES {
            let build = knob.apply(self.build, amount);
            // From a full battery the margin decides; from less the first shifts may need more.
            if self.of(&build) >= 0.0 && (build.start >= Fraction::ONE || keeps_up(&build)) {
                return Some(amount);
            }
            let step = 1.5 * 10f64.powi(1 - digits) * amount;
            amount = match side {
                Round::Up => rounded(amount + 0.5 * step, digits, side),
                Round::Down => rounded(amount - 0.5 * step, digits, side),
            };
        }
        None
    }
}
