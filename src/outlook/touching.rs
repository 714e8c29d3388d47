//! The cycle that just touches the reserve.
//!
//! A build keeps up from a full battery if a cycle whose lowest charge is the reserve ends no
//! lower than it began. That gain is continuous in every figure of the build, so it is what
//! searches for a figure follow.

use crate::battery::Charge;
use crate::ledger::Machine;
use crate::quantity::Fraction;

/// Share of full by which a cycle may go under the reserve and count as touching it.
pub(super) const TOUCHES: f64 = 1e-7;
/// Times the lowest point of the cycle is looked for anew.
const MOST_TURNS: u32 = 4;

/// Where a cycle is lowest: a cycle is begun there with the reserve. Found by one call of
/// [`Turn::gain`] and carried to the next, for a build much like the last.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Turn {
    /// Leg after which the cycle is lowest.
    pub(super) from: usize,
    /// Depletion of the battery's acid there.
    pub(super) depletion: Fraction,
}

impl Turn {
    /// Gain of charge over a cycle that just touches the reserve: at zero or above the build
    /// keeps up from a full battery.
    #[must_use]
    pub fn gain(&mut self, machine: &Machine, reserve: Fraction) -> Fraction {
        self.from %= machine.cycle.len().max(1);
        let mut start = reserve;
        let mut gain = f64::NAN;
        for _ in 0..MOST_TURNS {
            let passed = machine.pass_around(
                self.from,
                Charge {
                    soc: start,
                    depletion: self.depletion,
                },
            );
            gain = passed.end.soc.0 - start.0;
            self.depletion = passed.end.depletion;
            let under = reserve.0 - passed.lowest.0;
            if under <= 1e-10 {
                break;
            }
            let lowest_at = passed.lowest_after % machine.cycle.len();
            if lowest_at == self.from {
                if gain < 0.0 && (passed.lowest.0 - passed.end.soc.0).abs() < 1e-12 {
                    break;
                }
                start += Fraction(under);
            } else {
                self.from = lowest_at;
                self.depletion = Fraction::ZERO;
                start = reserve;
            }
        }
        Fraction(gain)
    }
}
