//! Tables used, notes and cautions of an answer.

use super::answer::{Arrives, SourceRow, Wire};
use super::demand::Demand;
use super::size::Choice;
use super::tables::{Ground, Tables};
use crate::build::Build;
use crate::catalog::Certainty;
use crate::description::accessory::LoadKind;
use crate::quantity::{Fraction, Volts, format};

/// How much more than its stated draw a fuse at four fifths still carries.
const FUSE_ROOM: Fraction = Fraction(0.25);

/// The grounds that a choice rests on.
pub(super) fn grounds(tables: &Tables, choice: &Choice) -> Vec<Ground> {
    let mut all = choice.settled.wire.grounds.clone();
    all.push(choice.settled.ground.clone());
    all.extend(choice.place.grounds.iter().cloned());
    all.push(choice.fused.fuse.ground.clone());
    all.extend(tables.fuses.loading().map(|(_, ground)| ground));
    if choice.fused.held.is_some() {
        all.extend(tables.fuses.times_ground(&choice.fused.fuse));
    }
    all
}

/// Each ground once, in the order met.
pub(super) fn sources(grounds: &[Ground]) -> Vec<SourceRow> {
    let mut rows: Vec<SourceRow> = Vec::new();
    for ground in grounds {
        let row = SourceRow {
            what: ground.what.to_owned(),
            source: ground.source.clone(),
            certainty: ground.certainty.to_string(),
        };
        if !rows.contains(&row) {
            rows.push(row);
        }
    }
    rows
}

/// What the reader should know of the figures; figures from memory are named first.
pub(super) fn notes(build: &Build, demands: &[Demand], grounds: &[Ground]) -> Vec<String> {
    let mut notes = Vec::new();
    notes.extend(of_certainty(grounds, Certainty::Memory));
    notes.extend(of_certainty(grounds, Certainty::CommonPractice));
    if demands.is_empty() {
        return notes;
    }
    let planning = format::text(Volts(2.0) * f64::from(build.cells()));
    notes.push("what a wire may carry is boat law (33 CFR 183.425), used as a yardstick; a size between two gauges counts as the thinner one".to_owned());
    notes.push(format!(
        "constant powers are taken at {planning} or the lowest bus volts, everything else at the highest bus volts, coils as cold as the air"
    ));
    notes.push("copper warms from the air about it to its insulation's class as the square of the current (textbook heat balance)".to_owned());
    if demands.iter().any(|d| !d.return_wire) {
        notes.push("the frame carries the return and is taken as free of resistance; its joints must be bright and tight".to_owned());
    }
    notes.extend(without_surge(build, demands));
    notes.extend(far_off(build, demands));
    notes
}

/// The grounds of one certainty in one line, each once.
fn of_certainty(grounds: &[Ground], certainty: Certainty) -> Option<String> {
    let mut texts: Vec<String> = Vec::new();
    for ground in grounds.iter().filter(|g| g.certainty == certainty) {
        let text = format!("{} ({})", ground.what, ground.source);
        if !texts.contains(&text) {
            texts.push(text);
        }
    }
    (!texts.is_empty()).then(|| format!("{certainty}: {}", texts.join("; ")))
}

/// Lamps and motors whose surge is not stated.
fn without_surge(build: &Build, demands: &[Demand]) -> Option<String> {
    let silent: Vec<&str> = demands
        .iter()
        .flat_map(|d| &d.members)
        .filter(|m| matches!(m.kind, LoadKind::Lamp | LoadKind::Motor))
        .filter(|m| {
            build
                .accessories
                .get(m.index)
                .is_some_and(|a| a.inrush.is_none())
        })
        .map(|m| m.name.as_str())
        .collect();
    (!silent.is_empty()).then(|| {
        format!(
            "no `inrush:` is given for {}: the fuse is not checked against the surge at switch-on (filaments 10 to 15 times for 5 to 50 ms, motors 5 to 8 times: common practice)",
            silent.join(", ")
        )
    })
}

/// Draws that may lie further above their stated figure than the fuse leaves room for.
fn far_off(build: &Build, demands: &[Demand]) -> Option<String> {
    let far: Vec<&str> = demands
        .iter()
        .flat_map(|d| &d.members)
        .filter(|m| {
            let draw = build.accessories.get(m.index).map(|a| &a.draw);
            let tolerance = draw.and_then(|d| d.tolerance);
            tolerance.is_some_and(|t| t.relative > FUSE_ROOM)
        })
        .map(|m| m.name.as_str())
        .collect();
    (!far.is_empty()).then(|| {
        format!(
            "draws are taken as stated; a fuse at four fifths leaves room for a quarter more, {} may lie further off: measure",
            far.join(", ")
        )
    })
}

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

/// Cautions for any added wire.
const ALWAYS: [&str; 7] = [
    "Fit each fuse where its wire takes its supply; if that cannot be, within 7 in (18 cm) of it, or within 40 in (1 m) where the wire is sheathed all the way (33 CFR 183.455(b), boat law).",
    "The fuse is there for the wire. One that blows is no reason for a larger one: find the fault.",
    "Take no supply from the seat, blade, brake or reverse switches, and move or bridge none of them: the blades must stop as the machine's maker meant.",
    "Before you work: engine off, key out, blades and belts still; battery negative off first and on last.",
    "Lay wires clear of exhaust, belts, blades, steering and sharp edges; sleeve them and clamp them at least every 45 cm.",
    "Measure the current and the volts at each accessory before you rely on these figures: they are for planning.",
    "Rules for the machine, the workplace and the road come first; where they ask for a qualified person, use one.",
];

/// Caution for clutch coils.
const CLUTCH: &str = "Put nothing else, no diode and no second load, on a clutch coil's circuit unless the machine's maker allows it: it can change how fast the blades stop.";
