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
    // The falling current is hollow before the trough of the EMF and bulges after it (R apart): from the trough
    // Newton's steps run to the end without overshooting, whichever side it lies.
    let end = segment.falls_to(0.0, PI - alpha, 2.0 * PI + alpha, 1.5 * PI);
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

#[cfg(test)]
mod tests {
    use super::*;

    /// Start, end and top of the current, from the one stretch handed over.
    fn arc(e: f64, r: f64, u: f64) -> (f64, f64, f64) {
        let mut found = (0.0, 0.0, 0.0);
        conduct(&Circuit::new(e, r, 0.0), u, |p| {
            found = (
                p.segment.t1.to_degrees(),
                p.end.to_degrees(),
                p.segment.current(PI / 2.0),
            );
        });
        found
    }

    #[test]
    fn battery_charger_angles() {
        // K056: 60 V rms, 12 V battery conducts over 163.74° (Rashid, Power Electronics, battery-charger example;
        // from memory).
        let (start, end, _) = arc(60.0 * 2.0_f64.sqrt(), 4.256, 12.0);
        assert!((end - start - 163.74).abs() < 0.005, "{}", end - start);
        // K062, K063: 240 V rms, 180 V battery, 0.5 ohm: 32.03° to 147.97°, peak 318.823 A (published exercise sheet
        // on the half-wave battery charger).
        let (start, end, top) = arc(240.0 * 2.0_f64.sqrt(), 0.5, 180.0);
        assert!((start - 32.03).abs() < 0.005 && (end - 147.97).abs() < 0.005);
        assert!((top - 318.823).abs() < 0.01, "{top}");
    }

    #[test]
    fn small_charger_fraction_and_peak() {
        // K066: 24 V peak, 12 V battery, 0.6 V diode, 100 ohm: 114 mA peak, 0.3241 of the cycle (Neamen, example
        // 2.1, from memory). K067: ideal diode: 120 mA, one third (Sedra and Smith, exercise, from memory).
        for (u, peak, fraction) in [(12.6, 0.114, 0.3241), (12.0, 0.120, 0.3333)] {
            let (start, end, top) = arc(24.0, 100.0, u);
            assert!((top / peak - 1.0).abs() < 1e-3);
            assert!(((end - start) / 360.0 / fraction - 1.0).abs() < 1e-3);
        }
    }

    #[test]
    fn nothing_at_or_under_the_bus() {
        for e in [0.0, 13.0, 13.5] {
            let c = Circuit::new(e, 0.2, 0.5);
            assert_eq!(
                conduct(&c, 13.5, |_| panic!("handed over")),
                Conduction::Off
            );
        }
        // A whisker above, where rounding may leave no positive current at all: no charge, but an answer.
        let c = Circuit::new(13.5 * (1.0 + 1e-15), 0.2, 0.5);
        conduct(&c, 13.5, |p| assert!(p.mean().abs() < 1e-12));
    }

    #[test]
    fn peak_inverse_after_the_trough() {
        assert_eq!(peak_inverse(20.0, 14.0, Some(4.0)), 34.0);
        // β = 300°: 14 + 20 · sin 60° = 31.32 V (arithmetic).
        assert!((peak_inverse(20.0, 14.0, Some(300.0_f64.to_radians())) - 31.3205).abs() < 1e-4);
    }
}
