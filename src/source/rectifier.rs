//! Rectifiers, and what a winding gives through one into a bus.

use super::segment::{Circuit, Piece};
use super::winding::{Phases, Winding};
use super::{bridge, half_wave, three_phase};
use crate::quantity::{Amps, Rpm, Volts};
use serde::Serialize;
use std::f64::consts::SQRT_2;

/// How alternating current becomes direct current. A series regulator whose switch doubles as the rectifier is the
/// same, with the switch's drop.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Rectifier {
    /// One diode in the live lead. On three phases: one diode each, the star point on the return.
    HalfWave {
        /// Forward drop of the diode.
        drop: Volts,
    },
    /// A bridge: four diodes, or six on three phases.
    FullWave {
        /// Forward drop of one diode; two are in series at any time. For a bridge of two controlled rectifiers and
        /// two diodes: the mean of both drops.
        drop: Volts,
    },
}

impl Rectifier {
    /// The forward drops in series with the bus: one diode's for half-wave, two for a bridge.
    #[must_use]
    pub fn drops(&self) -> Volts {
        match self {
            Rectifier::HalfWave { drop } => *drop,
            Rectifier::FullWave { drop } => 2.0 * *drop,
        }
    }

    /// Bus volts and drops together, never under zero: what the EMF has to exceed.
    fn opposing(&self, bus: Volts) -> f64 {
        (bus + self.drops()).0.max(0.0)
    }
}

/// How the rectifier conducts over a cycle.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Conduction {
    /// Not at all: the EMF never exceeds the bus and the drops.
    Off,
    /// In separate pulses.
    Pulses,
    /// Three-phase: in pulses so long that the next phase joins in, with a time of no current between.
    OverlappingPulses,
    /// Three-phase: always two phases, three while the current changes over.
    Commutating,
    /// Without a pause; three-phase: all three phases always.
    Continuous,
}

/// What a winding gives through its rectifier at one speed into one bus voltage, averaged over an electrical cycle.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Output {
    /// Mean current into the bus.
    pub dc: Amps,
    /// Root-mean-square current of one phase of the winding.
    pub winding_rms: Amps,
    /// The greatest reverse voltage a diode sees.
    pub peak_inverse: Volts,
    /// How the rectifier conducts.
    pub mode: Conduction,
}

/// What `winding` gives through `rectifier` at `rpm` into a bus held at `bus`.
///
/// Exact for a sine EMF, constant inductance, constant forward drop and a stiff bus; the equations are with each
/// topology. A bus so far under zero that it would help the EMF is taken as a short. A speed that is not a positive
/// number stands still.
///
/// Three phases through single diodes with the star point on the return are three half-wave circuits beside each
/// other.
#[must_use]
pub fn rectified(winding: &Winding, rectifier: &Rectifier, rpm: Rpm, bus: Volts) -> Output {
    let circuit = winding.at(rpm);
    let (mut mean, mut square, mut end) = (0.0, 0.0, None);
    let mode = conduct(winding, rectifier, &circuit, bus, |piece| {
        mean += piece.mean();
        square += piece.square();
        end = Some(piece.end);
    });
    let peak_inverse = match rectifier {
        Rectifier::HalfWave { .. } => half_wave::peak_inverse(circuit.e, bus.0, end),
        Rectifier::FullWave { drop } => (bus + *drop).0,
    };
    Output {
        dc: Amps(f64::max(mean, 0.0) * circuits(winding, rectifier)),
        winding_rms: Amps(f64::max(square, 0.0).sqrt()),
        peak_inverse: Volts(peak_inverse),
        mode,
    }
}

/// The mean current of [`rectified`] alone, in closed form after at most one root: the fast path of a bus solver.
#[must_use]
pub fn rectified_dc(winding: &Winding, rectifier: &Rectifier, rpm: Rpm, bus: Volts) -> Amps {
    let circuit = winding.at(rpm);
    let mut mean = 0.0;
    let _mode = conduct(winding, rectifier, &circuit, bus, |piece| {
        mean += piece.mean()
    });
    Amps(f64::max(mean, 0.0) * circuits(winding, rectifier))
}

/// How many separate circuits feed the bus side by side.
fn circuits(winding: &Winding, rectifier: &Rectifier) -> f64 {
    match rectifier {
        Rectifier::HalfWave { .. } => f64::from(winding.phases().count()),
        Rectifier::FullWave { .. } => 1.0,
    }
}

/// Picks the topology.
fn conduct(
    winding: &Winding,
    rectifier: &Rectifier,
    circuit: &Circuit,
    bus: Volts,
    add: impl FnMut(&Piece),
) -> Conduction {
    let u = rectifier.opposing(bus);
    if !(circuit.e.is_finite() && circuit.x.is_finite() && u.is_finite()) {
        return Conduction::Off;
    }
    match (rectifier, winding.phases()) {
        (Rectifier::HalfWave { .. }, _) => half_wave::conduct(circuit, u, add),
        (Rectifier::FullWave { .. }, Phases::One) => bridge::conduct(circuit, u, add),
        (Rectifier::FullWave { .. }, Phases::Three) => three_phase::conduct(circuit, u, add),
    }
}

/// The speed above which the winding gives current into `bus`.
///
/// Equation: n0 = U / (√2 k), three-phase bridge n0 = U / (√6 k), where U bus volts and the drops in series, V; k
/// open-circuit rms volts per rpm of one phase. Valid for U ≥ 0, else zero. Source: the peak EMF reaches U.
#[must_use]
pub fn cut_in_speed(winding: &Winding, rectifier: &Rectifier, bus: Volts) -> Rpm {
    let across = match (rectifier, winding.phases()) {
        (Rectifier::FullWave { .. }, Phases::Three) => 3.0_f64.sqrt(),
        _ => 1.0,
    };
    Rpm(rectifier.opposing(bus) / (SQRT_2 * across * winding.open_circuit().0))
}
