//! Why a build does not keep up, in a few words.

use crate::battery::Charge;
use crate::build::{Build, State};
use crate::check::{ReserveFrom, reserve};
use crate::ledger::Machine;
use crate::outlook::Turn;
use crate::quantity::format::{percent, text};
use crate::quantity::{AmpHours, Amps, Fraction};

/// A current beyond any source's.
const BEYOND: Amps = Amps(1e5);

/// What binds: the first cause found, from what no charging can mend to what charging is short of.
#[must_use]
pub fn why_not(build: &Build) -> String {
    let Some(machine) = Machine::new(build) else {
        return "there is no battery".to_owned();
    };
    let kept = reserve(build, &machine);
    match kept.from {
        ReserveFrom::NeverCranks { starter, least } => {
            return format!(
                "cold start: {} at the starter from a full battery, {} needed",
                text(starter),
                text(least)
            );
        }
        ReserveFrom::NeverThawed => {
            return "freezing: even a full battery is too near it".to_owned();
        }
        _ => {}
    }
    if !helped_by_charging(&machine, kept.soc) {
        return "time with the engine off: no charging while it runs makes up for it".to_owned();
    }
    charge(build, &machine, kept.soc)
}

/// The reserve and what sets it: what binds a battery that is too small.
#[must_use]
pub(super) fn reserve_of(build: &Build) -> String {
    let Some(machine) = Machine::new(build) else {
        return "there is no battery".to_owned();
    };
    let kept = reserve(build, &machine);
    let why = match kept.from {
        ReserveFrom::NeverCranks { .. } | ReserveFrom::NeverThawed => return why_not(build),
        ReserveFrom::ColdStart => "the next cold start",
        ReserveFrom::Freezing => "the acid must not freeze",
        ReserveFrom::LeastCharge => "lower charges are not trusted",
        ReserveFrom::Assumed => "assumed",
        ReserveFrom::Stated => "stated",
    };
    format!("reserve of {}: {why}", percent(kept.soc))
}

/// Whether any current while the engine runs would do.
fn helped_by_charging(machine: &Machine, reserve: Fraction) -> bool {
    let mut helped = machine.clone();
    helped.set_extra(BEYOND);
    let mut turn = Turn::default();
    let _first = turn.gain(&helped, reserve);
    turn.gain(&helped, reserve) >= Fraction::ZERO
}

/// The state that takes most out of the battery, charge at the reserve.
fn charge(build: &Build, machine: &Machine, reserve: Fraction) -> String {
    let mut states: Vec<(State, AmpHours)> = Vec::new();
    for leg in &machine.cycle {
        let at = Charge::rested(reserve.min(Fraction::ONE));
        let charge = machine.flow(leg.wired, at).battery * leg.time;
        match states.iter_mut().find(|(state, _)| *state == leg.state) {
            Some((_, sum)) => *sum += charge,
            None => states.push((leg.state, charge)),
        }
    }
    let worst = states.iter().min_by(|a, b| a.1.0.total_cmp(&b.1.0));
    let Some((state, charge)) = worst.filter(|(_, charge)| *charge < AmpHours::ZERO) else {
        return "charge: the battery takes it too slowly".to_owned();
    };
    let taken = text(-*charge * (1.0 / f64::from(machine.shifts.max(1))));
    let name = build.state_name(*state);
    match state {
        State::Running(_) => format!("charge at {name}: takes {taken}"),
        _ => format!("charge: {name} takes {taken}, running gives back less"),
    }
}
