//! A number of a build that may be varied, others held: what it is, where it stands in the file,
//! how far it may go.
//!
//! Within this module the amount of a knob is a plain number in the knob's own unit, the one in
//! which `--set` takes it: `1.27` times, 2140 rpm, 35.2 %, 18.5 min.

use super::value::Rated;
use crate::build::{Build, Draw, Figure, Source, SourceKind, State, WindingSource};
use crate::description::path;
use crate::quantity::{Amps, Fraction, Volts};

/// Which number of a build.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Knob {
    /// Current of a winding that feeds the battery, times what it is: index into the sources.
    Winding(usize),
    /// 20-hour capacity of the battery.
    Capacity,
    /// Cold cranking amps of the battery.
    ColdCranking,
    /// Charge never to go below.
    Reserve,
    /// A named speed: index into the speeds.
    Speed(usize),
    /// Time of one step of the shift: index into the steps.
    Time(usize),
    /// Time parked between shifts.
    Parked,
    /// What one accessory draws, by the law it follows: index into the accessories.
    Draw(usize),
    /// Share of the time an accessory is on.
    Duty {
        /// Index into the accessories.
        accessory: usize,
        /// In which state; none is in every running state alike.
        state: Option<State>,
    },
    /// A constant power drawn whenever the engine runs, added.
    AddedPower,
    /// A constant current drawn whenever the engine runs, added.
    AddedCurrent,
}

/// Highest speed looked at, as a share of the highest named one.
const FASTEST: f64 = 1.5;
/// Lowest speed looked at, rpm.
const SLOWEST: f64 = 100.0;
/// Longest time of a step looked at, min: a day.
const LONGEST: f64 = 1440.0;
/// Longest time parked looked at, h: sixty days.
const LONGEST_PARKED: f64 = 1440.0;
/// How far a winding or a battery is varied, times and over what it is.
const WIDEST: f64 = 30.0;
/// Cold cranking amps for each Ah beyond which a label contradicts itself.
const CRANKING_AN_AH: f64 = 15.0;

/// The windings that feed the battery bus, with their index.
pub(crate) fn windings(build: &Build) -> impl Iterator<Item = (usize, &Source, &WindingSource)> {
    build
        .sources
        .iter()
        .enumerate()
        .filter(|(_, source)| source.circuit.is_none() && !source.braking)
        .filter_map(|(index, source)| match &source.kind {
            SourceKind::Winding(winding) => Some((index, source, winding.as_ref())),
            SourceKind::Alternator(_) => None,
        })
}

/// Every knob of a build, in the order in which `size` answers.
#[must_use]
pub fn knobs(build: &Build) -> Vec<Knob> {
    let mut all: Vec<Knob> = windings(build).map(|(i, _, _)| Knob::Winding(i)).collect();
    if build.battery.is_some() {
        all.extend([Knob::Capacity, Knob::ColdCranking, Knob::Reserve]);
    }
    let runs = |speed: &usize| occurs(build, State::Running(*speed));
    all.extend((0..build.speeds.len()).filter(runs).map(Knob::Speed));
    let timed = build
        .shift
        .iter()
        .enumerate()
        .filter(|(_, step)| step.state != State::Crank);
    all.extend(timed.map(|(index, _)| Knob::Time(index)));
    all.push(Knob::Parked);
    for accessory in 0..build.accessories.len() {
        all.extend(duties(build, accessory));
    }
    all.extend(
        (0..build.accessories.len())
            .filter(|i| drawn(build, *i).is_some())
            .map(Knob::Draw),
    );
    all.extend([Knob::AddedPower, Knob::AddedCurrent]);
    all
}

/// One knob for each duty of an accessory on the bus that the file gives for itself.
pub(super) fn duties(build: &Build, index: usize) -> Vec<Knob> {
    let Some(accessory) = build.accessories.get(index) else {
        return Vec::new();
    };
    if accessory.circuit.is_some() {
        return Vec::new();
    }
    let everywhere = path::key(&accessory.path, "duty");
    let mut knobs = Vec::new();
    for state in states_of_duty(build).filter(|s| occurs(build, *s)) {
        let Some(figure) = figure_of(build, index, state).filter(|f| f.value.0 > 0.0) else {
            continue;
        };
        let state = (figure.path != everywhere).then_some(state);
        let knob = Knob::Duty {
            accessory: index,
            state,
        };
        if !knobs.contains(&knob) {
            knobs.push(knob);
        }
    }
    let everywhere = Knob::Duty {
        accessory: index,
        state: None,
    };
    if alike(build, index) && !knobs.contains(&everywhere) {
        knobs.push(everywhere);
    }
    knobs
}

/// Whether an accessory is on for the same share in every running state of the shift, and in no
/// other: then one figure may stand for all of them.
fn alike(build: &Build, index: usize) -> bool {
    let Some(duty) = build.accessories.get(index).map(|a| &a.duty) else {
        return false;
    };
    let running = (0..build.speeds.len()).map(State::Running);
    let mut shares = running.filter(|s| occurs(build, *s)).map(|s| duty.share(s));
    let Some(first) = shares.next().filter(|s| *s > Fraction::ZERO) else {
        return false;
    };
    let others = [State::Stopped, State::Crank];
    shares.all(|s| s == first) && others.iter().all(|s| duty.share(*s) == Fraction::ZERO)
}

/// What one accessory on the bus draws, as a number and its unit; none for a resistance, where more
/// ohms are less load.
fn drawn(build: &Build, index: usize) -> Option<(f64, &'static str)> {
    let accessory = build.accessories.get(index)?;
    let states = [State::Stopped, State::Crank].into_iter();
    let mut states = (0..build.speeds.len()).map(State::Running).chain(states);
    let on = |s: State| occurs(build, s) && accessory.duty.share(s) > Fraction::ZERO;
    if accessory.circuit.is_some() || !states.any(on) {
        return None;
    }
    let (x, unit) = match accessory.draw.value {
        Draw::Current(amps) => (amps.0, "A"),
        Draw::Power(power) | Draw::Filament { power, .. } => (power.0, "W"),
        Draw::Resistance(_) => return None,
    };
    (x > 0.0).then_some((x, unit))
}

/// Whether the shift has any time in a state.
pub(crate) fn occurs(build: &Build, state: State) -> bool {
    let mut steps = build.shift.iter();
    steps.any(|step| step.state == state && step.time.value.0 > 0.0)
}

/// The states a duty may name, cranking apart, in the order of the speeds.
fn states_of_duty(build: &Build) -> impl Iterator<Item = State> {
    (0..build.speeds.len())
        .map(State::Running)
        .chain([State::Stopped])
}

pub(super) fn figure_of(
    build: &Build,
    accessory: usize,
    state: State,
) -> Option<&Figure<Fraction>> {
    let duty = &build.accessories.get(accessory)?.duty;
    match state {
        State::Running(speed) => duty.running.get(speed),
        State::Stopped => Some(&duty.stopped),
        State::Crank => Some(&duty.crank),
        State::Parked => None,
    }
}

impl Knob {
    /// What it is, in words.
    #[must_use]
    pub fn what(&self, build: &Build) -> String {
        match self {
            Knob::Winding(index) => {
                let name = build.sources.get(*index).map_or("winding", |s| &s.name);
                format!("rated output, {name}")
            }
            Knob::Capacity => "battery capacity".to_owned(),
            Knob::ColdCranking => "cold cranking amps".to_owned(),
            Knob::Reserve => "reserve".to_owned(),
            Knob::Parked => "time parked".to_owned(),
            Knob::Draw(index) => {
                let name = build
                    .accessories
                    .get(*index)
                    .map_or("accessory", |a| &a.name);
                format!("draw of {name}")
            }
            Knob::Speed(index) => {
                format!("{} speed", build.state_name(State::Running(*index)))
            }
            Knob::Time(index) => self.what_time(build, *index),
            Knob::Duty { accessory, state } => {
                let name = build
                    .accessories
                    .get(*accessory)
                    .map_or("accessory", |a| &a.name);
                let state = state.map_or(String::new(), |s| format!(" at {}", build.state_name(s)));
                format!("duty of {name}{state}")
            }
            Knob::AddedPower => "more load, as power".to_owned(),
            Knob::AddedCurrent => "more load, as current".to_owned(),
        }
    }

    fn what_time(&self, build: &Build, index: usize) -> String {
        let Some(step) = build.shift.get(index) else {
            return "time".to_owned();
        };
        let alike = |i: &usize| build.shift.get(*i).is_some_and(|s| s.state == step.state);
        let which = (0..=index).filter(alike).count();
        let name = build.state_name(step.state);
        if (0..build.shift.len()).filter(alike).count() > 1 {
            format!("time at {name}, {} of the shift", nth(which))
        } else {
            format!("time at {name}")
        }
    }

    /// Path that `--set` takes; none where the file has no such value.
    #[must_use]
    pub fn path(&self, build: &Build) -> Option<String> {
        match self {
            Knob::Winding(index) => winding(build, *index).map(|w| w.scale.path.clone()),
            Knob::Capacity => build.battery.as_ref().map(|b| b.capacity.path.clone()),
            Knob::ColdCranking => build
                .battery
                .as_ref()
                .map(|_| "battery.cold_cranking".to_owned()),
            Knob::Reserve => build.battery.as_ref().map(|_| "battery.reserve".to_owned()),
            Knob::Parked => Some(build.parked.path.clone()),
            Knob::Draw(index) => build.accessories.get(*index).map(|a| a.draw.path.clone()),
            Knob::Speed(index) => build.speeds.get(*index).map(|s| s.rpm.path.clone()),
            Knob::Time(index) => build.shift.get(*index).map(|s| s.time.path.clone()),
            Knob::Duty { accessory, state } => match state {
                Some(state) => figure_of(build, *accessory, *state).map(|f| f.path.clone()),
                None => build
                    .accessories
                    .get(*accessory)
                    .map(|a| path::key(&a.path, "duty")),
            },
            Knob::AddedPower | Knob::AddedCurrent => None,
        }
    }

    /// The unit in which `--set` takes it; none for a plain number.
    #[must_use]
    pub fn unit(&self, build: &Build) -> &'static str {
        match self {
            Knob::Winding(_) => "",
            Knob::Capacity => "Ah",
            Knob::ColdCranking | Knob::AddedCurrent => "A",
            Knob::Speed(_) => "rpm",
            Knob::Time(_) => "min",
            Knob::Duty { .. } | Knob::Reserve => "%",
            Knob::Parked => "h",
            Knob::Draw(index) => drawn(build, *index).map_or("W", |(_, unit)| unit),
            Knob::AddedPower => "W",
        }
    }

    /// The amount that the build has, in the knob's unit; none where the build has no such thing.
    pub(super) fn now(&self, build: &Build) -> Option<f64> {
        Some(match self {
            Knob::Winding(index) => winding(build, *index)?.scale.value.0,
            Knob::Capacity => build.battery.as_ref()?.label.capacity.0,
            Knob::ColdCranking => {
                let label = &build.battery.as_ref()?.label;
                let usual = || label.chemistry.cranking_from_capacity(label.capacity);
                label.cold_cranking.unwrap_or_else(usual).0
            }
            Knob::Reserve => {
                let reserve = build.battery.as_ref()?.reserve.as_ref();
                reserve.map_or(0.0, |r| r.value.percent())
            }
            Knob::Parked => build.parked.value.0,
            Knob::Draw(index) => drawn(build, *index)?.0,
            Knob::Speed(index) => build.speeds.get(*index)?.rpm.value.0,
            Knob::Time(index) => build.shift.get(*index)?.time.value.minutes(),
            Knob::Duty { accessory, state } => match state {
                Some(state) => figure_of(build, *accessory, *state)?.value.percent(),
                None => {
                    let running = &build.accessories.get(*accessory)?.duty.running;
                    let most = running
                        .iter()
                        .map(|f| f.value)
                        .fold(Fraction::ZERO, Fraction::max);
                    most.percent()
                }
            },
            Knob::AddedPower | Knob::AddedCurrent => 0.0,
        })
    }

    /// The least and the most that is looked at.
    pub(super) fn range(&self, build: &Build) -> (f64, f64) {
        let now = self.now(build).unwrap_or(0.0);
        match self {
            Knob::Winding(_) => (now / WIDEST, now * WIDEST),
            Knob::Capacity => (now / WIDEST, (now * WIDEST).min(5000.0)),
            Knob::ColdCranking => {
                let capacity = Knob::Capacity.now(build).unwrap_or(now);
                (now / WIDEST, now.max(CRANKING_AN_AH * capacity))
            }
            Knob::Speed(_) => (SLOWEST.min(now), (FASTEST * top_speed(build)).min(12_000.0)),
            Knob::Time(_) => (0.0, LONGEST.max(now)),
            Knob::Reserve => (0.0, 100.0),
            Knob::Parked => (0.0, LONGEST_PARKED.max(now)),
            Knob::Draw(_) => (0.0, now * WIDEST),
            Knob::Duty { accessory, state } => (0.0, room(build, *accessory, *state)),
            Knob::AddedPower => (0.0, 16.0 * most_output(build).0 + 50.0),
            Knob::AddedCurrent => (0.0, most_output(build).0 + 5.0),
        }
    }

    /// The most that the file may hold.
    pub(super) fn limit(&self, build: &Build) -> f64 {
        match self {
            Knob::Winding(_) => 1000.0,
            Knob::Capacity => 5000.0,
            Knob::ColdCranking => 10_000.0,
            Knob::Speed(_) => 12_000.0,
            Knob::Time(_) => 336.0 * 60.0,
            Knob::Reserve => 100.0,
            Knob::Parked => 8760.0,
            Knob::Draw(index) => match drawn(build, *index) {
                Some((_, "A")) => 2000.0,
                _ => 50_000.0,
            },
            Knob::Duty { accessory, state } => room(build, *accessory, *state),
            Knob::AddedPower | Knob::AddedCurrent => f64::INFINITY,
        }
    }

    /// The amount as the answers state it: rated amps for a winding, else as `--set` takes it.
    pub(super) fn stated(&self, build: &Build, x: f64) -> (f64, &'static str) {
        match self {
            Knob::Winding(index) => {
                let amps = winding(build, *index).map(|w| Rated::of(build, w).at(Fraction(x)));
                (amps.map_or(f64::NAN, |a| a.0), "A")
            }
            _ => (x, self.unit(build)),
        }
    }
}

/// Room that the accessories an accessory is never on with leave it, per cent.
fn room(build: &Build, accessory: usize, state: Option<State>) -> f64 {
    let Some(this) = build.accessories.get(accessory) else {
        return 100.0;
    };
    let states: Vec<State> = match state {
        Some(state) => vec![state],
        None => (0..build.speeds.len()).map(State::Running).collect(),
    };
    let taken = |state: &State| -> f64 {
        let others = this.apart.iter().filter_map(|i| build.accessories.get(*i));
        others.map(|a| a.duty.share(*state).percent()).sum()
    };
    let most = states.iter().map(taken).fold(0.0, f64::max);
    (100.0 - most).max(0.0)
}

/// A winding of the build by its index.
pub(super) fn winding(build: &Build, index: usize) -> Option<&WindingSource> {
    match &build.sources.get(index)?.kind {
        SourceKind::Winding(winding) => Some(winding),
        SourceKind::Alternator(_) => None,
    }
}

/// The highest named speed, rpm.
pub(super) fn top_speed(build: &Build) -> f64 {
    build
        .speeds
        .iter()
        .map(|s| s.rpm.value.0)
        .fold(0.0, f64::max)
}

/// What the sources give together at the highest speed into a discharged battery.
fn most_output(build: &Build) -> Amps {
    let cells = build.cells();
    let rpm = crate::quantity::Rpm(top_speed(build));
    let supply = crate::bus::Supply::at(&build.sources, rpm, build.air.value, cells);
    supply.available(Volts(1.75 * f64::from(cells)))
}

/// `1st`, `2nd`.
fn nth(number: usize) -> String {
    crate::check::ordinal(u32::try_from(number).unwrap_or(u32::MAX))
}
