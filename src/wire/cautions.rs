//! Cautions of an answer on wires.

use super::answer::{Arrives, Wire};
use super::demand::Demand;
use crate::build::Build;
use crate::description::accessory::LoadKind;
use crate::quantity::format;

/// Where a fuse goes.
pub const FIT_FUSES: &str = "Fit each fuse where its wire takes its supply; if that cannot be, within 7 in (18 cm) of it, or within 40 in (1 m) where the wire is sheathed all the way (33 CFR 183.455(b), boat law).";
/// On measuring.
pub const MEASURE: &str = "Measure the current and the volts at each accessory before you rely on these figures: they are for planning.";
/// On whose rules come first.
pub const RULES: &str = "Rules for the machine, the workplace and the road come first; where they ask for a qualified person, use one.";
/// On clutch coils.
pub const CLUTCH: &str = "Put nothing else, no diode and no second load, on a clutch coil's circuit unless the machine's maker allows it: it can change how fast the blades stop.";

/// For any added wire.
const ALWAYS: [&str; 7] = [
    FIT_FUSES,
    "The fuse is there for the wire. One that blows is no reason for a larger one: find the fault.",
    "Take no supply from the seat, blade, brake or reverse switches, and move or bridge none of them: the blades must stop as the machine's maker meant.",
    "Before you work: engine off, key out, blades and belts still; battery negative off first and on last.",
    "Lay wires clear of exhaust, belts, blades, steering and sharp edges; sleeve them and clamp them at least every 45 cm.",
    MEASURE,
    RULES,
];

/// Cautions: first what these figures show, then what always applies.
pub(super) fn cautions(build: &Build, demands: &[Demand], wires: &[Wire]) -> Vec<String> {
    let mut all: Vec<String> = wires
        .iter()
        .flat_map(|w| &w.arrives)
        .filter_map(short_of_volts)
        .collect();
    if demands.is_empty() {
        return all;
    }
    all.extend(ALWAYS.iter().map(|text| (*text).to_owned()));
    let coils = demands.iter().flat_map(|d| &d.members).any(|m| {
        m.kind == LoadKind::Coil
            && build
                .accessories
                .get(m.index)
                .is_some_and(|a| a.wire.run.is_some() || a.wire.feed.is_some())
    });
    if coils {
        all.push(CLUTCH.to_owned());
    }
    all
}

/// An accessory that does not work, or a hot coil that may not pull in, at the end of its wire.
fn short_of_volts(row: &Arrives) -> Option<String> {
    if let (false, Some(low)) = (row.works, row.works_low_v) {
        return Some(format!(
            "{} gets {} in {} with everything on, under the {} it works from; the bus itself is at {}",
            row.accessory,
            format::text(row.volts),
            row.state,
            format::text(low),
            format::text(row.bus_v)
        ));
    }
    let pull = row.pull_in.filter(|p| !p.pulls_in)?;
    Some(format!(
        "{} at {} draws {} in {}, less than the {} it has cold at its lower limit: try that it pulls in hot",
        row.accessory,
        format::temperature(pull.coil_c),
        format::text(pull.amps),
        row.state,
        format::text(pull.needs_a)
    ))
}
