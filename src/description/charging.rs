//! `charging:` as written.

use super::Written;
use crate::quantity::{Amps, Celsius, Fraction, Henries, Money, Ohms, Rpm, Volts, VoltsPerKelvin};
use serde::Serialize;

/// One entry of `charging:`. A catalog winding has the same shape.
#[derive(Clone, Debug, Default)]
pub struct ChargingText {
    /// Path of the mapping.
    pub path: String,
    /// What it is called in the answers.
    pub name: Option<Written<String>>,
    /// Catalog part that it is.
    pub part: Option<Written<String>>,
    /// A flywheel winding.
    pub winding: Option<WindingText>,
    /// A belt-driven alternator, in place of a winding.
    pub alternator: Option<AlternatorText>,
    /// Rectifier.
    pub rectifier: Option<RectifierText>,
    /// Regulator; without it unregulated.
    pub regulator: Option<RegulatorText>,
    /// Price.
    pub price: Option<Written<Money>>,
}

/// `winding:`.
#[derive(Clone, Debug, Default)]
pub struct WindingText {
    /// Path of the mapping.
    pub path: String,
    /// Rated amps at a speed into stated volts, at working temperature.
    pub rated: Option<Written<RatedText>>,
    /// Open-circuit rms volts between two leads at a speed, at 20 °C; the tolerance is that of the volts.
    pub open_circuit: Option<Written<(Volts, Rpm)>>,
    /// Resistance between two leads at 20 °C.
    pub resistance: Option<Written<Ohms>>,
    /// Inductance between two leads.
    pub inductance: Option<Written<Henries>>,
    /// Bench table.
    pub readings: Vec<ReadingText>,
    /// Magnet poles.
    pub poles: Option<Written<u32>>,
    /// 1 or 3.
    pub phases: Option<Written<u32>>,
    /// The winding's temperature at work.
    pub working: Option<Written<Celsius>>,
    /// Magnets.
    pub magnets: Option<Written<crate::source::Magnets>>,
    /// Same volts, this many times the current.
    pub scale: Option<Written<Fraction>>,
    /// `battery`, or the name of its own circuit.
    pub feeds: Option<Written<String>>,
    /// A winding grounded by the interlock to stop the blades; it carries no accessory.
    pub braking: Option<Written<bool>>,
}

/// `rated: 16 A at 3600 rpm into 14 V`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RatedText {
    /// Mean amps into the battery.
    pub amps: Amps,
    /// At this speed.
    pub rpm: Rpm,
    /// Into this bus; 14 V for each 12 V of the system where not written.
    pub volts: Option<Volts>,
}

/// One row of a bench table.
#[derive(Clone, Debug)]
pub struct ReadingText {
    /// Path of the row.
    pub path: String,
    /// Speed.
    pub rpm: Written<Rpm>,
    /// Bus volts at the rectifier.
    pub volts: Written<Volts>,
    /// Mean amps into the bus.
    pub amps: Written<Amps>,
}

/// `rectifier: full-wave` or `{kind: full-wave, drop: 0.9 V}`.
#[derive(Clone, Debug)]
pub struct RectifierText {
    /// Which.
    pub kind: Written<RectifierKind>,
    /// Forward drop of one diode.
    pub drop: Option<Written<Volts>>,
}

/// Kinds of rectifier.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RectifierKind {
    /// One diode.
    HalfWave,
    /// A bridge: of four diodes, or of six for three phases.
    FullWave,
    /// None: alternating current on its own circuit.
    None,
}

/// `regulator: {holds: 14.4 V, kind: series, per_degree: -18 mV}`.
#[derive(Clone, Debug)]
pub struct RegulatorText {
    /// Path of the mapping.
    pub path: String,
    /// Setpoint at 25 °C.
    pub holds: Option<Written<Volts>>,
    /// Series or shunt.
    pub kind: Option<Written<RegulatorKind>>,
    /// Change of the setpoint a degree.
    pub per_degree: Option<Written<VoltsPerKelvin>>,
}

/// Kinds of regulator.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
pub enum RegulatorKind {
    /// Opens at its setpoint.
    Series,
    /// Shorts the winding at its setpoint.
    Shunt,
}

/// `alternator:` belt-driven, by its output curve.
#[derive(Clone, Debug, Default)]
pub struct AlternatorText {
    /// Path of the mapping.
    pub path: String,
    /// Amps at alternator speeds, rising.
    pub curve: Vec<Written<(Amps, Rpm)>>,
    /// Alternator turns for one of the engine.
    pub ratio: Option<Written<Fraction>>,
    /// Bus volts the curve was taken at.
    pub at: Option<Written<Volts>>,
    /// Temperature the curve was taken at.
    pub tested: Option<Written<Celsius>>,
    /// Temperature at work.
    pub working: Option<Written<Celsius>>,
}
