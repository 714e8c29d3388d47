//! A lead-acid battery scaled from its label: capacity, reserve minutes and
//! cold-cranking amperes in; current against volts, charge and cold starts out.
//!
//! ```text
//!  Label ──from_label──▶ Battery ──climate(air)──▶ Climate ──at(charge)──▶ Terminals
//!  (as printed)          (per cell, 25 °C)         (one temperature)       (one state)
//! ```
//! Each arrow precomputes what the next repeats: a [`Climate`] serves a whole
//! shift, a [`Terminals`] a whole search for the bus voltage.
//!
//! Current is positive when it charges. Two states: the state of charge, and
//! the depletion of the acid in the plates, which lags behind it
//! ([`Charge`]).
//!
//! ```
//! use ampledger::battery::{Battery, Charge, Chemistry, Label};
//! use ampledger::quantity::{AmpHours, Amps, Celsius, Fraction, Volts};
//! let label = Label { cold_cranking: Some(Amps(400.0)), ..Label::new(Chemistry::Flooded, AmpHours(45.0)) };
//! let battery = Battery::from_label(&label);
//! let terminals = battery.at(Charge::rested(Fraction(0.75)), Celsius(25.0));
//! assert!(terminals.current(Volts(14.2)).total > Amps(5.0));
//! assert!(terminals.current(Volts(12.0)).total < Amps(-5.0));
//! ```
//!
//! Not modelled: surface charge after charging, ageing beyond
//! [`Label::health`] and [`Label::gassing`]. Charging times of the published
//! laws differ by a factor of two: take them as ±50 %.

mod calibrate;
mod cell;
mod climate;
pub mod constants;
mod crank;
mod gassing;
mod label;
mod note;
mod rundown;
mod storage;
pub mod tables;
mod terminals;
#[cfg(test)]
mod worked;

pub use climate::{Charge, Climate, Rates};
pub use crank::{Binds, Cranked, FREEZING_MARGIN, LEAST_CHARGE, StartFloor, StartMargin, Starter};
pub use gassing::HYDROGEN_BURNS;
pub use label::{Chemistry, Label};
pub use note::Note;
pub use rundown::Rundown;
pub use storage::RECHARGE_AT;
pub use terminals::{BatteryCurrent, Terminals};

use crate::quantity::{AmpHours, Amps, Celsius, Fraction, Ohms, Volts};
use cell::Cell;

/// One battery, made from its label.
#[derive(Clone, Debug, PartialEq)]
pub struct Battery {
    cell: Cell,
    cells: u32,
    chemistry: Chemistry,
    notes: Vec<Note>,
}

impl Battery {
    /// The battery a label describes. Never fails: what is missing or out of
    /// range is taken as the nearest usable and told in [`notes`](Battery::notes).
    #[must_use]
    pub fn from_label(label: &Label) -> Battery {
        let (cell, notes) = calibrate::calibrate(label);
        Battery {
            cell,
            cells: label.cells.max(1),
            chemistry: label.chemistry,
            notes,
        }
    }

    /// What was assumed or mended, in the order it was met.
    #[must_use]
    pub fn notes(&self) -> &[Note] {
        &self.notes
    }

    /// This battery at an air temperature: for everything done more than once at it.
    #[must_use]
    pub fn climate(&self, air: Celsius) -> Climate {
        Climate::new(self.cell, air)
    }

    /// Its terminals in one state at one temperature.
    #[must_use]
    pub fn at(&self, charge: Charge, air: Celsius) -> Terminals {
        self.climate(air).at(charge)
    }

    /// How fast its states change; see [`Climate::rates`].
    #[must_use]
    pub fn rates(&self, main: Amps, total: Amps, charge: Charge, air: Celsius) -> Rates {
        self.climate(air).rates(main, total, charge)
    }

    /// Depletion a constant terminal current tends to; see [`Climate::depletion_target`].
    #[must_use]
    pub fn depletion_target(&self, total: Amps, air: Celsius) -> Fraction {
        self.climate(air).depletion_target(total)
    }

    /// How its acid is held.
    #[must_use]
    pub fn chemistry(&self) -> Chemistry {
        self.chemistry
    }

    /// Cells in series.
    #[must_use]
    pub fn cells(&self) -> u32 {
        self.cells
    }

    /// Capacity at the 20 h rate, 25 °C, health counted.
    #[must_use]
    pub fn c20(&self) -> AmpHours {
        AmpHours(self.cell.c20)
    }

    /// Greatest charge it can hold: what it gives at vanishing current. The
    /// state of charge is a share of this.
    #[must_use]
    pub fn cmax(&self) -> AmpHours {
        AmpHours(self.cell.c_max)
    }

    /// Least share of the greatest capacity it gives at any current.
    #[must_use]
    pub fn c_floor(&self) -> Fraction {
        Fraction(self.cell.c_floor)
    }

    /// Peukert exponent through the 20 h and the reserve rating. For show:
    /// capacity is computed by a law that does not grow without end.
    #[must_use]
    pub fn peukert(&self) -> Fraction {
        Fraction(self.cell.peukert)
    }

    /// Ohmic resistance of the whole battery, full, 25 °C.
    #[must_use]
    pub fn resistance(&self) -> Ohms {
        Ohms(self.cell.resistance * self.cell.cells)
    }

    /// Volts of the whole battery at which discharge ends: 1.75 V per cell.
    #[must_use]
    pub fn end_of_discharge(&self) -> Volts {
        Volts(constants::END_OF_DISCHARGE_PER_CELL * self.cell.cells)
    }

    /// Rested volts of the whole battery.
    #[must_use]
    pub fn rest_volts(&self, soc: Fraction, air: Celsius) -> Volts {
        self.climate(air).rest_volts(soc)
    }

    /// Charge a full battery gives at a constant current before it is empty.
    #[must_use]
    pub fn capacity_at(&self, discharge: Amps, air: Celsius) -> AmpHours {
        self.climate(air).capacity_at(discharge)
    }

    /// Specific gravity of the acid, ratio to water at 25 °C.
    ///
    /// ```text
    /// SG = E(s) − 0.845
    /// ```
    /// where E rested volts per cell at 25 °C, s state of charge.
    /// Valid for: 1.05 to 1.30. Source: DOE-HDBK-1084-95.
    #[must_use]
    pub fn specific_gravity(&self, soc: Fraction) -> Fraction {
        Fraction(self.cell.open_circuit(soc.0) - constants::VOLTS_LESS_GRAVITY)
    }

    /// Temperature at which the acid freezes at a state of charge.
    #[must_use]
    pub fn freezing_point(&self, soc: Fraction) -> Celsius {
        tables::freezing_point(self.specific_gravity(soc))
    }

    /// Share of the 20 h capacity a rested battery loses in 30 days.
    #[must_use]
    pub fn self_discharge_per_month(&self, soc: Fraction, air: Celsius) -> Fraction {
        Fraction(30.0 * 24.0 * self.climate(air).self_discharge(soc).0 / self.cell.c20)
    }
}
