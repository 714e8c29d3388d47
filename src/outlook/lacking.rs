//! The charge that is lacking, and the current that is to spare.
//!
//! Both are one question: which constant current, added on the bus while the engine runs, puts
//! the build on the edge of keeping up? Above zero it is lacking, below zero to spare. On the
//! edge the settled cycle just touches the reserve. So the cycle is begun where it is lowest, at
//! the reserve, and the current sought with which it comes back to it.

use super::Turn;
use super::enough::{BEYOND, FOUND_TO, halved, width};
use super::touching::TOUCHES;
use crate::battery::Charge;
use crate::build::State;
use crate::ledger::Machine;
use crate::quantity::{AmpHours, Amps, Fraction, Hours};
use crate::root::{bracketed, rising};

/// Where between the reserve and the highest charge kept a cycle that holds itself up with less
/// is looked for: at 1 − e^(−t) of the way, since a battery filled in every shift settles just
/// under the highest.
const DEPTHS: [f64; 7] = [13.0, 6.0, 3.5, 2.2, 1.4, 0.8, 0.35];
/// Rounds in which the depths beside the best are tried.
const REFINED: u32 = 3;
/// Gain of charge that counts as a closed cycle.
const CLOSED: f64 = 1e-9;
/// Width, as a share of the current, within which the edge of a build with constant powers is proved.
const PROVED: f64 = 4e-3;
/// The same of a current near nought, A.
const PROVED_AT_NOUGHT: f64 = 1e-4;

/// Searches for the current of the touching cycle, each from where the last ended.
const MOST_SEARCHES: u32 = 4;

/// Width to which a current of about this size is found.
fn tolerance(current: f64) -> f64 {
    width(current, FOUND_TO)
}

/// What is lacking.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Lacking {
    /// This much charge each shift, as this current over the engine's running time.
    Charge {
        /// In each shift.
        charge: AmpHours,
        /// While the engine runs.
        current: Amps,
    },
    /// No charging while the engine runs can help.
    BeyondCharging,
}

/// Where the added current flows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Spread {
    /// In every running state.
    Everywhere,
    /// In one state only.
    In(State),
}

impl Machine {
    /// The least current that makes it keep up from a charge; for a build that does not.
    #[must_use]
    pub fn lacking(&self, start: Charge, reserve: Fraction) -> Lacking {
        let hours = self.running_a_shift();
        if hours <= Hours::ZERO {
            return Lacking::BeyondCharging;
        }
        let current = self
            .found(reserve, Spread::Everywhere)
            .and_then(|(edge, touches)| {
                if touches && start.soc >= Fraction::ONE && edge > Amps::ZERO {
                    return Some(edge);
                }
                self.enough_from(start, reserve, edge.max(Amps::ZERO))
            });
        current.map_or(Lacking::BeyondCharging, |current| Lacking::Charge {
            charge: current * hours,
            current,
        })
    }

    /// The constant current on the edge of keeping up: above zero lacking, below zero to spare.
    /// None if no current reaches the edge.
    #[must_use]
    pub fn edge(&self, reserve: Fraction, spread: Spread) -> Option<Amps> {
        self.found(reserve, spread).map(|(edge, _)| edge)
    }

    /// The edge, and whether it is known to be enough from a full battery.
    fn found(&self, reserve: Fraction, spread: Spread) -> Option<(Amps, bool)> {
        let mut search = Search {
            machine: self.clone(),
            spread,
            reserve,
            turn: Turn::default(),
        };
        let touching = search.touching()?;
        if !self.has_constant_powers() {
            return Some((Amps(touching), search.touches(touching)));
        }
        let least = search.held_up_from_full(touching);
        // At one speed alone it tells what is to spare there: were less current enough, that would be more.
        let edge = match spread {
            Spread::Everywhere => search.proved(least),
            Spread::In(_) => least,
        };
        Some((Amps(edge), true))
    }
}

/// A search for the current at the edge.
struct Search {
    machine: Machine,
    spread: Spread,
    reserve: Fraction,
    turn: Turn,
}

impl Search {
    fn add(&mut self, current: f64) {
        match self.spread {
            Spread::Everywhere => self.machine.set_extra(Amps(current)),
            Spread::In(state) => self.machine.set_extra_in(state, Amps(current)),
        }
    }

    /// Gain over the touching cycle with a current.
    fn gain_touching(&mut self, current: f64) -> f64 {
        self.add(current);
        self.turn.gain(&self.machine, self.reserve).0
    }

    /// Whether the cycle with a current goes no lower than the reserve, at which it begins.
    fn touches(&mut self, current: f64) -> bool {
        self.add(current);
        let begin = Charge {
            soc: self.reserve,
            depletion: self.turn.depletion,
        };
        let lowest = self.machine.pass_around(self.turn.from, begin).lowest;
        self.reserve.0 - lowest.0 <= TOUCHES
    }

    /// The current at which the touching cycle closes.
    fn touching(&mut self) -> Option<f64> {
        let slope = 1.0 / self.amps_a_cycle();
        if let Some(current) = rising(|x| self.gain_touching(x), 0.0, slope, tolerance) {
            return Some(current + tolerance(current));
        }
        self.turn = Turn::default();
        self.touching_in_bracket()
    }

    /// The same, between bounds. A cycle is begun with the depletion that the one before it ended
    /// with, which a search from afar leaves behind its current: so the search is repeated from
    /// where it ended until the cycle there, its depletion its own, closes.
    fn touching_in_bracket(&mut self) -> Option<f64> {
        let gain = |search: &mut Search, current: f64| search.gain_touching(current);
        let mut current = self.current_for(0.0, gain)?;
        for _ in 0..MOST_SEARCHES {
            self.gain_touching(current);
            let off = self.gain_touching(current).abs() * self.amps_a_cycle();
            if off <= 2.0 * tolerance(current) {
                break;
            }
            current = self.current_for(current, gain)?;
        }
        Some(current)
    }

    /// Current that over one cycle's running time fills the battery.
    fn amps_a_cycle(&self) -> f64 {
        self.machine.battery.cmax().0 / self.machine.running.0.max(1e-6)
    }

    /// The current at which a gain of charge over the cycle is nought, looked for from `start`.
    fn current_for(&mut self, start: f64, gain: impl Fn(&mut Search, f64) -> f64) -> Option<f64> {
        let here = gain(self, start);
        let mut reach = (1.2 * here.abs() * self.amps_a_cycle()).max(0.01);
        let (mut low, mut high) = ((start, here), (start, here));
        if here < 0.0 {
            // The depletion of a cycle with no end of current is no beginning for the next.
            let turn = self.turn;
            if gain(self, BEYOND) < 0.0 {
                return None;
            }
            self.turn = turn;
            while high.1 < 0.0 {
                // a cycle that hangs on the one before it may close with no end of current and with none short of it
                if high.0 > BEYOND {
                    return None;
                }
                low = high;
                high = (start + reach, gain(self, start + reach));
                reach *= 2.0;
            }
        } else {
            while low.1 >= 0.0 {
                if low.0 < -BEYOND {
                    return None;
                }
                high = low;
                low = (start - reach, gain(self, start - reach));
                reach *= 2.0;
            }
        }
        let known = [low, high];
        let tolerance = tolerance(high.0);
        let root = bracketed(
            |x| {
                known
                    .iter()
                    .find(|(at, _)| *at == x)
                    .map_or_else(|| gain(self, x), |(_, gain)| *gain)
            },
            low.0,
            high.0,
            tolerance,
        );
        root.ok().map(|x| (x + tolerance).min(high.0))
    }

    /// The edge when a full battery holds itself up with less current than the touching cycle
    /// needs, as constant powers allow: the least current with which any cycle above the reserve
    /// closes.
    fn held_up_from_full(&mut self, touching: f64) -> f64 {
        self.add(BEYOND);
        let top = 1.0 + self.gain_from(1.0);
        let mut least = touching;
        let mut best = None;
        for (k, depth) in DEPTHS.iter().enumerate() {
            if self.lowers(&mut least, top, *depth) {
                best = Some(k);
            }
        }
        let Some(best) = best else { return touching };
        let mut around = [
            DEPTHS[best.saturating_sub(1)],
            DEPTHS[best],
            DEPTHS[(best + 1).min(DEPTHS.len() - 1)],
        ];
        for _ in 0..REFINED {
            let (before, after) = (0.5 * (around[0] + around[1]), 0.5 * (around[1] + around[2]));
            around = if self.lowers(&mut least, top, before) {
                [around[0], before, around[1]]
            } else if self.lowers(&mut least, top, after) {
                [around[1], after, around[2]]
            } else {
                [before, around[1], after]
            };
        }
        least
    }

    /// The edge by its definition: if the build keeps up from full with a little less than a current found, the least
    /// current with which it does, between the two.
    fn proved(&mut self, found: f64) -> f64 {
        let mut keeps = |current: f64| {
            self.add(current);
            self.machine.keeps_up(Charge::FULL, self.reserve)
        };
        let width = PROVED * found.abs() + PROVED_AT_NOUGHT;
        let (mut low, mut high) = (found - width, found);
        while keeps(low) {
            if low < -BEYOND {
                return low;
            }
            (low, high) = (low - 2.0 * (found - low), low);
        }
        if high < found {
            high = halved(low, high, |_| width, keeps);
        }
        high
    }

    /// Lowers the least current to that with which the cycle at a depth closes, if that is less.
    fn lowers(&mut self, least: &mut f64, top: f64, depth: f64) -> bool {
        let soc = self.reserve.0 + (1.0 - (-depth).exp()) * (top - self.reserve.0);
        self.add(*least);
        if self.gain_from(soc) <= CLOSED {
            return false;
        }
        let gain = |search: &mut Search, current: f64| {
            search.add(current);
            search.gain_from(soc)
        };
        match self.current_for(*least, gain) {
            Some(current) if current < *least => {
                *least = current;
                true
            }
            _ => false,
        }
    }

    /// Gain over a cycle begun where the touching cycle is lowest, with a charge. Its depletion there is that which the
    /// last such cycle left: parking between takes away what the beginning brought.
    fn gain_from(&mut self, soc: f64) -> f64 {
        let begin = Charge {
            soc: Fraction(soc),
            depletion: self.turn.depletion,
        };
        let passed = self.machine.pass_around(self.turn.from, begin);
        self.turn.depletion = passed.end.depletion;
        passed.end.soc.0 - soc
    }
}
