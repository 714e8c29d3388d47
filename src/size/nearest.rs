//! The nearest single changes that make a build keep up; what more it could carry when it does.
//!
//! Part of every check, so it looks at few things and loosely: amounts to three digits, on the side
//! that holds, each proved by the margin (see [`Margin`]).

use super::knob::{self, Knob};
use super::lamps;
use super::margin::Margin;
use super::value::{Rated, Round, rounded, written};
use super::worth::Worth;
use crate::build::{Accessory, Build, State};
use crate::check::answer::{Change, Verdict};
use crate::check::{ReserveFrom, Ruling};
use crate::ledger::Machine;
use crate::load::LoadSum;
use crate::quantity::format::{duration, percent, text};
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Rpm, Volts};

/// Changes that are enough without looking at the battery.
const FEW: usize = 3;
/// Most changes listed.
const MOST: usize = 6;
/// How far a speed may rise, times.
const FASTER: f64 = 1.6;
/// How far the highest speed may rise, which a governor holds, times.
const FASTER_TOP: f64 = 1.1;
/// Greatest scale of a winding looked at.
const WIDER: f64 = 4.0;
/// Greatest battery looked at, times what there is.
const LARGER: f64 = 4.0;
/// Charge lacking, as a share of the battery's, up to which a larger battery may help.
const BY_BATTERY: f64 = 0.1;
/// Share of an amount left open before it is rounded and proved.
const CLOSENESS: f64 = 1e-2;
/// Digits of an amount.
const DIGITS: i32 = 3;
/// Accessories looked at, those that take most.
const LOADS: usize = 2;
/// Volts a cell at which accessories are ranked.
const RANKED_AT_CELL: f64 = 2.1;
/// Duty below which an accessory may as well be left off, per cent.
const HARDLY_ON: f64 = 5.0;
/// Power below which there is no room to speak of, W.
const HARDLY_ROOM: f64 = 1.0;

/// The nearest single changes with which a build keeps up, each with its figure; when it keeps up
/// already, what could still be added. At most six. `machine` is the build's own.
#[must_use]
pub fn nearest(build: &Build, machine: &Machine, ruling: &Ruling) -> Vec<Change> {
    let edge = ruling.lacks_current.unwrap_or(Amps::ZERO);
    let worth = Worth::new(build, machine, ruling.reserve.soc, edge);
    let full = machine.battery.cmax() / f64::from(machine.shifts.max(1));
    let margin = Margin::new(build, machine.clone());
    // What the cycle on the edge loses or gains is lacking or to spare, to first order.
    let wanted = match ruling.lacks {
        Some(lacks) if ruling.verdict != Verdict::KeepsUp => lacks,
        _ => -margin.now * full,
    };
    let mut near = Near {
        build,
        worth,
        margin,
        wanted,
    };
    let mut changes = if ruling.verdict == Verdict::KeepsUp {
        near.what_more()
    } else {
        near.ways_out(ruling)
    };
    changes.truncate(MOST);
    changes
}

/// What the search for changes goes by.
struct Near<'b> {
    build: &'b Build,
    worth: Worth<'b>,
    margin: Margin<'b>,
    /// Worth that is wanted; below zero what may be lost.
    wanted: AmpHours,
}

impl Near<'_> {
    /// Single changes that make it keep up.
    fn ways_out(&mut self, ruling: &Ruling) -> Vec<Change> {
        let build = self.build;
        let mut changes = Vec::new();
        if ruling.reserve.soc > Fraction::ONE {
            changes.extend(self.larger(Knob::ColdCranking));
            changes.extend(self.larger(Knob::Capacity));
            return changes;
        }
        if ruling.lacks.is_some() {
            for speed in 0..build.speeds.len() {
                changes.extend(self.faster(speed));
            }
            let windings: Vec<usize> = knob::windings(build).map(|(i, _, _)| i).collect();
            for index in windings {
                changes.extend(self.wider(index));
            }
        }
        changes.extend(lamps::led(
            build,
            &self.worth,
            self.wanted,
            &mut self.margin,
        ));
        for (index, _) in largest(build).into_iter().take(LOADS) {
            changes.extend(self.less(index));
        }
        let capacity = build.battery.as_ref().map(|b| b.label.capacity);
        let small = ruling
            .lacks
            .zip(capacity)
            .is_none_or(|(lacks, capacity)| lacks < BY_BATTERY * capacity);
        // A battery is looked for last, and only where there is little else: it takes longest.
        let small = small && changes.len() < FEW;
        if small {
            changes.extend(self.larger(Knob::Capacity));
        }
        if small && ruling.reserve.from == ReserveFrom::ColdStart {
            changes.extend(self.larger(Knob::ColdCranking));
        }
        if ruling.lacks.is_none() {
            changes.extend(self.shorter());
        }
        changes
    }

    /// The amount at which it just keeps up, rounded to the side that holds.
    fn amount(&mut self, knob: &Knob, now: f64, limit: f64, side: Round) -> Option<f64> {
        let x = self
            .margin
            .by_worth(&self.worth, self.wanted, knob, (now, limit))?;
        let x = if x == limit {
            x
        } else {
            rounded(x, DIGITS, side)
        };
        let proved = self.margin.decides || super::keeps_up(&knob.apply(self.build, x));
        proved.then_some(x)
    }

    /// A running speed, raised to the next one or by a share.
    fn faster(&mut self, index: usize) -> Option<Change> {
        let build = self.build;
        let now = build.speeds.get(index)?.rpm.value.0;
        if !knob::occurs(build, State::Running(index)) {
            return None;
        }
        let all = build.speeds.iter().map(|s| s.rpm.value.0);
        let next = all.filter(|rpm| *rpm > now).fold(f64::INFINITY, f64::min);
        let most = if next.is_finite() {
            next.min(FASTER * now)
        } else {
            FASTER_TOP * now
        };
        let knob = Knob::Speed(index);
        let rpm = self.amount(&knob, now, most, Round::Up)?;
        let name = build.state_name(State::Running(index));
        let (to, from) = (text(Rpm(rpm)), text(Rpm(now)));
        let words = format!("{name} at {to} instead of {from}");
        Some(change(build, &knob, rpm, &words))
    }

    /// A winding of the same volts and more current.
    fn wider(&mut self, index: usize) -> Option<Change> {
        let build = self.build;
        let knob = Knob::Winding(index);
        let winding = knob::winding(build, index)?;
        let now = winding.scale.value.0;
        let scale = self.amount(&knob, now, WIDER * now, Round::Up)?;
        let rated = Rated::of(build, winding);
        let (rpm, _) = rated.point();
        let (amps, before) = (rated.at(Fraction(scale)), rated.at(Fraction(now)));
        let (amps, rpm, before) = (text(amps), text(rpm), text(before));
        let words = format!("a winding of {amps} at {rpm} instead of {before}");
        Some(change(build, &knob, scale, &words))
    }

    /// A larger battery, or one that cranks better.
    fn larger(&mut self, knob: Knob) -> Option<Change> {
        let build = self.build;
        let now = knob.now(build)?;
        let most = (LARGER * now).min(knob.range(build).1);
        if most <= now {
            return None;
        }
        let (here, top) = (self.margin.now, self.margin.at(&knob, most));
        let x = self
            .margin
            .edge(&knob, (now, here), (most, top), CLOSENESS)?;
        let x = self.margin.proved(&knob, x, DIGITS, Round::Up)?;
        let words = if knob == Knob::Capacity {
            let (to, from) = (text(AmpHours(x)), text(AmpHours(now)));
            format!("a battery of {to} instead of {from}")
        } else {
            let (to, from) = (text(Amps(x)), text(Amps(now)));
            format!("a battery of {to} cold cranking instead of {from}")
        };
        Some(change(build, &knob, x, &words))
    }

    /// Less duty of an accessory.
    fn less(&mut self, index: usize) -> Option<Change> {
        let build = self.build;
        let name = &build.accessories.get(index)?.name;
        let (knob, at) = most_of_duty(build, index)?;
        let now = knob.now(build)?;
        let x = self.amount(&knob, now, 0.0, Round::Down)?;
        if x < HARDLY_ON {
            return Some(change(build, &knob, 0.0, &format!("{name} off{at}")));
        }
        let to = text(Fraction::from_percent(x));
        let from = percent(Fraction::from_percent(now));
        let words = format!("{name} on {to} of the time{at} instead of {from}");
        Some(change(build, &knob, x, &words))
    }

    /// Less time standing with the key on.
    fn shorter(&mut self) -> Option<Change> {
        let build = self.build;
        let steps = build.shift.iter().enumerate();
        let (index, longest) = steps
            .filter(|(_, step)| step.state == State::Stopped)
            .max_by(|a, b| a.1.time.value.0.total_cmp(&b.1.time.value.0))?;
        let time = longest.time.value;
        let knob = Knob::Time(index);
        let (here, none) = (self.margin.now, self.margin.at(&knob, 0.0));
        let x = self
            .margin
            .edge(&knob, (time.minutes(), here), (0.0, none), CLOSENESS)?;
        let x = self.margin.proved(&knob, x, DIGITS, Round::Down)?;
        let (to, from) = (duration(Hours::from_minutes(x)), duration(time));
        let words = format!("stopped for {to} instead of {from}");
        Some(change(build, &knob, x, &words))
    }

    /// What more a build that keeps up could carry.
    fn what_more(&mut self) -> Vec<Change> {
        let build = self.build;
        let mut changes = Vec::new();
        if self.margin.now <= 0.0 {
            // It holds itself up from a full battery only: no room to speak of.
            return changes;
        }
        let knob = Knob::AddedPower;
        let (_, most) = knob.range(build);
        let watts = self.amount(&knob, 0.0, most, Round::Down);
        if let Some(watts) = watts.filter(|w| *w >= HARDLY_ROOM) {
            let watts = written(watts, "W");
            let words = format!("room for {watts} more whenever the engine runs");
            changes.push(Change {
                text: capital(&words),
                set: None,
                settles_soc: None,
            });
        }
        let cycling: Vec<usize> = largest(build)
            .into_iter()
            .map(|(index, _)| index)
            .filter(|index| {
                most_of_duty(build, *index)
                    .and_then(|(knob, _)| knob.now(build))
                    .is_some_and(|now| now < 100.0)
            })
            .collect();
        for index in cycling.into_iter().take(LOADS) {
            changes.extend(self.more(index));
        }
        changes
    }

    /// More duty of an accessory that cycles.
    fn more(&mut self, index: usize) -> Option<Change> {
        let build = self.build;
        let name = &build.accessories.get(index)?.name;
        let (knob, at) = most_of_duty(build, index)?;
        let now = knob.now(build)?;
        let (_, most) = knob.range(build);
        let x = self.amount(&knob, now, most, Round::Down)?;
        let from = percent(Fraction::from_percent(now));
        let to = text(Fraction::from_percent(x));
        let words = format!("{name} may be on {to} of the time{at} instead of {from}");
        (x > now).then(|| change(build, &knob, x, &words))
    }
}

/// The duty of an accessory in which it takes most, and where that is in words: in every running
/// state, where that is one figure, else in one state.
fn most_of_duty(build: &Build, index: usize) -> Option<(Knob, String)> {
    let duty = &build.accessories.get(index)?.duty;
    let weight = |knob: &Knob| -> f64 {
        let Knob::Duty { state, .. } = knob else {
            return 0.0;
        };
        let steps = build.shift.iter().filter(|step| match state {
            Some(state) => step.state == *state,
            None => matches!(step.state, State::Running(_)),
        });
        steps.map(|s| duty.share(s.state).0 * s.time.value.0).sum()
    };
    let knob = knob::duties(build, index)
        .into_iter()
        .max_by(|a, b| weight(a).total_cmp(&weight(b)))?;
    let Knob::Duty { state, .. } = knob else {
        return None;
    };
    let at = state.map_or(String::new(), |s| format!(" at {}", build.state_name(s)));
    Some((knob, at))
}

/// Accessories on the battery bus with their Ah in a shift at a rested battery's volts, most first.
pub(crate) fn largest(build: &Build) -> Vec<(usize, AmpHours)> {
    let volts = Volts(RANKED_AT_CELL * f64::from(build.cells()));
    let charge = |a: &Accessory| -> AmpHours {
        let amps = LoadSum::of(a.draw.value, a.count).current_at(volts);
        let times = build
            .shift
            .iter()
            .map(|s| a.duty.share(s.state) * s.time.value);
        amps * times.sum::<Hours>()
    };
    let on_bus = build
        .accessories
        .iter()
        .enumerate()
        .filter(|(_, a)| a.circuit.is_none());
    let mut all: Vec<(usize, AmpHours)> = on_bus.map(|(i, a)| (i, charge(a))).collect();
    all.retain(|(_, charge)| charge.0 > 0.0);
    all.sort_by(|a, b| b.1.0.total_cmp(&a.1.0));
    all
}

/// A change of one knob.
fn change(build: &Build, knob: &Knob, x: f64, words: &str) -> Change {
    let set = knob
        .path(build)
        .map(|path| format!("{path}={}", written(x, knob.unit(build))));
    Change {
        text: capital(words),
        set,
        settles_soc: None,
    }
}

/// The first letter a capital.
pub(super) fn capital(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map_or(String::new(), |first| {
        first.to_uppercase().chain(letters).collect()
    })
}
