//! A stator winding: the constants of one phase at its working temperature.

use super::segment::Circuit;
use crate::quantity::{Fraction, Henries, Hertz, Ohms, Rpm, Volts, VoltsPerRpm};
use serde::Serialize;
use std::f64::consts::{PI, SQRT_2};
use std::fmt;

/// How many phases a winding has.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Phases {
    /// One winding with two leads.
    #[default]
    One,
    /// Three equal windings in star; a delta is its equivalent star.
    Three,
}

impl Phases {
    /// The number of phases.
    #[must_use]
    pub fn count(self) -> u32 {
        match self {
            Phases::One => 1,
            Phases::Three => 3,
        }
    }
}

/// The constants of one phase, at the temperature at which they are used.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Winding {
    open_circuit: VoltsPerRpm,
    resistance: Ohms,
    inductance: Henries,
    poles: u32,
    phases: Phases,
}

/// Why figures do not make a winding.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum WindingError {
    /// A constant is negative, infinite or not a number (open-circuit volts: zero as well).
    OutOfRange {
        /// Which constant, as in a build file.
        what: &'static str,
        /// The figure given, in volts per rpm, ohms or henries.
        value: f64,
    },
    /// Neither resistance nor inductance: nothing limits the current.
    NoImpedance,
    /// Magnet poles come in pairs: an even number from 2.
    Poles {
        /// The number given.
        poles: u32,
    },
}

impl fmt::Display for WindingError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            WindingError::OutOfRange { what, value } => write!(f, "`{what}` cannot be {value}"),
            WindingError::NoImpedance => {
                write!(
                    f,
                    "`resistance` and `inductance` are both zero: nothing would limit the current"
                )
            }
            WindingError::Poles { poles } => {
                write!(
                    f,
                    "`poles` is {poles}: magnet poles come in pairs, an even number from 2"
                )
            }
        }
    }
}

impl std::error::Error for WindingError {}

impl Winding {
    /// From the constants of one phase: open-circuit rms volts per rpm (three-phase: line to neutral), resistance and
    /// inductance, the number of magnet poles, and the phases.
    ///
    /// # Errors
    /// [`WindingError`]: a constant out of range, no impedance at all, an odd number of poles.
    pub fn new(
        open_circuit: VoltsPerRpm,
        resistance: Ohms,
        inductance: Henries,
        poles: u32,
        phases: Phases,
    ) -> Result<Winding, WindingError> {
        let out = |what, value| Err(WindingError::OutOfRange { what, value });
        if !(open_circuit.is_finite() && open_circuit.0 > 0.0) {
            return out("open_circuit", open_circuit.0);
        }
        if !(resistance.is_finite() && resistance.0 >= 0.0) {
            return out("resistance", resistance.0);
        }
        if !(inductance.is_finite() && inductance.0 >= 0.0) {
            return out("inductance", inductance.0);
        }
        if resistance.0 == 0.0 && inductance.0 == 0.0 {
            return Err(WindingError::NoImpedance);
        }
        if poles < 2 || poles % 2 == 1 {
            return Err(WindingError::Poles { poles });
        }
        Ok(Winding {
            open_circuit,
            resistance,
            inductance,
            poles,
            phases,
        })
    }

    /// From what is measured between two leads. Three phases become the equivalent star: V/√3, R/2, L/2 per phase.
    ///
    /// # Errors
    /// As [`Winding::new`].
    pub fn between_leads(
        open_circuit: VoltsPerRpm,
        resistance: Ohms,
        inductance: Henries,
        poles: u32,
        phases: Phases,
    ) -> Result<Winding, WindingError> {
        match phases {
            Phases::One => Winding::new(open_circuit, resistance, inductance, poles, phases),
            Phases::Three => Winding::new(
                open_circuit / 3.0_f64.sqrt(),
                resistance / 2.0,
                inductance / 2.0,
                poles,
                phases,
            ),
        }
    }

    /// Open-circuit rms volts per rpm of one phase (three-phase: line to neutral).
    #[must_use]
    pub fn open_circuit(&self) -> VoltsPerRpm {
        self.open_circuit
    }
    /// Resistance of one phase.
    #[must_use]
    pub fn resistance(&self) -> Ohms {
        self.resistance
    }
    /// Inductance of one phase.
    #[must_use]
    pub fn inductance(&self) -> Henries {
        self.inductance
    }
    /// Magnet poles (two to a pole pair).
    #[must_use]
    pub fn poles(&self) -> u32 {
        self.poles
    }
    /// One phase or three.
    #[must_use]
    pub fn phases(&self) -> Phases {
        self.phases
    }

    /// Electrical frequency.
    ///
    /// Equation: f = n p / 120, where n speed, rpm; p magnet poles. Valid for any speed. Source: any text on
    /// synchronous machines.
    #[must_use]
    pub fn frequency(&self, rpm: Rpm) -> Hertz {
        Hertz(rpm.0 * f64::from(self.poles) / 120.0)
    }

    /// Open-circuit rms volts of one phase at a speed: k · n.
    #[must_use]
    pub fn emf(&self, rpm: Rpm) -> Volts {
        self.open_circuit * rpm
    }

    /// Reactance of one phase at a speed: X = 2π f L.
    #[must_use]
    pub fn reactance(&self, rpm: Rpm) -> Ohms {
        Ohms(2.0 * PI * self.frequency(rpm).0 * self.inductance.0)
    }

    /// A winding of the same volts and `scale` times the current: resistance and inductance divided by `scale`.
    ///
    /// # Errors
    /// [`WindingError`] when the scale is not a positive, finite number.
    pub fn scaled(&self, scale: Fraction) -> Result<Winding, WindingError> {
        if !(scale.is_finite() && scale.0 > 0.0) {
            return Err(WindingError::OutOfRange {
                what: "scale",
                value: scale.0,
            });
        }
        Winding::new(
            self.open_circuit,
            self.resistance / scale.0,
            self.inductance / scale.0,
            self.poles,
            self.phases,
        )
    }

    /// One phase as a loop of peak volts, resistance and reactance. A speed that is not a positive number stands
    /// still.
    pub(super) fn at(&self, rpm: Rpm) -> Circuit {
        let turning = if rpm.is_finite() {
            rpm.max(Rpm::ZERO)
        } else {
            Rpm::ZERO
        };
        Circuit::new(
            SQRT_2 * self.emf(turning).0,
            self.resistance.0,
            self.reactance(turning).0,
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn invented() -> Winding {
        Winding::new(
            VoltsPerRpm(28.0 / 3600.0),
            Ohms(0.15),
            Henries(0.35e-3),
            18,
            Phases::One,
        )
        .unwrap()
    }

    #[test]
    fn frequency_and_emf() {
        // K084: 18 poles at 3600 rpm, n p / 120 = 540 Hz (textbook). K085: 28 V at 3600 rpm is 14 V at 1800.
        assert_eq!(invented().frequency(Rpm(3600.0)), Hertz(540.0));
        assert!((invented().emf(Rpm(1800.0)) - Volts(14.0)).abs() < Volts(1e-12));
        // X = 2π · 540 · 0.35 mH = 1.18752 ohm (arithmetic).
        assert!((invented().reactance(Rpm(3600.0)) - Ohms(1.187_522)).abs() < Ohms(1e-6));
    }

    #[test]
    fn three_phase_leads_become_a_star() {
        let w = Winding::between_leads(
            VoltsPerRpm(0.01),
            Ohms(0.2),
            Henries(1e-3),
            12,
            Phases::Three,
        )
        .unwrap();
        assert!((w.open_circuit().0 - 0.005_773_502_691_896_258).abs() < 1e-17);
        assert_eq!((w.resistance(), w.inductance()), (Ohms(0.1), Henries(5e-4)));
    }

    #[test]
    fn scale_divides_impedance() {
        let w = invented().scaled(Fraction(1.25)).unwrap();
        assert!(
            (w.resistance().0 - 0.12).abs() < 1e-15 && (w.inductance().0 - 0.28e-3).abs() < 1e-15
        );
        assert_eq!(w.open_circuit(), invented().open_circuit());
        assert!(invented().scaled(Fraction(0.0)).is_err());
    }

    #[test]
    fn refuses_what_is_no_winding() {
        let new = |k, r, l, p| Winding::new(VoltsPerRpm(k), Ohms(r), Henries(l), p, Phases::One);
        assert_eq!(new(0.01, 0.0, 0.0, 12), Err(WindingError::NoImpedance));
        assert_eq!(
            new(0.01, 0.1, 0.0, 13),
            Err(WindingError::Poles { poles: 13 })
        );
        assert_eq!(
            new(0.0, 0.1, 0.0, 12),
            Err(WindingError::OutOfRange {
                what: "open_circuit",
                value: 0.0
            })
        );
        assert!(new(0.01, f64::NAN, 0.0, 12).is_err());
        assert!(new(0.01, 0.1, -1e-3, 12).is_err());
        assert_eq!(
            WindingError::Poles { poles: 7 }.to_string(),
            "`poles` is 7: magnet poles come in pairs, an even number from 2"
        );
    }
}
