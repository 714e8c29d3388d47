//! How far a build is from the edge of keeping up, as a number that searches can follow.

use super::keeps_up;
use super::knob::Knob;
use super::value::{Round, rounded};
use super::worth::Worth;
use crate::build::{Build, State};
use crate::bus::Supply;
use crate::check::reserve;
use crate::ledger::{Machine, connect};
use crate::outlook::Turn;
use crate::quantity::{AmpHours, Fraction};
use crate::root::bracketed;

/// Margins looked at for one knob.
const MOST_TRIES: u32 = 7;
/// A margin that counts as just over the edge, as a share of how far the build is from it.
const LITTLE: f64 = 0.05;
/// How far beyond a straight line the next amount is looked for.
const FURTHER: f64 = 1.25;
/// Share of what is wanted below which a knob is not tried.
const UNLIKELY: f64 = 0.6;
/// Times a rounded amount that does not hold is moved on by its last digit.
const MOST_NUDGES: u32 = 3;

/// Follows a build's margin while one number of it is varied.
pub(super) struct Margin<'b> {
    build: &'b Build,
    machine: Machine,
    reserve: Fraction,
    turn: Turn,
    /// Whether a margin at or above nought is proof that a build keeps up: from a full battery. From less the first
    /// shifts may need more.
    pub(super) decides: bool,
    /// The margin of the build as it is: charge gained over the cycle that just touches the
    /// reserve, as a share of full. At zero or above a build keeps up from a full battery. −1 where
    /// even a full battery does not start.
    pub(super) now: f64,
}

impl<'b> Margin<'b> {
    /// Of a build and the machine made of it.
    pub(super) fn new(build: &'b Build, machine: Machine) -> Margin<'b> {
        let reserve = reserve(build, &machine).soc;
        let mut margin = Margin {
            reserve,
            decides: build.start >= Fraction::ONE,
            build,
            machine,
            turn: Turn::default(),
            now: 0.0,
        };
        let machine = margin.machine.clone();
        // Twice: the second begins at the cycle's lowest point as the first found it.
        margin.gain(&machine, margin.reserve);
        margin.now = margin.gain(&machine, margin.reserve);
        margin
    }

    fn gain(&mut self, machine: &Machine, reserve: Fraction) -> f64 {
        if reserve > Fraction::ONE || machine.cycle.is_empty() {
            return -1.0;
        }
        self.turn.gain(machine, reserve).0
    }

    /// The margin of another build, with the same battery and shift or others.
    pub(super) fn of(&mut self, build: &Build) -> f64 {
        Machine::new(build).map_or(-1.0, |machine| {
            let reserve = reserve(build, &machine).soc;
            self.gain(&machine, reserve)
        })
    }

    /// The margin with a knob at an amount.
    pub(super) fn at(&mut self, knob: &Knob, x: f64) -> f64 {
        let changed = knob.apply(self.build, x);
        match self.rewired(knob, &changed) {
            Some(machine) => self.gain(&machine, self.reserve),
            None => self.of(&changed),
        }
    }

    /// The machine with what a knob changes connected anew; none where more than what is connected
    /// changes.
    fn rewired(&self, knob: &Knob, changed: &Build) -> Option<Machine> {
        let touched = |state: State| match (knob, state) {
            (Knob::Speed(speed), State::Running(running)) => *speed == running,
            (
                Knob::Duty {
                    state: Some(on), ..
                },
                _,
            ) => *on == state,
            (Knob::Draw(_), _) => state != State::Parked,
            (_, State::Running(_)) => true,
            _ => false,
        };
        let supply_alone = match knob {
            Knob::Winding(_) | Knob::Speed(_) => true,
            Knob::Duty { .. } | Knob::Draw(_) | Knob::AddedPower | Knob::AddedCurrent => false,
            Knob::Capacity | Knob::ColdCranking | Knob::Reserve | Knob::Time(_) | Knob::Parked => {
                return None;
            }
        };
        let mut machine = self.machine.clone();
        for wired in machine.connected.iter_mut().filter(|w| touched(w.state)) {
            if supply_alone {
                let (rpm, air) = (changed.rpm(wired.state), changed.air.value);
                wired.bus.supply = Supply::at(&changed.sources, rpm, air, changed.cells());
            } else {
                wired.bus = connect(changed, wired.state, None);
            }
        }
        Some(machine)
    }

    /// The amount of a knob whose worth is known at which the build just holds: a guess by hand,
    /// then the margin itself. Between what is and `limit`; at the limit, where the build holds
    /// still there and more would be worse; none where it does not hold anywhere.
    pub(super) fn by_worth(
        &mut self,
        worth: &Worth<'_>,
        wanted: AmpHours,
        knob: &Knob,
        (now, limit): (f64, f64),
    ) -> Option<f64> {
        let reach = worth.of(knob, limit).0;
        if self.now < 0.0 && reach < UNLIKELY * wanted.0 {
            return None;
        }
        let mut line = Line::new(self.now);
        let mut amount = (self.now >= 0.0).then_some(now);
        let little = LITTLE * self.now.abs();
        let mut aim = wanted.0;
        for _ in 0..MOST_TRIES {
            let at_limit = aim / reach >= 1.0;
            let (w, x) = if at_limit {
                (reach, limit)
            } else {
                (aim, worth.amount(knob, AmpHours(aim), now, limit)?)
            };
            let g = self.at(knob, x);
            line.add((w, g));
            if g >= 0.0 {
                amount = Some(x);
                if line.short.is_some() && g < little || line.short.is_none() && at_limit {
                    break;
                }
            } else if at_limit && line.holds.is_none() {
                return None;
            }
            aim = line.next(0.4 * little)?;
        }
        amount.filter(|x| *x != now)
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
            if self.of(&build) >= 0.0 && (self.decides || keeps_up(&build)) {
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

/// The margin as a line over the worth: the points nearest the edge on either side, and the last
/// two.
struct Line {
    short: Option<(f64, f64)>,
    holds: Option<(f64, f64)>,
    last: (f64, f64),
    before: Option<(f64, f64)>,
}

impl Line {
    /// The build as it is, at worth 0.
    fn new(now: f64) -> Line {
        let point = (0.0, now);
        Line {
            short: (now < 0.0).then_some(point),
            holds: (now >= 0.0).then_some(point),
            last: point,
            before: None,
        }
    }

    fn add(&mut self, point: (f64, f64)) {
        self.before = Some(self.last);
        self.last = point;
        if point.1 < 0.0 {
            self.short = Some(point);
        } else {
            self.holds = Some(point);
        }
    }

    /// The worth at which the margin is a little over the edge: between the points on either side
    /// of it, or beyond the last two, and then some, as the line bends down. None where it does not
    /// rise.
    fn next(&self, target: f64) -> Option<f64> {
        let rise = |from: (f64, f64), to: (f64, f64)| {
            let slope = (to.1 - from.1) / (to.0 - from.0);
            (slope > 0.0 && slope.is_finite()).then_some(slope)
        };
        if let (Some(short), Some(holds)) = (self.short, self.holds) {
            return Some(short.0 + (target - short.1) / rise(short, holds)?);
        }
        let slope = rise(self.before?, self.last)?;
        Some(self.last.0 + FURTHER * (target - self.last.1) / slope)
    }
}
