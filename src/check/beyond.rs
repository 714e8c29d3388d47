//! Where no charging can help: the battery that would do.

use super::answer::Verdict;
use super::ruling::{Ruling, reserve};
use crate::battery::Charge;
use crate::build::Build;
use crate::ledger::Machine;
use crate::outlook::Lacking;
use crate::quantity::format::text;
use crate::quantity::{AmpHours, Amps};

/// Most times the present battery that is looked at.
const MOST: f64 = 12.0;
/// Width, as a share, to which the battery is found.
const WIDTH: f64 = 0.01;

/// Says that no charging while the engine runs can help, and which battery would do with enough
/// of it: the present one made larger, capacity and cold cranking amps alike. None where charging
/// can help.
#[must_use]
pub fn battery_that_would_do(build: &Build, ruling: &Ruling) -> Option<String> {
    if ruling.verdict == Verdict::KeepsUp || ruling.lacks.is_some() {
        return None;
    }
    let cause = if ruling.reserve.soc.0 > 1.0 {
        "The battery is too weak for a start at this temperature"
    } else {
        "The time without charging alone empties the battery"
    };
    let Some(times) = least_times(build) else {
        return Some(format!(
            "{cause}: no charging can help, nor a battery {MOST:.0} times as large."
        ));
    };
    let label = build.battery.as_ref()?.label;
    let capacity = text(AmpHours((label.capacity.0 * times).ceil()));
    let cranking = label.cold_cranking.map_or(String::new(), |amps| {
        format!(
            " and {} cold cranking",
            text(Amps((amps.0 * times / 10.0).ceil() * 10.0))
        )
    });
    Some(format!(
        "{cause}: no charging can help. With enough charging, a battery of {capacity}{cranking} would do."
    ))
}

fn least_times(build: &Build) -> Option<f64> {
    let (mut low, mut high) = (1.0, 1.0);
    while !could_do(build, high) {
        if high >= MOST {
            return None;
        }
        (low, high) = (high, (high * 1.5).min(MOST));
    }
    while high - low > WIDTH * low {
        let middle = 0.5 * (low + high);
        if could_do(build, middle) {
            high = middle
        } else {
            low = middle
        }
    }
    Some(high)
}

/// Whether some charging would do with the battery this many times as large.
fn could_do(build: &Build, times: f64) -> bool {
    let mut larger = build.clone();
    if let Some(battery) = &mut larger.battery {
        battery.label.capacity = times * battery.label.capacity;
        battery.label.cold_cranking = battery.label.cold_cranking.map(|amps| times * amps);
        battery.label.reserve_capacity = battery.label.reserve_capacity.map(|time| times * time);
        battery.label.resistance = battery.label.resistance.map(|ohms| ohms / times);
    }
    Machine::new(&larger).is_some_and(|machine| {
        let kept = reserve(&larger, &machine).soc;
        kept.0 <= 1.0
            && (machine.outlook(Charge::FULL, kept).keeps_up()
                || matches!(machine.lacking(Charge::FULL, kept), Lacking::Charge { .. }))
    })
}
