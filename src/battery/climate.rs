//! A battery at one temperature: what stays the same through a shift.

use super::cell::Cell;
use super::constants as k;
use super::tables::capacity_factor;
use super::terminals::Terminals;
use crate::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Volts};

/// The two states of a battery.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Charge {
    /// Coulombs held over the greatest the battery can hold, 0..1.
    pub soc: Fraction,
    /// How far the acid in the plates lags behind the bulk, 0..1; relaxes to
    /// zero at rest.
    pub depletion: Fraction,
}

impl Charge {
    /// A battery rested at a state of charge.
    #[must_use]
    pub fn rested(soc: Fraction) -> Charge {
        Charge {
            soc,
            depletion: Fraction::ZERO,
        }
    }
    /// Full and rested.
    pub const FULL: Charge = Charge {
        soc: Fraction::ONE,
        depletion: Fraction::ZERO,
    };
}

/// How fast the two states change.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rates {
    /// Change of the state of charge, share per hour.
    pub soc_per_hour: Fraction,
    /// Change of the depletion, share per hour.
    pub depletion_per_hour: Fraction,
}

/// One battery at one temperature. Small and copied freely.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Climate {
    pub(super) cell: Cell,
    air: Celsius,
    /// Capacity factor of the temperature.
    factor: f64,
    /// Rise of the open-circuit voltage over 25 °C, V per cell.
    shift: f64,
    /// Ohmic and acceptance resistance, full and empty, ohms per cell.
    resistance: f64,
    acceptance: f64,
    /// Polarisations, V per cell.
    polarisation: [f64; 2],
    /// Gassing current at 2.23 V, A.
    gassing: f64,
}

impl Climate {
    pub(super) fn new(cell: Cell, air: Celsius) -> Climate {
        let held = air.0.max(k::AIR_RANGE.0).min(k::AIR_RANGE.1);
        let dt = held - k::REFERENCE_AIR;
        let softer = (-k::POLARISATION_PER_KELVIN * dt).exp();
        Climate {
            cell,
            air: Celsius(held),
            factor: capacity_factor(Celsius(held)).0,
            shift: k::OCV_PER_KELVIN * dt,
            resistance: cell.resistance * (-k::RESISTANCE_PER_KELVIN * dt).exp(),
            acceptance: cell.acceptance * (-k::ACCEPTANCE_PER_KELVIN * dt).exp(),
            polarisation: [
                k::POLARISATION_DISCHARGE * softer,
                k::POLARISATION_CHARGE * softer,
            ],
            gassing: cell.gassing * (k::GASSING_PER_KELVIN * dt).exp(),
        }
    }

    /// The temperature, held to -60..90 °C.
    #[must_use]
    pub fn air(&self) -> Celsius {
        self.air
    }

    /// Everything about the terminals that does not depend on their volts.
    ///
    /// ```text
    /// R  = R25 (1 + 0.8 (1 − s)) exp(−0.020 ΔT)
    /// Kc = (ρc/C20) (1 + 0.888 s/(1.005 − s)) exp(−0.025 ΔT)    only while charging
    /// p  = p0 exp(−0.007 ΔT),  p0 = 0.050 V discharge, 0.080 V charge
    /// Ik = 0.15 C20
    /// e  = emf(s, d) + 2e-4 ΔT
    /// ```
    /// where s state of charge, ΔT air less 25 °C, R ohmic and Kc acceptance
    /// resistance (ohm per cell), p polarisation (V), Ik its half current (A).
    /// Valid for: -60..90 °C. Source: as each constant says.
    #[must_use]
    pub fn at(&self, charge: Charge) -> Terminals {
        let soc = charge.soc.0;
        let resistance = self.resistance * Cell::resistance_rise(soc);
        Terminals {
            cells: self.cell.cells,
            emf: self.cell.emf(soc, charge.depletion.0) + self.shift,
            resistance: [
                resistance,
                resistance + self.acceptance * Cell::acceptance_rise(soc),
            ],
            polarisation: self.polarisation,
            half: k::POLARISATION_HALF * self.cell.c20,
            gassing: self.gassing,
        }
    }

    /// Rested volts of the whole battery.
    #[must_use]
    pub fn rest_volts(&self, soc: Fraction) -> Volts {
        Volts(self.cell.cells * (self.cell.open_circuit(soc.0) + self.shift))
    }

    /// Current by which a rested battery discharges itself: the gassing current
    /// at its own rested volts.
    #[must_use]
    pub fn self_discharge(&self, soc: Fraction) -> Amps {
        let cell_volts = self.cell.open_circuit(soc.0) + self.shift;
        Amps(super::terminals::gas(self.gassing, cell_volts))
    }

    /// Charge a full battery gives at a constant current before it is empty.
    #[must_use]
    pub fn capacity_at(&self, discharge: Amps) -> AmpHours {
        AmpHours(self.cell.c_max * self.cell.capacity_share(discharge.0.max(0.0), self.factor))
    }

    /// Depletion a constant terminal current tends to; zero unless it discharges.
    /// May exceed 1: see [`depletion_after`](Climate::depletion_after), which holds
    /// what is reached to 0..1.
    #[must_use]
    pub fn depletion_target(&self, total: Amps) -> Fraction {
        Fraction(self.cell.depletion_target(-total.0, self.factor))
    }

    /// Depletion after a time at a constant target.
    ///
    /// ```text
    /// d(t) = d∞ + (d0 − d∞) exp(−t/0.5 h)      held to 0..1
    /// ```
    /// where d0 depletion at the start, d∞ the target.
    /// Valid for: a target that stands still. Source: derived (first-order lag).
    #[must_use]
    pub fn depletion_after(&self, start: Fraction, target: Fraction, time: Hours) -> Fraction {
        let left = (-time.0 / k::DEPLETION_HOURS).exp();
        Fraction(target.0 + (start.0 - target.0) * left).clamp(Fraction::ZERO, Fraction::ONE)
    }

    /// How fast the states change, given the current of the main branch and the
    /// whole terminal current.
    ///
    /// ```text
    /// ds/dt = I_m / C_max
    /// dd/dt = (d∞(I) − d) / 0.5 h
    /// ```
    /// where I_m current of the main branch (A), I terminal current (A), C_max
    /// greatest capacity (Ah), d∞ the depletion's target. A rate that points out
    /// of 0..1 at the bound is zero.
    /// Valid for: any current. Source: charge balance; first-order lag.
    #[must_use]
    pub fn rates(&self, main: Amps, total: Amps, charge: Charge) -> Rates {
        let soc = main.0 / self.cell.c_max;
        let target = self.cell.depletion_target(-total.0, self.factor);
        let depletion = (target - charge.depletion.0) / k::DEPLETION_HOURS;
        Rates {
            soc_per_hour: Fraction(inward(soc, charge.soc.0)),
            depletion_per_hour: Fraction(inward(depletion, charge.depletion.0)),
        }
    }

    /// Current at which half of the polarisation acts.
    #[must_use]
    pub fn half_current(&self) -> Amps {
        Amps(k::POLARISATION_HALF * self.cell.c20)
    }

    /// Greatest charge the battery can hold: at vanishing current, 25 °C.
    #[must_use]
    pub fn capacity_greatest(&self) -> AmpHours {
        AmpHours(self.cell.c_max)
    }
}

/// A rate of a state, zero where it would leave 0..1.
fn inward(rate: f64, state: f64) -> f64 {
    let outward = (state <= 0.0 && rate < 0.0) || (state >= 1.0 && rate > 0.0);
    if outward { 0.0 } else { rate }
}
