//! The check of a build with a battery.

use super::answer::{ByState, Check, StateRow, TraceRow, Verdict};
use super::ruling::{Ruling, rule_on};
use super::{
    Checked, FORMAT, FirstShift, SolveError, Wanted, beyond, by_accessory, by_state, cautions,
    course, findings, first_shift, history, rundown, sentence, storage,
};
use crate::battery::Charge;
use crate::build::{Build, State};
use crate::ledger::Machine;
use crate::outlook::Spread;
use crate::quantity::{Amps, Fraction, Volts};

/// Checks a build with a battery; circuits of their own are left to the caller.
///
/// # Errors
/// [`SolveError`]: there is no answer.
pub(super) fn check(build: &Build, wanted: Wanted) -> Result<Checked, SolveError> {
    let machine = Machine::new(build).ok_or(SolveError::NoBattery)?;
    let ruling = rule_on(build, &machine)?;
    let shift = first_shift(build, &machine, Charge::rested(build.start), wanted.trace);
    if !shift.balance.is_finite() {
        return Err(SolveError::NotFinite);
    }
    let states = by_state(build, &machine, &shift);
    let accessories = by_accessory(build, &machine, &shift);
    let spare = spare(build, &machine, &ruling, &states);
    let lowest = ruling.settles.map_or(shift.lowest, |(_, lowest)| lowest);
    let fails = fails(build, &machine, &ruling);
    let everywhere = spare.as_ref().and_then(|_| everywhere(&machine, &ruling));
    let sentence = sentence::sentence(&ruling, everywhere, shift.lowest, fails.as_deref());
    let seen = findings::Seen {
        build,
        machine: &machine,
        ruling: &ruling,
        shift: &shift,
        states: &states,
        accessories: &accessories,
    };
    let later = later(build, &machine, &shift, wanted);
    let check = Check {
        format: FORMAT,
        build: build.name.clone(),
        air_c: build.air.value,
        system_v: Volts(2.0 * f64::from(machine.cells)),
        verdict: ruling.verdict,
        judged: true,
        sentence,
        shifts_carried: ruling.shifts_carried,
        lacks_ah: ruling.lacks,
        lacks_a: ruling.lacks_current,
        beyond_charging: beyond::battery_that_would_do(build, &ruling),
        fails,
        storage: Some(storage(build, &machine, &ruling)),
        rundown: rundown(&machine, Charge::rested(build.start), ruling.reserve.soc),
        balance_ah: Some(shift.balance),
        settles_soc: ruling.settles.map(|(charge, _)| charge.soc),
        lowest_soc: Some(lowest),
        reserve_soc: Some(ruling.reserve.soc.min(Fraction::ONE)),
        reserve_from: Some(ruling.reserve.from.words().to_owned()),
        findings: findings::findings(&seen),
        steps: shift.steps(build, &machine),
        states,
        accessories,
        circuits: Vec::new(),
        spare_a: spare,
        changes: crate::size::nearest(build, &machine, &ruling),
        assumed: build.assumed.clone(),
        cautions: cautions(build),
        notes: build.notes.clone(),
    };
    Ok(Checked {
        check,
        trace: shift.trace,
        later,
    })
}

/// The course of the shifts after the first, where it is wanted.
fn later(build: &Build, machine: &Machine, shift: &FirstShift, wanted: Wanted) -> Vec<TraceRow> {
    let last = shift.legs.last().filter(|_| wanted.trace);
    last.map_or_else(Vec::new, |last| {
        let ends = last.begins + last.time;
        history::history(build, machine, last.after, ends, wanted.shifts)
    })
}

/// What fails first when a build that does not keep up is worked all the same; of one that keeps up, the accessory that
/// drops out on the way, without which it might not.
fn fails(build: &Build, machine: &Machine, ruling: &Ruling) -> Option<String> {
    let keeps_up = ruling.verdict == Verdict::KeepsUp;
    let lowest = ruling.settles.map_or(Fraction::ONE, |(_, lowest)| lowest);
    if keeps_up && !machine.may_drop_out(lowest) {
        return None;
    }
    let course = course(
        build,
        machine,
        Charge::rested(build.start),
        ruling.reserve.soc,
    );
    match course.clause(build) {
        None if !keeps_up => course.reserve_clause(build),
        clause => clause,
    }
}

/// What may still be drawn at every running speed at once.
fn everywhere(machine: &Machine, ruling: &Ruling) -> Option<Amps> {
    let edge = machine.edge(ruling.reserve.soc, Spread::Everywhere)?;
    Some((-edge).max(Amps::ZERO))
}

/// What may still be drawn at each running speed alone, for a build that keeps up; no more than
/// its sources can give there, whatever the battery could add for a while.
fn spare(
    build: &Build,
    machine: &Machine,
    ruling: &Ruling,
    states: &[StateRow],
) -> Option<ByState<Amps>> {
    if ruling.verdict != Verdict::KeepsUp {
        return None;
    }
    let running = machine
        .connected
        .iter()
        .filter(|w| w.runs && matches!(w.state, State::Running(_)));
    let amps = running.filter_map(|w| {
        let edge = machine.edge(ruling.reserve.soc, Spread::In(w.state))?;
        let name = build.state_name(w.state).to_owned();
        let most = states
            .iter()
            .find(|s| s.state == name)
            .map_or(Amps::ZERO, |s| s.available_a);
        Some((name, (-edge).min(most).max(Amps::ZERO)))
    });
    Some(ByState(amps.collect()))
}
