//! Where the charge settles when the cycle is repeated without end, or when it breaks.
//!
//! The charge at the beginning of a cycle maps to that at its end: s' = F(s). F rises with s, so
//! from a full battery the charges fall to the greatest fixed point of F, or through the reserve.
//! Plain repetition is the definition ([`Machine::repeat`]); here the fixed point is found by
//! root search, which gives the same answer in a dozen cycles.

use super::peak::reaches_nought;
use super::repeat::{MOST_CYCLES, MOST_DOUBTFUL, PLAIN, STILL};
use super::touching::TOUCHES;
use crate::battery::Charge;
use crate::ledger::{Machine, Passed};
use crate::quantity::Fraction;
use crate::root::bracketed;

/// Where between the touching cycle (0) and the charge reached (1) a cycle that holds itself up
/// is looked for, from the top.
const PROBES: [f64; 6] = [0.95, 0.8, 0.6, 0.4, 0.2, 0.0];
/// Most rounds of any search here; each closes in by a fixed factor or stops.
const MOST_ROUNDS: u32 = 60;
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
        /// Charges looked at, lowest first, and what a cycle from each gains: all less than nothing.
        looked_at: Vec<(f64, f64)>,
    },
    /// The cycle found goes under the reserve, which another may hold. Only repetition tells.
    Doubtful {
        /// Charge reached.
        charge: Charge,
    },
}

/// What a search for a charge at which a cycle ends as it began comes to.
enum Found {
    /// One whose cycle holds the reserve.
    Holds {
        /// Charge at its beginning.
        charge: Charge,
        /// Lowest charge in it.
        lowest: Fraction,
    },
    /// One whose cycle does not.
    Under,
    /// None, at these charges with what a cycle from each gains.
    None(Vec<(f64, f64)>),
}

/// A bracket of such a charge, each end with what a cycle from it gains; or where none was found.
type Bracket = Result<((f64, f64), (f64, f64)), Vec<(f64, f64)>>;

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
            Approach::Doubtful { charge } => self.count(charge, reserve, MOST_DOUBTFUL),
        }
    }

    /// Whether it keeps up from a charge, without counting the shifts it carries: what a search
    /// asks, many times over.
    #[must_use]
    pub fn keeps_up(&self, start: Charge, reserve: Fraction) -> bool {
        match self.approach(start, reserve) {
            Approach::Decided(outlook) => outlook.keeps_up(),
            // Without constant powers the touching cycle, which was looked at, tells all.
            Approach::Falls { charge, looked_at } => {
                self.has_constant_powers()
                    && reaches_nought(&looked_at, |soc| self.gain(soc, charge).0)
            }
            Approach::Doubtful { charge } => self.repeat(charge, reserve, MOST_DOUBTFUL).keeps_up(),
        }
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
        match self.fixed_point(charge, lowest, reserve, limit(charge, changes)) {
            Found::Holds { charge, lowest } => {
                Approach::Decided(Outlook::Settles { charge, lowest })
            }
            Found::Under => Approach::Doubtful { charge },
            Found::None(looked_at) => Approach::Falls { charge, looked_at },
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
    ) -> Found {
        let at = |soc: f64| self.gain(soc, charge);
        let (here, passed) = at(charge.soc.0);
        let near = limit.filter(|_| here < 0.0).map(|soc| (soc, at(soc)));
        let (low, high) = match near {
            _ if here >= 0.0 && passed.lowest < reserve => return Found::None(Vec::new()),
            _ if here >= 0.0 => ((charge.soc.0, here), (1.0, at(1.0).0)),
            Some((soc, (gain, passed))) if gain >= 0.0 && passed.lowest >= reserve => {
                ((soc, gain), (charge.soc.0, here))
            }
            _ => match self.bracket_below((charge, here), lowest, reserve) {
                Ok(bracket) => bracket,
                Err(looked_at) => return Found::None(looked_at),
            },
        };
        let ends = [low, high];
        let known = |x: f64| ends.iter().find(|end| end.0 == x).map(|end| end.1);
        let gain = |x: f64| known(x).unwrap_or_else(|| at(x).0);
        let found = match high.1 >= 0.0 {
            true => Ok(high.0),
            false => bracketed(gain, low.0, high.0, STILL),
        };
        let Ok(soc) = found else {
            return Found::None(Vec::new());
        };
        let (_, passed) = at(soc);
        if passed.lowest.0 < reserve.0 - TOUCHES {
            return Found::Under;
        }
        Found::Holds {
            charge: Charge {
                soc: Fraction(soc),
                ..passed.end
            },
            lowest: passed.lowest.max(reserve),
        }
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
    ) -> Bracket {
        let Some(touching) = self.touching(charge, lowest, reserve) else {
            return Err(Vec::new());
        };
        let span = charge.soc.0 - touching;
        let mut looked_at = vec![(charge.soc.0, here)];
        let probes = if self.has_constant_powers() {
            &PROBES[..]
        } else {
            &PROBES[PROBES.len() - 1..]
        };
        for share in probes {
            let soc = touching + share * span;
            let point = (soc, self.gain(soc, charge).0);
            if point.1 >= 0.0 {
                return Ok((point, looked_at[0]));
            }
            looked_at.insert(0, point);
        }
        Err(looked_at)
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
