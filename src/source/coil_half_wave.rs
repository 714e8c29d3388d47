//! One diode that feeds a coil and a resistive load, with no battery.

use super::half_wave;
use super::no_battery::{Driver, Means};
use super::segment::{Circuit, Segment};
use std::f64::consts::PI;

/// Mean and mean square of the current through a coil in series with winding and diode: the half-wave rectifier with
/// R + R_coil, X + X_coil into U = Vf.
pub(super) fn in_series(d: &Driver, coil: f64, reactance: f64) -> (f64, f64) {
    let all = Circuit::new(d.c.e, d.c.r + coil, d.c.x + reactance);
    let (mut mean, mut square) = (0.0, 0.0);
    let _mode = half_wave::conduct(&all, d.drops, |piece| {
        mean += piece.mean();
        square += piece.square();
    });
    (mean, square)
}

/// Means over a cycle of one diode that feeds a resistor Rp beside a steady coil current I, no freewheel diode.
///
/// Equation: X di/dθ + (R + Rp) i = E sin θ − U, i ≥ 0, U = Vf − Rp I; V = Rp (I_dc − I). U < 0 (the coil pulls through
/// the diode): conduction starts at asin(U/E) < 0; where it has not ended a cycle later it never does, and
/// I_dc = −U/(R + Rp), I_rms² = I_dc² + (E/Z)²/2.
///
/// Symbols as for the rectifiers; V the mean volts across the load. Valid for a coil whose time constant is long
/// against a cycle. Source: derived from Kirchhoff's laws.
pub(super) fn means(d: &Driver, coil: f64) -> Means {
    let all = d.with_load();
    let u = d.drops - d.beside * coil;
    let (mut mean, mut square) = (0.0, 0.0);
    if u >= 0.0 {
        let _mode = half_wave::conduct(&all, u, |piece| {
            mean += piece.mean();
            square += piece.square();
        });
    } else {
        (mean, square) = pulled(&all, u);
    }
    Means {
        volts: d.beside * (mean - coil),
        power: d.heat(coil, 1.0, mean, square),
        winding_square: square,
    }
}

/// Mean and mean square of the current with U < 0.
fn pulled(all: &Circuit, u: f64) -> (f64, f64) {
    if u > -all.e {
        let alpha = (u / all.e).asin();
        let segment = Segment::new(all, 0.0, u, alpha, 0.0);
        if segment.current(2.0 * PI + alpha) <= 0.0 {
            let end = segment.falls_to(0.0, PI - alpha, 2.0 * PI + alpha, 1.5 * PI);
            return (
                segment.charge(end) / (2.0 * PI),
                segment.square(end) / (2.0 * PI),
            );
        }
    }
    let (steady, swing) = (
        -u / all.r,
        if all.e > 0.0 {
            all.e / all.impedance()
        } else {
            0.0
        },
    );
    (steady, steady * steady + 0.5 * swing * swing)
}

/// Means over a cycle of one diode with a freewheel diode across the load: a steady coil current I and a resistor Rp.
///
/// Equation, with m = I − Vf/Rp the current up to which the freewheel diode carries the rest, both diodes dropping Vf:
/// ```text
/// m > 0:  i < m:  X di/dθ + R i = E sin θ                               (load at −Vf)
///         i ≥ m:  X di/dθ + (R + Rp) i = E sin θ − Vf + Rp I            (load at Rp (i − I))
///         from 0 at 0 up to m at θ1, back to m at θ2, to 0 before 2π
///         V = (1/2π)[E (cos θ1 − cos θ2) − R ∫i from θ1 to θ2] − Vf
/// m ≤ 0:  half-wave with R + Rp into U = Vf − Rp I;  V = Rp (I_dc − I)
/// no resistor (Rp → ∞):  i = I from θ1 to θ2 = π − asin(R I/E)
/// ```
/// Symbols as for the rectifiers. Valid for a coil whose time constant is long against a cycle. R = 0 and no resistor:
/// V = E/π − X I/2π − Vf. Where the winding never takes the whole current V = −Vf. Source: derived.
pub(super) fn means_freewheel(d: &Driver, coil: f64) -> Means {
    let m = coil - d.drops / d.beside;
    if d.beside.is_finite() && m <= 0.0 {
        return means(d, coil);
    }
    let idle_heat = |angle: f64| d.drops * d.drops / d.beside * angle;
    if d.c.e <= 0.0 {
        return Means {
            volts: -d.drops,
            power: idle_heat(1.0),
            winding_square: 0.0,
        };
    }
    let up = Segment::new(&d.c, 0.0, 0.0, 0.0, 0.0);
    let latest = PI - (d.c.r * m / d.c.e).min(1.0).asin();
    if d.c.r * m >= d.c.e || up.current(latest) <= m {
        let end = up.falls_to(0.0, PI, 2.0 * PI, 2.0 * PI);
        let winding_square = up.square(end) / (2.0 * PI);
        return Means {
            volts: -d.drops,
            power: idle_heat(1.0),
            winding_square,
        };
    }
    let taken = up.rises_to(m, 0.0, latest);
    let (given_back, charge, square) = if d.beside.is_finite() {
        let fed = Segment::new(&d.with_load(), 0.0, d.drops - d.beside * coil, taken, m);
        let back = fed.falls_to(
            m,
            latest,
            2.0 * PI - taken,
            latest.midpoint(2.0 * PI - taken),
        );
        (back, fed.charge(back), fed.square(back))
    } else {
        let fed_for = latest - taken;
        (latest, coil * fed_for, coil * coil * fed_for)
    };
    let down = Segment::new(&d.c, 0.0, 0.0, given_back, m);
    let end = down.falls_to(0.0, given_back, 2.0 * PI, 2.0 * PI);
    let fed_for = given_back - taken;
    let driven = d.c.e * (taken.cos() - given_back.cos()) - d.c.r * charge;
    let heat = idle_heat(2.0 * PI - fed_for) + d.heat(coil, fed_for, charge, square);
    Means {
        volts: driven / (2.0 * PI) - d.drops,
        power: heat / (2.0 * PI),
        winding_square: (up.square(taken) + square + down.square(end)) / (2.0 * PI),
    }
}
