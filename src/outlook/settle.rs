//! Where the charge settles when the cycle is repeated without end, or when it breaks.
//!
//! The charge at the beginning of a cycle maps to that at its end: s' = F(s). F rises with s, so
//! from a full battery the charges fall to the greatest fixed point of F, or through the reserve.
//! Plain repetition is the definition ([`Machine::repeat`]); here the fixed point is found by
//! root search, which gives the same answer in a dozen cycles.

use crate::battery::Charge;
use crate::ledger::{Machine, Passed};
use crate::quantity::Fraction;
use crate::root::bracketed;

/// Cycles repeated plainly before the fixed point is searched for.
const PLAIN: u32 = 3;
/// Change of charge over a cycle that counts as none.
const STILL: f64 = 1e-9;
/// Where between the touching cycle (0) and the charge reached (1) a cycle that holds itself up
/// is looked for, from the top.
const PROBES: [f64; 6] = [0.95, 0.8, 0.6, 0.4, 0.2, 0.0];
/// The golden section's greater part.
const GOLDEN: f64 = 0.618_033_988_749_894_8;
/// Width to which the peak of the gain is found.
const PEAK: f64 = 2e-4;
/// Most rounds of any search here; each closes in by a fixed factor or stops.
const MOST_ROUNDS: u32 = 60;
/// Most cycles counted one by one towards a break.
const MOST_CYCLES: u32 = 20_000;
/// The same where loads that drop out make the charge go up and down: it neither falls slowly nor settles late.
const MOST_UNSTEADY: u32 = 1000;
/// Share of full by which a settled cycle may go under the reserve and count as touching it.
const UNDER: f64 = 1e-7;

/// What repeating the cycle without end comes to.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Outlook {
    /// The charge settles and never goes under the reserve.
    Settles {
        /// Charge at the beginning of each cycle.
        charge: Charge,
        /// Lowest charge in it.
        lowest: Fraction,
    },
    /// A shift breaks the reserve.
    Breaks {
        /// Shifts carried before it.
        shifts: u32,
        /// Charge at the beginning of the cycle that breaks it.
        begins: Charge,
    },
}

/// What a few cycles and a search for their limit tell.
enum Approach {
    /// The outlook.
    Decided(Outlook),
    /// No charge was found at which it settles: most likely it falls through the reserve.
    Falls {
        /// Charge reached.
        charge: Charge,
        /// Lowest of the cycle that led to it.
        lowest: Fraction,
    },
    /// Loads drop out before the charge is down at the reserve, and more of it is left from a low charge than from a
    /// higher one. Only repetition tells.
    Unsteady {
        /// Charge reached.
        charge: Charge,
    },
}

/// A charge at which a cycle ends as it began.
enum Closed {
    /// Its cycle holds the reserve.
    Holds {
        /// Charge at its beginning.
        charge: Charge,
        /// Lowest charge in it.
        lowest: Fraction,
    },
    /// It does not.
    Under,
}

impl Outlook {
    /// Whether it keeps up without end.
    #[must_use]
    pub fn keeps_up(&self) -> bool {
        matches!(self, Outlook::Settles { .. })
    }
}

impl Machine {
    /// What repeating the cycle from a charge comes to.
    #[must_use]
    pub fn outlook(&self, start: Charge, reserve: Fraction) -> Outlook {
        match self.approach(start, reserve) {
            Approach::Decided(outlook) => outlook,
            Approach::Falls { charge, .. } => self.count(charge, reserve, MOST_CYCLES),
            Approach::Unsteady { charge } => self.count(charge, reserve, MOST_UNSTEADY),
        }
    }

    /// Whether it keeps up from a charge, without counting the shifts it carries: what a search
    /// asks, many times over.
    #[must_use]
    pub fn keeps_up(&self, start: Charge, reserve: Fraction) -> bool {
        match self.approach(start, reserve) {
            Approach::Decided(outlook) => outlook.keeps_up(),
            Approach::Falls { charge, lowest } => self.held_under(charge, lowest, reserve),
            Approach::Unsteady { charge } => self.count(charge, reserve, MOST_UNSTEADY).keeps_up(),
        }
    }

    /// Whether any cycle between the one that touches the reserve and a charge reached ends no lower
    /// than it began. The gain has one peak there; it is looked for by golden sections.
    fn held_under(&self, charge: Charge, lowest: Fraction, reserve: Fraction) -> bool {
        let Some(touching) = self.touching(charge, lowest, reserve) else {
            return false;
        };
        let gain = |soc: f64| self.gain(soc, charge).0;
        let (mut low, mut high) = (touching, charge.soc.0);
        let mut inner = [high - GOLDEN * (high - low), low + GOLDEN * (high - low)];
        let mut gains = inner.map(gain);
        if gain(touching) >= 0.0 {
            return true;
        }
        while high - low > PEAK && gains.iter().all(|g| *g < 0.0) {
            if gains[0] > gains[1] {
                high = inner[1];
                inner = [high - GOLDEN * (high - low), inner[0]];
                gains = [gain(inner[0]), gains[0]];
            } else {
                low = inner[0];
                inner = [inner[1], low + GOLDEN * (high - low)];
                gains = [gains[1], gain(inner[1])];
            }
        }
        gains.iter().any(|g| *g >= 0.0)
    }

    /// A few cycles run, then the charge they tend to looked for.
    fn approach(&self, start: Charge, reserve: Fraction) -> Approach {
        if start.soc < reserve {
            return Approach::Decided(Outlook::Breaks {
                shifts: 0,
                begins: start,
            });
        }
        let mut charge = start;
        let mut lowest = start.soc;
        let mut changes = [0.0; 2];
        for cycle in 0..PLAIN {
            let passed = self.pass(charge, reserve);
            if let Some(shift) = passed.broke {
                return Approach::Decided(Outlook::Breaks {
                    shifts: cycle * self.shifts + shift,
                    begins: charge,
                });
            }
            changes = [changes[1], passed.end.soc.0 - charge.soc.0];
            lowest = passed.lowest;
            // a charge that is no number stays none: those who ask refuse it
            if changes[1].abs() < STILL || changes[1].is_nan() {
                return Approach::Decided(Outlook::Settles {
                    charge: passed.end,
                    lowest,
                });
            }
            charge = passed.end;
        }
        if self.may_drop_out(reserve) {
            return Approach::Unsteady { charge };
        }
        match self.fixed_point(charge, lowest, reserve, limit(charge, changes)) {
            Some(Closed::Holds { charge, lowest }) => {
                Approach::Decided(Outlook::Settles { charge, lowest })
            }
            Some(Closed::Under) => Approach::Unsteady { charge },
            None => Approach::Falls { charge, lowest },
        }
    }

    /// Plain repetition: the definition, for at most `cycles` cycles.
    #[must_use]
    pub fn repeat(&self, start: Charge, reserve: Fraction, cycles: u32) -> Outlook {
        let mut charge = start;
        let mut lowest = [start.soc; 2];
        let mut before = Fraction(f64::NAN);
        for cycle in 0..cycles {
            let passed = self.pass(charge, reserve);
            if let Some(shift) = passed.broke {
                return Outlook::Breaks {
                    shifts: cycle * self.shifts + shift,
                    begins: charge,
                };
            }
            // As it was one cycle ago, or two, where the charge goes up and down.
            let as_at = |soc: Fraction| (passed.end.soc - soc).abs() < Fraction(1e-12);
            let still = as_at(charge.soc) || as_at(before);
            before = charge.soc;
            charge = passed.end;
            lowest = [lowest[1], passed.lowest];
            if still {
                break;
            }
        }
        Outlook::Settles {
            charge,
            lowest: lowest[0].min(lowest[1]),
        }
    }

    /// Repetition from the charge that the first cycles led to.
    fn count(&self, charge: Charge, reserve: Fraction, most: u32) -> Outlook {
        match self.repeat(charge, reserve, most) {
            Outlook::Breaks { shifts, begins } => Outlook::Breaks {
                shifts: PLAIN * self.shifts + shifts,
                begins,
            },
            settled => settled,
        }
    }

    /// A fixed point, and whether its cycle holds the reserve, if one is found.
    ///
    /// `charge` has been reached by repetition, `lowest` is the lowest of the cycle before it.
    /// While the charge falls, a fixed point lies below it if some cycle between here and the
    /// one that just touches the reserve ends no lower than it began. (Constant powers draw more
    /// amps the lower the bus, so a build can hold itself up from a full battery and not from a
    /// low one: the touching cycle alone does not tell.)
    fn fixed_point(
        &self,
        charge: Charge,
        lowest: Fraction,
        reserve: Fraction,
        limit: Option<f64>,
    ) -> Option<Closed> {
        let at = |soc: f64| self.gain(soc, charge);
        let (here, passed) = at(charge.soc.0);
        let (low, high) = if here >= 0.0 {
            if passed.lowest < reserve {
                return None;
            }
            ((charge.soc.0, here), (1.0, at(1.0).0))
        } else if let Some(near) = limit
            .map(|soc| (soc, at(soc)))
            .filter(|(_, (gain, _))| *gain >= 0.0)
        {
            if near.1.1.lowest < reserve {
                return None;
            }
            ((near.0, near.1.0), (charge.soc.0, here))
        } else {
            self.bracket_below((charge, here), lowest, reserve)?
        };
        let soc = if high.1 >= 0.0 {
            high.0
        } else {
            let ends = [low, high];
            let gain = |x: f64| {
                ends.iter()
                    .find(|end| end.0 == x)
                    .map_or_else(|| at(x).0, |end| end.1)
            };
            bracketed(gain, low.0, high.0, STILL).ok()?
        };
        let (_, passed) = at(soc);
        if passed.lowest.0 < reserve.0 - UNDER {
            return Some(Closed::Under);
        }
        Some(Closed::Holds {
            charge: Charge {
                soc: Fraction(soc),
                ..passed.end
            },
            lowest: passed.lowest.max(reserve),
        })
    }

    /// What a cycle begun at a charge gains, and how it passed; the depletion is that of `like`.
    fn gain(&self, soc: f64, like: Charge) -> (f64, Passed) {
        let begun = Charge {
            soc: Fraction(soc),
            ..like
        };
        let passed = self.pass_around(0, begun);
        (passed.end.soc.0 - soc, passed)
    }

    /// From a charge that falls by a cycle: a lower one from which a cycle gains, and the lowest found above it from
    /// which it does not, each with its gain.
    fn bracket_below(
        &self,
        (charge, here): (Charge, f64),
        lowest: Fraction,
        reserve: Fraction,
    ) -> Option<((f64, f64), (f64, f64))> {
        let touching = self.touching(charge, lowest, reserve)?;
        let span = charge.soc.0 - touching;
        let mut high = (charge.soc.0, here);
        let probes = if self.has_constant_powers() {
            &PROBES[..]
        } else {
            &PROBES[PROBES.len() - 1..]
        };
        let held = probes.iter().find_map(|share| {
            let soc = touching + share * span;
            let gain = self.gain(soc, charge).0;
            if gain < 0.0 {
                high = (soc, gain);
            }
            (gain >= 0.0).then_some((soc, gain))
        });
        Some((held?, high))
    }

    /// The charge at the beginning of the cycle whose lowest charge is the reserve; none if that
    /// is not below the charge reached.
    fn touching(&self, charge: Charge, lowest: Fraction, reserve: Fraction) -> Option<f64> {
        let mut soc = charge.soc.0 - (lowest.0 - reserve.0);
        for _ in 0..MOST_ROUNDS {
            if soc >= charge.soc.0 || soc < 0.0 {
                return None;
            }
            let over = self.gain(soc, charge).1.lowest.0 - reserve.0;
            if over.abs() < 1e-10 {
                break;
            }
            soc -= over;
        }
        Some(soc)
    }
}

/// A charge a little under the limit of a falling sequence whose last two changes are given:
/// Aitken's limit, and a quarter of the way to it further. None where it does not close in.
fn limit(charge: Charge, changes: [f64; 2]) -> Option<f64> {
    let ratio = changes[1] / changes[0];
    let left = changes[1] * ratio / (1.0 - ratio);
    let soc = charge.soc.0 + 1.25 * left;
    (changes[1] < 0.0 && ratio > 0.0 && ratio < 0.98 && soc > 0.0).then_some(soc)
}
