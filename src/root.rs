//! Roots of one equation in one unknown, kept in a bracket: pure mathematics, no unit.

use std::fmt;

/// Most evaluations one search may use; bisection alone needs about 60 for a double.
const MOST_EVALUATIONS: u32 = 200;

/// Why a bracketed search has no answer.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum RootError {
    /// The function has the same sign at both ends, so no crossing is known to lie between.
    NotBracketed {
        /// Lower end of the bracket.
        low: f64,
        /// Upper end of the bracket.
        high: f64,
        /// The function at the lower end.
        at_low: f64,
        /// The function at the upper end.
        at_high: f64,
    },
    /// The function is infinite or not a number at a point that was tried.
    NotFinite {
        /// Where.
        at: f64,
    },
    /// The bracket is still wider than asked for after the last permitted evaluation.
    NotConverged {
        /// Lower end of the bracket that is left.
        low: f64,
        /// Upper end of the bracket that is left.
        high: f64,
        /// The function at the better end.
        residual: f64,
        /// Evaluations used.
        evaluations: u32,
    },
}

impl fmt::Display for RootError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            RootError::NotBracketed {
                low,
                high,
                at_low,
                at_high,
            } => write!(
                f,
                "no sign change between {low} ({at_low}) and {high} ({at_high})"
            ),
            RootError::NotFinite { at } => write!(f, "the function is not finite at {at}"),
            RootError::NotConverged {
                low,
                high,
                residual,
                evaluations,
            } => write!(
                f,
                "not converged after {evaluations} evaluations: between {low} and {high}, residual {residual}"
            ),
        }
    }
}

impl std::error::Error for RootError {}

/// The root of `f` between `low` and `high`, where `f` has opposite signs (or is zero), to within `tolerance`
/// (absolute, in the unknown) or to the last digit of a double, whichever is wider.
///
/// Inverse quadratic interpolation where three points lie on a curve fit for it, bisection elsewhere.
/// Source: Chandrupatla, T. R., 1997, "A new hybrid quadratic/bisection algorithm for finding the zero of a
/// nonlinear function without using derivatives", Advances in Engineering Software 28 (from memory).
///
/// # Errors
/// [`RootError`]: no sign change, a value that is not finite, or no convergence. The last is returned when the
/// loop falls out; success returns from inside.
pub fn bracketed(
    mut f: impl FnMut(f64) -> f64,
    low: f64,
    high: f64,
    tolerance: f64,
) -> Result<f64, RootError> {
    let mut at = |x: f64| {
        let y = f(x);
        if y.is_finite() {
            Ok(y)
        } else {
            Err(RootError::NotFinite { at: x })
        }
    };
    let (at_low, at_high) = (at(low)?, at(high)?);
    if at_low == 0.0 {
        return Ok(low);
    }
    if at_high == 0.0 {
        return Ok(high);
    }
    if (at_low > 0.0) == (at_high > 0.0) {
        return Err(RootError::NotBracketed {
            low,
            high,
            at_low,
            at_high,
        });
    }
    narrow(at, (high, at_high), (low, at_low), tolerance)
}

/// The search of [`bracketed`], between two points of opposite sign.
fn narrow(
    mut at: impl FnMut(f64) -> Result<f64, RootError>,
    mut newest: (f64, f64),
    mut opposite: (f64, f64),
    tolerance: f64,
) -> Result<f64, RootError> {
    let mut share = 0.5;
    for _ in 2..MOST_EVALUATIONS {
        let x = newest.0 + share * (opposite.0 - newest.0);
        let fx = at(x)?;
        let replaced;
        if (fx > 0.0) == (newest.1 > 0.0) {
            replaced = newest;
        } else {
            replaced = opposite;
            opposite = newest;
        }
        newest = (x, fx);
        let best = better(newest, opposite);
        let width = (opposite.0 - newest.0).abs();
        let least = 0.5 * tolerance + 2.0 * f64::EPSILON * best.0.abs();
        if best.1 == 0.0 || width <= 2.0 * least {
            return Ok(best.0);
        }
        share = next_share(newest, opposite, replaced).clamp(least / width, 1.0 - least / width);
    }
    Err(RootError::NotConverged {
        low: newest.0.min(opposite.0),
        high: newest.0.max(opposite.0),
        residual: better(newest, opposite).1,
        evaluations: MOST_EVALUATIONS,
    })
}

/// The point nearer to zero.
fn better(a: (f64, f64), b: (f64, f64)) -> (f64, f64) {
    if a.1.abs() < b.1.abs() { a } else { b }
}

/// Where between the newest point (0) and the opposite end (1) to look next.
fn next_share((a, fa): (f64, f64), (b, fb): (f64, f64), (c, fc): (f64, f64)) -> f64 {
    let xi = (a - b) / (c - b);
    let phi = (fa - fb) / (fc - fb);
    let fits = phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi;
    if !fits {
        return 0.5;
    }
    let quadratic =
        fa / (fb - fa) * (fc / (fb - fc)) + (c - a) / (b - a) * (fa / (fc - fa)) * (fb / (fc - fb));
    if quadratic.is_finite() {
        quadratic
    } else {
        0.5
    }
}

/// The root of `f` between `low` and `high` where theory puts exactly one: like [`bracketed`], but where rounding has
/// pushed it just past an end, the end with the smaller residual.
pub(crate) fn within(mut f: impl FnMut(f64) -> f64, low: f64, high: f64, tolerance: f64) -> f64 {
    match bracketed(&mut f, low, high, tolerance) {
        Ok(root) => root,
        Err(RootError::NotConverged { low, high, .. }) => 0.5 * (low + high),
        Err(_) => {
            if f(low).abs() < f(high).abs() {
                low
            } else {
                high
            }
        }
    }
}

/// Most evaluations of [`rising`]: where it closes in at all it takes half of them.
const MOST_SECANTS: u32 = 12;
/// Times the slope to expect that a chord may be.
const STEEPER: f64 = 8.0;
/// Times the last step that the next may be: where the function is all but flat the secant leads far off.
const LONGER: f64 = 8.0;

/// The root of a function that rises, from one point and a slope to expect, by the secant through the last two points,
/// kept between points of opposite sign once there are any. Ends where a step is within `tolerance` of its point.
///
/// ```text
/// x'' = x' − f(x') (x' − x)/(f(x') − f(x))
/// ```
/// Source: secant method, textbook. `None` where it does not close in soon, or finds the function falling or far steeper
/// than expected: then [`bracketed`] is to be asked, which always ends.
pub(crate) fn rising(
    mut f: impl FnMut(f64) -> f64,
    start: f64,
    expected: f64,
    tolerance: impl Fn(f64) -> f64,
) -> Option<f64> {
    let (mut low, mut high) = (f64::NEG_INFINITY, f64::INFINITY);
    let (mut x, mut slope, mut longest) = (start, expected, f64::MAX);
    let mut fx = f(x);
    for _ in 1..MOST_SECANTS {
        if !fx.is_finite() {
            return None;
        }
        if fx < 0.0 {
            low = x;
        } else {
            high = x;
        }
        let secant = x + (-fx / slope).clamp(-longest, longest);
        if (secant - x).abs() <= tolerance(x) {
            return Some(secant.clamp(low, high));
        }
        let next = match secant > low && secant < high {
            true => secant,
            false => 0.5 * (low + high),
        };
        let f_next = f(next);
        longest = LONGER * (next - x).abs();
        slope = (f_next - fx) / (next - x);
        // A chord across a bend would make a step small far from the root.
        if slope <= 0.0 || slope > STEEPER * expected || slope.is_nan() {
            return None;
        }
        (x, fx) = (next, f_next);
    }
    None
}

/// The zero of a function that is positive at `low`, negative at `high` and crosses once between, by Newton's steps
/// from `start`, held in the bracket. `f` gives the value and its true slope. The bracket is halved where a step leaves
/// it or is more than half the one before, so the steps shrink to nothing whatever the function.
///
/// Ends when a Newton step moves by less than 1e-10 of the unknown: convergence being quadratic, what is left is of the
/// order of the last digit; where it is slower, 1e-10.
///
/// A function that is already at or under zero at `low` gives `low`; one that stays above zero gives `high` (rounding at
/// the edge of existence of the pulse whose end is sought).
pub(crate) fn falling(
    mut f: impl FnMut(f64) -> (f64, f64),
    low: f64,
    high: f64,
    start: f64,
) -> f64 {
    if f(low).0 <= 0.0 {
        return low;
    }
    let (mut lo, mut hi) = (low, high);
    let mut x = start;
    let mut before = hi - lo;
    for _ in 0..MOST_EVALUATIONS {
        let (value, slope) = f(x);
        if value > 0.0 {
            lo = x;
        } else {
            hi = x;
        }
        let step = value / slope;
        if value == 0.0 {
            return x;
        }
        if step.abs() <= 1e-10 * x.abs() {
            return (x - step).clamp(lo, hi);
        }
        let newton = x - step;
        if newton > lo && newton < hi && 2.0 * step.abs() <= before {
            before = step.abs();
            x = newton;
        } else {
            before = 0.5 * (hi - lo);
            x = lo + before;
        }
        if hi - lo <= 4.0 * f64::EPSILON * hi.abs() {
            return x;
        }
    }
    0.5 * (lo + hi)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_root_of_a_cubic() {
        // x³ − 2x − 5 has its real root at 2.0945514815423265 (Wallis' equation, in every numerical text).
        let mut evaluations = 0;
        let f = |x: f64| {
            evaluations += 1;
            x * x * x - 2.0 * x - 5.0
        };
        let root = bracketed(f, 2.0, 3.0, 1e-15).unwrap();
        assert!((root - 2.094_551_481_542_326_5).abs() < 1e-14, "{root}");
        assert!(evaluations < 15, "{evaluations}");
    }

    #[test]
    fn takes_either_order_and_ends() {
        assert_eq!(bracketed(|x| x - 1.0, 1.0, 5.0, 1e-12), Ok(1.0));
        let root = bracketed(|x| 2.0 - x * x, 2.0, 0.0, 1e-14).unwrap();
        assert!((root - 2.0_f64.sqrt()).abs() < 1e-14);
    }

    #[test]
    fn says_why_there_is_none() {
        assert!(matches!(
            bracketed(|x| x * x + 1.0, -1.0, 1.0, 1e-12),
            Err(RootError::NotBracketed { .. })
        ));
        assert!(matches!(
            bracketed(|x| if x > 0.4 { f64::NAN } else { -1.0 }, 0.0, 1.0, 1e-12),
            Err(RootError::NotFinite { .. })
        ));
        let text = RootError::NotFinite { at: 0.5 }.to_string();
        assert_eq!(text, "the function is not finite at 0.5");
    }

    #[test]
    fn a_step_is_found_too() {
        let root = bracketed(|x| if x < 0.3 { -1.0 } else { 1e6 }, 0.0, 1.0, 1e-12).unwrap();
        assert!((root - 0.3).abs() < 2e-12);
    }

    #[test]
    fn falling_survives_flat_and_steep_slopes() {
        // 1 − x⁹ from far out: Newton's first steps crawl, bisection takes over.
        let root = falling(|x| (1.0 - x.powi(9), -9.0 * x.powi(8)), 0.0, 60.0, 60.0);
        assert!((root - 1.0).abs() < 1e-14, "{root}");
        // A cliff at 2.5 with no slope on either side: bisection alone.
        let cliff = |x: f64| if x < 2.5 { (1.0, 0.0) } else { (-1e-3, 0.0) };
        assert!((falling(cliff, 0.0, 6.0, 6.0) - 2.5).abs() < 1e-14);
        // e^(−1000x) − 1/2 falls in a layer of a thousandth: root ln 2/1000.
        let layer = |x: f64| ((-1e3 * x).exp() - 0.5, -1e3 * (-1e3 * x).exp());
        assert!((falling(layer, 0.0, 6.0, 3.0) - 2.0_f64.ln() / 1e3).abs() < 1e-17);
        assert_eq!(falling(|_| (-1.0, 0.0), 0.5, 1.0, 0.8), 0.5);
        assert!((falling(|_| (1.0, 0.0), 0.5, 1.0, 0.8) - 1.0).abs() < 1e-15);
    }

    #[test]
    fn rising_takes_few_steps_or_none() {
        let mut evaluations = 0;
        let f = |x: f64| {
            evaluations += 1;
            x * x * x - 2.0 * x - 5.0
        };
        // Wallis' equation, from 2 with its slope of 10 there.
        let root = rising(f, 2.0, 10.0, |x| 1e-10 * x.abs()).expect("a root");
        assert!((root - 2.094_551_481_542_326_5).abs() < 1e-14, "{root}");
        assert!(evaluations <= 6, "{evaluations}");
        // A function that bends off to a ceiling, from above: the root of 1 − e^(−x) − 1/2 is ln 2.
        let bent = |x: f64| 0.5 - (-x).exp();
        let root = rising(bent, 3.0, 0.5, |_| 1e-9).expect("a root");
        assert!((root - 2.0_f64.ln()).abs() < 1e-9, "{root}");
        // None: from so far out that it is flat, never crosses, falls, is no number.
        assert_eq!(rising(bent, 9.0, 1.0, |_| 1e-9), None);
        assert_eq!(rising(|x| -1.0 - (-x).exp(), 0.0, 1.0, |_| 1e-9), None);
        assert_eq!(rising(|x| 1.0 - x, 0.0, 1.0, |_| 1e-9), None);
        assert_eq!(rising(|_| f64::NAN, 0.0, 1.0, |_| 1e-9), None);
    }

    #[test]
    fn within_takes_the_nearer_end() {
        assert_eq!(within(|x| x + 1e-17, 0.0, 1.0, 1e-15), 0.0);
    }
}
