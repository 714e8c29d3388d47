//! Where the values with a tolerance stand in an entry of `accessories:`.

use super::amount::Amount;
use super::law::Law;
use super::toleranced::{Walk, spread};
use super::walk::{Below, Ground, place};
use crate::description::{AccessoryText, DutyText, Written, path};
use crate::quantity::{Fraction, bounds};

/// Walks an entry. Several alike (`count:`) come from one batch: they lie off together.
pub(super) fn accessory(walk: &mut Walk, own: &mut AccessoryText, ground: &Ground, index: usize) {
    let (Some(below), Some(nominal)) = (
        ground.accessories.get(index),
        ground.nominal.accessories.get(index),
    ) else {
        return;
    };
    let (at, name) = (own.path.clone(), nominal.name.as_str());
    let of = |key, what| place(&at, key, what).of(name);
    let part = below.first(|t| t.draw.as_ref());
    walk.value(of("draw", "draw"), &mut own.draw, part, &());
    let part = below.first(|t| t.at.as_ref());
    let volts = of("at", "volts of the draw");
    walk.value(volts, &mut own.at, part, &bounds::STATED_AT);
    duty(walk, &mut own.duty, below, (&at, name));
    let part = below.first(|t| t.parked.as_ref());
    let parked = of("parked", "draw while parked");
    walk.value(parked, &mut own.parked, part, &bounds::PARKED_DRAW);
    let part = below.first(|t| t.coil.as_ref());
    let coil = of("coil", "coil inductance");
    walk.value(coil, &mut own.coil, part, &bounds::COIL);
}

fn duty(
    walk: &mut Walk,
    own: &mut Option<DutyText>,
    below: &Below<AccessoryText>,
    (at, name): (&str, &str),
) {
    match own {
        Some(DutyText::Everywhere(share)) => {
            walk.stated(place(at, "duty", "duty").of(name), share, &bounds::DUTY);
        }
        Some(DutyText::ByState { path, shares }) => {
            for (state, share) in shares {
                let of = format!("{name} at {}", state.value);
                let place = place(path, &state.value, "duty").of(&of);
                walk.stated(place, share, &bounds::DUTY);
            }
        }
        None => {
            if let Some(text) = below.first(|t| t.duty.as_ref()) {
                *own = duty_of_part(walk, text, (at, name));
            }
        }
    }
}

/// A part's duty with a tolerance is written beside `part:` whole.
fn duty_of_part(walk: &mut Walk, text: &DutyText, (at, name): (&str, &str)) -> Option<DutyText> {
    let whole = place(at, "duty", "duty").of(name);
    let at = path::key(at, "duty");
    match text {
        DutyText::Everywhere(share) => {
            let share = drawn(walk, share, whole)?;
            walk.put(|| format!("{at}={}", share.value.typed()));
            Some(DutyText::Everywhere(share))
        }
        DutyText::ByState { shares, .. } => {
            let mut shares = shares.clone();
            let mut any = false;
            for (state, share) in &mut shares {
                let of = format!("{name} at {}", state.value);
                let place = place(&at, &state.value, "duty").of(&of);
                if let Some(new) = drawn(walk, share, place) {
                    (*share, any) = (new, true);
                }
            }
            if !any {
                return None;
            }
            let each = |(state, share): &(Written<String>, Written<Fraction>)| {
                format!("\"{}\": {}", state.value, share.value.typed())
            };
            let all: Vec<String> = shares.iter().map(each).collect();
            walk.put(|| format!("{at}={{{}}}", all.join(", ")));
            Some(DutyText::ByState { path: at, shares })
        }
    }
}

fn drawn(
    walk: &mut Walk,
    share: &Written<Fraction>,
    place: super::toleranced::Place,
) -> Option<Written<Fraction>> {
    spread(share)?;
    let value = walk.one(place, share, Law::Normal, &bounds::DUTY, &Amount::typed)?;
    Some(Written::exact(value, share.path.clone()))
}
