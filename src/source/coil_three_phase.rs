//! A three-phase bridge that feeds a steady coil current, with no battery.

use super::no_battery::{Driver, Means};
use super::segment::{Circuit, Segment};
use std::f64::consts::{FRAC_PI_3, FRAC_PI_6, PI};

/// Means over a cycle of a three-phase bridge that feeds a steady current I, and the overlap angle, rad.
///
/// Equation, δ measured from where the EMFs of the leaving and the coming phase are equal:
/// ```text
/// the coming phase's current:  X di/dδ + R i = (√3/2) E sin δ + R I/2,  0 at δs = −asin(RI/√3E),  I at δe
/// V = (3/π)[(E/2)(sin δe − sin δs) − (RI/2)(δe − δs) + E (cos(δe + π/6) − cos(δs + 5π/6))
///           − RI (2π/3 − δe + δs)] − 2Vf
/// ```
/// where E peak line-to-neutral volts; R, X of one phase, ohms; V mean volts across the load.
///
/// Valid while the overlap δe − δs is at most π/3: the caller checks. R = 0: V = 1.35 V_LL − (3/π) X I − 2Vf and
/// cos δe = 1 − 2XI/√3E. Beyond, the same equations are followed so that a search has a curve to follow.
///
/// Source: derived; the form for R = 0 in Mohan, Undeland and Robbins, Power Electronics (from memory).
pub(super) fn means(d: &Driver, coil: f64) -> (Means, f64) {
    let (e, r) = (d.c.e, d.c.r);
    let line = 3.0_f64.sqrt() * e;
    if e <= 0.0 || r * coil >= line {
        return (
            Means {
                volts: -d.drops,
                ..Means::default()
            },
            PI,
        );
    }
    let starts = -(r * coil / line).asin();
    let pair = Circuit {
        e: 0.5 * line,
        ..d.c
    };
    let coming = Segment::new(&pair, 0.0, -0.5 * r * coil, starts, 0.0);
    let latest = PI - starts.abs();
    if coming.current(latest) <= coil {
        return (
            Means {
                volts: -d.drops,
                ..Means::default()
            },
            PI,
        );
    }
    let ends = coming.rises_to(coil, starts, latest);
    let overlap = ends - starts;
    let window = 2.0 * FRAC_PI_3;
    let upper = 0.5 * e * (ends.sin() - starts.sin()) - 0.5 * r * coil * overlap
        + e * ((ends + FRAC_PI_6).cos() - (starts + window + FRAC_PI_6).cos())
        - r * coil * (window - overlap);
    let (charge, square) = (coming.charge(ends), coming.square(ends));
    // Rising, steady for what is left of a third of a cycle, falling as the mirror of the next one's rise.
    let half_cycle = 2.0 * square - 2.0 * coil * charge + coil * coil * window;
    let means = Means {
        volts: 3.0 / PI * upper - d.drops,
        power: 0.0,
        winding_square: half_cycle / PI,
    };
    (means, overlap)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Volts and overlap in degrees of a bridge of `drops` volts in all, fed `line` volts rms between lines.
    fn at(line: f64, hertz: f64, l: f64, drops: f64, coil: f64) -> (f64, f64) {
        let e = line * (2.0_f64 / 3.0).sqrt();
        let c = Circuit::new(e, 0.0, 2.0 * PI * hertz * l);
        let beside = f64::INFINITY;
        let (means, overlap) = means(&Driver { c, drops, beside }, coil);
        (means.volts, overlap.to_degrees())
    }

    #[test]
    fn overlap_angle_and_volts() {
        // K075 (closed form): 20 V line rms 400 Hz, 0.05 mH, 30 A: 42.826°, 23.409 V.
        let (volts, overlap) = at(20.0, 400.0, 5e-5, 0.0, 30.0);
        assert!((overlap - 42.826).abs() < 0.005, "{overlap}");
        assert!((volts - 23.409).abs() < 0.005, "{volts}");
    }

    #[test]
    fn alternator_at_given_battery_volts() {
        // K076 (constant-current overlap model): 16 V line rms, 400 Hz, 0.05 mH and 0.03 ohm a phase, two 0.9 V drops
        // give 32.264 A into 14.0 V, overlap 50.1°. That model takes 2 R I off the volts of a bridge without
        // resistance, which are 14.0 + 2 · 0.03 · 32.264 = 15.936 V; its 0.005 A are 0.0007 V.
        let (volts, overlap) = at(16.0, 400.0, 5e-5, 1.8, 32.264);
        assert!((volts - 15.935_84).abs() < 0.0009, "{volts}");
        assert!((overlap - 50.1).abs() < 0.05, "{overlap}");
    }

    #[test]
    fn a_phase_carries_the_coil_for_two_thirds_of_a_cycle() {
        // Without reactance the winding's current is ± I for a third of a cycle each: I √(2/3) rms (textbook).
        let c = Circuit::new(20.0, 1e-7, 0.0);
        let driver = Driver {
            c,
            drops: 0.0,
            beside: f64::INFINITY,
        };
        let (means, _) = means(&driver, 10.0);
        assert!(
            (means.winding_square - 200.0 / 3.0).abs() < 1e-3,
            "{}",
            means.winding_square
        );
    }
}
