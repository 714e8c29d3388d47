//! From what the user wrote to a complete build: stated over catalog over assumed.
//!
//! Every figure of a [`Build`] has its origin and the path by which `--set` changes it, whether or not it is written
//! there. What was neither stated nor in a catalog is assumed here, and nowhere later, and listed in
//! [`Build::assumed`] with its ground. Names are turned into places, and what must not be connected is refused, with
//! the path at which it stands.

mod accessories;
mod alternator;
mod battery;
mod charging;
mod context;
mod draw;
mod duty;
mod engine;
mod fault;
mod groups;
mod kit;
mod parts;
mod readings;
mod shift;
mod winding;
mod wiring;

pub use fault::Fault;
pub use kit::{Kit, KitError, find_kit, misfit, with_kit};

use crate::build::{BatterySpec, Build, Figure, Origin, Source};
use crate::catalog::Catalogs;
use crate::description::{BatteryText, Description};
use crate::problem::{Problem, Problems};
use crate::quantity::{Celsius, Fraction, format};
use accessories::{Circuit, Surroundings};
use charging::Place;
use context::{Context, Layers, PRACTICE, figure};
use std::sync::Arc;

/// Air temperature where none is stated. Common practice, no source.
const AIR: Celsius = Celsius(20.0);

/// The complete build of a description.
///
/// # Errors
/// Every [`Fault`] found, as problems at the path where each stands: parts that are in no catalog, names that lead
/// nowhere, figures of a winding that contradict each other, connections that must not be.
pub fn resolve(description: &Description, catalogs: &Catalogs) -> Result<Build, Problems> {
    let mut context = Context::new(catalogs);
    let build = build(&mut context, description);
    match build {
        Some(build) if context.faults.is_empty() => Ok(build),
        _ => Err(problems(context.faults)),
    }
}

/// What is wrong besides with a file that did not read whole: parts that are in no catalog or do not read.
/// Other faults would only follow from what is missing in it.
#[must_use]
pub fn more_problems(partial: &Description, catalogs: &Catalogs) -> Problems {
    let mut context = Context::new(catalogs);
    if let Some(starter) = &partial.engine.starter {
        parts::layers(&mut context, starter, "engine.starter");
    }
    for charging in &partial.charging {
        parts::layers(&mut context, charging, &charging.path);
    }
    if let Some(battery) = &partial.battery {
        parts::layers(&mut context, battery, "battery");
    }
    parts::of_each(&mut context, &partial.accessories);
    problems(context.faults)
}

fn problems(faults: Vec<(String, Fault)>) -> Problems {
    let mut problems = Problems::default();
    for (path, fault) in faults {
        // a state is named by a key
        problems.push(match fault {
            Fault::UnknownName { what: "state", .. } => Problem::key(path, fault),
            _ => Problem::value(path, fault),
        });
    }
    problems
}

/// The build, or none where a fault leaves nothing to go by; the faults are in the context.
fn build(context: &mut Context, description: &Description) -> Option<Build> {
    let air = air(context, description);
    let speeds = engine::speeds(context, &description.engine);
    let starter = description.engine.starter.as_ref();
    let starter = starter.map(|s| parts::layers(context, s, "engine.starter"));
    let has_starter = starter.is_some();
    let battery = description.battery.as_ref();
    let battery = battery.map(|b| parts::layers(context, b, "battery"));
    let cells = cells(battery.as_ref());
    let starter = starter.and_then(|s| engine::starter(context, &s, cells));
    let (sources, circuits) = sources(context, description, cells);
    let battery: Option<Option<BatterySpec>> = match &battery {
        Some(layers) => battery::battery(context, layers, has_starter).map(Some),
        None => Some(None),
    };
    let around = Surroundings {
        speeds: &speeds,
        circuits: &circuits,
        cells,
        has_battery: description.battery.is_some(),
        wiring: wiring::usual(context, &description.wiring),
    };
    let accessories = accessories::accessories(context, &description.accessories, &around);
    let shift = shift::steps(context, description, &speeds, starter.as_ref());
    let parked = shift::parked(context, description);
    let charger = description.charger.as_ref();
    let charger = charger.map(|c| shift::charger(context, c, cells, &parked));
    Some(Build {
        name: description.build.value.clone(),
        air,
        speeds,
        starter,
        sources: sources?,
        battery: battery?,
        accessories: accessories?.into_iter().map(Arc::new).collect(),
        shift,
        parked,
        start: Fraction::ONE,
        days: shift::days(description),
        charger,
        assumed: std::mem::take(&mut context.assumed),
        wiring_assumed: std::mem::take(&mut context.wiring_assumed),
        notes: std::mem::take(&mut context.notes),
        currency: String::new(),
    })
}

fn air(context: &mut Context, description: &Description) -> Figure<Celsius> {
    let air = description.air.as_ref();
    let air = air.map(|a| figure(a, Origin::Stated, "air"));
    let words = ("air temperature", format::temperature(AIR), PRACTICE);
    context.figure_or(air, "air".to_owned(), AIR, words)
}

/// Cells in series of the system: the battery's, or six.
fn cells(battery: Option<&Layers<BatteryText>>) -> u32 {
    battery
        .and_then(|b| b.value(|t| t.cells.as_ref()))
        .unwrap_or(battery::CELLS)
}

/// The sources, none where a fault leaves nothing to go by, and the circuits of their own that they feed.
fn sources(
    context: &mut Context,
    description: &Description,
    cells: u32,
) -> (Option<Vec<Source>>, Vec<Circuit>) {
    let layers: Vec<_> = description
        .charging
        .iter()
        .map(|c| parts::layers(context, c, &c.path))
        .collect();
    let names = charging::names(&layers);
    let mut sources = Vec::with_capacity(layers.len());
    let mut circuits: Vec<Circuit> = Vec::new();
    for (layers, name) in layers.iter().zip(&names) {
        let path = layers.own.path.as_str();
        if let Some(circuit) = charging::circuit(layers, name) {
            if !circuit.braking && circuits.iter().any(|c| c.name == circuit.name) {
                let fault = Fault::CircuitTwice {
                    circuit: circuit.name.clone(),
                };
                context.fault(format!("{path}.winding.feeds"), fault);
            }
            circuits.push(circuit);
        }
        let has_battery = description.battery.is_some();
        let place = Place {
            path,
            name,
            cells,
            has_battery,
        };
        sources.push(charging::source(context, layers, place));
    }
    context.tell_groups(sources.len());
    (sources.into_iter().collect(), circuits)
}

impl Build {
    /// The same build, its first shift beginning at a state of charge (`--start`).
    #[must_use]
    pub fn starting_at(mut self, charge: Fraction) -> Build {
        self.start = charge.clamp(Fraction::ZERO, Fraction::ONE);
        self
    }
}
