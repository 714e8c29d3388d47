//! The shift: its steps, the hours parked after it, and what comes between shifts.

use super::Fault;
use super::context::{Context, PRACTICE, by_rule, figure, of_system};
use crate::build::{Charger, Days, Figure, Origin, Speed, Starter, State, Step};
use crate::description::path::key;
use crate::description::{ChargerText, Description, StepText};
use crate::quantity::{Hours, Volts, format};

/// Key off between shifts. Common practice, no source.
const PARKED: Hours = Hours(14.0);
/// Volts at which a shop charger of a 12 V system tapers. Common practice, no source.
const CHARGER_HOLDS: Volts = Volts(14.4);

/// The state of a name, where there is one.
pub(super) fn state(speeds: &[Speed], name: &str) -> Option<State> {
    match name {
        "crank" => Some(State::Crank),
        "stopped" => Some(State::Stopped),
        _ => speeds
            .iter()
            .position(|s| s.name == name)
            .map(State::Running),
    }
}

/// The names of the states that a shift or a duty may name.
pub(super) fn state_names(speeds: &[Speed]) -> Vec<String> {
    let speeds = speeds.iter().map(|s| s.name.clone());
    speeds
        .chain(["crank".to_owned(), "stopped".to_owned()])
        .collect()
}

/// The steps in order.
pub(super) fn steps(
    context: &mut Context,
    description: &Description,
    speeds: &[Speed],
    starter: Option<&Starter>,
) -> Vec<Step> {
    if description.shift.is_empty() {
        context.fault("shift", Fault::EmptyShift);
    }
    let has_battery = description.battery.is_some();
    let has_starter = description.engine.starter.is_some();
    let mut steps = Vec::with_capacity(description.shift.len());
    for text in &description.shift {
        let name = &text.state.value;
        let Some(state) = state(speeds, name) else {
            context.fault(
                text.state.path.clone(),
                Fault::UnknownName {
                    what: "state",
                    name: name.clone(),
                    known: state_names(speeds),
                },
            );
            continue;
        };
        if state == State::Crank {
            let lacks = match (has_starter, has_battery) {
                (false, _) => Some("engine.starter"),
                (true, false) => Some("battery"),
                (true, true) => None,
            };
            if let Some(lacks) = lacks {
                context.fault(text.state.path.clone(), Fault::CannotCrank { lacks });
                continue;
            }
        }
        if let Some(time) = step_time(context, text, state, starter) {
            steps.push(Step { state, time });
        }
    }
    note_unused_speeds(context, description, speeds);
    steps
}

/// A speed that no step is worked at changes nothing, which a slip of its name hides.
fn note_unused_speeds(context: &mut Context, description: &Description, speeds: &[Speed]) {
    let unused = |speed: &&Speed| {
        let mut steps = description.shift.iter();
        !steps.any(|step| step.state.value == speed.name)
    };
    for speed in speeds.iter().filter(unused) {
        let note = format!("the shift has no step at speed `{}`", speed.name);
        context.notes.push(note);
    }
}

/// How long a step lasts; a start without a time takes the starter's.
fn step_time(
    context: &mut Context,
    text: &StepText,
    state: State,
    starter: Option<&Starter>,
) -> Option<Figure<Hours>> {
    let name = &text.state.value;
    match (&text.time, state, starter) {
        (Some(time), _, _) => {
            let path = key(&text.path, name);
            Some(figure(time, Origin::Stated, &path))
        }
        (None, State::Crank, Some(starter)) => Some(starter.time.clone()),
        (None, State::Crank, None) => None, // the starter itself is at fault, and was told
        (None, _, _) => {
            context.fault(
                text.path.clone(),
                Fault::NoTime {
                    state: name.clone(),
                },
            );
            None
        }
    }
}

/// Hours parked between shifts.
pub(super) fn parked(context: &mut Context, description: &Description) -> Figure<Hours> {
    let found = description
        .parked
        .as_ref()
        .map(|p| figure(p, Origin::Stated, "parked"));
    let words = (
        "time parked between shifts",
        format::duration(PARKED),
        PRACTICE,
    );
    context.figure_or(found, "parked".to_owned(), PARKED, words)
}

/// Shifts in a row and days parked.
pub(super) fn days(description: &Description) -> Option<Days> {
    description.days.as_ref().map(|d| Days {
        shifts: d.shifts.value,
        parked: d.parked.value,
    })
}

/// The shop charger, its open figures assumed.
pub(super) fn charger(
    context: &mut Context,
    text: &ChargerText,
    cells: u32,
    parked: &Figure<Hours>,
) -> Charger {
    let path = |key: &str| format!("charger.{key}");
    let stated = |w: &Option<crate::description::Written<Hours>>, key: &str| {
        w.as_ref().map(|w| figure(w, Origin::Stated, &path(key)))
    };
    let holds = text
        .holds
        .as_ref()
        .map(|w| figure(w, Origin::Stated, &path("holds")));
    let taper = of_system(CHARGER_HOLDS, cells);
    let words = (
        "volts at which the charger tapers",
        format::text(taper),
        PRACTICE,
    );
    let holds = context.figure_or(holds, path("holds"), taper, words);
    let after = stated(&text.after, "after").unwrap_or_else(|| by_rule(Hours::ZERO, path("after")));
    let rest = (parked.value - after.value).max(Hours::ZERO);
    let words = (
        "time on the charger",
        format::duration(rest),
        "all of the time parked after it is plugged in",
    );
    let time = context.figure_or(stated(&text.time, "time"), path("time"), rest, words);
    Charger {
        amps: figure(&text.amps, Origin::Stated, &path("amps")),
        holds,
        after,
        time,
        price: text.price.as_ref().map(|p| p.value),
    }
}
