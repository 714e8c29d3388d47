//! Tables used and notes of an answer.

use super::answer::SourceRow;
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
