//! The engine: its speeds and its starter.

use super::Fault;
use super::context::{Context, Layers, PRACTICE};
use crate::battery;
use crate::build::{Figure, Origin, Speed, Starter};
use crate::description::path::key;
use crate::description::{EngineText, StarterText};
use crate::quantity::{Amps, Hours, Ohms, format};

/// States that are no speeds.
pub(super) const RESERVED: [&str; 3] = ["crank", "stopped", "parked"];

/// Starts in a row that the battery holds in reserve. Common practice, no source.
const STARTS: u32 = 3;
/// Rest between them. Common practice, no source.
const REST: Hours = Hours::from_seconds(10.0);
/// Resistance of the starter's cables, there and back. Common practice, no source.
const CABLE: Ohms = Ohms(0.004);

/// Why the least volts at the starter are what they are: see [`battery::Starter::least_for`].
const LEAST_VOLTS_GROUND: &str = "own choice, just under what load tests ask";

/// The named speeds, in the order written.
pub(super) fn speeds(context: &mut Context, engine: &EngineText) -> Vec<Speed> {
    if engine.speeds.is_empty() {
        context.fault(
            "engine.speeds",
            Fault::Missing {
                keys: "a named speed",
            },
        );
    }
    for (name, rpm) in &engine.speeds {
        if RESERVED.contains(&name.as_str()) {
            context.fault(rpm.path.clone(), Fault::ReservedName { name: name.clone() });
        }
    }
    let speed = |(name, rpm): &(String, crate::description::Written<crate::quantity::Rpm>)| Speed {
        name: name.clone(),
        rpm: super::context::figure(rpm, Origin::Stated, &key("engine.speeds", name)),
    };
    engine.speeds.iter().map(speed).collect()
}

/// The starter, its open figures assumed.
pub(super) fn starter(
    context: &mut Context,
    layers: &Layers<StarterText>,
    cells: u32,
) -> Option<Starter> {
    if layers.broken {
        return None;
    }
    let path = |key: &str| format!("engine.starter.{key}");
    let draw: Option<Figure<Amps>> = layers.figure(&path("draw"), |s| s.draw.as_ref());
    let time: Option<Figure<Hours>> = layers.figure(&path("time"), |s| s.time.as_ref());
    if draw.is_none() {
        context.fault("engine.starter", Fault::Missing { keys: "`draw`" });
    }
    if time.is_none() {
        context.fault("engine.starter", Fault::Missing { keys: "`time`" });
    }
    let (draw, time) = (draw?, time?);
    let starts = layers.figure(&path("starts"), |s| s.starts.as_ref());
    let starts = context.figure_or(
        starts,
        path("starts"),
        STARTS,
        (
            "starts in a row held in reserve",
            STARTS.to_string(),
            PRACTICE,
        ),
    );
    let rest = layers.figure(&path("rest"), |s| s.rest.as_ref());
    let rest = context.figure_or(
        rest,
        path("rest"),
        REST,
        ("rest between starts", format::duration(REST), PRACTICE),
    );
    let cable = layers.figure(&path("cable"), |s| s.cable.as_ref());
    let cable = context.figure_or(
        cable,
        path("cable"),
        CABLE,
        (
            "resistance of the starter's cables",
            format::text(CABLE),
            PRACTICE,
        ),
    );
    let usual = battery::Starter::new(draw.value).least_for(cells);
    let least_volts = layers.figure(&path("least_volts"), |s| s.least_volts.as_ref());
    let least_volts = context.figure_or(
        least_volts,
        path("least_volts"),
        usual,
        (
            "least volts at the starter",
            format::text(usual),
            LEAST_VOLTS_GROUND,
        ),
    );
    Some(Starter {
        draw,
        time,
        starts,
        rest,
        cable,
        least_volts,
    })
}
