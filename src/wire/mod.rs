//! Wire, fuse and relay for what is added.
//!
//! Each accessory with a `run:`, and each `feed:` shared by several, gets the thinnest wire and the
//! smallest fuse that hold three constraints: the fuse carries the load at four fifths of its
//! rating, it is not above what the wire may carry where it lies, and no more volts are lost, hot,
//! than allowed. What is lost goes back into the volts at each accessory and into the charge.
//!
//! ```text
//! Build ──demands──▶ worst amps by wire ──choose(tables)──▶ wire, fuse ──▶ relay, volts, list to buy
//! ```

mod ampacity;
mod answer;
mod arrives;
pub mod cautions;
mod conductor;
mod demand;
mod fuse;
mod list;
mod notes;
mod reasons;
mod relay;
mod remedy;
mod series;
mod size;
mod surge;
mod tables;
mod volts;

pub use ampacity::{Ampacity, ENGINE_SPACE_AIR, Laid, Place, TABLE_AIR, hotter};
pub use answer::{
    Arrives, Buy, BuyFuse, BuyRelay, BuyWire, Effect, NotSized, PullIn, SourceRow, SurgeRow,
    SwitchRow, Unmet, Wire, Wires,
};
pub use conductor::{Conductor, Conductors, Gauge, Least};
pub use fuse::{Fuse, Fuses, PASSES};
pub use list::buy;
pub use relay::{Relay, Relays};
pub use series::{in_series, series_resistance};
pub use surge::Surge;
pub use tables::{Ground, Tables};
pub use volts::{PLANNING_CELL, Seen};

use crate::build::Build;
use crate::quantity::{Fraction, Volts};
use demand::{Demand, Member};
use size::{Choice, choose};

/// Version of the answer's names.
const FORMAT: u32 = 1;

/// What is asked of the choice.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Options {
    /// In which sizes the wire is bought.
    pub gauge: Gauge,
}

/// Wire, fuse and relay for everything in a build that has a `run:`, from the tables the program
/// carries. Never fails: what no standard pair can do is told in [`Wires::unmet`].
#[must_use]
pub fn wires(build: &Build, options: &Options) -> Wires {
    wires_from(build, options, &Tables::builtin())
}

/// The same from tables given.
#[must_use]
pub fn wires_from(build: &Build, options: &Options, tables: &Tables) -> Wires {
    let (demands, without) = demand::demands(build);
    let mut grounds = Vec::new();
    let (mut wires, mut unmet) = (Vec::new(), Vec::new());
    for demand in &demands {
        let laid = Laid {
            insulation: demand.insulation,
            engine_space: demand.engine_space,
            air: build.air.value,
            bundle: demand.bundle,
        };
        match choose(tables, options.gauge, demand, &laid) {
            Ok(choice) => {
                grounds.extend(notes::grounds(tables, &choice));
                wires.push(wire(build, options, tables, demand, &choice, &mut grounds));
            }
            Err(why) => unmet.push(remedy::unmet(tables, options.gauge, demand, &laid, &why)),
        }
    }
    let mut answer = Wires {
        format: FORMAT,
        build: build.name.clone(),
        gauge: options.gauge,
        system_v: PLANNING_CELL * f64::from(build.cells()),
        buy: buy(&wires),
        notes: notes::notes(build, &demands, &grounds),
        cautions: cautions::cautions(build, &demands, &wires),
        sources: notes::sources(&grounds),
        wires,
        unmet,
        not_sized: without
            .into_iter()
            .map(|u| NotSized {
                name: u.name,
                why: u.why,
            })
            .collect(),
        effect: None,
        assumed: build.wiring_assumed.clone(),
    };
    answer.effect = series::effect(build, &answer);
    answer
}

/// One choice as a row of the answer.
fn wire(
    build: &Build,
    options: &Options,
    tables: &Tables,
    demand: &Demand,
    choice: &Choice,
    grounds: &mut Vec<Ground>,
) -> Wire {
    let (settled, fused, place) = (&choice.settled, &choice.fused, &choice.place);
    let switches: Vec<SwitchRow> = demand
        .members
        .iter()
        .filter_map(|member| switch(tables, demand.system, member, settled.lost, grounds))
        .collect();
    let loading = tables
        .fuses
        .loading()
        .map_or(Fraction::ONE, |(share, _)| share);
    let name_of = |state| build.state_name(state).to_owned();
    let gauge_beside = || tables.conductors.gauge_not_thinner(settled.wire.section);
    Wire {
        name: demand.name.clone(),
        accessories: demand.members.iter().map(|m| m.name.clone()).collect(),
        amps: settled.amps,
        worst_state: settled.state.map_or_else(String::new, name_of),
        run_m: demand.run,
        return_wire: demand.return_wire,
        length_m: demand.length(),
        section_mm2: settled.wire.section,
        gauge_awg: settled.wire.gauge.clone().or_else(gauge_beside),
        ampacity_a: settled.allows,
        table_a: settled.table,
        derating: place.share(),
        insulation_c: place.class,
        ambient_c: place.ambient,
        copper_c: settled.copper,
        overload_c: reasons::overloaded(choice),
        resistance_ohm: settled.resistance,
        drop_v: settled.lost,
        drop_fraction: Fraction(settled.lost / demand.system),
        max_drop: demand.max_drop,
        fuse_a: fused.fuse.rating,
        fuse_kind: fused.fuse.kind.clone(),
        fuse_colour: fused.fuse.colour.clone(),
        surge: fused.held.as_ref().map(size::Held::row),
        relay: switches.iter().any(|s| s.relay),
        binds: reasons::binds(choice, tables, options.gauge),
        reasons: reasons::reasons(build, demand, choice, &switches, loading),
        arrives: arrives::arrives(build, demand, settled),
        switches,
    }
}

/// The switch of one accessory.
fn switch(
    tables: &Tables,
    system: Volts,
    member: &Member,
    lost: Volts,
    grounds: &mut Vec<Ground>,
) -> Option<SwitchRow> {
    let (_, amps) = member.worst(lost);
    let (needs, factor, ground) = tables.relays.switch_needs(member.kind, amps, system)?;
    grounds.push(ground);
    let needed = needs > member.switch;
    let relay = needed.then(|| tables.relays.for_load(amps)).flatten();
    grounds.extend(relay.iter().flat_map(|r| r.grounds.clone()));
    Some(SwitchRow {
        accessory: member.name.clone(),
        amps,
        factor,
        needs_a: needs,
        switch_a: member.switch,
        relay: needed,
        relay_a: relay.as_ref().map(|r| r.contacts),
        relay_carries_a: relay.map(|r| r.carries),
    })
}
