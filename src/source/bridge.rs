//! Full-wave rectification of a single-phase winding: four diodes, or two diodes and two controlled rectifiers.

use super::Conduction;
use super::segment::{Circuit, Piece, Segment};
use std::f64::consts::{FRAC_PI_2, PI};

/// Single-phase bridge into a stiff bus, exact over one half cycle.
///
/// Equation:
/// ```text
/// pulses:      from α = asin(U/E), i = 0, to β, i(β) = 0 in [π − α, π + α], while i(π + α) ≤ 0
/// continuous:  from θ0 = φ − asin(κ) over π, i(θ0) = i(θ0 + π) = 0
///              κ = (Z U / E X) (π/2) tanh(y)/y,  y = π R / 2X,  tanh(y)/y → 1
/// I_dc = Q/π,  I_rms² = S/π
/// ```
/// where E peak open-circuit volts; U = V + 2 Vf bus volts and two forward drops, V; R, X, Z = √(R² + X²) ohms;
/// φ = atan2(X, R); Q, S the integrals of i and i² (see the segment).
///
/// Valid for U ≥ 0; no current when E ≤ U. i(π + α) ≤ 0 is exact as the border of the regimes, where both agree.
/// For R → 0 continuous: I_dc = (2/πX) √(E² − (πU/2)²), while U/E ≤ 1/√(1 + π²/4) = 0.537.
///
/// Source: derived from Kirchhoff's voltage law and half-wave symmetry.
///
/// Gives the mode, and hands the one stretch of conduction to `add`.
pub(super) fn conduct(c: &Circuit, u: f64, mut add: impl FnMut(&Piece)) -> Conduction {
    let u = u.max(0.0);
    if c.e <= u {
        return Conduction::Off;
    }
    let share = 1.0 / PI;
    let alpha = (u / c.e).min(1.0).asin();
    let pulse = Segment::new(c, 0.0, u, alpha, 0.0);
    if pulse.current(PI + alpha) <= 0.0 {
        let end = pulse.falls_to(0.0, PI - alpha, PI + alpha, PI + alpha);
        add(&Piece {
            segment: pulse,
            end,
            in_mean: share,
            in_square: share,
        });
        return Conduction::Pulses;
    }
    let y = FRAC_PI_2 * c.r / c.x;
    let flattened = if y > 1e-8 { y.tanh() / y } else { 1.0 };
    let kappa = c.impedance() * u / (c.e * c.x) * FRAC_PI_2 * flattened;
    let start = c.x.atan2(c.r) - kappa.min(1.0).asin();
    let segment = Segment::new(c, 0.0, u, start, 0.0);
    add(&Piece {
        segment,
        end: start + PI,
        in_mean: share,
        in_square: share,
    });
    Conduction::Continuous
}
