//! `ampledger check --why STATE`.

use super::args::Common;
use super::input::Opened;
use super::{KEEPS_UP, output};
use ampledger::build::{Build, State};
use ampledger::check::{SolveError, why};
use ampledger::ledger::Machine;
use ampledger::view;
use anyhow::bail;

/// Shows the working of one state.
///
/// # Errors
/// No such state in the shift; no battery.
pub fn run(opened: &Opened, name: &str, common: &Common) -> anyhow::Result<u8> {
    let build = &opened.build;
    let Some(state) = state(build, name) else {
        bail!(
            "--why `{name}`: the shift has no such state; it has {}",
            names(build)
        );
    };
    let machine = Machine::new(build).ok_or(SolveError::NoBattery)?;
    let Some(answer) = why::why(build, &machine, state) else {
        bail!(
            "--why `{name}`: the shift has no such state; it has {}",
            names(build)
        );
    };
    output::write(common, || view::why(&answer), &answer)?;
    Ok(KEEPS_UP)
}

fn state(build: &Build, name: &str) -> Option<State> {
    build
        .shift
        .iter()
        .map(|step| step.state)
        .chain([State::Parked])
        .find(|state| build.state_name(*state) == name)
}

fn names(build: &Build) -> String {
    let mut names: Vec<String> = Vec::new();
    for step in &build.shift {
        let name = format!("`{}`", build.state_name(step.state));
        if !names.contains(&name) {
            names.push(name);
        }
    }
    names.join(", ")
}
