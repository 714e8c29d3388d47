//! What may be changed: the build's `may:`, or without it all that the catalogs allow.

use super::Asked;
use super::change::{Change, What};
use super::prices::{CHARGER, Prices};
use crate::build::{Build, Draw, State};
use crate::catalog::{Entry, Kind};
use crate::description::{AccessoryText, BatteryText, ChargingText, DrawText, LawName, MayText};
use crate::quantity::format::text;
use crate::quantity::{Amps, Fraction, Money, Rpm};
use crate::size::{self, occurs, rated, windings};

/// How far a speed may rise without `may:`, times, if no faster one is named before.
const FASTER: f64 = 1.6;
/// How far a duty may fall where nothing else helps and `may:` says nothing.
const LESS: Fraction = Fraction(0.25);
/// Accessories whose duty may fall then.
const LESS_OF: usize = 3;
/// Shop charger that is offered: a small one. Common practice, no source.
const CHARGER_AMPS: Amps = Amps(4.0);
/// Lamps that are looked at one by one: those that take most.
const MOST_LAMPS: usize = 6;
/// Light of a lamp against that of the one it replaces: equal within what the eye can tell.
const EQUAL_LIGHT: Fraction = Fraction(0.9);
/// Light beyond which it is another kind of lamp.
const MOST_LIGHT: Fraction = Fraction(3.0);

/// Something that may be changed, with the ways in which it may.
#[derive(Clone, Debug)]
pub(super) struct Slot {
    pub(super) ways: Vec<Change>,
}

/// What is offered for a build, each thing with its ways. `duties` offers less duty as well, where
/// `may:` does not say.
pub(super) fn offers(asked: &Asked<'_>, prices: &Prices, duties: bool) -> Vec<Slot> {
    let may = asked.description.may.as_ref();
    let allowed = |of: fn(&MayText) -> bool| may.is_none_or(of);
    let mut slots = Vec::new();
    if allowed(|m| m.winding.as_ref().is_some_and(|w| w.value)) {
        let sources = windings(asked.build).map(|(index, _, _)| index);
        let all: Vec<usize> = sources.collect();
        slots.extend(
            all.into_iter()
                .map(|index| winding_slot(asked, prices, index)),
        );
    }
    if allowed(|m| m.battery.as_ref().is_some_and(|w| w.value)) {
        slots.push(battery_slot(asked, prices));
    }
    if allowed(|m| m.lamps.as_ref().is_some_and(|w| w.value)) {
        slots.extend(lamp_slots(asked, prices));
    }
    slots.extend(speed_slots(asked));
    let charger = allowed(|m| m.charger.as_ref().is_some_and(|w| w.value));
    if charger && asked.build.charger.is_none() && asked.build.parked.value.0 > 0.0 {
        slots.push(charger_slot(prices));
    }
    slots.extend(match may {
        Some(may) => stated_duties(asked.build, may),
        None if duties => usual_duties(asked.build),
        None => Vec::new(),
    });
    slots.retain(|slot| !slot.ways.is_empty());
    slots
}

/// How much a size differs from what there is.
fn apart(size: f64, now: f64) -> f64 {
    let ratio = size / now;
    if ratio.is_finite() && ratio > 0.0 {
        ratio.ln().abs()
    } else {
        1.0
    }
}

/// A catalog part in place of what there is, and the build with it; none where it does not fit.
fn fitted(
    asked: &Asked<'_>,
    entry: &Entry,
    cost: Option<Money>,
    what: What,
) -> Option<(Change, Build)> {
    let change = Change {
        words: entry.title.clone(),
        cost,
        much: 0.0,
        what,
    };
    let build = change.alone(asked)?;
    Some((change, build))
}

/// Another winding or alternator in place of one.
fn winding_slot(asked: &Asked<'_>, prices: &Prices, index: usize) -> Slot {
    let now = rated(asked.build, index);
    let has = asked.build.sources.get(index).and_then(|s| s.part.clone());
    let parts = asked.parts::<ChargingText>(Kind::Charging).into_iter();
    let ways = parts
        .filter(|part| has.as_ref() != Some(&part.entry.id))
        .filter_map(|part| {
            let price = prices.of(&part.entry.id, part.text.price.as_ref().map(|p| p.value));
            let id = part.entry.id.clone();
            let (change, build) = fitted(asked, &part.entry, price, What::Winding { index, id })?;
            let source = build.sources.get(index)?;
            let feeds = source.circuit.is_none() && !source.braking;
            let much = apart(rated(&build, index).0, now.0);
            feeds.then_some(Change { much, ..change })
        });
    Slot {
        ways: ways.collect(),
    }
}

/// Another battery of as many cells.
fn battery_slot(asked: &Asked<'_>, prices: &Prices) -> Slot {
    let Some(now) = &asked.build.battery else {
        return Slot { ways: Vec::new() };
    };
    let parts = asked.parts::<BatteryText>(Kind::Battery).into_iter();
    let ways = parts
        .filter(|part| now.part.as_ref() != Some(&part.entry.id))
        .filter_map(|part| {
            let price = prices.of(&part.entry.id, part.text.price.as_ref().map(|p| p.value));
            let id = part.entry.id.clone();
            let (change, build) = fitted(asked, &part.entry, price, What::Battery { id })?;
            let same = build.cells() == asked.build.cells();
            let capacity = build.battery?.label.capacity;
            let much = apart(capacity.0, now.label.capacity.0);
            same.then_some(Change { much, ..change })
        });
    Slot {
        ways: ways.collect(),
    }
}

/// LED lamps in place of filament lamps, one slot a lamp: the cheapest that is bright enough.
fn lamp_slots(asked: &Asked<'_>, prices: &Prices) -> Vec<Slot> {
    let build = asked.build;
    let parts = asked.parts::<AccessoryText>(Kind::Accessory);
    let lamps = size::largest(build).into_iter().map(|(index, _)| index);
    let lamps = lamps.filter(|i| {
        build
            .accessories
            .get(*i)
            .is_some_and(|a| size::light(a).is_some())
    });
    lamps
        .take(MOST_LAMPS)
        .filter_map(|index| {
            let lamp = build.accessories.get(index)?;
            let (light, power) = (size::light(lamp)?, filament_power(lamp.draw.value)?);
            let mut ways: Vec<Change> = parts
                .iter()
                .filter_map(|part| {
                    let lumens = part.text.lumens.as_ref()?.value;
                    let watts = led_watts(&part.text)?;
                    let bright = lumens >= Fraction(EQUAL_LIGHT.0 * light.0)
                        && lumens <= Fraction(MOST_LIGHT.0 * light.0);
                    let price =
                        prices.of(&part.entry.id, part.text.price.as_ref().map(|p| p.value));
                    let change = Change {
                        words: format!("{} as {}", lamp.name, part.entry.title),
                        cost: price.map(|p| Money(p.0 * f64::from(lamp.count))),
                        much: apart(watts, power),
                        what: What::Lamp {
                            index,
                            id: part.entry.id.clone(),
                        },
                    };
                    let fits = bright && watts < power && change.alone(asked).is_some();
                    fits.then_some(change)
                })
                .collect();
            ways.sort_by(|a, b| {
                super::change::Effort::of([a]).cmp(&super::change::Effort::of([b]))
            });
            ways.truncate(1);
            (!ways.is_empty()).then_some(Slot { ways })
        })
        .collect()
}

fn filament_power(draw: Draw) -> Option<f64> {
    match draw {
        Draw::Filament { power, .. } => Some(power.0),
        _ => None,
    }
}

/// Watts of a catalog lamp that draws a constant power.
fn led_watts(text: &AccessoryText) -> Option<f64> {
    let law = text.law.as_ref().map(|l| l.value);
    match text.draw.as_ref()?.value {
        DrawText::Power(watts) if law.is_none_or(|l| l == LawName::Power) => Some(watts.0),
        _ => None,
    }
}

/// Speeds raised, one slot a speed.
fn speed_slots(asked: &Asked<'_>) -> Vec<Slot> {
    let build = asked.build;
    let stated = asked.description.may.as_ref();
    let speeds = build.speeds.iter().enumerate();
    let slots = speeds.filter_map(|(index, speed)| {
        let now = speed.rpm.value;
        let most = match stated {
            Some(may) => {
                let named = may.speeds.iter().find(|(name, _)| *name == speed.name);
                named.map(|(_, rpm)| rpm.value)?
            }
            None => {
                let all = build.speeds.iter().map(|s| s.rpm.value);
                let faster = all.filter(|rpm| *rpm > now);
                // The highest is the governor's and stays.
                faster.reduce(Rpm::min)?.min(now * FASTER)
            }
        };
        let used = occurs(build, State::Running(index)) && most > now;
        used.then(|| Slot {
            ways: vec![Change {
                words: format!("{} at {} instead of {}", speed.name, text(most), text(now)),
                cost: Some(Money::ZERO),
                much: apart(most.0, now.0),
                what: What::Speed { index, to: most },
            }],
        })
    });
    slots.collect()
}

/// A shop charger while parked.
fn charger_slot(prices: &Prices) -> Slot {
    Slot {
        ways: vec![Change {
            words: format!("a shop charger of {} while parked", text(CHARGER_AMPS)),
            cost: prices.of(CHARGER, None),
            much: 1.0,
            what: What::Charger { amps: CHARGER_AMPS },
        }],
    }
}

/// Duties that `may:` lets fall.
fn stated_duties(build: &Build, may: &MayText) -> Vec<Slot> {
    let named = may.duty.iter().filter_map(|(name, least)| {
        let index = build.accessories.iter().position(|a| a.name == *name)?;
        duty_slot(build, index, least.value)
    });
    named.collect()
}

/// Duties of the largest loads, down to a quarter.
fn usual_duties(build: &Build) -> Vec<Slot> {
    let large = size::largest(build).into_iter().take(LESS_OF);
    large
        .filter_map(|(index, _)| duty_slot(build, index, LESS))
        .collect()
}

/// One accessory's duty, nowhere above `to`.
fn duty_slot(build: &Build, index: usize, to: Fraction) -> Option<Slot> {
    let accessory = build.accessories.get(index)?;
    let most = accessory.duty.most();
    (most > to).then(|| Slot {
        ways: vec![Change {
            words: format!("{} on {} of the time at most", accessory.name, text(to)),
            cost: Some(Money::ZERO),
            much: apart(to.0.max(1e-3), most.0),
            what: What::Duty { index, to },
        }],
    })
}
