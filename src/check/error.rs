//! When there is no answer.

use crate::circuit::CircuitError;
use std::fmt;

/// Why a build has no answer.
#[derive(Clone, Debug, PartialEq)]
pub enum SolveError {
    /// Asked for the charge of a battery that is not there.
    NoBattery,
    /// A figure of the build or of the answer is infinite or no number.
    NotFinite,
    /// The engine never runs at a named speed and the machine never stands with its key on.
    EmptyShift,
    /// A circuit without the battery is not solved.
    Circuit(CircuitError),
}

impl fmt::Display for SolveError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            SolveError::NoBattery => f.write_str("the build has no battery to keep charged"),
            SolveError::NotFinite => {
                f.write_str("the solver did not converge to a number: no answer is given")
            }
            SolveError::EmptyShift => f.write_str("the shift has no time in it"),
            SolveError::Circuit(cause) => cause.fmt(f),
        }
    }
}

impl std::error::Error for SolveError {}
