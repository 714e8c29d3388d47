//! From what a user has (volts, ohms, a rating) to a winding's constants.

use super::inductance::RatedPoint;
use super::rectifier::Rectifier;
use super::regulator::Range;
use super::temperature::Working;
use super::winding::{Phases, Winding, WindingError};
use crate::quantity::{Amps, Fraction, Henries, Ohms, Rpm, Volts, VoltsPerRpm};
use crate::root::RootError;
use serde::Serialize;
use std::fmt;

/// A typical share or ratio and the ends of its usual band.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Typical {
    /// The value assumed.
    pub value: Fraction,
    /// The usual band.
    pub band: Range<Fraction>,
}

/// Open-circuit rms volts between the leads at the rated speed, as a multiple of the rated bus volts.
/// Common practice, no source (from memory).
#[must_use]
pub fn typical_open_circuit(phases: Phases) -> Typical {
    let (value, low, high) = match phases {
        Phases::One => (2.1, 1.8, 2.6),
        Phases::Three => (1.9, 1.6, 2.4),
    };
    Typical {
        value: Fraction(value),
        band: Range {
            low: Fraction(low),
            high: Fraction(high),
        },
    }
}

/// The resistance's share of the EMF at the rated current, R · I_rms / E_rms, at work.
/// Common practice, no source (from memory).
pub const TYPICAL_RESISTIVE_SHARE: Fraction = Fraction(0.08);

/// A rated point: amps at a speed into a bus voltage, at working temperature.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Rating {
    /// Mean current into the bus; without a rectifier rms current.
    pub amps: Amps,
    /// At this speed.
    pub rpm: Rpm,
    /// Into this bus voltage; without a rectifier rms volts.
    pub bus: Volts,
}

/// What is known of a winding. Volts, ohms and henries between two leads at 20 °C; the rating at working temperature.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Known {
    /// Open-circuit rms volts per rpm between two leads.
    pub open_circuit: Option<VoltsPerRpm>,
    /// Resistance between two leads.
    pub resistance: Option<Ohms>,
    /// Inductance between two leads.
    pub inductance: Option<Henries>,
    /// A rated point; not used where the inductance is known.
    pub rated: Option<Rating>,
    /// Magnet poles.
    pub poles: u32,
    /// Phases.
    pub phases: Phases,
    /// What it is rated through; none for a winding whose alternating current is used as it is.
    pub rectifier: Option<Rectifier>,
    /// Temperature at work, and magnets.
    pub working: Working,
}

/// A winding's constants, complete.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Constants {
    /// One phase, at working temperature: what is solved with.
    pub winding: Winding,
    /// Open-circuit rms volts per rpm between two leads at 20 °C.
    pub open_circuit: VoltsPerRpm,
    /// Resistance between two leads at 20 °C.
    pub resistance: Ohms,
    /// Inductance between two leads.
    pub inductance: Henries,
    /// The open-circuit volts were assumed.
    pub open_circuit_assumed: bool,
    /// The resistance was assumed.
    pub resistance_assumed: bool,
    /// The inductance was computed from the rating.
    pub inductance_computed: bool,
}

/// Why no constants follow from what is known.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ConstantsError {
    /// A constant is out of range.
    Winding(WindingError),
    /// The rating's amps, speed or volts are not positive, finite numbers.
    Rating(Rating),
    /// Without this figure nothing follows from the others.
    Missing {
        /// The keys of a build file, any of which would do.
        what: &'static str,
    },
    /// At the rated speed the EMF does not even reach the bus: open-circuit volts and rating contradict each other.
    UnderBus {
        /// Peak of the EMF between the leads at the rated speed and working temperature.
        peak: Volts,
        /// What it has to exceed: bus volts and forward drops.
        needed: Volts,
        /// The rated speed.
        rpm: Rpm,
    },
    /// Open-circuit volts, resistance and rating contradict each other: even without inductance the winding gives less
    /// than it is rated for.
    Contradiction {
        /// What it gives at the rated point with no inductance at all.
        ceiling: Amps,
        /// What it is rated for.
        rated: Amps,
        /// The rated speed.
        rpm: Rpm,
    },
    /// The usual share of resistance does not fit these volts and this rating: the resistance has to be measured.
    NeedsResistance,
    /// A search failed.
    Root(RootError),
}

impl fmt::Display for ConstantsError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            ConstantsError::Winding(error) => write!(f, "{error}"),
            ConstantsError::Rating(rating) => write!(
                f,
                "`rated` is {} A at {} rpm into {} V: all three have to be above zero",
                rating.amps.0, rating.rpm.0, rating.bus.0
            ),
            ConstantsError::Missing { what } => write!(f, "the winding needs {what}"),
            ConstantsError::UnderBus { peak, needed, rpm } => write!(
                f,
                "`open_circuit` and `rated` contradict each other: at {:.0} rpm the open-circuit peak is {:.1} V at work, and no current flows under {:.1} V",
                rpm.0, peak.0, needed.0
            ),
            ConstantsError::Contradiction {
                ceiling,
                rated,
                rpm,
            } => write!(
                f,
                "`open_circuit`, `resistance` and `rated` contradict each other: with no inductance at all the winding gives {:.3} A at {:.0} rpm, less than the {:.3} A it is rated for",
                ceiling.0, rpm.0, rated.0
            ),
            ConstantsError::NeedsResistance => {
                write!(
                    f,
                    "`resistance` is needed: the usual 8 % of the volts does not fit `open_circuit` and `rated`"
                )
            }
            ConstantsError::Root(error) => write!(f, "no inductance found: {error}"),
        }
    }
}

impl std::error::Error for ConstantsError {}

impl From<WindingError> for ConstantsError {
    fn from(error: WindingError) -> ConstantsError {
        ConstantsError::Winding(error)
    }
}

impl From<RootError> for ConstantsError {
    fn from(error: RootError) -> ConstantsError {
        ConstantsError::Root(error)
    }
}

/// What is needed besides the open-circuit volts when nothing is rated.
const NEEDS: &str = "`rated`, or `open_circuit`, `resistance` and `inductance`";

impl Known {
    /// Completes the constants: computes the inductance from the rating, assumes what is lacking of the rest.
    ///
    /// - open-circuit volts, resistance and a rating: the inductance is the root of I_dc(L) = rated;
    /// - a rating alone: open-circuit volts 2.1 times the bus (three-phase 1.9), a resistance whose drop is 8 % of the
    ///   EMF at the rated current, then the inductance.
    ///
    /// # Errors
    /// [`ConstantsError`]: figures out of range, lacking, or contradicting each other.
    pub fn complete(&self) -> Result<Constants, ConstantsError> {
        let open_circuit = match (self.open_circuit, self.rated) {
            (Some(given), _) => given,
            (None, Some(rated)) => {
                lawful(&rated)?;
                rated.bus * typical_open_circuit(self.phases).value / rated.rpm
            }
            (None, None) => return Err(ConstantsError::Missing { what: NEEDS }),
        };
        if let (Some(resistance), Some(inductance)) = (self.resistance, self.inductance) {
            let cold = Winding::between_leads(
                open_circuit,
                resistance,
                inductance,
                self.poles,
                self.phases,
            )?;
            return self.finish(open_circuit, &self.working.heat(&cold)?);
        }
        let rated = self.rated.ok_or(ConstantsError::Missing { what: NEEDS })?;
        lawful(&rated)?;
        // One ohm stands in until the resistance is known; the leads' figures become one phase's at work here.
        let stand_in = Ohms(1.0);
        let cold = Winding::between_leads(
            open_circuit,
            self.resistance.unwrap_or(stand_in),
            self.inductance.unwrap_or(Henries::ZERO),
            self.poles,
            self.phases,
        )?;
        let point = RatedPoint {
            hot: self.working.heat(&cold)?,
            rated,
            rectifier: self.rectifier,
        };
        let winding = match (self.resistance, self.inductance) {
            (Some(_), _) => point.with_inductance(point.hot.resistance())?,
            (None, None) => point.with_typical_resistance()?,
            (None, Some(_)) => point.with_typical_resistance_beside_inductance()?,
        };
        self.finish(open_circuit, &winding)
    }

    /// Back to the leads at 20 °C. A figure that was given is handed back as given.
    fn finish(
        &self,
        open_circuit: VoltsPerRpm,
        winding: &Winding,
    ) -> Result<Constants, ConstantsError> {
        let leads = match self.phases {
            Phases::One => 1.0,
            Phases::Three => 2.0,
        };
        let resistance = match self.resistance {
            Some(given) => given,
            None => self.working.cool(winding)?.resistance() * leads,
        };
        Ok(Constants {
            winding: *winding,
            open_circuit,
            resistance,
            inductance: self.inductance.unwrap_or(winding.inductance() * leads),
            open_circuit_assumed: self.open_circuit.is_none(),
            resistance_assumed: self.resistance.is_none(),
            inductance_computed: self.inductance.is_none(),
        })
    }
}

fn lawful(rating: &Rating) -> Result<(), ConstantsError> {
    let positive = |x: f64| x.is_finite() && x > 0.0;
    if positive(rating.amps.0) && positive(rating.rpm.0) && positive(rating.bus.0) {
        Ok(())
    } else {
        Err(ConstantsError::Rating(*rating))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::Celsius;
    use crate::source::{Magnets, rectified, rectified_dc};

    const BRIDGE: Rectifier = Rectifier::FullWave { drop: Volts(0.9) };

    fn rated_16_a() -> Known {
        Known {
            open_circuit: Some(VoltsPerRpm(30.0 / 3600.0)),
            resistance: Some(Ohms(0.14)),
            inductance: None,
            rated: Some(Rating {
                amps: Amps(16.0),
                rpm: Rpm(3600.0),
                bus: Volts(14.0),
            }),
            poles: 18,
            phases: Phases::One,
            rectifier: Some(BRIDGE),
            working: Working {
                winding: Celsius(100.0),
                magnets: Magnets::Ferrite,
            },
        }
    }

    #[test]
    fn rating_decides_the_inductance() {
        let found = rated_16_a().complete().unwrap();
        let given = rectified_dc(&found.winding, &BRIDGE, Rpm(3600.0), Volts(14.0));
        assert!((given - Amps(16.0)).abs() < Amps(1e-9), "{given:?}");
        assert!(
            found.inductance_computed && !found.resistance_assumed && !found.open_circuit_assumed
        );
        assert_eq!(found.resistance, Ohms(0.14));
        assert!((found.winding.resistance().0 - 0.14 * 1.3144).abs() < 1e-12);
        // Handed back in place of the rating, the inductance gives the same winding.
        let again = Known {
            inductance: Some(found.inductance),
            rated: None,
            ..rated_16_a()
        };
        assert_eq!(again.complete().unwrap().winding, found.winding);
    }

    #[test]
    fn worked_number_of_a_known_winding() {
        // Round trip: the invented stator of K083 gives 15.1036 A at 3600 rpm into 14.0 V through 0.9 V diodes with
        // 0.35 mH; from that rating 0.35 mH follows (± what four decimals of the amps leave).
        let known = Known {
            open_circuit: Some(VoltsPerRpm(28.0 / 3600.0)),
            resistance: Some(Ohms(0.15)),
            rated: Some(Rating {
                amps: Amps(15.1036),
                rpm: Rpm(3600.0),
                bus: Volts(14.0),
            }),
            working: Working::AS_MEASURED,
            ..rated_16_a()
        };
        let found = known.complete().unwrap();
        assert!(
            (found.inductance.0 - 0.35e-3).abs() < 1e-8,
            "{:?}",
            found.inductance
        );
    }

    #[test]
    fn rating_alone_assumes_volts_and_resistance() {
        for (phases, ratio) in [(Phases::One, 2.1), (Phases::Three, 1.9)] {
            let known = Known {
                open_circuit: None,
                resistance: None,
                phases,
                ..rated_16_a()
            };
            let found = known.complete().unwrap();
            assert!((found.open_circuit.0 * 3600.0 - ratio * 14.0).abs() < 1e-12);
            let out = rectified(&found.winding, &BRIDGE, Rpm(3600.0), Volts(14.0));
            assert!((out.dc.0 - 16.0).abs() < 1e-9);
            let share =
                found.winding.resistance() * out.winding_rms / found.winding.emf(Rpm(3600.0));
            assert!((share - 0.08).abs() < 1e-9, "{share}");
            assert!(found.open_circuit_assumed && found.resistance_assumed);
            // The figures between the leads, typed in, give the same winding.
            let typed = Known {
                open_circuit: Some(found.open_circuit),
                resistance: Some(found.resistance),
                inductance: Some(found.inductance),
                rated: None,
                ..known
            };
            let again = typed.complete().unwrap().winding;
            assert!((again.resistance() / found.winding.resistance() - 1.0).abs() < 1e-12);
            assert!((again.open_circuit() / found.winding.open_circuit() - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn half_wave_and_alternating_ratings() {
        let half = Known {
            rectifier: Some(Rectifier::HalfWave { drop: Volts(0.9) }),
            rated: Some(Rating {
                amps: Amps(3.0),
                rpm: Rpm(3600.0),
                bus: Volts(13.0),
            }),
            resistance: None,
            ..rated_16_a()
        };
        assert!(half.complete().is_ok());
        // A lighting winding, no rectifier: 20 V, 0.5 ohm, 4 A into 12 V: X = √(20² − (12 + 2)²)/4 = 3.5707 ohm.
        let lighting = Known {
            open_circuit: Some(VoltsPerRpm(20.0 / 3600.0)),
            resistance: Some(Ohms(0.5)),
            rectifier: None,
            rated: Some(Rating {
                amps: Amps(4.0),
                rpm: Rpm(3600.0),
                bus: Volts(12.0),
            }),
            working: Working::AS_MEASURED,
            ..rated_16_a()
        };
        let x = lighting.complete().unwrap().winding.reactance(Rpm(3600.0));
        assert!((x.0 - 3.570_714).abs() < 1e-5, "{x:?}");
    }

    #[test]
    fn contradictions_say_which() {
        let known = Known {
            resistance: Some(Ohms(1.4)),
            ..rated_16_a()
        };
        let Err(ConstantsError::Contradiction { ceiling, rated, .. }) = known.complete() else {
            panic!("no contradiction found")
        };
        assert!(ceiling < rated && ceiling > Amps(1.0));
        assert!(
            known
                .complete()
                .unwrap_err()
                .to_string()
                .contains("`resistance` and `rated` contradict")
        );
        let weak = Known {
            open_circuit: Some(VoltsPerRpm(11.0 / 3600.0)),
            ..rated_16_a()
        };
        assert!(matches!(
            weak.complete(),
            Err(ConstantsError::UnderBus { .. })
        ));
        let nothing = Known {
            rated: None,
            ..rated_16_a()
        };
        assert!(matches!(
            nothing.complete(),
            Err(ConstantsError::Missing { .. })
        ));
        let none = Rating {
            amps: Amps(0.0),
            rpm: Rpm(3600.0),
            bus: Volts(14.0),
        };
        let idle = Known {
            rated: Some(none),
            ..rated_16_a()
        };
        assert!(matches!(idle.complete(), Err(ConstantsError::Rating(_))));
    }

    #[test]
    fn barely_above_the_bus_the_resistance_has_to_be_known() {
        let known = Known {
            open_circuit: Some(VoltsPerRpm(12.5 / 3600.0)),
            resistance: None,
            ..rated_16_a()
        };
        assert_eq!(known.complete(), Err(ConstantsError::NeedsResistance));
    }
}
