//! Accessories outside the volts within which they work.

use super::lamps::finding;
use super::loads::is_coil;
use crate::build::{Accessory, Build, Draw};
use crate::check::answer::{ByState, Finding, Weight};
use crate::quantity::{Volts, format};

/// Volts a cell above which electronics that state no range are at risk: 16 V on 12 V.
const ELECTRONICS_HIGH_CELL: f64 = 16.0 / 6.0;
const ELECTRONICS_SOURCE: &str =
    "upper end of the supply ranges of ISO 16750-2, 16 V on 12 V (from memory)";
const DEFAULT_LOW_SOURCE: &str = "1.75 V a cell: common practice, no source";
const STATED_SOURCE: &str = "its stated working volts";

/// The lowest or highest volts at an accessory by state, and when it sees them.
#[derive(Clone, Copy, Debug)]
pub struct Extreme<'a> {
    /// Volts by state.
    pub volts: &'a ByState<Volts>,
    /// When, in words: `with everything on`; may be empty.
    pub when: &'a str,
}

/// Findings on an accessory's working range, from the lowest and the highest volts at it in each
/// state: `pull-in missed` for a coil and `drop-out` for another below its lower limit, `over its
/// range` above its upper one. Electronics that state no upper limit are held against 16 V on a 12 V
/// system. Give states in which the accessory is on.
#[must_use]
pub fn range_findings(
    build: &Build,
    accessory: &Accessory,
    lowest: Extreme<'_>,
    highest: Extreme<'_>,
) -> Vec<Finding> {
    let mut all = Vec::new();
    all.extend(below(accessory, lowest));
    all.extend(above(build, accessory, highest));
    all
}

fn below(accessory: &Accessory, seen: Extreme<'_>) -> Option<Finding> {
    let low = accessory.works.low?;
    let states = outside(seen.volts, |v| v < low);
    let places = places(&states, seen.when)?;
    let text = format!(
        "{} gets {places} and needs {}",
        accessory.name,
        format::text(low)
    );
    let what = if is_coil(accessory) {
        "pull-in missed"
    } else {
        "drop-out"
    };
    Some(if accessory.works.stated {
        finding(what, Weight::Fault, text, STATED_SOURCE)
    } else {
        finding(what, Weight::Warning, text, DEFAULT_LOW_SOURCE)
    })
}

fn above(build: &Build, accessory: &Accessory, seen: Extreme<'_>) -> Option<Finding> {
    let electronics = matches!(accessory.draw.value, Draw::Current(_) | Draw::Power(_));
    let usual = Volts(ELECTRONICS_HIGH_CELL * f64::from(build.cells()));
    let (high, source) = match accessory.works.high {
        Some(high) => (high, STATED_SOURCE),
        None if electronics => (usual, ELECTRONICS_SOURCE),
        None => return None,
    };
    let states = outside(seen.volts, |v| v > high);
    let places = places(&states, seen.when)?;
    let text = format!(
        "{} gets {places}, above {}",
        accessory.name,
        format::text(high)
    );
    let weight = if electronics && accessory.works.high.is_some() {
        Weight::Fault
    } else {
        Weight::Warning
    };
    Some(finding("over its range", weight, text, source))
}

fn outside(volts: &ByState<Volts>, test: impl Fn(Volts) -> bool) -> Vec<(&str, Volts)> {
    let all = volts.0.iter().map(|(name, v)| (name.as_str(), *v));
    all.filter(|(_, v)| test(*v)).collect()
}

/// `7.42 V at idle, 9.8 V at transport, with everything on`; none without a state.
fn places(states: &[(&str, Volts)], when: &str) -> Option<String> {
    let each: Vec<String> = states
        .iter()
        .map(|(name, v)| format!("{} at {name}", format::text(*v)))
        .collect();
    let when = if when.is_empty() {
        String::new()
    } else {
        format!(" {when}")
    };
    (!each.is_empty()).then(|| format!("{}{when}", each.join(", ")))
}
