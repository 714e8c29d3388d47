//! The nearest single changes that make a build keep up; what more it could carry when it does.
//!
//! Part of every check, so it looks at few things and loosely: amounts to two or three digits, on
//! the side that holds, each proved.

use super::knob::{self, Knob};
use super::lamps;
use super::margin::Margin;
use super::value::{Rated, Round, written};
use crate::build::{Accessory, Build, State};
use crate::check::answer::{Change, Verdict};
use crate::check::{ReserveFrom, Ruling};
use crate::load::LoadSum;
use crate::quantity::format::{duration, percent, text};
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Rpm, Volts};

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
/// Share of an amount left open before it is rounded and proved.
const CLOSENESS: f64 = 4e-3;
/// Digits of an amount.
const DIGITS: i32 = 3;
/// Accessories looked at, those that take most.
const LOADS: usize = 3;
/// Volts a cell at which accessories are ranked.
const RANKED_AT_CELL: f64 = 2.1;
/// Duty below which an accessory may as well be left off, per cent.
const HARDLY_ON: f64 = 5.0;

/// The nearest single changes with which a build keeps up, each with its figure; when it keeps up
/// already, what could still be added. At most six.
#[must_use]
pub fn nearest(build: &Build, ruling: &Ruling) -> Vec<Change> {
    if build.battery.is_none() {
        return Vec::new();
    }
    let mut margin = Margin::new(build);
    let mut changes = if ruling.verdict == Verdict::KeepsUp {
        what_more(build, &mut margin)
    } else {
        ways_out(build, ruling, &mut margin)
    };
    changes.truncate(MOST);
    changes
}

/// Single changes that make it keep up.
fn ways_out(build: &Build, ruling: &Ruling, margin: &mut Margin) -> Vec<Change> {
    let mut changes = Vec::new();
    if ruling.lacks.is_some() {
        changes.extend(faster(build, margin));
        changes.extend(
            knob::windings(build)
                .filter_map(|(index, _, _)| wider(build, margin, &Knob::Winding(index))),
        );
    }
    changes.extend(larger(build, ruling, margin));
    if ruling.reserve.soc > Fraction::ONE {
        return changes;
    }
    changes.extend(lamps::led(build, margin));
    for (index, _) in largest(build).into_iter().take(LOADS) {
        changes.extend(less(build, margin, index));
    }
    if ruling.lacks.is_none() {
        changes.extend(shorter(build, margin));
    }
    changes
}

/// Each running speed, raised to the next one or by a share.
fn faster(build: &Build, margin: &mut Margin) -> Vec<Change> {
    let mut changes = Vec::new();
    let speeds = 0..build.speeds.len();
    for (index, now) in speeds.filter_map(|i| Some((i, build.speeds.get(i)?.rpm.value.0))) {
        if !knob::occurs(build, State::Running(index)) {
            continue;
        }
        let all = build.speeds.iter().map(|s| s.rpm.value.0);
        let next = all.filter(|rpm| *rpm > now).fold(f64::INFINITY, f64::min);
        let most = if next.is_finite() {
            next.min(FASTER * now)
        } else {
            FASTER_TOP * now
        };
        let knob = Knob::Speed(index);
        if let Some(rpm) = least(margin, &knob, now, most) {
            let name = build.state_name(State::Running(index));
            let (to, from) = (text(Rpm(rpm)), text(Rpm(now)));
            changes.push(change(
                build,
                &knob,
                rpm,
                format!("{name} at {to} instead of {from}"),
            ));
        }
    }
    changes
}

/// A winding of the same volts and more current.
fn wider(build: &Build, margin: &mut Margin, knob: &Knob) -> Option<Change> {
    let Knob::Winding(index) = knob else {
        return None;
    };
    let winding = knob::winding(build, *index)?;
    let now = winding.scale.value.0;
    let scale = least(margin, knob, now, WIDER * now)?;
    let rated = Rated::of(build, winding);
    let (rpm, _) = rated.point();
    let (amps, before) = (rated.at(Fraction(scale)), rated.at(Fraction(now)));
    let words = format!(
        "a winding of {} at {} instead of {}",
        text(amps),
        text(rpm),
        text(before)
    );
    Some(change(build, knob, scale, words))
}

/// A larger battery, and one that cranks better where the cold start sets the reserve.
fn larger(build: &Build, ruling: &Ruling, margin: &mut Margin) -> Vec<Change> {
    let mut changes = Vec::new();
    let starts = matches!(
        ruling.reserve.from,
        ReserveFrom::ColdStart | ReserveFrom::NeverCranks { .. }
    );
    for knob in [Knob::Capacity, Knob::ColdCranking] {
        let Some(now) = knob.now(build) else { continue };
        if knob == Knob::ColdCranking && !starts {
            continue;
        }
        let most = (LARGER * now).min(knob.range(build).1);
        let Some(x) = least(margin, &knob, now, most) else {
            continue;
        };
        let words = if knob == Knob::Capacity {
            let (to, from) = (text(AmpHours(x)), text(AmpHours(now)));
            format!("a battery of {to} instead of {from}")
        } else {
            let (to, from) = (text(Amps(x)), text(Amps(now)));
            format!("a battery of {to} cold cranking instead of {from}")
        };
        changes.push(change(build, &knob, x, words));
    }
    changes
}

/// Less duty of an accessory.
fn less(build: &Build, margin: &mut Margin, index: usize) -> Option<Change> {
    let accessory = build.accessories.get(index)?;
    let knob = most_of_duty(build, index)?;
    let now = knob.now(build)?;
    let off = margin.at(&knob, 0.0);
    let x = margin.edge(&knob, (now, margin.now), (0.0, off), CLOSENESS)?;
    let Knob::Duty { state, .. } = knob else {
        return None;
    };
    let at = state.map_or(String::new(), |s| format!(" at {}", build.state_name(s)));
    let name = &accessory.name;
    if x < HARDLY_ON {
        let words = format!("{name} off{at}");
        return Some(change(build, &knob, 0.0, words));
    }
    let x = margin.proved(&knob, x, DIGITS, Round::Down)?;
    let (to, from) = (
        text(Fraction::from_percent(x)),
        percent(Fraction::from_percent(now)),
    );
    let words = format!("{name} on {to} of the time{at} instead of {from}");
    Some(change(build, &knob, x, words))
}

/// Less time standing with the key on.
fn shorter(build: &Build, margin: &mut Margin) -> Option<Change> {
    let stopped = |i: &usize| build.shift.get(*i).map(|s| (s.state, s.time.value));
    let (index, time) = (0..build.shift.len())
        .filter_map(|i| {
            stopped(&i)
                .filter(|(s, _)| *s == State::Stopped)
                .map(|s| (i, s.1))
        })
        .max_by(|a, b| a.1.0.total_cmp(&b.1.0))?;
    let knob = Knob::Time(index);
    let none = margin.at(&knob, 0.0);
    let x = margin.edge(&knob, (time.minutes(), margin.now), (0.0, none), CLOSENESS)?;
    let x = margin.proved(&knob, x, DIGITS, Round::Down)?;
    let (to, from) = (duration(Hours::from_minutes(x)), duration(time));
    let words = format!("stopped for {to} instead of {from}");
    Some(change(build, &knob, x, words))
}

/// What more a build that keeps up could carry.
fn what_more(build: &Build, margin: &mut Margin) -> Vec<Change> {
    let mut changes = Vec::new();
    if margin.now < 0.0 {
        // It holds itself up from a full battery only: no room to speak of.
        return changes;
    }
    let knob = Knob::AddedPower;
    let (_, most) = knob.range(build);
    let heaviest = margin.at(&knob, most);
    let watts = margin
        .edge(&knob, (most, heaviest), (0.0, margin.now), CLOSENESS / 8.0)
        .and_then(|x| margin.proved(&knob, x, DIGITS, Round::Down));
    if let Some(watts) = watts.filter(|w| *w >= 1.0) {
        let words = format!(
            "room for {} more whenever the engine runs",
            written(watts, "W")
        );
        changes.push(change(build, &knob, watts, words));
    }
    let cycling = |i: usize| {
        let knob = most_of_duty(build, i)?;
        let now = knob.now(build)?;
        (now < 100.0).then_some((i, knob, now))
    };
    let loads: Vec<_> = largest(build)
        .into_iter()
        .filter_map(|l| cycling(l.0))
        .collect();
    for (index, knob, now) in loads.into_iter().take(LOADS - 1) {
        changes.extend(more(build, margin, index, &knob, now));
    }
    changes
}

/// More duty of an accessory that cycles.
fn more(build: &Build, margin: &mut Margin, index: usize, knob: &Knob, now: f64) -> Option<Change> {
    let name = &build.accessories.get(index)?.name;
    let Knob::Duty { state, .. } = knob else {
        return None;
    };
    let at = state.map_or(String::new(), |s| format!(" at {}", build.state_name(s)));
    let (_, most) = knob.range(build);
    let all = margin.at(knob, most);
    let from = percent(Fraction::from_percent(now));
    if all >= 0.0 {
        let to = percent(Fraction::from_percent(most));
        let words = format!("{name} on {to} of the time{at} instead of {from} does no harm");
        return Some(change(build, knob, most, words));
    }
    let x = margin.edge(knob, (most, all), (now, margin.now), CLOSENESS)?;
    let x = margin.proved(knob, x, DIGITS, Round::Down)?;
    let to = text(Fraction::from_percent(x));
    let words = format!("{name} on up to {to} of the time{at} instead of {from}");
    (x > now).then(|| change(build, knob, x, words))
}

/// The least amount between what is and the most that keeps up, rounded up and proved.
fn least(margin: &mut Margin, knob: &Knob, now: f64, most: f64) -> Option<f64> {
    if most <= now {
        return None;
    }
    let top = margin.at(knob, most);
    let x = margin.edge(knob, (now, margin.now), (most, top), CLOSENESS)?;
    margin
        .proved(knob, x, DIGITS, Round::Up)
        .filter(|x| *x <= 1.01 * most)
}

/// The duty of an accessory in which it takes most: in every running state where that is one
/// figure, else in one.
fn most_of_duty(build: &Build, index: usize) -> Option<Knob> {
    let knobs = knob::duties(build, index);
    let weight = |knob: &Knob| -> f64 {
        let Knob::Duty { state, .. } = knob else {
            return 0.0;
        };
        let duty = &build.accessories[index].duty;
        let steps = build.shift.iter().filter(|step| match state {
            Some(state) => step.state == *state,
            None => matches!(step.state, State::Running(_)),
        });
        steps.map(|s| duty.share(s.state).0 * s.time.value.0).sum()
    };
    knobs
        .into_iter()
        .max_by(|a, b| weight(a).total_cmp(&weight(b)))
}

/// Accessories on the battery bus with their Ah in a shift at a rested battery's volts, most first.
pub(super) fn largest(build: &Build) -> Vec<(usize, AmpHours)> {
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
fn change(build: &Build, knob: &Knob, x: f64, words: String) -> Change {
    let set = knob
        .path(build)
        .map(|path| format!("{path}={}", written(x, knob.unit())));
    Change {
        text: capital(&words),
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
