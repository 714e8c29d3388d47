//! The one building block: a sine EMF with resistance and inductance working against a fixed voltage.

use crate::root;

/// A winding loop at one speed, in the symbols of the equations: raw numbers inside this module only.
#[derive(Clone, Copy, Debug)]
pub(super) struct Circuit {
    /// E, peak open-circuit volts.
    pub e: f64,
    /// R, ohms.
    pub r: f64,
    /// X = ωL, ohms; never under [`LEAST_REACTANCE`] of R.
    pub x: f64,
}

/// Reactance is raised to this share of the resistance: the decay then ends at once, which is the exact resistive
/// limit to 14 digits, and nothing divides by zero.
const LEAST_REACTANCE: f64 = 1e-7;

impl Circuit {
    /// From peak volts, ohms and ohms, at least one of the last two above zero.
    pub(super) fn new(e: f64, r: f64, x: f64) -> Circuit {
        Circuit {
            e,
            r,
            x: x.max(LEAST_REACTANCE * r),
        }
    }

    /// Z = √(R² + X²), ohms.
    pub(super) fn impedance(&self) -> f64 {
        self.r.hypot(self.x)
    }
}

/// P1(x) = (1 − e^(−x))/x with P1(0) = 1, and e^(−x).
///
/// Mean over a stretch x of a decay that starts at 1.
fn decay(x: f64) -> (f64, f64) {
    let grown = (-x).exp_m1();
    (if x == 0.0 { 1.0 } else { -grown / x }, 1.0 + grown)
}

/// P1 alone.
pub(super) fn p1(x: f64) -> f64 {
    decay(x).0
}

/// P2(x) = (x − 1 + e^(−x))/x² with P2(0) = 1/2; its series under 0.03, where the closed form cancels.
fn p2(x: f64, p1: f64) -> f64 {
    if x < 0.03 {
        0.5 - x
            * (1.0 / 6.0 - x * (1.0 / 24.0 - x * (1.0 / 120.0 - x * (1.0 / 720.0 - x / 5040.0))))
    } else {
        (1.0 - p1) / x
    }
}

/// One stretch of conduction.
///
/// Equation:
/// ```text
/// X di/dθ + R i = A sin(θ + h) − u,  i(t1) = i1
/// s(θ) = (A/Z) sin(θ + ψ),  ψ = h − φ,  φ = atan2(X, R),  ρ = R/X,  d = θ − t1
/// i(θ) = s(θ) + (i1 − s(t1)) e^(−ρd) − u (d/X) P1(ρd)
/// Q(θ) = ∫ i = (A/Z)[cos(t1 + ψ) − cos(θ + ψ)] + (i1 − s(t1)) d P1(ρd) − u (d²/X) P2(ρd)
/// S(θ) = ∫ i²
/// ```
/// where θ electrical angle, rad; A peak EMF of the loop, V; h its phase, rad; u fixed opposing voltage, V; R, X the
/// loop's resistance and reactance, ohms; i1 the current at t1, A.
///
/// Valid for any R ≥ 0 and X > 0 (X is floored at 1e-7 R); θ ≥ t1.
///
/// Source: derived from Kirchhoff's voltage law; the solution of a first-order linear equation.
#[derive(Clone, Copy, Debug)]
pub(super) struct Segment {
    amplitude: f64,
    psi: f64,
    u: f64,
    r: f64,
    per_x: f64,
    rho: f64,
    /// Start, rad.
    pub t1: f64,
    decaying: f64,
}

impl Segment {
    /// A stretch that starts at angle `t1` with current `i1`. `loop_` gives A (as its E), R and X.
    pub(super) fn new(loop_: &Circuit, phase: f64, u: f64, t1: f64, i1: f64) -> Segment {
        let amplitude = loop_.e / loop_.impedance();
        let psi = phase - loop_.x.atan2(loop_.r);
        let per_x = 1.0 / loop_.x;
        Segment {
            amplitude,
            psi,
            u,
            r: loop_.r,
            per_x,
            rho: loop_.r * per_x,
            t1,
            decaying: i1 - amplitude * (t1 + psi).sin(),
        }
    }

    /// i(θ), amperes.
    pub(super) fn current(&self, theta: f64) -> f64 {
        let d = theta - self.t1;
        let (p1, e) = decay(self.rho * d);
        self.amplitude * (theta + self.psi).sin() + self.decaying * e - self.u * d * self.per_x * p1
    }

    /// i(θ) less `level`, and di/dθ.
    fn above(&self, theta: f64, level: f64) -> (f64, f64) {
        let d = theta - self.t1;
        let (p1, e) = decay(self.rho * d);
        let (sin, cos) = (theta + self.psi).sin_cos();
        let i = self.amplitude * sin + self.decaying * e - self.u * d * self.per_x * p1;
        let slope = self.amplitude * cos - (self.rho * self.decaying + self.u * self.per_x) * e;
        (i - level, slope)
    }

    /// Where the current falls through `level` between `low` and `high`, searched from `start`; `low` when it is not
    /// above it there.
    pub(super) fn falls_to(&self, level: f64, low: f64, high: f64, start: f64) -> f64 {
        root::falling(|t| self.above(t, level), low, high, start)
    }

    /// Where the current rises through `level` between `low` and `high`; `low` when it is already there.
    pub(super) fn rises_to(&self, level: f64, low: f64, high: f64) -> f64 {
        let mirrored = |t: f64| {
            let (value, slope) = self.above(t, level);
            (-value, -slope)
        };
        root::falling(mirrored, low, high, 0.5 * (low + high))
    }

    /// Q(θ): the charge since t1, ampere-radians.
    pub(super) fn charge(&self, theta: f64) -> f64 {
        let d = theta - self.t1;
        let x = self.rho * d;
        let (p1, _) = decay(x);
        let swing = (self.t1 + self.psi).cos() - (theta + self.psi).cos();
        self.amplitude * swing + self.decaying * d * p1 - self.u * d * d * self.per_x * p2(x, p1)
    }

    /// S(θ): the squared current's integral since t1, ampere²-radians.
    ///
    /// Equation: ρd < 1/2: 16-point Gauss–Legendre of i², exact to rounding for so smooth a current. Else, with
    /// a = A/Z, K = −u/R, D = i1 − s(t1) − K, ta = t1 + ψ, tb = θ + ψ, e = e^(−ρd):
    /// ```text
    /// S = a²[d/2 − (sin 2tb − sin 2ta)/4] + K²d + D²d P1(2ρd) + 2aK(cos ta − cos tb) + 2KD d P1(ρd)
    ///     + 2aD[(ρ sin ta + cos ta) − e(ρ sin tb + cos tb)]/(1 + ρ²)
    /// ```
    /// where the symbols are the segment's. Valid for every segment; the closed form would lose (X/R)² of its
    /// digits where R is small, hence the first form. Source: derived, by squaring i(θ) and integrating.
    pub(super) fn square(&self, theta: f64) -> f64 {
        let d = theta - self.t1;
        if d <= 0.0 {
            return 0.0;
        }
        if self.rho * d < 0.5 {
            self.square_by_points(d)
        } else {
            self.square_closed(theta, d)
        }
    }

    fn square_by_points(&self, d: f64) -> f64 {
        let (half, middle) = (0.5 * d, self.t1 + 0.5 * d);
        let sum: f64 = GAUSS_16
            .iter()
            .map(|(node, weight)| {
                let (before, after) = (
                    self.current(middle - half * node),
                    self.current(middle + half * node),
                );
                weight * (before * before + after * after)
            })
            .sum();
        half * sum
    }

    fn square_closed(&self, theta: f64, d: f64) -> f64 {
        let (rho, a) = (self.rho, self.amplitude);
        let k = -self.u / self.r;
        let decaying = self.decaying - k;
        let (sin_a, cos_a) = (self.t1 + self.psi).sin_cos();
        let (sin_b, cos_b) = (theta + self.psi).sin_cos();
        let (p1, e) = decay(rho * d);
        let steady = 0.5 * d - 0.5 * (sin_b * cos_b - sin_a * cos_a);
        let mixed = ((rho * sin_a + cos_a) - e * (rho * sin_b + cos_b)) / (1.0 + rho * rho);
        a * a * steady
            + k * k * d
            + decaying * decaying * d * decay(2.0 * rho * d).0
            + 2.0 * a * k * (cos_a - cos_b)
            + 2.0 * k * decaying * d * p1
            + 2.0 * a * decaying * mixed
    }
}

/// Nodes (positive half) and weights of 16-point Gauss–Legendre on −1..1.
/// Source: Abramowitz & Stegun, 1964, Handbook of Mathematical Functions, table 25.4.
const GAUSS_16: [(f64, f64); 8] = [
    (0.095_012_509_837_637_44, 0.189_450_610_455_068_5),
    (0.281_603_550_779_258_9, 0.182_603_415_044_923_6),
    (0.458_016_777_657_227_4, 0.169_156_519_395_002_54),
    (0.617_876_244_402_643_7, 0.149_595_988_816_576_73),
    (0.755_404_408_355_003, 0.124_628_971_255_533_87),
    (0.865_631_202_387_831_7, 0.095_158_511_682_492_79),
    (0.944_575_023_073_232_6, 0.062_253_523_938_647_89),
    (0.989_400_934_991_649_9, 0.027_152_459_411_754_096),
];

/// A stretch of conduction as part of a cycle: what its charge and its square weigh in the cycle's means.
#[derive(Clone, Copy, Debug)]
pub(super) struct Piece {
    /// The current.
    pub segment: Segment,
    /// Where it ends, rad.
    pub end: f64,
    /// Mean bus current = Σ this · Q.
    pub in_mean: f64,
    /// Square of the winding's rms current = Σ this · S.
    pub in_square: f64,
}

impl Piece {
    /// This piece's part of the mean current, amperes.
    pub(super) fn mean(&self) -> f64 {
        if self.in_mean == 0.0 {
            0.0
        } else {
            self.in_mean * self.segment.charge(self.end)
        }
    }

    /// This piece's part of the squared rms current, ampere².
    pub(super) fn square(&self) -> f64 {
        self.in_square * self.segment.square(self.end)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::f64::consts::PI;

    #[test]
    fn gauss_weights_sum_to_two_and_integrate_powers() {
        let power = |n: i32| {
            GAUSS_16
                .iter()
                .map(|(x, w)| 2.0 * w * x.powi(n))
                .sum::<f64>()
        };
        assert!((power(0) - 2.0).abs() < 1e-15);
        // ∫ x^30 over −1..1 = 2/31: the highest even power that 16 points integrate exactly.
        assert!((power(30) - 2.0 / 31.0).abs() < 1e-15);
    }

    #[test]
    fn p2_series_meets_the_closed_form() {
        for x in [0.0299_f64, 0.0301] {
            let closed = (x + (-x).exp_m1()) / (x * x);
            assert!((p2(x, p1(x)) - closed).abs() < 2e-14, "{x}");
        }
        assert_eq!(p2(0.0, 1.0), 0.5);
    }

    /// Mean and square by fine Simpson summation of i(θ): knows nothing of the closed forms.
    fn summed(s: &Segment, to: f64) -> (f64, f64) {
        let n = 20_000;
        let h = (to - s.t1) / f64::from(n);
        let mut sums = (0.0, 0.0);
        for k in 0..=n {
            let weight = if k == 0 || k == n {
                1.0
            } else if k % 2 == 1 {
                4.0
            } else {
                2.0
            };
            let i = s.current(s.t1 + h * f64::from(k));
            sums.0 += weight * i * h / 3.0;
            sums.1 += weight * i * i * h / 3.0;
        }
        sums
    }

    #[test]
    fn integrals_agree_with_summation() {
        for (r, x) in [
            (0.15, 1.2),
            (0.0, 0.7),
            (1.0, 0.02),
            (2.0, 3.0),
            (1e-6, 1.0),
        ] {
            let s = Segment::new(&Circuit::new(39.6, r, x), 0.3, 15.8, 0.41, 0.7);
            for to in [0.6, 2.0, 3.5] {
                let (q, sq) = summed(&s, to);
                assert!(
                    (s.charge(to) - q).abs() < 1e-9 * (1.0 + q.abs()),
                    "Q {r} {x} {to}"
                );
                assert!(
                    (s.square(to) - sq).abs() < 1e-9 * (1.0 + sq),
                    "S {r} {x} {to}"
                );
            }
        }
    }

    #[test]
    fn current_obeys_its_equation() {
        // X di/dθ + R i = A sin(θ + h) − u, by a central difference.
        let s = Segment::new(&Circuit::new(39.6, 0.15, 1.2), 0.3, 15.8, 0.41, 0.7);
        assert!((s.current(0.41) - 0.7).abs() < 1e-14);
        for t in [0.5, 1.0, 2.0, 3.0] {
            let slope = (s.current(t + 1e-5) - s.current(t - 1e-5)) / 2e-5;
            let left = 1.2 * slope + 0.15 * s.current(t);
            assert!((left - (39.6 * (t + 0.3).sin() - 15.8)).abs() < 1e-7);
        }
    }

    #[test]
    fn no_resistance_worked_number() {
        // R = 0, X = 1, A = 10, u = 0, from −90° with no current: i = 10 cos(−π/2) − 10 cos θ; at θ = π: 10 A.
        let s = Segment::new(&Circuit::new(10.0, 0.0, 1.0), 0.0, 0.0, -PI / 2.0, 0.0);
        assert!((s.current(PI) - 10.0).abs() < 1e-14);
        // Q = ∫(−10 cos θ) from −π/2 to π = 10 (sin(−π/2) − sin π) = −10.
        assert!((s.charge(PI) + 10.0).abs() < 1e-13);
    }
}
