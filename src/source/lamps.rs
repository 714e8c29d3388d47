//! A lighting winding with lamps and heaters straight across it, no rectifier.

use super::winding::Winding;
use crate::quantity::{Amps, Rpm, Volts, Watts};
use crate::root::{self, RootError};
use serde::Serialize;

/// An AC circuit's operating point.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct AcOutput {
    /// Rms volts across the loads.
    pub volts: Volts,
    /// Rms current of the winding, all loads together.
    pub amps: Amps,
    /// Power into the loads.
    pub power: Watts,
}

/// Rms volts across loads in parallel on an AC winding. `current` is the loads' rms current, in phase with the volts
/// (lamps, heaters), at given rms volts: it must not fall as the volts rise.
///
/// Equation: E_rms² = (V + R I(V))² + (X I(V))², where E_rms = k n open-circuit rms volts; V rms volts across the
/// loads; I(V) their current, A; R, X ohms of the winding. The right side rises with V: one root.
///
/// Valid for in-phase loads of a sine; the volts of loads that fall with V (a constant power) may have no root. One
/// phase; on a three-phase star the loads of one phase to neutral, equal on all three.
/// Source: Kirchhoff's voltage law, phasors.
///
/// # Errors
/// [`RootError`] when the loads ask for more than the winding gives even shorted, or their current is not finite.
pub fn lamps_on_ac(
    winding: &Winding,
    rpm: Rpm,
    current: impl Fn(Volts) -> Amps,
) -> Result<AcOutput, RootError> {
    let circuit = winding.at(rpm);
    let emf = circuit.e / std::f64::consts::SQRT_2;
    if !emf.is_finite() {
        return Err(RootError::NotFinite { at: rpm.0 });
    }
    if emf <= 0.0 {
        return Ok(AcOutput {
            volts: Volts::ZERO,
            amps: Amps::ZERO,
            power: Watts::ZERO,
        });
    }
    let excess = |v: f64| {
        let i = current(Volts(v)).0;
        let (in_phase, across) = (v + circuit.r * i, circuit.x * i);
        in_phase.hypot(across) - emf
    };
    let volts = Volts(root::bracketed(excess, 0.0, emf, 1e-13 * emf)?);
    let amps = current(volts);
    Ok(AcOutput {
        volts,
        amps,
        power: volts * amps,
    })
}
