//! The engine: its speeds and its starter.

use super::Fault;
use super::context::{Context, Layers, PRACTICE};
use crate::battery;
use crate::build::{Figure, Origin, Speed, Starter};
use crate::description::path::key;
use crate::description::{EngineText, StarterText, Written};
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
    let speed = |(name, rpm): &(String, Written<crate::quantity::Rpm>)| Speed {
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
    let mut open = Open { context, layers };
    let starts = (
        "starts in a row held in reserve",
        STARTS.to_string(),
        PRACTICE,
    );
    let rest = ("rest between starts", format::duration(REST), PRACTICE);
    let cable = (
        "resistance of the starter's cables",
        format::text(CABLE),
        PRACTICE,
    );
    let least = battery::Starter::new(draw.value).least_for(cells);
    let least_volts = (
        "least volts at the starter",
        format::text(least),
        LEAST_VOLTS_GROUND,
    );
    Some(Starter {
        starts: open.figure("starts", |s| s.starts.as_ref(), STARTS, starts),
        rest: open.figure("rest", |s| s.rest.as_ref(), REST, rest),
        cable: open.figure("cable", |s| s.cable.as_ref(), CABLE, cable),
        least_volts: open.figure(
            "least_volts",
            |s| s.least_volts.as_ref(),
            least,
            least_volts,
        ),
        draw,
        time,
    })
}
/// The starter's figures that may stay open.
struct Open<'c, 'a, 'l> {
    context: &'c mut Context<'a>,
    layers: &'c Layers<'l, StarterText>,
}

impl Open<'_, '_, '_> {
    /// A figure as written or as a part has it, else assumed: what it is, its value in words, the ground.
    fn figure<V: Copy>(
        &mut self,
        key: &str,
        of: impl Fn(&StarterText) -> Option<&Written<V>>,
        usual: V,
        words: (&str, String, &str),
    ) -> Figure<V> {
        let path = format!("engine.starter.{key}");
        let found = self.layers.figure(&path, of);
        self.context.figure_or(found, path, usual, words)
    }
}
