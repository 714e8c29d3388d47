//! Which tolerance matters most: shares of the variance of the margin.

use crate::quantity::Fraction;

/// Results for each fitted coefficient, at least: fewer leave the fit to chance.
const RESULTS_EACH: usize = 4;

/// The share of a result's variance that each of its inputs accounts for by itself.
///
/// ```text
/// y ≈ ȳ + Σⱼ (aⱼ L₁(uⱼ) + bⱼ L₂(uⱼ)),   Sⱼ = (aⱼ² + bⱼ²) / Var(y)
/// L₁(u) = √3 (2u − 1),   L₂(u) = √5 (6u² − 6u + 1)
/// ```
/// where y the result, uⱼ the share of its distribution that the j-th input was drawn at, L₁ and L₂ the
/// first two Legendre polynomials, of mean 0 and variance 1 over 0 … 1, Sⱼ the input's first-order share.
/// The coefficients by least squares. Valid for: inputs drawn independently of each other, results
/// that bend no more than a parabola in any of them; the rest of the variance is what inputs do together.
/// With fewer than eight results an input only L₁ is fitted, with fewer than four each input is taken by itself.
/// Source: first-order index of I. M. Sobol', 1993, from a polynomial expansion as B. Sudret, 2008.
///
/// None where the results do not differ. `points` holds the shares of each result's inputs.
#[must_use]
pub(super) fn first_order(points: &[Vec<f64>], results: &[f64]) -> Option<Vec<Fraction>> {
    let inputs = points.first().map_or(0, Vec::len);
    let n = results.len() as f64;
    let mean = results.iter().sum::<f64>() / n;
    let variance = results.iter().map(|y| (y - mean).powi(2)).sum::<f64>() / n;
    if inputs == 0 || !variance.is_finite() || variance <= 1e-18 * mean.abs().max(1e-9).powi(2) {
        return None;
    }
    let degree = match results.len() / (inputs * RESULTS_EACH) {
        0 => 0,
        1 => 1,
        _ => 2,
    };
    let fitted = if degree > 0 {
        fit(points, results, degree)
    } else {
        None
    };
    let coefficients = fitted.unwrap_or_else(|| each_alone(points, results));
    let each = coefficients.len() / inputs;
    let shares: Vec<f64> = coefficients
        .chunks(each)
        .map(|c| c.iter().map(|a| a * a).sum::<f64>() / variance)
        .collect();
    let whole = shares.iter().sum::<f64>().max(1.0);
    Some(shares.into_iter().map(|s| Fraction(s / whole)).collect())
}

/// The polynomials at a share.
fn basis(share: f64, degree: usize) -> impl Iterator<Item = f64> {
    let first = 3.0_f64.sqrt() * (2.0 * share - 1.0);
    let second = 5.0_f64.sqrt() * (6.0 * share * share - 6.0 * share + 1.0);
    [first, second].into_iter().take(degree)
}

/// Least squares by the normal equations, the mean taken out of every column.
fn fit(points: &[Vec<f64>], results: &[f64], degree: usize) -> Option<Vec<f64>> {
    let rows: Vec<Vec<f64>> = points
        .iter()
        .map(|p| p.iter().flat_map(|u| basis(*u, degree)).collect())
        .collect();
    let columns = rows.first()?.len();
    let n = rows.len() as f64;
    let mean = |k: usize| rows.iter().map(|r| r[k]).sum::<f64>() / n;
    let means: Vec<f64> = (0..columns).map(mean).collect();
    let middle = results.iter().sum::<f64>() / n;
    let mut matrix = vec![vec![0.0; columns]; columns];
    let mut right = vec![0.0; columns];
    for (row, y) in rows.iter().zip(results) {
        let row: Vec<f64> = row.iter().zip(&means).map(|(x, m)| x - m).collect();
        for (j, x) in row.iter().enumerate() {
            right[j] += x * (y - middle);
            for (k, z) in row.iter().enumerate().take(j + 1) {
                matrix[j][k] += x * z;
            }
        }
    }
    solved(matrix, right)
}

/// Solves a positive definite system, of which the lower half is given, by Cholesky's factors.
fn solved(mut a: Vec<Vec<f64>>, mut b: Vec<f64>) -> Option<Vec<f64>> {
    let n = b.len();
    for j in 0..n {
        for k in 0..=j {
            let sum: f64 = (0..k).map(|i| a[j][i] * a[k][i]).sum();
            let rest = a[j][k] - sum;
            if j == k {
                if rest <= 0.0 {
                    return None;
                }
                a[j][j] = rest.sqrt();
            } else {
                a[j][k] = rest / a[k][k];
            }
        }
    }
    for j in 0..n {
        let sum: f64 = (0..j).map(|i| a[j][i] * b[i]).sum();
        b[j] = (b[j] - sum) / a[j][j];
    }
    for j in (0..n).rev() {
        let sum: f64 = (j + 1..n).map(|i| a[i][j] * b[i]).sum();
        b[j] = (b[j] - sum) / a[j][j];
    }
    Some(b)
}

/// Each input by its own covariance with the result.
fn each_alone(points: &[Vec<f64>], results: &[f64]) -> Vec<f64> {
    let n = results.len() as f64;
    let middle = results.iter().sum::<f64>() / n;
    let inputs = points.first().map_or(0, Vec::len);
    (0..inputs)
        .map(|j| {
            let sum: f64 = points
                .iter()
                .zip(results)
                .map(|(p, y)| basis(p[j], 1).next().unwrap_or_default() * (y - middle))
                .sum();
            sum / n
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::odds::sequence::Sequence;

    fn points(inputs: usize, n: u64) -> Vec<Vec<f64>> {
        let sequence = Sequence::new(inputs, 11);
        (0..n).map(|i| sequence.point(i)).collect()
    }

    /// A sum of independent terms: each term's share is its variance over the sum's (textbook).
    #[test]
    fn shares_of_a_sum_are_those_of_its_variances() {
        let points = points(3, 512);
        let results: Vec<f64> = points
            .iter()
            .map(|p| 7.0 + 3.0 * p[0] - 2.0 * p[1] + 0.0 * p[2])
            .collect();
        let shares = first_order(&points, &results).unwrap();
        for (share, expected) in shares.iter().zip([9.0 / 13.0, 4.0 / 13.0, 0.0]) {
            assert!((share.0 - expected).abs() < 0.01, "{shares:?}");
        }
    }

    /// The g-function of Saltelli and Sobol' with a = (0, 1, 4.5, 9): first-order shares
    /// Vⱼ = (1/3)/(1 + aⱼ)², V = Π(1 + Vⱼ) − 1, here 0.716, 0.179, 0.024, 0.007 (analytic). A parabola
    /// takes 15/16 of the variance of |4u − 2|, whence the bound.
    #[test]
    fn shares_of_the_g_function() {
        let a = [0.0, 1.0, 4.5, 9.0];
        let points = points(4, 4096);
        let g = |p: &Vec<f64>| -> f64 {
            let terms = p
                .iter()
                .zip(a)
                .map(|(u, a)| ((4.0 * u - 2.0).abs() + a) / (1.0 + a));
            terms.product()
        };
        let results: Vec<f64> = points.iter().map(g).collect();
        let shares = first_order(&points, &results).unwrap();
        let parts: Vec<f64> = a.iter().map(|a| 1.0 / 3.0 / (1.0 + a).powi(2)).collect();
        let whole = parts.iter().map(|v| 1.0 + v).product::<f64>() - 1.0;
        for (share, part) in shares.iter().zip(&parts) {
            let expected = 15.0 / 16.0 * part / whole;
            assert!(
                (share.0 - expected).abs() < 0.02,
                "{} for {expected}",
                share.0
            );
        }
    }

    /// Fewer results than a fit of all inputs takes: each input by itself.
    #[test]
    fn many_inputs_and_few_results() {
        let points = points(60, 100);
        let results: Vec<f64> = points.iter().map(|p| p[4]).collect();
        let shares = first_order(&points, &results).unwrap();
        let most = shares
            .iter()
            .enumerate()
            .max_by(|a, b| a.1.0.total_cmp(&b.1.0));
        assert_eq!(most.map(|(j, _)| j), Some(4));
        assert!(shares.iter().map(|s| s.0).sum::<f64>() <= 1.0 + 1e-12);
    }

    #[test]
    fn nothing_matters_where_nothing_differs() {
        assert_eq!(first_order(&points(2, 64), &[5.0; 64]), None);
    }
}
