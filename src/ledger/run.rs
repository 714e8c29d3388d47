//! A cycle run from one charge to the next.

use super::machine::Machine;
use super::step::Stride;
use crate::battery::Charge;
use crate::quantity::{Fraction, Hours};

/// What a cycle came to.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Passed {
    /// Charge at its end.
    pub end: Charge,
    /// Lowest charge on the way, its beginning counted.
    pub lowest: Fraction,
    /// Where in the cycle the lowest was met: leg index, at whose end (0 is the beginning).
    pub lowest_after: usize,
    /// Shift of the cycle in which the charge first went under the floor given.
    pub broke: Option<u32>,
}

impl Machine {
    /// Runs one cycle from a charge, watching the floor; stops where it breaks.
    #[must_use]
    pub fn pass(&self, start: Charge, floor: Fraction) -> Passed {
        self.pass_from(0, start, floor, true)
    }

    /// Runs one cycle beginning after leg `from`, whatever happens to the charge.
    #[must_use]
    pub fn pass_around(&self, from: usize, start: Charge) -> Passed {
        self.pass_from(from, start, Fraction(f64::NEG_INFINITY), false)
    }

    fn pass_from(&self, from: usize, start: Charge, floor: Fraction, stop: bool) -> Passed {
        let mut passed = Passed {
            end: start,
            lowest: start.soc,
            lowest_after: from,
            broke: None,
        };
        let legs = self.cycle.len();
        for k in 0..legs {
            let index = (from + k) % legs;
            let leg = &self.cycle[index];
            let (count, time) = Machine::steps_of(leg, leg.step);
            for _ in 0..count {
                passed.end = self.stride(leg, passed.end, time).after;
                if passed.end.soc < passed.lowest {
                    passed.lowest = passed.end.soc;
                    passed.lowest_after = index + 1;
                }
                if stop && passed.end.soc < floor {
                    passed.broke = Some(leg.shift);
                    return passed;
                }
            }
        }
        passed
    }

    /// Runs the legs of the first shift and the parking after it, showing every step: the leg's
    /// index, when the step begins, and the step. `longest` caps every step's length.
    pub fn walk(
        &self,
        start: Charge,
        longest: Option<Hours>,
        mut show: impl FnMut(usize, Hours, &Stride),
    ) -> Charge {
        let mut charge = start;
        let mut clock = Hours::ZERO;
        for (index, leg) in self
            .cycle
            .iter()
            .enumerate()
            .take_while(|(_, leg)| leg.shift == 0)
        {
            let (count, time) =
                Machine::steps_of(leg, longest.map_or(leg.step, |l| l.min(leg.step)));
            for _ in 0..count {
                let stride = self.stride(leg, charge, time);
                show(index, clock, &stride);
                charge = stride.after;
                clock += time;
            }
        }
        charge
    }
}
