//! When there is no answer.

use std::fmt;

/// Why a build has no answer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SolveError {
    /// Asked for the charge of a battery that is not there.
    NoBattery,
    /// The search for the charge or the current ended in something that is no number.
    NotFinite,
    /// The engine never runs at a named speed and the machine never stands with its key on.
    EmptyShift,
    /// A circuit without the battery has no operating point.
    Circuit,
}

impl fmt::Display for SolveError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            SolveError::NoBattery => "the build has no battery to keep charged",
            SolveError::NotFinite => "the solver did not converge to a number: no answer is given",
            SolveError::EmptyShift => "the shift has no time in it",
            SolveError::Circuit => "a circuit without the battery has no operating point",
        })
    }
}

impl std::error::Error for SolveError {}
