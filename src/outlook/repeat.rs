//! Plain repetition of the cycle: the definition of what becomes of the charge, and the judge where loads drop out.

use super::Outlook;
use crate::battery::Charge;
use crate::ledger::Machine;
use crate::quantity::Fraction;

/// Cycles repeated plainly before the fixed point is searched for.
pub(super) const PLAIN: u32 = 3;
/// Change of charge over a cycle that counts as none.
pub(super) const STILL: f64 = 1e-9;
/// The same where a search asks and loads drop out.
pub(super) const NEARLY_STILL: f64 = 1e-6;
/// Most cycles counted one by one towards a break.
pub(super) const MOST_CYCLES: u32 = 20_000;
/// The same where loads that drop out make the charge go up and down: it neither falls slowly nor settles late.
pub(super) const MOST_UNSTEADY: u32 = 300;

impl Machine {
    /// Plain repetition: the definition, for at most `cycles` cycles.
    #[must_use]
    pub fn repeat(&self, start: Charge, reserve: Fraction, cycles: u32) -> Outlook {
        self.repeated(start, reserve, cycles, STILL)
    }

    /// The same, until a cycle changes the charge by no more than counts as none.
    pub(super) fn repeated(
        &self,
        start: Charge,
        reserve: Fraction,
        cycles: u32,
        none: f64,
    ) -> Outlook {
        let mut charge = start;
        // A charge that goes up and down comes back to one it had: the one after 1, 2, 4, 8 … cycles.
        let (mut mark, mut next_mark) = (start.soc, 1);
        let mut lowest = start.soc;
        for cycle in 0..cycles {
            let passed = self.pass(charge, reserve);
            if let Some(shift) = passed.broke {
                return Outlook::Breaks {
                    shifts: cycle * self.shifts + shift,
                    begins: charge,
                };
            }
            let as_at = |soc: Fraction| (passed.end.soc - soc).abs() < Fraction(none);
            let (still, back) = (as_at(charge.soc), as_at(mark));
            charge = passed.end;
            lowest = match still {
                true => passed.lowest,
                false => lowest.min(passed.lowest),
            };
            if still || back {
                break;
            }
            if cycle + 1 == next_mark {
                (mark, lowest) = (charge.soc, charge.soc);
                next_mark *= 2;
            }
        }
        Outlook::Settles { charge, lowest }
    }

    /// Repetition from the charge that the first cycles led to.
    pub(super) fn count(&self, charge: Charge, reserve: Fraction, most: u32) -> Outlook {
        match self.repeat(charge, reserve, most) {
            Outlook::Breaks { shifts, begins } => Outlook::Breaks {
                shifts: PLAIN * self.shifts + shifts,
                begins,
            },
            settled => settled,
        }
    }
}
