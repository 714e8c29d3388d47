//! A bridge that feeds a steady coil current and a resistive load, with no battery.

use super::bridge;
use super::no_battery::{Driver, Means};
use super::segment::Segment;
use crate::root;
use std::f64::consts::PI;

/// Means over half a cycle of a single-phase bridge that feeds a steady coil current I and a resistor Rp.
///
/// Equation, with D = 2 Vf, and m = I − D/Rp the current up to which the bridge cannot keep the load's volts above −D,
/// so that all four diodes conduct and short the winding:
/// ```text
/// m > 0:  |i| < m:  X di/dθ + R i = E sin θ                             (load at −D)
///         i ≥ m:    X di/dθ + (R + Rp) i = E sin θ − D + Rp I           (load at Rp (i − I))
///         from −m at θs to +m at θe, back to m at θs + π
///         V = (1/π)[E (cos θe + cos θs) − R ∫i from θe to θs + π] − D
/// m ≤ 0:  the bridge with R + Rp into U = D − Rp I;  V = Rp (I_dc − I)
/// no resistor (Rp → ∞):  i = I from θe on,  θs = −asin(R I/E)
/// ```
/// where E, R, X are the winding's, V, ohms; V the mean volts across the load.
///
/// Valid for a coil whose time constant is long against a cycle. R = 0 and no resistor: V = 2E/π − (2X/π) I − D and
/// cos(θe − θs) = 1 − 2XI/E. Where the short never ends V = −D.
///
/// Source: derived from Kirchhoff's laws; without a resistor it is the commutation overlap of Mohan, Undeland and
/// Robbins, Power Electronics (from memory).
pub(super) fn means(d: &Driver, coil: f64) -> Means {
    let m = coil - d.drops / d.beside;
    if d.beside.is_finite() && m <= 0.0 {
        return unshorted(d, coil);
    }
    if d.c.e <= 0.0 || d.c.r * m >= d.c.e {
        return shorted(d);
    }
    let earliest = -(d.c.r * m / d.c.e).asin();
    let late = |starts: f64| Half::from(d, coil, m, starts).map_or(-PI, |h| h.over - PI - starts);
    let starts = if d.beside.is_finite() {
        root::within(late, earliest, earliest + PI, 1e-13)
    } else {
        earliest
    };
    Half::from(d, coil, m, starts).map_or_else(|| shorted(d), |half| half.means(d, coil))
}

/// All four diodes conduct all the time: the winding is shorted, the coil runs down through the diodes.
fn shorted(d: &Driver) -> Means {
    let (z, power) = (d.c.impedance(), d.drops * d.drops / d.beside);
    let peak = if d.c.e > 0.0 { d.c.e / z } else { 0.0 };
    Means {
        volts: -d.drops,
        power,
        winding_square: 0.5 * peak * peak,
    }
}

/// The resistor takes the coil's current whenever the bridge does not: no short.
fn unshorted(d: &Driver, coil: f64) -> Means {
    let (mut mean, mut square) = (0.0, 0.0);
    let _mode = bridge::conduct(&d.with_load(), d.drops - d.beside * coil, |piece| {
        mean += piece.mean();
        square += piece.square();
    });
    Means {
        volts: d.beside * (mean - coil),
        power: d.heat(coil, 1.0, mean, square),
        winding_square: square,
    }
}

/// Half a cycle that begins with a short.
struct Half {
    /// The short's current, from −m at θs.
    short: Segment,
    /// θe, where it reaches m.
    ends: f64,
    /// The current while the load is fed; none when it is the steady coil current.
    fed: Option<Segment>,
    /// Where it has fallen back to m.
    over: f64,
}

impl Half {
    /// From the angle where the short begins; none when it never ends.
    ///
    /// The current can rise through m only while E sin θ > R m, so until θl = π − asin(Rm/E), and fall through it only
    /// after; it is back by 2π − θe, which is where it would be without any resistance.
    fn from(d: &Driver, coil: f64, m: f64, starts: f64) -> Option<Half> {
        let latest = PI - (d.c.r * m / d.c.e).asin();
        let short = Segment::new(&d.c, 0.0, 0.0, starts, -m);
        if starts >= latest || short.current(latest) <= m {
            return None;
        }
        let ends = short.rises_to(m, starts, latest);
        if !d.beside.is_finite() {
            return Some(Half {
                short,
                ends,
                fed: None,
                over: starts + PI,
            });
        }
        let fed = Segment::new(&d.with_load(), 0.0, d.drops - d.beside * coil, ends, m);
        let over = fed.falls_to(m, latest, 2.0 * PI - ends, latest.midpoint(2.0 * PI - ends));
        Some(Half {
            short,
            ends,
            fed: Some(fed),
            over,
        })
    }

    fn means(&self, d: &Driver, coil: f64) -> Means {
        let starts = self.short.t1;
        let fed_for = self.over - self.ends;
        let (charge, square) = match &self.fed {
            Some(fed) => (fed.charge(self.over), fed.square(self.over)),
            None => (coil * fed_for, coil * coil * fed_for),
        };
        let driven = d.c.e * (self.ends.cos() - self.over.cos()) - d.c.r * charge;
        let short_heat = d.drops * d.drops / d.beside * (self.ends - starts);
        Means {
            volts: driven / PI - d.drops,
            power: (short_heat + d.heat(coil, fed_for, charge, square)) / PI,
            winding_square: (self.short.square(self.ends) + square) / PI,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::source::segment::Circuit;

    #[test]
    fn overlap_angle() {
        // K074 (closed form): 120 V rms 60 Hz, 1 mH, 10 A: overlap 17.143°, 105.638 V.
        let c = Circuit::new(120.0 * 2.0_f64.sqrt(), 0.0, 2.0 * PI * 60.0 * 1e-3);
        let driver = Driver {
            c,
            drops: 0.0,
            beside: f64::INFINITY,
        };
        let half = Half::from(&driver, 10.0, 10.0, 0.0).unwrap();
        assert!((half.ends.to_degrees() - 17.143).abs() < 0.005);
        assert!((means(&driver, 10.0).volts - 105.638).abs() < 0.005);
    }

    #[test]
    fn too_heavy_a_coil_shorts_the_winding() {
        // E/Z = 10 A: with 12 A in the coil the diodes never stop conducting, and the load sits at −2 Vf.
        let driver = Driver {
            c: Circuit::new(10.0, 0.6, 0.8),
            drops: 1.6,
            beside: f64::INFINITY,
        };
        let found = means(&driver, 12.0);
        assert_eq!(found.volts, -1.6);
        assert!((found.winding_square - 50.0).abs() < 1e-9);
    }
}
