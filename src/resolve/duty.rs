//! When an accessory is on.

use super::Fault;
use super::context::{Context, Layers, by_rule};
use super::shift::{state, state_names};
use crate::build::{Duty, Figure, Origin, Speed, State};
use crate::description::accessory::DutyText;
use crate::description::path::key;
use crate::description::{AccessoryText, Written};
use crate::quantity::Fraction;

/// The duty of an entry. Left out, it is on whenever the engine runs.
pub(super) fn duty(
    context: &mut Context,
    layers: &Layers<AccessoryText>,
    (path, name): (&str, &str),
    speeds: &[Speed],
) -> Duty {
    let path = format!("{path}.duty");
    match layers.get(|t| t.duty.as_ref()) {
        Some((DutyText::Everywhere(share), origin)) => everywhere(
            speeds,
            super::context::figure(share, origin.clone(), &path),
            &path,
        ),
        Some((DutyText::ByState { shares, .. }, origin)) => {
            let origin = origin.clone();
            by_state(context, shares, &origin, &path, speeds)
        }
        None => {
            let origin = "on whenever the engine runs, the safe side";
            context.assume_for("duty in every running state", "100 %", origin, name);
            let assumed = Figure {
                origin: Origin::Assumed(origin.to_owned()),
                ..by_rule(Fraction::ONE, path.clone())
            };
            everywhere(speeds, assumed, &path)
        }
    }
}

/// One share for every running state.
fn everywhere(speeds: &[Speed], share: Figure<Fraction>, path: &str) -> Duty {
    Duty {
        running: vec![share; speeds.len()],
        stopped: by_rule(Fraction::ZERO, format!("{path}.stopped")),
        crank: by_rule(Fraction::ZERO, format!("{path}.crank")),
    }
}

/// A share for each state named, none for the others.
fn by_state(
    context: &mut Context,
    shares: &[(Written<String>, Written<Fraction>)],
    origin: &Origin,
    path: &str,
    speeds: &[Speed],
) -> Duty {
    let none = |name: &str| by_rule(Fraction::ZERO, key(path, name));
    let mut duty = Duty {
        running: speeds.iter().map(|s| none(&s.name)).collect(),
        stopped: none("stopped"),
        crank: none("crank"),
    };
    for (name, share) in shares {
        let found = state(speeds, &name.value);
        let place = match found {
            Some(State::Running(speed)) => duty.running.get_mut(speed),
            Some(State::Stopped) => Some(&mut duty.stopped),
            Some(State::Crank) => Some(&mut duty.crank),
            Some(State::Parked) | None => None,
        };
        match place {
            Some(place) => {
                *place = super::context::figure(share, origin.clone(), &key(path, &name.value));
            }
            None => context.fault(
                name.path.clone(),
                Fault::UnknownName {
                    what: "state",
                    name: name.value.clone(),
                    known: state_names(speeds),
                },
            ),
        }
    }
    duty
}
