//! Plain repetition of the cycle: the definition of what becomes of the charge.

use super::Outlook;
use crate::battery::Charge;
use crate::ledger::Machine;
use crate::quantity::Fraction;

/// Cycles repeated plainly before the fixed point is searched for.
pub(super) const PLAIN: u32 = 3;
/// Change of charge over a cycle that counts as none.
pub(super) const STILL: f64 = 1e-9;
/// Most cycles counted one by one towards a break.
pub(super) const MOST_CYCLES: u32 = 20_000;
/// The same where a search was in doubt: a charge that falls slowly.
pub(super) const MOST_DOUBTFUL: u32 = 300;

impl Machine {
    /// Plain repetition: the definition, for at most `cycles` cycles or until one changes the charge no more.
    #[must_use]
    pub fn repeat(&self, start: Charge, reserve: Fraction, cycles: u32) -> Outlook {
        let mut charge = start;
        let mut lowest = start.soc;
        for cycle in 0..cycles {
            let passed = self.pass(charge, reserve);
            if let Some(shift) = passed.broke {
                return Outlook::Breaks {
                    shifts: cycle * self.shifts + shift,
                    begins: charge,
                };
            }
            let still = (passed.end.soc - charge.soc).abs() < Fraction(STILL);
            (charge, lowest) = (passed.end, passed.lowest);
            if still {
                break;
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
