//! The 80 % guideline: a rule of thumb beside the verdict.
//!
//! FAA AC 43.13-1B §11-35: a continuous load over 80 % of what the source can give calls for less
//! load or more capacity. The circular itself calls it a rule of thumb; it is reported, and nothing
//! is judged by it.

use crate::build::{Build, State};
use crate::bus::Supply;
use crate::load::LoadSum;
use crate::quantity::{Amps, Fraction, Rpm, Volts};
use crate::root::bracketed;
use serde::Serialize;

/// Share of what the source can give that the rule allows.
pub const ALLOWED: Fraction = Fraction(0.8);
/// Bus volts of a 12 V system at which load and supply are compared: a charging system's nominal
/// volts. Common practice, no source.
const COMPARED_AT: f64 = 14.0;
/// Lowest speed looked at, rpm.
const SLOWEST: f64 = 50.0;
/// Highest speed looked at, rpm.
const FASTEST: f64 = 12_000.0;

/// Load against supply at one running speed, bus held at 14 V for each 12 V.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Guideline {
    /// The state.
    pub state: String,
    /// Its speed.
    pub rpm: Rpm,
    /// What the accessories draw on average: always-on ones in full, cycling ones by their duty.
    pub load_a: Amps,
    /// What the sources can give.
    pub supply_a: Amps,
    /// Load over supply.
    pub share: Fraction,
    /// Whether that is within 80 %.
    pub within: bool,
    /// Speed at which the supply meets the load; none where no speed does.
    pub meets_rpm: Option<Rpm>,
}

/// The guideline at each running speed of the shift.
#[must_use]
pub fn guideline(build: &Build) -> Vec<Guideline> {
    let cells = build.cells();
    let volts = compared_at(build);
    let supply = |rpm: Rpm| {
        // A hair below: a regulator that holds just these volts still gives.
        let bus = volts - Volts(1e-9);
        Supply::at(&build.sources, rpm, build.air.value, cells).available(bus)
    };
    let running =
        (0..build.speeds.len()).filter(|s| super::knob::occurs(build, State::Running(*s)));
    running
        .filter_map(|index| {
            let state = State::Running(index);
            let rpm = build.speeds.get(index)?.rpm.value;
            let (load, given) = (mean_load(build, state, volts), supply(rpm));
            let share = Fraction(load / given);
            Some(Guideline {
                state: build.state_name(state).to_owned(),
                rpm,
                load_a: load,
                supply_a: given,
                share,
                within: share <= ALLOWED,
                meets_rpm: meeting_speed(load, supply),
            })
        })
        .collect()
}

/// Bus volts of the comparison: 14 V for each 12 V, or the highest setpoint where that is lower.
fn compared_at(build: &Build) -> Volts {
    let usual = Volts(COMPARED_AT * f64::from(build.cells()) / 6.0);
    let feeds = build
        .sources
        .iter()
        .filter(|s| s.circuit.is_none() && !s.braking);
    let setpoints = feeds.map(|s| {
        let regulator = s.regulator.as_ref();
        regulator.map_or(usual, |r| r.setpoint(build.air.value))
    });
    setpoints
        .reduce(Volts::max)
        .map_or(usual, |highest| highest.min(usual))
}

/// Draw of the accessories on the battery bus at fixed volts, cycling ones by their duty.
fn mean_load(build: &Build, state: State, volts: Volts) -> Amps {
    let on_bus = build.accessories.iter().filter(|a| a.circuit.is_none());
    on_bus
        .map(|a| LoadSum::of(a.draw.value, a.count).current_at(volts) * a.duty.share(state))
        .sum()
}

/// The speed at which a supply meets a load.
fn meeting_speed(load: Amps, supply: impl Fn(Rpm) -> Amps) -> Option<Rpm> {
    let lacks = |rpm: f64| (supply(Rpm(rpm)) - load).0;
    bracketed(lacks, SLOWEST, FASTEST, 1e-3).ok().map(Rpm)
}
