//! A share of draws, and how far the truth may lie from it.

use crate::quantity::{AmpHours, Fraction};

/// Standard deviations within which 95 % of a normal distribution lies.
const NINETY_FIVE: f64 = 1.959_963_984_540_054;

/// The interval in which the share of all builds lies, at 95 %, from a share of draws.
///
/// ```text
/// (p + z²/2n ± z √(p(1 − p)/n + z²/4n²)) / (1 + z²/n)
/// ```
/// where p the share of the draws, n their number, z = 1.960. Valid for: draws independent of each other; a
/// sequence that fills the cube more evenly than chance comes nearer, so that the interval is on the safe side.
/// Source: E. B. Wilson, 1927.
#[must_use]
pub(super) fn interval(hits: u64, draws: u64) -> [Fraction; 2] {
    let (n, z2) = (draws.max(1) as f64, NINETY_FIVE * NINETY_FIVE);
    let p = hits as f64 / n;
    let middle = p + z2 / (2.0 * n);
    let away = NINETY_FIVE * (p * (1.0 - p) / n + z2 / (4.0 * n * n)).sqrt();
    let whole = 1.0 + z2 / n;
    [
        Fraction(((middle - away) / whole).clamp(0.0, p)),
        Fraction(((middle + away) / whole).clamp(p, 1.0)),
    ]
}

/// The value that a share of the draws does not exceed: the nearest rank. None where that draw has no value (no
/// charging helps it).
///
/// `sorted` rises; those without a value come last.
#[must_use]
pub(super) fn quantile(sorted: &[f64], share: f64) -> Option<AmpHours> {
    let rank = (share * sorted.len() as f64).ceil() as usize;
    let value = sorted.get(rank.saturating_sub(1)).copied()?;
    value.is_finite().then_some(AmpHours(value))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 8 of 10: 0.4902 to 0.9433 (Wilson's formula, worked by hand: centre 0.71673, half-width 0.22659).
    #[test]
    fn wilsons_interval() {
        let [low, high] = interval(8, 10);
        assert!(
            (low.0 - 0.490_16).abs() < 1e-4 && (high.0 - 0.943_32).abs() < 1e-4,
            "{low:?} {high:?}"
        );
    }

    #[test]
    fn none_and_all() {
        assert_eq!(interval(0, 4096)[0], Fraction::ZERO);
        assert_eq!(interval(4096, 4096)[1], Fraction::ONE);
        // The rule of three: about 3.84/n (z²/(n + z²)).
        assert!((interval(0, 4096)[1].0 - 3.8415 / 4099.84).abs() < 1e-6);
    }

    #[test]
    fn nearest_rank() {
        let draws: Vec<f64> = (1..=20).map(f64::from).collect();
        assert_eq!(quantile(&draws, 0.05), Some(AmpHours(1.0)));
        assert_eq!(quantile(&draws, 0.5), Some(AmpHours(10.0)));
        assert_eq!(quantile(&draws, 0.95), Some(AmpHours(19.0)));
        assert_eq!(quantile(&[0.0, f64::INFINITY], 0.95), None);
        assert_eq!(quantile(&[], 0.5), None);
    }
}
