//! How a value is spread about what is stated: the law of its draws.

use crate::quantity::Fraction;
use serde::Serialize;

/// The spread of a value within its tolerance.
///
/// A tolerance that the user states, and one that goes with an assumption, are limits and nothing
/// more: every value between them is as likely (JCGM 100:2008, 4.3.7). A tolerance of a catalog part
/// is the spread of its making: normal, the tolerance taken as two standard deviations, 95 % of the
/// parts within it (JCGM 100:2008, 4.3.4).
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Law {
    /// As likely anywhere between the limits.
    Uniform,
    /// Normal, the limits at two standard deviations, cut off at three.
    Normal,
}

/// Standard deviations beyond which a normal spread is cut off: such parts do not pass inspection.
/// Common practice, no source.
const CUT: f64 = 3.0;
/// Least factor a normal spread comes to, so that no quantity reaches nothing.
const LEAST: f64 = 0.05;

impl Law {
    /// The factor on the stated value at a share of the distribution, `share` of all draws lying below.
    ///
    /// ```text
    /// uniform: f = 1 + r (2u − 1)     normal: f = 1 + (r/2) Φ⁻¹(Φ(−c) + u (1 − 2Φ(−c)))
    /// ```
    /// where r tolerance as a share of the value, u share, Φ the normal distribution, c where it is
    /// cut off (3, less where the tolerance is so wide that a value would vanish). Valid for: 0 < u < 1, r ≥ 0.
    /// Source: inverse of each distribution function.
    #[must_use]
    pub fn factor(self, tolerance: Fraction, share: f64) -> f64 {
        let r = tolerance.0;
        match self {
            Law::Uniform => 1.0 + r * (2.0 * share - 1.0),
            Law::Normal if r <= 0.0 => 1.0,
            Law::Normal => {
                let cut = CUT.min(2.0 * (1.0 - LEAST) / r);
                let tail = below(cut);
                1.0 + 0.5 * r * deviations(tail + share * (1.0 - 2.0 * tail))
            }
        }
    }
}

/// The share of a normal distribution below so many standard deviations under its mean, by the
/// inverse itself: halving finds where it is met.
fn below(cut: f64) -> f64 {
    let (mut low, mut high) = (0.0, 0.5);
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if deviations(middle) < -cut {
            low = middle;
        } else {
            high = middle;
        }
    }
    high
}

/// Standard deviations from the mean below which a share of a normal distribution lies.
///
/// ```text
/// |p − ½| ≤ 0.425: z = q A(s)/B(s), s = 0.180625 − q², q = p − ½
/// else:            z = ± C(t)/D(t), t = √(−ln min(p, 1 − p)) − 1.6
/// ```
/// where A to D polynomials of degree seven. Valid for: t ≤ 3.4 (p down to 1e-11; beyond, an error
/// that grows), absolute error under 1e-12. Source: M. J. Wichura, algorithm AS 241, Applied Statistics 37, 1988.
fn deviations(p: f64) -> f64 {
    let q = p - 0.5;
    if q.abs() <= 0.425 {
        let s = 0.180_625 - q * q;
        return q * polynomial(&A, s) / polynomial(&B, s);
    }
    let t = (-p.min(1.0 - p).max(f64::MIN_POSITIVE).ln()).sqrt() - 1.6;
    let z = polynomial(&C, t) / polynomial(&D, t);
    if q < 0.0 { -z } else { z }
}

fn polynomial(coefficients: &[f64], x: f64) -> f64 {
    coefficients.iter().rev().fold(0.0, |sum, c| sum * x + c)
}

const A: [f64; 8] = [
    3.387_132_872_796_366_5,
    133.141_667_891_784_38,
    1_971.590_950_306_551_3,
    13_731.693_765_509_46,
    45_921.953_931_549_87,
    67_265.770_927_008_7,
    33_430.575_583_588_13,
    2_509.080_928_730_122_7,
];
const B: [f64; 8] = [
    1.0,
    42.313_330_701_600_91,
    687.187_007_492_057_9,
    5_394.196_021_424_751,
    21_213.794_301_586_597,
    39_307.895_800_092_71,
    28_729.085_735_721_943,
    5_226.495_278_852_854,
];
const C: [f64; 8] = [
    1.423_437_110_749_683_5,
    4.630_337_846_156_546,
    5.769_497_221_460_691,
    3.647_848_324_763_204_5,
    1.270_458_252_452_368_4,
    0.241_780_725_177_450_6,
    0.022_723_844_989_269_184,
    0.000_774_545_014_278_341_4,
];
const D: [f64; 8] = [
    1.0,
    2.053_191_626_637_759,
    1.676_384_830_183_803_8,
    0.689_767_334_985_1,
    0.148_103_976_427_480_08,
    0.015_198_666_563_616_457,
    0.000_547_593_808_499_534_5,
    1.050_750_071_644_416_9e-9,
];

#[cfg(test)]
mod tests {
    use super::*;

    /// Percentage points of the normal distribution as printed in any statistical table.
    #[test]
    fn percentage_points() {
        for (p, z) in [
            (0.5, 0.0),
            (0.75, 0.674_489_750_2),
            (0.841_344_746_1, 1.0),
            (0.9, 1.281_551_565_5),
            (0.95, 1.644_853_627_0),
            (0.975, 1.959_963_984_5),
            (0.995, 2.575_829_303_5),
            (0.998_650_101_968, 3.0),
            (0.999_5, 3.290_526_731_5),
            (0.999_995, 4.417_173_413_5),
        ] {
            assert!((deviations(p) - z).abs() < 2e-9, "{p}: {}", deviations(p));
            assert!((deviations(1.0 - p) + z).abs() < 2e-9, "{p}");
        }
    }

    #[test]
    fn uniform_between_its_limits() {
        let ten = Fraction(0.1);
        assert!((Law::Uniform.factor(ten, 0.5) - 1.0).abs() < 1e-15);
        assert!((Law::Uniform.factor(ten, 0.25) - 0.95).abs() < 1e-15);
        assert!((Law::Uniform.factor(ten, 0.999_999) - 1.1).abs() < 1e-6);
    }

    /// Standard deviation of a normal spread cut off at three: 0.98658 of the whole one's (textbook:
    /// 1 − 2cφ(c)/(2Φ(c) − 1) with c = 3, φ(3) = 0.0044318, Φ(3) = 0.9986501 gives 0.97334 = 0.98658²).
    #[test]
    fn normal_with_two_sigma_as_its_tolerance() {
        let (n, r) = (20_000, Fraction(0.08));
        let draws: Vec<f64> = (0..n)
            .map(|k| Law::Normal.factor(r, (f64::from(k) + 0.5) / f64::from(n)) - 1.0)
            .collect();
        let variance = draws.iter().map(|d| d * d).sum::<f64>() / f64::from(n);
        assert!(
            (variance.sqrt() - 0.04 * 0.98658).abs() < 2e-6,
            "{}",
            variance.sqrt()
        );
        assert!(draws.iter().all(|d| d.abs() <= 0.12 + 1e-12));
        let within = draws.iter().filter(|d| d.abs() <= 0.08).count();
        // 95.45 % within two sigma, of the 99.73 % that are not cut off.
        assert!((within as f64 / f64::from(n) - 0.9545 / 0.9973).abs() < 2e-4);
    }

    #[test]
    fn nothing_vanishes_however_wide() {
        for r in [0.5, 0.8, 0.999] {
            let least = Law::Normal.factor(Fraction(r), 1e-9);
            assert!(least >= LEAST - 1e-9, "{r}: {least}");
        }
    }
}
