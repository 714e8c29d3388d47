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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Henries, Ohms, VoltsPerRpm};

    /// Nodes and weights of 24-point Gauss–Legendre by Newton's method on the Legendre polynomial: none of the code
    /// under test.
    fn gauss_24() -> Vec<(f64, f64)> {
        let n = 24_u32;
        (1..=n)
            .map(|k| {
                let mut x =
                    (std::f64::consts::PI * (f64::from(k) - 0.25) / (f64::from(n) + 0.5)).cos();
                let mut slope = 1.0;
                for _ in 0..20 {
                    let (mut before, mut value) = (1.0, x);
                    for j in 2..=n {
                        let j = f64::from(j);
                        (before, value) = (
                            value,
                            ((2.0 * j - 1.0) * x * value - (j - 1.0) * before) / j,
                        );
                    }
                    slope = f64::from(n) * (x * value - before) / (x * x - 1.0);
                    x -= value / slope;
                }
                (x, 2.0 / ((1.0 - x * x) * slope * slope))
            })
            .collect()
    }

    /// Integrals of i and i² of a piece, on panels that resolve its start.
    fn by_points(piece: &Piece, layer: f64, gauss: &[(f64, f64)]) -> (f64, f64) {
        let (start, end) = (piece.segment.t1, piece.end);
        let mut edges = vec![start];
        let mut width = layer.min(0.4);
        while edges[edges.len() - 1] + width < end {
            edges.push(edges[edges.len() - 1] + width);
            width = (2.0 * width).min(0.4);
        }
        edges.push(end);
        let mut sums = (0.0, 0.0);
        for pair in edges.windows(2) {
            let (middle, half) = (0.5 * (pair[0] + pair[1]), 0.5 * (pair[1] - pair[0]));
            for (x, w) in gauss {
                let i = piece.segment.current(middle + half * x);
                sums.0 += w * half * i;
                sums.1 += w * half * i * i;
            }
        }
        sums
    }

    #[test]
    fn closed_forms_equal_summation_by_points() {
        let gauss = gauss_24();
        let drop = Volts(0.8);
        let cases = [
            (Phases::One, Rectifier::HalfWave { drop }),
            (Phases::One, Rectifier::FullWave { drop }),
            (Phases::Three, Rectifier::FullWave { drop }),
        ];
        let mut compared = 0;
        for (phases, rectifier) in cases {
            for (r, l) in [
                (0.2, 5e-4),
                (0.0, 5e-4),
                (0.8, 1e-6),
                (0.01, 3e-3),
                (0.5, 1e-4),
            ] {
                let k = VoltsPerRpm(20.0 / 3600.0);
                let winding = Winding::new(k, Ohms(r), Henries(l), 12, phases).unwrap();
                for bus in (0..28).map(f64::from) {
                    let circuit = winding.at(Rpm(3600.0));
                    let layer = if r > 0.0 { 2.0 * circuit.x / r } else { 1.0 };
                    let (mut mean, mut square) = (0.0, 0.0);
                    conduct(&winding, &rectifier, &circuit, Volts(bus), |piece| {
                        let (q, s) = by_points(piece, layer, &gauss);
                        mean += piece.in_mean * q;
                        square += piece.in_square * s;
                    });
                    let out = rectified(&winding, &rectifier, Rpm(3600.0), Volts(bus));
                    let fast = rectified_dc(&winding, &rectifier, Rpm(3600.0), Volts(bus));
                    assert_eq!(fast, out.dc);
                    let scale = 1e-9 * circuit.e / circuit.impedance();
                    assert!(
                        (fast.0 - mean).abs() < 1e-9 * mean + 1e-4 * scale,
                        "{rectifier:?} {r} {l} {bus}"
                    );
                    assert!(
                        (out.winding_rms.0.powi(2) - square).abs() < 1e-9 * square + 1e-4 * scale
                    );
                    compared += 1;
                }
            }
        }
        assert_eq!(compared, 420);
    }

    #[test]
    fn three_half_waves_beside_each_other() {
        let build = |phases| {
            Winding::new(
                VoltsPerRpm(20.0 / 3600.0),
                Ohms(0.2),
                Henries(5e-4),
                12,
                phases,
            )
            .unwrap()
        };
        let diode = Rectifier::HalfWave { drop: Volts(0.8) };
        let one = rectified(&build(Phases::One), &diode, Rpm(3000.0), Volts(13.0));
        let three = rectified(&build(Phases::Three), &diode, Rpm(3000.0), Volts(13.0));
        assert_eq!(three.dc, 3.0 * one.dc);
        assert_eq!(three.winding_rms, one.winding_rms);
    }

    #[test]
    fn odd_speeds_and_volts_give_answers() {
        let k = VoltsPerRpm(20.0 / 3600.0);
        for phases in [Phases::One, Phases::Three] {
            for (r, l) in [(0.2, 0.0), (0.0, 5e-4), (0.2, 5e-4)] {
                let winding = Winding::new(k, Ohms(r), Henries(l), 12, phases).unwrap();
                for drop in [0.0, 0.8].map(Volts) {
                    for rectifier in [Rectifier::HalfWave { drop }, Rectifier::FullWave { drop }] {
                        for rpm in [f64::NAN, f64::INFINITY, -5.0, 0.0, 1e-9, 1e9] {
                            for bus in [f64::NAN, f64::INFINITY, -1e9, -1.0, 0.0, 1e9] {
                                let out = rectified(&winding, &rectifier, Rpm(rpm), Volts(bus));
                                assert!(out.dc.is_finite() && out.dc >= Amps::ZERO);
                                assert!(out.winding_rms.is_finite());
                            }
                        }
                    }
                }
            }
        }
    }
}
