//! Whether a gain that is nowhere above nought among the charges looked at is so between them.

/// Width to which the peak is found.
const NARROW: f64 = 2e-4;
/// The golden section's lesser part.
const GOLDEN: f64 = 0.381_966_011_250_105;
/// Share of the stretch about the best point within which no second one is looked for.
const BESIDE: f64 = 0.05;
/// Times the error of the last parabola that the peak may lie above what is known.
const DOUBT: f64 = 4.0;

/// A place and the value there.
type Point = (f64, f64);

/// Whether a function with one peak reaches nought between points at which it does not, lowest place first. The vertex of
/// the parabola through the best point and those beside it is looked at, and golden sections where that leads nowhere.
///
/// ```text
/// x = x₂ − ½ [(x₂−x₁)² (f₂−f₃) − (x₂−x₃)² (f₂−f₁)] / [(x₂−x₁)(f₂−f₃) − (x₂−x₃)(f₂−f₁)]
/// ```
/// Source: successive parabolic interpolation with golden sections: Brent 1973, Algorithms for Minimization without
/// Derivatives (from memory).
pub(super) fn reaches_nought(known: &[Point], f: impl Fn(f64) -> f64) -> bool {
    let best = (0..known.len()).max_by(|a, b| known[*a].1.total_cmp(&known[*b].1));
    let Some(best) = best else { return false };
    let (mut low, mut high) = (
        known[best.saturating_sub(1)],
        known[(best + 1).min(known.len() - 1)],
    );
    let mut top = known[best];
    while high.0 - low.0 > NARROW {
        let vertex = vertex(low, top, high);
        let x = vertex.map_or_else(|| golden(low, top, high), |(x, _)| x);
        let value = f(x);
        if value >= 0.0 {
            return true;
        }
        let best = value.max(top.1);
        if vertex.is_some_and(|(_, foretold)| best + DOUBT * (value - foretold).abs() < 0.0) {
            return false;
        }
        let (point, beyond) = ((x, value), x > top.0);
        match (value > top.1, beyond) {
            (true, true) => (low, top) = (top, point),
            (true, false) => (high, top) = (top, point),
            (false, true) => high = point,
            (false, false) => low = point,
        }
    }
    false
}

/// The vertex of the parabola through three points, and the value foretold there; none where it lies outside or next to
/// the middle one.
fn vertex(low: Point, top: Point, high: Point) -> Option<Point> {
    let (a, b) = (top.0 - low.0, top.0 - high.0);
    let (p, q) = (top.1 - high.1, top.1 - low.1);
    let (p, q) = (a * p, b * q);
    let x = top.0 - 0.5 * (a * p - b * q) / (p - q);
    let apart = (x - top.0).abs() > BESIDE * (high.0 - low.0);
    if !(x > low.0 && x < high.0 && apart) {
        return None;
    }
    // Lagrange's form through the three points.
    let term = |at: Point, one: Point, other: Point| {
        at.1 * (x - one.0) * (x - other.0) / ((at.0 - one.0) * (at.0 - other.0))
    };
    let foretold = term(low, top, high) + term(top, low, high) + term(high, low, top);
    foretold.is_finite().then_some((x, foretold))
}

/// A golden section of the wider side.
fn golden(low: Point, top: Point, high: Point) -> f64 {
    if high.0 - top.0 > top.0 - low.0 {
        top.0 + GOLDEN * (high.0 - top.0)
    } else {
        top.0 - GOLDEN * (top.0 - low.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::cell::Cell;

    /// Asks of a function at seven places, and how often it was asked between them.
    fn asked(f: impl Fn(f64) -> f64) -> (bool, u32) {
        let known: Vec<Point> = [0.3, 0.36, 0.42, 0.48, 0.54, 0.59, 0.61]
            .map(|x| (x, f(x)))
            .to_vec();
        let count = Cell::new(0);
        let reaches = reaches_nought(&known, |x| {
            count.set(count.get() + 1);
            f(x)
        });
        (reaches, count.get())
    }

    /// Peaks of known height: of a parabola, a cosine, a tent, and one at an end.
    #[test]
    fn a_peak_between_the_points_is_found() {
        let parabola = |height: f64| move |x: f64| height - (x - 0.447) * (x - 0.447);
        assert!(asked(parabola(1e-9)).0);
        assert!(!asked(parabola(-1e-9)).0);
        let cosine = |height: f64| move |x: f64| height - 1.0 + (3.0 * (x - 0.4)).cos();
        assert!(asked(cosine(1e-7)).0);
        assert!(!asked(cosine(-1e-7)).0);
        let tent = |height: f64| move |x: f64| height - (x - 0.45f64).abs();
        assert!(asked(tent(3e-4)).0);
        assert!(!asked(tent(-1e-9)).0);
        let (reaches, count) = asked(|x| -x);
        assert!(!reaches && count < 15, "{count}");
        assert!(!reaches_nought(&[], |_| 1.0));
        // A smooth peak well below takes few looks.
        let (reaches, count) = asked(cosine(-1e-3));
        assert!(!reaches && count <= 4, "{count}");
    }
}
