//! Catalog parts that qualify: each put in place of what there is, and judged by the full verdict.

use super::knob::{Knob, top_speed};
use super::value::Rated;
use super::yardstick::Yardstick;
use crate::build::{Build, SourceKind};
use crate::catalog::{Entry, Kind};
use crate::description::{BatteryText, ChargingText, Description};
use crate::quantity::{Amps, Rpm};
use crate::remedy::{Asked, swap};

/// A catalog part fitted, and whether the build then keeps up.
pub(super) struct Fitted {
    /// Its id.
    pub(super) id: String,
    /// What it is, in words.
    pub(super) title: String,
    /// The build with it.
    pub(super) build: Build,
    /// Whether that keeps up.
    pub(super) keeps_up: bool,
}

/// Every catalog winding and alternator in place of a source, as far as it fits.
pub(super) fn windings(asked: &Asked<'_>, index: usize, yardstick: &Yardstick<'_>) -> Vec<Fitted> {
    let parts = asked.parts::<ChargingText>(Kind::Charging).into_iter();
    parts
        .filter_map(|part| {
            let swapped = swap::charging(asked.description, index, &part.entry.id)?;
            let build = asked.resolved(&swapped.description)?;
            let source = build.sources.get(index)?;
            let feeds = source.circuit.is_none() && !source.braking;
            feeds.then(|| fitted(&part.entry, &swapped.description, build, yardstick))
        })
        .collect()
}

/// Every catalog battery of as many cells in place of the battery.
pub(super) fn batteries(asked: &Asked<'_>, yardstick: &Yardstick<'_>) -> Vec<Fitted> {
    let parts = asked.parts::<BatteryText>(Kind::Battery).into_iter();
    parts
        .filter_map(|part| {
            let swapped = swap::battery(asked.description, &part.entry.id)?;
            let build = asked.resolved(&swapped.description)?;
            let same = build.cells() == asked.build.cells();
            same.then(|| fitted(&part.entry, &swapped.description, build, yardstick))
        })
        .collect()
}

fn fitted(
    entry: &Entry,
    description: &Description,
    build: Build,
    yardstick: &Yardstick<'_>,
) -> Fitted {
    Fitted {
        id: entry.id.clone(),
        title: entry.title.clone(),
        keeps_up: yardstick.fits(description, &build),
        build,
    }
}

/// The ids of those that keep up, in order of the size that a knob varies.
pub(super) fn in_order(fitted: &[Fitted], knob: &Knob) -> Vec<String> {
    let mut found: Vec<(f64, &str)> = fitted
        .iter()
        .filter(|f| f.keeps_up)
        .map(|f| (size(&f.build, knob), f.id.as_str()))
        .collect();
    found.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.cmp(b.1)));
    found.into_iter().map(|(_, id)| id.to_owned()).collect()
}

/// The size of what is fitted: rated amps, Ah, cold cranking amps.
pub(super) fn size(build: &Build, knob: &Knob) -> f64 {
    match knob {
        Knob::Winding(index) => rated(build, *index).0,
        _ => knob.now(build).unwrap_or(f64::NAN),
    }
}

/// Rated amps of a source: of a winding its rating, scale included; of an alternator what it gives at
/// the highest named speed.
pub(crate) fn rated(build: &Build, index: usize) -> Amps {
    match build.sources.get(index).map(|s| &s.kind) {
        Some(SourceKind::Winding(winding)) => Rated::of(build, winding).at(winding.scale.value),
        Some(SourceKind::Alternator(alternator)) => alternator.output(Rpm(top_speed(build))),
        None => Amps(f64::NAN),
    }
}
