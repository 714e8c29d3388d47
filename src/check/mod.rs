//! One build's answer: verdict, figures by state and accessory, findings.

pub mod answer;
mod beyond;
pub mod cautions;
mod charged;
mod course;
mod error;
mod findings;
mod first_shift;
mod history;
mod judge;
mod rows;
mod ruling;
pub mod season;
mod sentence;
mod storage;
pub mod why;
mod without_battery;

pub use cautions::cautions;
pub use course::{Course, Rundown, course, rundown};
pub use error::SolveError;
pub use first_shift::{Book, FirstShift, Mean, Passage, first_shift};
pub use judge::{Judged, judge};
pub use rows::{by_accessory, by_state};
pub use ruling::{Reserve, ReserveFrom, Ruling, reserve, rule, rule_on};
pub use sentence::ordinal;
pub use storage::{Storage, storage};

use crate::build::Build;
use crate::circuit;
use crate::quantity::{Fraction, Hours, all_finite};
use answer::{AccessoryRow, Check, TraceRow};

/// Version of the JSON names.
pub const FORMAT: u32 = 1;

/// What to do beside the verdict.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Wanted {
    /// A trace of the first shift.
    pub trace: bool,
    /// Shifts that are followed where there is a trace; 0 and 1 are the first alone.
    pub shifts: u32,
}

/// The answer, and the trace where one was asked for.
#[derive(Clone, Debug)]
pub struct Checked {
    /// The answer.
    pub check: Check,
    /// The first shift and the parking after it, at least a row every ten minutes.
    pub trace: Vec<TraceRow>,
    /// The shifts after it, each with its parking, as far as they were asked for.
    pub later: Vec<TraceRow>,
}

impl Checked {
    /// The course of the first shift and of those after it.
    #[must_use]
    pub fn course(&self) -> Vec<TraceRow> {
        self.trace.iter().chain(&self.later).cloned().collect()
    }
}

/// Checks a build.
///
/// # Errors
/// [`SolveError`]: there is no answer.
pub fn check(build: &Build, wanted: Wanted) -> Result<Checked, SolveError> {
    solvable(build)?;
    let circuits = circuit::circuits(build).map_err(SolveError::Circuit)?;
    let mut checked = match build.battery {
        Some(_) => charged::check(build, wanted)?,
        None => Checked {
            check: without_battery::check(build, &circuits),
            trace: Vec::new(),
            later: Vec::new(),
        },
    };
    let check = &mut checked.check;
    check.circuits = circuit::circuit_rows(&circuits);
    check
        .accessories
        .extend(circuit::accessory_rows(build, &circuits));
    check.findings.extend(circuit::findings(build, &circuits));
    shares(&mut check.accessories);
    if !(all_finite(&checked.check) && all_finite(&checked.trace)) {
        return Err(SolveError::NotFinite);
    }
    Ok(checked)
}

/// Whether there is anything to solve, and in numbers.
///
/// # Errors
/// [`SolveError`]: no time in the shift, a figure that is no number.
pub(crate) fn solvable(build: &Build) -> Result<(), SolveError> {
    if !all_finite(build) {
        return Err(SolveError::NotFinite);
    }
    let empty = build.shift.iter().all(|s| s.time.value <= Hours::ZERO);
    if empty {
        Err(SolveError::EmptyShift)
    } else {
        Ok(())
    }
}

/// Each accessory's share of the charge of all, largest first.
fn shares(rows: &mut [AccessoryRow]) {
    let all: f64 = rows.iter().map(|row| row.ah.0).sum();
    for row in rows.iter_mut() {
        row.share = Fraction(if all > 0.0 { row.ah.0 / all } else { 0.0 });
    }
    rows.sort_by(|a, b| b.ah.0.total_cmp(&a.ah.0));
}
