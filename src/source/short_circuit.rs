//! A shorted winding, and the heat of a winding.

use super::bridge;
use super::three_phase;
use super::winding::{Phases, Winding};
use crate::quantity::{Amps, Rpm, Volts, Watts};
use std::f64::consts::SQRT_2;

/// The rms current of one phase when the winding is shorted, as a shunt regulator does.
///
/// Equation: I_sc = E / (√2 Z), where E peak open-circuit volts of a phase, Z = √(R² + X²) ohms.
/// Valid for an ideal short; tends to k n / X, the same at any speed, where X ≫ R.
/// Source: Ohm's law for alternating current.
#[must_use]
pub fn short_circuit(winding: &Winding, rpm: Rpm) -> Amps {
    let circuit = winding.at(rpm);
    if circuit.e > 0.0 && circuit.e.is_finite() {
        Amps(circuit.e / (SQRT_2 * circuit.impedance()))
    } else {
        Amps::ZERO
    }
}

/// The rms current of one phase when the winding is shorted through devices that drop `drop` in all, such as two
/// controlled rectifiers or a diode and one: a bridge into a bus of `drop` volts.
#[must_use]
pub fn short_circuit_through(winding: &Winding, rpm: Rpm, drop: Volts) -> Amps {
    if !(drop > Volts::ZERO && drop.is_finite()) {
        return short_circuit(winding, rpm);
    }
    let circuit = winding.at(rpm);
    if !circuit.e.is_finite() {
        return Amps::ZERO;
    }
    let mut square = 0.0;
    let _mode = match winding.phases() {
        Phases::One => bridge::conduct(&circuit, drop.0, |piece| square += piece.square()),
        Phases::Three => three_phase::conduct(&circuit, drop.0, |piece| square += piece.square()),
    };
    Amps(f64::max(square, 0.0).sqrt())
}

/// Heat in the copper of the whole winding: m R I_rms², m phases. Any current; R at the winding's temperature.
#[must_use]
pub fn copper_loss(winding: &Winding, winding_rms: Amps) -> Watts {
    winding_rms * winding.resistance() * winding_rms * f64::from(winding.phases().count())
}
