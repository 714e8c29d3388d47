//! The amount on the edge of keeping up, proved by the full verdict on both sides.

use super::knob::Knob;
use super::margin::Margin;
use super::value::{Round, rounded};
use super::yardstick::Yardstick;
use crate::build::Build;

/// Significant digits of an amount: four move it by at most 0.1 %.
const DIGITS: i32 = 4;
/// Share of the amount to which the margin is followed.
const FOLLOWED: f64 = 1e-4;
/// Share of the amount left open between what holds and what does not.
const OPEN: f64 = 5e-4;
/// How far on the other side of the answer it must not hold, as a share.
const JUST_BEYOND: f64 = 0.004;
/// How far within the answer it must hold, and beyond it must not, for the answer to stand as one
/// edge: nothing else may lie so near.
const WITHIN: f64 = 0.005;
const BEYOND: f64 = 0.04;
/// Shares of what is looked at when neither end tells: times the amount there is.
const STEPS_UP: [f64; 12] = [
    1.05, 1.15, 1.35, 1.6, 2.0, 2.6, 3.5, 5.0, 8.0, 12.0, 18.0, 27.0,
];
/// The same for times of a step.
const STEPS_BOTH: [f64; 10] = [0.1, 0.25, 0.5, 0.75, 0.9, 1.1, 1.3, 1.7, 2.5, 4.0];
/// Edges looked at before a ragged one is given up.
const MOST_EDGES: u32 = 4;
/// How far from a guess the edge is looked for, step by step, as shares of it.
const NARROWING: [f64; 4] = [0.02, 0.06, 0.15, 0.4];
/// Halvings of a bracket.
const MOST_HALVINGS: u32 = 60;

/// Which way an amount is bound.
#[derive(Clone, Copy, Debug, PartialEq, Eq, serde::Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Bound {
    /// This much or more keeps up.
    Least,
    /// This much or less keeps up.
    Most,
}

/// What a search found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Found {
    /// The amount at the edge, on the side that holds, and an amount beyond that does not.
    Edge {
        bound: Bound,
        amount: f64,
        beyond: f64,
    },
    /// It keeps up at every amount looked at.
    Always(Bound),
    /// It does at none; the amount that comes nearest.
    Never { bound: Bound, best: f64 },
    /// It does here and there: no single edge.
    Ragged(Bound),
}

/// A search over one knob of a build.
pub(super) struct Search<'a, 'b> {
    pub(super) build: &'b Build,
    pub(super) knob: &'a Knob,
    pub(super) yardstick: &'a Yardstick<'b>,
    pub(super) margin: &'a mut Margin<'b>,
    /// Whether the build as it is keeps up.
    pub(super) now_keeps: bool,
}

impl Search<'_, '_> {
    fn keeps(&self, x: f64) -> bool {
        self.yardstick.keeps(self.knob, x)
    }

    fn proved(&self, x: f64) -> bool {
        self.yardstick.proves(self.knob, x)
    }

    /// The edge of the knob.
    pub(super) fn run(&mut self) -> Option<Found> {
        let now = self.knob.now(self.build)?;
        let (low, high) = self.knob.range(self.build);
        Some(match self.knob {
            Knob::Winding(_) | Knob::Speed(_) => self.least(low, now, high, &[]),
            Knob::Capacity | Knob::ColdCranking => self.least(low, now, high, &STEPS_UP),
            Knob::Duty { .. }
            | Knob::Draw(_)
            | Knob::Reserve
            | Knob::AddedPower
            | Knob::AddedCurrent => self.most(now, high),
            Knob::Time(_) | Knob::Parked => self.time(now, high),
        })
    }

    /// The least that keeps up. `tried` are multiples looked at where the most does not help.
    fn least(&mut self, low: f64, now: f64, high: f64, tried: &[f64]) -> Found {
        let bound = Bound::Least;
        if self.now_keeps {
            if self.keeps(low) {
                return Found::Always(bound);
            }
            return self.edge(bound, low, now);
        }
        if self.keeps(high) {
            return self.edge(bound, now, high);
        }
        let mut short = now;
        for x in tried.iter().map(|times| times * now).filter(|x| *x < high) {
            if self.keeps(x) {
                return self.edge(bound, short, x);
            }
            short = x;
        }
        Found::Never { bound, best: high }
    }

    /// The most that keeps up.
    fn most(&mut self, now: f64, high: f64) -> Found {
        let bound = Bound::Most;
        if self.now_keeps {
            if self.keeps(high) {
                return Found::Always(bound);
            }
            return self.edge(bound, high, now);
        }
        if self.keeps(0.0) {
            return self.edge(bound, now, 0.0);
        }
        Found::Never { bound, best: 0.0 }
    }

    /// More time may help or harm, as the state charges or drains.
    fn time(&mut self, now: f64, high: f64) -> Found {
        let (none, all) = (self.keeps(0.0), self.keeps(high));
        let (short, holds) = match (self.now_keeps, none, all) {
            (true, true, true) => return Found::Always(Bound::Most),
            (true, _, false) => (high, now),
            (true, false, true) => (0.0, now),
            (false, true, _) => (now, 0.0),
            (false, false, true) => (now, high),
            (false, false, false) => {
                let island = STEPS_BOTH.iter().map(|t| t * now).find(|x| self.keeps(*x));
                match island {
                    // Beyond it on the far side it fails again: the most.
                    Some(x) => (if x < now { now } else { high }, x),
                    None => {
                        let best = if self.margin.at(self.knob, 0.0) > self.margin.now {
                            0.0
                        } else {
                            high
                        };
                        return Found::Never {
                            bound: Bound::Most,
                            best,
                        };
                    }
                }
            }
        };
        let bound = if holds < short {
            Bound::Most
        } else {
            Bound::Least
        };
        self.edge(bound, short, holds)
    }

    /// The edge between an amount that falls short and one that holds.
    fn edge(&mut self, bound: Bound, short: f64, holds: f64) -> Found {
        let (mut short, mut holds) = (short, holds);
        for _ in 0..MOST_EDGES {
            let Some(amount) = self.between(bound, short, holds) else {
                return match bound {
                    Bound::Most => Found::Never { bound, best: 0.0 },
                    Bound::Least => Found::Ragged(bound),
                };
            };
            let (within, beyond) = match bound {
                Bound::Least => (amount * (1.0 + WITHIN), amount * (1.0 - BEYOND)),
                Bound::Most => (amount * (1.0 - WITHIN), amount * (1.0 + BEYOND)),
            };
            if !self.keeps(within) {
                // It holds in a narrow stretch only: look for the next edge on.
                (short, holds) = (within, holds);
                if (within - holds).abs() < OPEN * holds.abs() {
                    return Found::Ragged(bound);
                }
            } else if self.allowed(beyond) && self.keeps(beyond) {
                // It holds beyond as well: the edge lies further out.
                (short, holds) = (short, beyond);
            } else if self.proved(amount) && (!self.allowed(beyond) || !self.proved(beyond)) {
                return Found::Edge {
                    bound,
                    amount,
                    beyond,
                };
            } else {
                return Found::Ragged(bound);
            }
        }
        Found::Ragged(bound)
    }

    /// Whether the file may hold an amount.
    fn allowed(&self, x: f64) -> bool {
        x <= self.knob.limit(self.build)
    }

    /// An amount next to the edge that holds, rounded to the side that holds.
    fn between(&mut self, bound: Bound, short: f64, holds: f64) -> Option<f64> {
        let side = match bound {
            Bound::Least => Round::Up,
            Bound::Most => Round::Down,
        };
        let out = match bound {
            Bound::Least => 1.0 - JUST_BEYOND,
            Bound::Most => 1.0 + JUST_BEYOND,
        };
        let (mut short, mut holds) = (short, holds);
        if let Some(guess) = self.followed(short, holds) {
            let amount = rounded(guess, DIGITS, side);
            let inside = (short.min(holds)..=short.max(holds)).contains(&amount);
            if inside && amount > 0.0 {
                match (self.keeps(amount), self.keeps(amount * out)) {
                    (true, false) => return Some(amount),
                    (true, true) => holds = amount,
                    (false, _) => short = amount,
                }
                (short, holds) = self.narrowed(amount, short, holds);
            }
        }
        self.halved(short, holds, side)
    }

    /// A narrower bracket, looked for step by step from a guess that was not quite right.
    fn narrowed(&self, guess: f64, mut short: f64, mut holds: f64) -> (f64, f64) {
        // Towards the end that is still far off.
        let held = holds == guess;
        let far = if held { short } else { holds };
        for away in NARROWING {
            let x = if far > guess {
                guess * (1.0 + away)
            } else {
                guess / (1.0 + away)
            };
            if !(short.min(holds)..short.max(holds)).contains(&x) {
                break;
            }
            match (self.keeps(x), held) {
                (true, true) => holds = x,
                (false, false) => short = x,
                (true, false) => return (short, x),
                (false, true) => return (x, holds),
            }
        }
        (short, holds)
    }

    /// Where the margin of the build as stated is nought; none where it is not what decides.
    fn followed(&mut self, short: f64, holds: f64) -> Option<f64> {
        if !self.yardstick.follows_margin() {
            return None;
        }
        let ends = (
            self.margin.at(self.knob, short),
            self.margin.at(self.knob, holds),
        );
        self.margin
            .edge(self.knob, (short, ends.0), (holds, ends.1), FOLLOWED)
    }

    /// By halving, on the verdict alone.
    fn halved(&self, mut short: f64, mut holds: f64, side: Round) -> Option<f64> {
        let floor = 1e-4 * short.max(holds);
        for _ in 0..MOST_HALVINGS {
            if (short - holds).abs() <= OPEN * short.min(holds).max(floor) {
                break;
            }
            let middle = if short.min(holds) > 4.0 * floor {
                (short * holds).sqrt()
            } else {
                0.5 * (short + holds)
            };
            if self.keeps(middle) {
                holds = middle;
            } else {
                short = middle;
            }
        }
        if holds < 4.0 * floor {
            // Nothing to speak of.
            return None;
        }
        let amount = rounded(holds, DIGITS, side);
        if self.keeps(amount) {
            Some(amount)
        } else {
            Some(holds)
        }
    }
}
