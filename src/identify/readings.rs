//! What was measured on the bench.

use crate::quantity::{Amps, Ohms, Rpm, Volts, VoltsPerRpm};
use crate::source::{Phases, Rectifier, Working};
use std::fmt;

/// One row of a bench table: mean current into a bus at a speed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Reading {
    /// Speed.
    pub rpm: Rpm,
    /// Bus volts at the rectifier.
    pub bus: Volts,
    /// Mean current into the bus.
    pub amps: Amps,
}

/// A bench table, and what else is known of the winding.
#[derive(Clone, Debug, PartialEq)]
pub struct Readings {
    /// The rows, in any order.
    pub rows: Vec<Reading>,
    /// Open-circuit rms volts per rpm between two leads at 20 °C, where measured.
    pub open_circuit: Option<VoltsPerRpm>,
    /// Resistance between two leads at 20 °C, where measured.
    pub resistance: Option<Ohms>,
    /// Magnet poles.
    pub poles: u32,
    /// Phases.
    pub phases: Phases,
    /// What the rows were measured through.
    pub rectifier: Rectifier,
    /// Where a regulator holds the bus: rows at it show what was asked for, and are left out.
    pub setpoint: Option<Volts>,
    /// The winding's temperature while the rows were taken.
    pub working: Working,
}

/// Rows this close to the setpoint count as held.
pub const HELD_WITHIN: Volts = Volts(0.1);

/// Why no constants follow from a bench table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum IdentifyError {
    /// A row's speed is not positive, its volts or amps are negative, or one of them is not finite.
    Row {
        /// Which row, from 0.
        row: usize,
    },
    /// Open-circuit volts or resistance are not positive, finite numbers.
    Stated {
        /// The key, as in a build file.
        what: &'static str,
    },
    /// Magnet poles come in pairs: an even number from 2.
    Poles {
        /// The number given.
        poles: u32,
    },
    /// There are fewer figures than constants: rows in use, open-circuit volts, resistance.
    TooFew {
        /// Figures that can be used.
        figures: usize,
        /// Rows left out because a regulator held the bus.
        held: usize,
    },
    /// No row in use has any current.
    NoCurrent,
    /// The temperature leaves nothing of resistance or EMF.
    Temperature,
    /// No set of constants comes near the readings.
    NotConverged {
        /// Rms of the differences that are left, as a share of the greatest reading.
        residual: f64,
    },
}

impl fmt::Display for IdentifyError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            IdentifyError::Row { row } => {
                write!(f, "reading {} is not a speed, bus volts and amps", row + 1)
            }
            IdentifyError::Stated { what } => write!(f, "`{what}` has to be above zero"),
            IdentifyError::Poles { poles } => {
                write!(
                    f,
                    "`poles` is {poles}: magnet poles come in pairs, an even number from 2"
                )
            }
            IdentifyError::TooFew { figures, held: 0 } => write!(
                f,
                "{figures} of the three figures that three constants need: add readings at other speeds, or `open_circuit` and `resistance`"
            ),
            IdentifyError::TooFew { figures, held } => write!(
                f,
                "{figures} of the three figures that three constants need, for at {held} readings the regulator holds the bus: load it until the volts fall"
            ),
            IdentifyError::NoCurrent => write!(f, "no reading has any current"),
            IdentifyError::Temperature => {
                write!(
                    f,
                    "at the `working` temperature nothing is left of the winding"
                )
            }
            IdentifyError::NotConverged { residual } => write!(
                f,
                "no winding comes near the readings: the best is {:.0} % of the greatest off",
                100.0 * residual
            ),
        }
    }
}

impl std::error::Error for IdentifyError {}

impl Readings {
    /// Whether a regulator held the bus at this row.
    #[must_use]
    pub fn is_held(&self, row: &Reading) -> bool {
        self.setpoint
            .is_some_and(|held| row.bus > held - HELD_WITHIN)
    }

    /// Checks every figure, and that there are enough of them.
    pub(super) fn check(&self) -> Result<(), IdentifyError> {
        let positive = |x: f64| x.is_finite() && x > 0.0;
        let level = |x: f64| x.is_finite() && x >= 0.0;
        for (row, reading) in self.rows.iter().enumerate() {
            if !(positive(reading.rpm.0) && level(reading.bus.0) && level(reading.amps.0)) {
                return Err(IdentifyError::Row { row });
            }
        }
        if self.open_circuit.is_some_and(|k| !positive(k.0)) {
            return Err(IdentifyError::Stated {
                what: "open_circuit",
            });
        }
        if self.resistance.is_some_and(|r| !positive(r.0)) {
            return Err(IdentifyError::Stated { what: "resistance" });
        }
        if self.poles < 2 || self.poles % 2 == 1 {
            return Err(IdentifyError::Poles { poles: self.poles });
        }
        if !(positive(self.working.resistance_factor().0) && positive(self.working.emf_factor().0))
        {
            return Err(IdentifyError::Temperature);
        }
        self.check_count()
    }

    fn check_count(&self) -> Result<(), IdentifyError> {
        let held = self.rows.iter().filter(|row| self.is_held(row)).count();
        let used = self.rows.len() - held;
        let stated =
            usize::from(self.open_circuit.is_some()) + usize::from(self.resistance.is_some());
        if used == 0 || used + stated < 3 {
            return Err(IdentifyError::TooFew {
                figures: used + stated,
                held,
            });
        }
        let flows = |row: &&Reading| !self.is_held(row) && row.amps > Amps::ZERO;
        if self.rows.iter().find(flows).is_none() {
            return Err(IdentifyError::NoCurrent);
        }
        Ok(())
    }
}
