//! One diode: half-wave rectification into a stiff bus.

use super::Conduction;
use super::segment::{Circuit, Piece, Segment};
use std::f64::consts::PI;

/// Half-wave rectifier, exact over one electrical cycle.
///
/// Equation:
/// ```text
/// conduction starts at α = asin(U/E) with i = 0:  X di/dθ + R i = E sin θ − U
/// ends at β, i(β) = 0 in [π − α, 2π + α];  I_dc = Q/2π,  I_rms² = S/2π
/// ```
/// where E peak open-circuit volts; U = V + Vf bus volts and forward drop, V; R, X ohms; Q, S the integrals of i and
/// i² (see the segment).
///
/// Valid for U ≥ 0 (a bus under −Vf is taken as −Vf); no current when E ≤ U. Conduction is never continuous.
///
/// Source: derived from Kirchhoff's voltage law; textbook form for R alone: Rashid, Power Electronics (from memory).
///
/// Gives the mode, and hands the one stretch of conduction to `add`.
pub(super) fn conduct(c: &Circuit, u: f64, mut add: impl FnMut(&Piece)) -> Conduction {
    let u = u.max(0.0);
    if c.e <= u {
        return Conduction::Off;
    }
    let alpha = (u / c.e).min(1.0).asin();
    let segment = Segment::new(c, 0.0, u, alpha, 0.0);
    let end = segment.ends(PI - alpha, 2.0 * PI + alpha);
    let share = 1.0 / (2.0 * PI);
    add(&Piece {
        segment,
        end,
        in_mean: share,
        in_square: share,
    });
    Conduction::Pulses
}

/// Peak inverse volts of the diode: E + V when it is off at the EMF's trough, V − E sin β when conduction lasts
/// beyond the trough, to `end` = β (bus volts `v`).
pub(super) fn peak_inverse(e: f64, v: f64, end: Option<f64>) -> f64 {
    match end {
        Some(beta) if beta >= 1.5 * PI => v - e * beta.sin(),
        _ => e + v,
    }
}
