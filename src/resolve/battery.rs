//! The battery: its label completed.

use super::Fault;
use super::context::{Context, Layers, PRACTICE, by_rule};
use crate::battery::{Battery, Chemistry, Label, Note};
use crate::build::{BatterySpec, Figure, Origin};
use crate::description::BatteryText;
use crate::quantity::{AmpHours, Amps, Fraction, Hours, format};

/// Charge never to go below where no starter asks for any. Common practice, no source.
const RESERVE: Fraction = Fraction(0.5);
/// Cells of a 12 V battery.
pub(super) const CELLS: u32 = 6;

/// The battery of a build; none where a fault leaves nothing to go by.
pub(super) fn battery(
    context: &mut Context,
    layers: &Layers<BatteryText>,
    has_starter: bool,
) -> Option<BatterySpec> {
    if layers.broken {
        return None;
    }
    let path = |key: &str| format!("battery.{key}");
    let (chemistry, cells) = make(context, layers);
    let reserve_capacity = reserve_capacity(layers);
    let cold_cranking = layers.figure(&path("cold_cranking"), |b| b.cold_cranking.as_ref());
    let capacity = capacity(
        context,
        layers,
        chemistry,
        reserve_capacity,
        cold_cranking.as_ref(),
    )?;
    let label = Label {
        cells,
        reserve_capacity,
        cold_cranking: cold_cranking.as_ref().map(|c| c.value),
        resistance: layers.value(|b| b.resistance.as_ref()),
        rest_full: layers.value(|b| b.rest_full.as_ref()),
        rest_empty: layers.value(|b| b.rest_empty.as_ref()),
        gassing: layers
            .value(|b| b.gassing.as_ref())
            .unwrap_or(Fraction::ONE),
        health: layers.value(|b| b.health.as_ref()).unwrap_or(Fraction::ONE),
        ..Label::new(chemistry, capacity.value)
    };
    tell_notes(context, &label);
    let reserve = reserve(context, layers, has_starter);
    Some(BatterySpec {
        label,
        capacity,
        cold_cranking,
        reserve,
        price: layers.value(|b| b.price.as_ref()),
        part: layers.part(),
    })
}

/// Type and cells, assumed where open.
fn make(context: &mut Context, layers: &Layers<BatteryText>) -> (Chemistry, u32) {
    let chemistry = layers.value(|b| b.chemistry.as_ref());
    let chemistry = chemistry.unwrap_or_else(|| {
        context.assume("type of battery", "flooded", PRACTICE);
        Chemistry::Flooded
    });
    let cells = layers.value(|b| b.cells.as_ref()).unwrap_or_else(|| {
        let origin = "a 12 V battery, the usual one";
        context.assume("cells of the battery", CELLS.to_string(), origin);
        CELLS
    });
    (chemistry, cells)
}

/// Charge never to go below: stated, or without a starter assumed; else the next start sets it.
fn reserve(
    context: &mut Context,
    layers: &Layers<BatteryText>,
    has_starter: bool,
) -> Option<Figure<Fraction>> {
    let path = "battery.reserve";
    let stated = layers.figure(path, |b| b.reserve.as_ref());
    if stated.is_some() || has_starter {
        return stated;
    }
    let words = ("charge never to go below", format::text(RESERVE), PRACTICE);
    Some(context.figure_or(None, path.to_owned(), RESERVE, words))
}

/// Reserve minutes. A capacity beside `part:` displaces the minutes of the part, which belong to another size.
fn reserve_capacity(layers: &Layers<BatteryText>) -> Option<Hours> {
    if layers.own.capacity.is_some() {
        return layers.own.reserve_capacity.as_ref().map(|w| w.value);
    }
    layers.value(|b| b.reserve_capacity.as_ref())
}

/// The 20-hour capacity: stated, of the part, or from what else the label says.
fn capacity(
    context: &mut Context,
    layers: &Layers<BatteryText>,
    chemistry: Chemistry,
    reserve: Option<Hours>,
    cranking: Option<&Figure<Amps>>,
) -> Option<Figure<AmpHours>> {
    let path = "battery.capacity".to_owned();
    if layers.own.capacity.is_none() && layers.own.reserve_capacity.is_some() {
        // Minutes beside `part:` displace its ampere-hours in the same way.
    } else if let Some(found) = layers.figure(&path, |b| b.capacity.as_ref()) {
        return Some(found);
    }
    let (capacity, origin) = match (reserve, cranking) {
        (Some(minutes), _) => {
            let amps = Label::new(chemistry, AmpHours::ZERO).reserve_amps;
            let origin = "from the reserve capacity, by the usual Peukert exponent of its type";
            (chemistry.capacity_from_reserve(minutes, amps), origin)
        }
        (None, Some(amps)) => {
            let origin = "from the cold cranking amps, by the usual ratio of its type";
            (chemistry.capacity_from_cranking(amps.value), origin)
        }
        (None, None) => {
            let keys = "`capacity`, `reserve_capacity` or `cold_cranking`";
            context.fault("battery", Fault::Missing { keys });
            return None;
        }
    };
    context.assume(
        "20-hour capacity of the battery",
        format::text(capacity),
        origin,
    );
    Some(Figure {
        origin: Origin::Assumed(origin.to_owned()),
        ..by_rule(capacity, path)
    })
}

/// What the battery's equations assumed of the label is assumed; what they mended is noted.
fn tell_notes(context: &mut Context, label: &Label) {
    for note in Battery::from_label(label).notes() {
        match note {
            Note::ReserveAssumed { exponent } => {
                context.assume(
                    "Peukert exponent of the battery",
                    format!("{}", exponent.0),
                    PRACTICE,
                );
            }
            Note::CrankingAssumed { amps } => {
                context.assume("cold cranking amps", format::text(*amps), PRACTICE);
            }
            other => context.notes.push(other.to_string()),
        }
    }
}
