//! What the figures show beside the verdict.

use super::answer::{AccessoryRow, ByState, Finding, StateRow, Weight};
use super::first_shift::FirstShift;
use super::ruling::Ruling;
use super::{rundown, storage};
use crate::battery::{Charge, FREEZING_MARGIN};
use crate::build::{Accessory, Build, State};
use crate::circuit::{Extreme, lamp_findings, range_findings};
use crate::ledger::{Machine, connect};
use crate::quantity::format::{duration, percent, temperature, text};
use crate::quantity::{AmpHours, Amps, Days, Fraction, Hours, Volts};
use std::collections::BTreeMap;

/// Volts a cell above which a running battery is overcharged, and above which a regulator must
/// have failed; and below which it is not being charged. Common practice, no source.
const OVERCHARGE_CELL: f64 = 14.8 / 6.0;
const REGULATOR_FAULT_CELL: f64 = 15.5 / 6.0;
const NOT_CHARGING_CELL: f64 = 13.2 / 6.0;
/// Charge that a battery ought to pass now and then, or its plates sulphate. Common practice.
const SULPHATION: Fraction = Fraction(0.8);
/// Draw with the key off above which a fault is likely. Common practice.
const PARASITIC: Amps = Amps(0.05);
const PRACTICE: &str = "common practice, no source";

/// All a finding may look at.
pub struct Seen<'a> {
    /// The build.
    pub build: &'a Build,
    /// The build made ready.
    pub machine: &'a Machine,
    /// The ruling.
    pub ruling: &'a Ruling,
    /// The first shift.
    pub shift: &'a FirstShift,
    /// By state.
    pub states: &'a [StateRow],
    /// By accessory.
    pub accessories: &'a [AccessoryRow],
}

fn finding(what: &str, weight: Weight, text: String, source: &str) -> Finding {
    Finding {
        what: what.to_owned(),
        weight,
        text,
        source: source.to_owned(),
    }
}

/// The findings on the battery and its bus.
#[must_use]
pub fn findings(seen: &Seen<'_>) -> Vec<Finding> {
    let mut all = Vec::new();
    all.extend(overcharge(seen));
    all.extend(not_charging(seen));
    all.extend(accessories(seen));
    all.extend(cold_start(seen));
    all.extend(freezing(seen));
    all.extend(never_full(seen));
    all.extend(gassing(seen));
    all.extend(parasitic(seen));
    all.extend(put_away(seen));
    all.extend(stands(seen));
    all
}

/// The charge the engine is next started from: where it settles, or what the first shift and the
/// parking after it leave.
fn working_charge(seen: &Seen<'_>) -> Charge {
    let left = seen.shift.legs.last().map_or(Charge::FULL, |leg| leg.after);
    seen.ruling.settles.map_or(left, |(charge, _)| charge)
}

/// The highest bus volts of each running state: battery full, all that cycles switched off.
/// An unregulated winding is judged with its loads off, as well as on.
fn overcharge(seen: &Seen<'_>) -> Vec<Finding> {
    let cells = f64::from(seen.machine.cells);
    let unregulated = seen
        .build
        .sources
        .iter()
        .any(|s| s.circuit.is_none() && s.regulator.is_none() && !s.braking);
    let mut all = Vec::new();
    for wired in seen.machine.connected.iter().filter(|w| w.runs) {
        let name = seen.build.state_name(wired.state);
        let loaded = wired
            .bus
            .flow(&seen.machine.climate, Charge::FULL, seen.machine.cells);
        let (volts, surplus, how) = match unregulated.then(|| lightest(seen, wired.state)).flatten()
        {
            Some((volts, surplus, off)) if volts > loaded.bus => {
                (volts, surplus, format!("with {off} off"))
            }
            _ => (loaded.bus, loaded.battery, "with all its loads".to_owned()),
        };
        if volts.0 <= OVERCHARGE_CELL * cells {
            continue;
        }
        let fault = volts.0 > REGULATOR_FAULT_CELL * cells;
        let text = format!(
            "at {name} a full battery is driven to {} by a surplus of {}, {how}{}",
            text(volts),
            text(surplus),
            if unregulated {
                ": the winding is unregulated and matched to its loads; fit a regulator or keep them on"
            } else {
                ""
            }
        );
        let weight = if fault {
            Weight::Fault
        } else {
            Weight::Warning
        };
        all.push(finding("overcharge", weight, text, "over 14.8 V a 12 V battery gasses hard, over 15.5 V a regulator has failed: common practice, no source"));
    }
    all
}

/// Bus volts and surplus with all loads of a running state off, and what is off.
///
/// No load off alone, nor any few of them, lets the bus rise further: a load only ever draws. So
/// one operating point answers for every choice, however many loads there are.
fn lightest(seen: &Seen<'_>, state: State) -> Option<(Volts, Amps, String)> {
    let mut on = seen.build.accessories.iter().filter(|accessory| {
        accessory.circuit.is_none() && accessory.duty.share(state) > Fraction::ZERO
    });
    let off = match (on.next()?, on.next()) {
        (only, None) => only.name.clone(),
        _ => "all of them".to_owned(),
    };
    let bare = Build {
        accessories: Vec::new(),
        ..seen.build.clone()
    };
    let flow =
        connect(&bare, state, None).flow(&seen.machine.climate, Charge::FULL, seen.machine.cells);
    Some((flow.bus, flow.battery, off))
}

fn not_charging(seen: &Seen<'_>) -> Vec<Finding> {
    let least = Volts(NOT_CHARGING_CELL * f64::from(seen.machine.cells));
    seen.states
        .iter()
        .filter(|s| s.rpm.0 > 0.0 && s.bus_v < least && s.battery_a < Amps::ZERO)
        .map(|s| {
            let text = format!(
                "at {} the battery is not charged but pays {} (bus {})",
                s.state,
                text(-s.battery_a),
                text(s.bus_v)
            );
            finding("not charging", Weight::Note, text, PRACTICE)
        })
        .collect()
}

/// Lamps too dim or short-lived, accessories outside their volts. The lowest volts are those with
/// all on at once that may be.
fn accessories(seen: &Seen<'_>) -> Vec<Finding> {
    let mut all = Vec::new();
    let built = seen.build.accessories.iter().rev();
    let named: BTreeMap<&str, &Accessory> = built.map(|a| (a.name.as_str(), &**a)).collect();
    for row in seen.accessories {
        let Some(accessory) = named.get(row.name.as_str()) else {
            continue;
        };
        let worst = row.volts.0.iter().map(|(state, volts)| {
            let at_worst = seen
                .states
                .iter()
                .find(|s| s.state == *state)
                .map(|s| s.worst_bus_v);
            (
                state.clone(),
                at_worst.map_or(*volts, |worst| worst.min(*volts)),
            )
        });
        let worst = ByState(worst.collect());
        let lowest = Extreme {
            volts: &worst,
            when: "with everything on",
        };
        let highest = Extreme {
            volts: &row.volts,
            when: "",
        };
        all.extend(lamp_findings(seen.build, accessory, &row.volts));
        all.extend(range_findings(seen.build, accessory, lowest, highest));
    }
    all
}

fn cold_start(seen: &Seen<'_>) -> Option<Finding> {
    let starter = seen.build.starter.as_ref()?;
    let charge = Charge::rested(working_charge(seen).soc);
    let margin = seen
        .machine
        .battery
        .start_margin(charge, &starter.asks(), seen.build.air.value);
    let soc = percent(charge.soc);
    let air = temperature(seen.build.air.value);
    let source = "SAE J537 cranking rating scaled by the battery model; starter's rise in the cold from a printed table";
    let attempts = crate::quantity::format::count(starter.starts.value, "start", "starts");
    if margin.volts < Volts::ZERO {
        let text = format!(
            "{attempts} at {air} from {soc} leave the starter {} short of what it needs",
            text(-margin.volts)
        );
        return Some(finding("cold start", Weight::Fault, text, source));
    }
    let spare = margin
        .charge
        .map_or(String::new(), |ah| format!(" and {} of charge", text(ah)));
    let text = format!(
        "{attempts} at {air} from {soc} leave {} at the starter to spare{spare}",
        text(margin.volts)
    );
    Some(finding("cold start", Weight::Note, text, source))
}

fn freezing(seen: &Seen<'_>) -> Option<Finding> {
    let lowest = seen
        .ruling
        .settles
        .map_or(seen.shift.lowest, |(_, lowest)| lowest);
    let freezes = seen.machine.battery.freezing_point(lowest);
    (seen.build.air.value.0 < freezes.0 + FREEZING_MARGIN.0).then(|| {
        let text = format!(
            "at its lowest charge of {} the acid freezes at {}; the air is at {}",
            percent(lowest),
            temperature(freezes),
            temperature(seen.build.air.value)
        );
        finding(
            "freezing",
            Weight::Fault,
            text,
            "freezing points printed in a vehicle owner's manual, 5 K margin own choice",
        )
    })
}

fn never_full(seen: &Seen<'_>) -> Option<Finding> {
    let (charge, _) = seen.ruling.settles?;
    let highest = highest(seen, charge);
    (highest < SULPHATION).then(|| {
        let text = format!(
            "the battery never gets above {} in the settled shift: its plates sulphate; recharge it fully now and then",
            percent(highest)
        );
        finding("undercharge", Weight::Warning, text, PRACTICE)
    })
}

fn highest(seen: &Seen<'_>, charge: Charge) -> Fraction {
    let mut most = charge.soc;
    seen.machine.walk(charge, None, |_, _, stride| {
        most = most.max(stride.after.soc)
    });
    most
}

fn gassing(seen: &Seen<'_>) -> Option<Finding> {
    let charge = working_charge(seen);
    let limit = Volts(14.4 / 6.0 * f64::from(seen.machine.cells));
    let (mut gassed, mut high) = (AmpHours::ZERO, Hours::ZERO);
    seen.machine.walk(charge, None, |_, _, stride| {
        gassed += 0.5 * (stride.first.gas + stride.second.gas) * stride.time;
        if stride.first.bus >= limit {
            high += stride.time;
        }
    });
    let water = seen.machine.battery.water_lost(gassed);
    (gassed > AmpHours(0.005 * seen.machine.battery.c20().0)).then(|| {
        let text = format!(
            "{} gas off in a settled shift ({} of water); {} at or above the gassing voltage",
            text(gassed),
            text(water),
            duration(high)
        );
        finding(
            "gassing",
            Weight::Note,
            text,
            "Faraday's law; gassing current as Schiffer et al. 2007 (transcribed)",
        )
    })
}

fn parasitic(seen: &Seen<'_>) -> Option<Finding> {
    let draw: Amps = seen
        .build
        .accessories
        .iter()
        .map(|a| f64::from(a.count) * a.parked)
        .sum();
    (draw > PARASITIC).then(|| {
        finding(
            "key-off drain",
            Weight::Warning,
            format!(
                "{} are drawn with the key off: over {} look for a fault",
                text(draw),
                text(PARASITIC)
            ),
            PRACTICE,
        )
    })
}

/// What becomes of the battery when the machine is put away after its settled shift.
fn put_away(seen: &Seen<'_>) -> Option<Finding> {
    let storage = storage(seen.build, seen.machine, seen.ruling);
    let air = temperature(seen.build.air.value);
    let from = percent(storage.from_soc);
    let days = storage.days_to_reserve.filter(|days| *days > Days::ZERO)?;
    let recharge = storage
        .days_to_recharge
        .filter(|d| *d > Days::ZERO)
        .map_or(String::new(), |days| {
            format!("; recharge it after {}", text(days))
        });
    let text = format!(
        "put away at {air} with {from} it is at its reserve after {}{recharge}",
        text(days)
    );
    Some(finding(
        "storage",
        Weight::Note,
        text,
        "self-discharge of the battery model, practice 3 to 6 % a month at 25 °C: common practice, no source",
    ))
}

/// How long it stands with its key on, where the engine never runs.
fn stands(seen: &Seen<'_>) -> Option<Finding> {
    let start = Charge::rested(seen.build.start);
    let stands = rundown(seen.machine, start, seen.ruling.reserve.soc)?;
    let until =
        |time: Option<Hours>| time.map_or("never".to_owned(), |t| format!("after {}", duration(t)));
    let text = format!(
        "with the key on and the engine off the reserve is broken {}, and the battery is at {} {} ({} taken)",
        until(stands.hours_to_reserve),
        text(seen.machine.battery.end_of_discharge()),
        until(stands.hours_to_empty),
        text(stands.taken_ah)
    );
    Some(finding(
        "rundown",
        Weight::Note,
        text,
        "end of discharge 1.75 V a cell, as in SAE J537",
    ))
}
