//! What the accessories on the bus draw, and the speed at which the sources meet it.

use super::setpoint;
use crate::build::{Build, Source, SourceKind, State};
use crate::ledger::connect;
use crate::quantity::{Amps, Rpm, Volts};
use crate::root;
use crate::source;
use serde::Serialize;

/// Highest engine speed looked at.
const MOST_RPM: f64 = 12_000.0;
/// Speeds at which a first crossing is looked for.
const LOOKED_AT: u32 = 240;

/// What the accessories on the battery bus draw in one running state at given bus volts. The demand
/// is that of the state at any speed; the battery's own current is left out.
#[derive(Clone, Debug, Serialize)]
pub struct Demand {
    /// The state.
    pub state: String,
    /// Bus volts.
    pub bus_v: Volts,
    /// Mean over the state's time: each accessory by its share of it.
    pub mean_a: Amps,
    /// With everything on that may be on at once.
    pub most_a: Amps,
    /// Least engine speed at which the sources on the bus together give `mean_a`; none where they
    /// never do up to 12 000 rpm.
    pub break_even_rpm: Option<Rpm>,
    /// The same for `most_a`.
    pub most_break_even_rpm: Option<Rpm>,
}

/// Sources on the battery bus.
pub(super) fn on_bus(build: &Build) -> impl Iterator<Item = &Source> {
    let battery = build.battery.is_some();
    let sources = build.sources.iter();
    sources.filter(move |s| battery && s.circuit.is_none() && !s.braking)
}

/// What a source gives into bus volts, its regulator left out; nothing on alternating current.
pub(super) fn gives(source: &Source, rpm: Rpm, bus: Volts) -> Amps {
    match &source.kind {
        SourceKind::Alternator(alternator) => alternator.output(rpm),
        SourceKind::Winding(winding) => winding.rectifier.as_ref().map_or(Amps::ZERO, |r| {
            source::rectified_dc(&winding.constants, r, rpm, bus)
        }),
    }
}

/// Demand of every running state of the shift at every bus volts, states first. Nothing without a
/// battery.
pub(super) fn demands(build: &Build, volts: &[Volts]) -> Vec<Demand> {
    if build.battery.is_none() {
        return Vec::new();
    }
    let mut states: Vec<State> = Vec::new();
    for step in &build.shift {
        if matches!(step.state, State::Running(_)) && !states.contains(&step.state) {
            states.push(step.state);
        }
    }
    let mut all = Vec::new();
    for state in states {
        let loads = connect(build, state, None).loads;
        for bus in volts {
            let mean = loads.mean().current_at(*bus);
            let most = loads.heaviest_total().current_at(*bus);
            all.push(Demand {
                state: build.state_name(state).to_owned(),
                bus_v: *bus,
                mean_a: mean,
                most_a: most,
                break_even_rpm: break_even(build, *bus, mean),
                most_break_even_rpm: break_even(build, *bus, most),
            });
        }
    }
    all
}

/// What all sources on the bus give into bus volts; one whose regulator holds less gives nothing.
pub(super) fn all_give(build: &Build, rpm: Rpm, bus: Volts) -> Amps {
    let lets = |s: &&Source| setpoint(build, s).is_none_or(|holds| holds.0 >= bus.0 - 1e-9);
    on_bus(build).filter(lets).map(|s| gives(s, rpm, bus)).sum()
}

/// The least engine speed at which the sources on the bus together give these amps into these volts.
/// None where nothing is asked, or it is never met.
fn break_even(build: &Build, bus: Volts, amps: Amps) -> Option<Rpm> {
    if amps <= Amps::ZERO {
        return None;
    }
    let spare = |rpm: f64| (all_give(build, Rpm(rpm), bus) - amps).0;
    let speed = |k: u32| MOST_RPM * f64::from(k) / f64::from(LOOKED_AT);
    let reached = (1..=LOOKED_AT).find(|k| spare(speed(*k)) >= 0.0)?;
    let (low, high) = (speed(reached - 1), speed(reached));
    let found = root::bracketed(spare, low, high, 1e-9 * MOST_RPM);
    found.ok().map(Rpm)
}
