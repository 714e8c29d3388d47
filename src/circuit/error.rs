//! Why a circuit without the battery has no answer.

use crate::source;
use std::fmt;

/// Why a circuit without the battery has no answer.
#[derive(Clone, Debug, PartialEq)]
pub enum CircuitError {
    /// Two windings feed one circuit; how they share its current is not computed.
    SeveralWindings {
        /// The circuit.
        circuit: String,
    },
    /// A belt-driven alternator needs a battery.
    AlternatorAlone {
        /// The circuit.
        circuit: String,
    },
    /// Three phases without a rectifier.
    AlternatingThreePhase {
        /// The circuit.
        circuit: String,
    },
    /// No operating point in a state.
    NoPoint {
        /// The circuit.
        circuit: String,
        /// The state, or the speed.
        state: String,
        /// Why.
        cause: source::CircuitError,
    },
}

impl fmt::Display for CircuitError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            CircuitError::SeveralWindings { circuit } => {
                write!(f, "two windings feed the circuit `{circuit}`")
            }
            CircuitError::AlternatorAlone { circuit } => {
                write!(
                    f,
                    "the circuit `{circuit}` has an alternator and no battery"
                )
            }
            CircuitError::AlternatingThreePhase { circuit } => {
                write!(
                    f,
                    "the circuit `{circuit}` has three phases and no rectifier"
                )
            }
            CircuitError::NoPoint {
                circuit,
                state,
                cause,
            } => write!(f, "circuit `{circuit}` at {state}: {cause}"),
        }
    }
}

impl std::error::Error for CircuitError {
    fn source(&self) -> Option<&(dyn std::error::Error + 'static)> {
        match self {
            CircuitError::NoPoint { cause, .. } => Some(cause),
            _ => None,
        }
    }
}
