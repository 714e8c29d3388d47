//! Windings and alternators of a build.

use super::Figure;
use crate::description::charging::RegulatorKind;
use crate::quantity::{
    Amps, Celsius, Fraction, Henries, Kelvins, Money, Ohms, Rpm, Volts, VoltsPerKelvin,
};
use crate::source::{
    ConstantsError, Known, Magnets, OutputCurve, Phases, Rating, Rectifier, Winding, Working,
};
use serde::Serialize;

/// One source of current.
#[derive(Clone, Debug, Serialize)]
pub struct Source {
    /// Name in the answers.
    pub name: String,
    /// Path of its entry, `charging[0]`.
    pub path: String,
    /// Catalog part, where it is one.
    pub part: Option<String>,
    /// Winding or alternator.
    pub kind: SourceKind,
    /// Its circuit: none is the battery bus.
    pub circuit: Option<String>,
    /// Grounded by the interlock to stop the blades: carries nothing.
    pub braking: bool,
    /// Regulator; none is unregulated.
    pub regulator: Option<Regulator>,
    /// Price.
    pub price: Option<Money>,
}

/// Winding or alternator.
#[derive(Clone, Debug, Serialize)]
pub enum SourceKind {
    /// A flywheel winding with its rectifier.
    Winding(Box<WindingSource>),
    /// A belt-driven alternator.
    Alternator(Box<Alternator>),
}

/// A winding as it stands in the build: measured figures, and the constants that follow.
#[derive(Clone, Debug, Serialize)]
pub struct WindingSource {
    /// Open-circuit rms volts between two leads at 20 °C.
    pub open_circuit: Figure<(Volts, Rpm)>,
    /// Resistance between two leads at 20 °C.
    pub resistance: Figure<Ohms>,
    /// Inductance between two leads, where measured; else it follows from the rating.
    pub inductance: Option<Figure<Henries>>,
    /// Rated amps, speed and bus volts, where given.
    pub rated: Option<Figure<(Amps, Rpm, Volts)>>,
    /// Magnet poles.
    pub poles: u32,
    /// 1 or 3.
    pub phases: u32,
    /// Temperature at work.
    pub working: Figure<Celsius>,
    /// Magnets.
    pub magnets: Magnets,
    /// Same volts, this many times the current.
    pub scale: Figure<Fraction>,
    /// Rectifier; none for alternating current on its own circuit.
    pub rectifier: Option<Rectifier>,
    /// Constants at working temperature, one phase to neutral, `scale` included.
    pub constants: Winding,
}

/// A belt-driven alternator.
#[derive(Clone, Debug, Serialize)]
pub struct Alternator {
    /// Output curve by alternator speed.
    pub curve: OutputCurve,
    /// Alternator turns for one of the engine.
    pub ratio: Figure<Fraction>,
    /// Bus volts the curve was taken at.
    pub at: Figure<Volts>,
    /// How much hotter it works than the curve's temperature.
    pub hotter: Kelvins,
}

/// A regulator.
#[derive(Clone, Debug, Serialize)]
pub struct Regulator {
    /// Setpoint at 25 °C.
    pub holds: Figure<Volts>,
    /// Series or shunt.
    pub kind: RegulatorKind,
    /// Change of the setpoint a degree of air above 25 °C.
    pub per_degree: VoltsPerKelvin,
}

impl Regulator {
    /// The setpoint at an air temperature.
    #[must_use]
    pub fn setpoint(&self, air: Celsius) -> Volts {
        self.holds.value + self.per_degree * air.above(Celsius(25.0))
    }
}

impl Alternator {
    /// Amps at an engine speed, whatever the bus volts below the setpoint (to first order a
    /// belt-driven alternator's output does not depend on them).
    #[must_use]
    pub fn output(&self, engine: Rpm) -> Amps {
        self.curve.driven(engine, self.ratio.value, self.hotter)
    }
}

impl WindingSource {
    /// What is known of it, by its figures as they stand.
    #[must_use]
    pub fn known(&self) -> Known {
        let rating = |&(amps, rpm, bus): &(Amps, Rpm, Volts)| Rating { amps, rpm, bus };
        let (volts, rpm) = self.open_circuit.value;
        Known {
            open_circuit: Some(volts / rpm),
            resistance: Some(self.resistance.value),
            inductance: self.inductance.as_ref().map(|f| f.value),
            rated: self.rated.as_ref().map(|f| rating(&f.value)),
            poles: self.poles,
            phases: if self.phases == 3 {
                Phases::Three
            } else {
                Phases::One
            },
            rectifier: self.rectifier,
            working: Working {
                winding: self.working.value,
                magnets: self.magnets,
            },
        }
    }

    /// The constants that follow from its figures as they stand, `scale` included: what
    /// [`constants`](Self::constants) must be set to after a figure was changed.
    ///
    /// # Errors
    /// [`ConstantsError`]: the figures contradict each other.
    pub fn solve(&self) -> Result<Winding, ConstantsError> {
        let complete = self.known().complete()?;
        Ok(complete.winding.scaled(self.scale.value)?)
    }
}
