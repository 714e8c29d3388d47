//! Least squares by Levenberg's and Marquardt's damped steps, for three unknowns.

use super::model::{Logs, Model};

/// Most steps of one descent.
const MOST_STEPS: usize = 300;
/// No step moves a logarithm by more than this.
const LONGEST_STEP: f64 = 0.7;

/// A 3 by 3 matrix.
pub(super) type Square = [[f64; 3]; 3];

/// Where a descent ended.
#[derive(Clone, Copy, Debug)]
pub(super) struct Descent {
    /// The constants' logarithms.
    pub at: Logs,
    /// Sum of squares there.
    pub cost: f64,
    /// Whether the steps had died out.
    pub settled: bool,
}

fn cost_of(residuals: &[f64]) -> f64 {
    residuals.iter().map(|x| x * x).sum()
}

/// JᵀJ.
pub(super) fn normal(slopes: &[Logs]) -> Square {
    let mut out = [[0.0; 3]; 3];
    for row in slopes {
        for i in 0..3 {
            for j in 0..3 {
                out[i][j] += row[i] * row[j];
            }
        }
    }
    out
}

/// The inverse by cofactors, scaled first so that its diagonal is 1; none when it is singular to rounding.
pub(super) fn inverse(m: &Square) -> Option<Square> {
    let d = [0, 1, 2].map(|i| m[i][i].sqrt());
    if d.iter().any(|x| !(x.is_finite() && *x > 0.0)) {
        return None;
    }
    let s = |i: usize, j: usize| m[i % 3][j % 3] / (d[i % 3] * d[j % 3]);
    let cofactor =
        |i: usize, j: usize| s(i + 1, j + 1) * s(i + 2, j + 2) - s(i + 1, j + 2) * s(i + 2, j + 1);
    let determinant: f64 = (0..3).map(|j| s(0, j) * cofactor(0, j)).sum();
    if determinant.is_nan() || determinant <= 1e-15 {
        return None;
    }
    let mut out = [[0.0; 3]; 3];
    for (i, row) in out.iter_mut().enumerate() {
        for (j, cell) in row.iter_mut().enumerate() {
            *cell = cofactor(j, i) / determinant / (d[i] * d[j]);
        }
    }
    Some(out)
}

/// Descends from `start`.
///
/// Equation: (JᵀJ + λ diag JᵀJ) δ = −Jᵀr, where r residuals, J their slopes, λ a damping that falls where steps help and
/// rises where they do not. Source: Marquardt, 1963, "An algorithm for least-squares estimation of nonlinear parameters",
/// J. SIAM 11 (from memory).
pub(super) fn descend(model: &Model, start: Logs, noise: f64) -> Option<Descent> {
    let mut at = start;
    let mut residuals = model.residuals(&at, noise)?;
    let mut cost = cost_of(&residuals);
    let mut damping = 1e-2;
    for _ in 0..MOST_STEPS {
        let slopes = model.slopes(&at, noise)?;
        let square = normal(&slopes);
        let mut gradient = [0.0; 3];
        for (row, r) in slopes.iter().zip(&residuals) {
            for i in 0..3 {
                gradient[i] += row[i] * r;
            }
        }
        let mut moved = None;
        while damping < 1e12 {
            let Some(step) = damped_step(&square, &gradient, damping) else {
                damping *= 10.0;
                continue;
            };
            let next = [0, 1, 2].map(|i| at[i] + step[i]);
            let found = model.residuals(&next, noise).map(|r| (cost_of(&r), r));
            match found {
                Some((less, r)) if less <= cost => {
                    let length = step.iter().fold(0.0, |most: f64, x| most.max(x.abs()));
                    moved = Some((length, cost - less));
                    (at, cost, residuals) = (next, less, r);
                    damping = (damping * 0.2).max(1e-12);
                    break;
                }
                _ => damping *= 4.0,
            }
        }
        match moved {
            None => {
                return Some(Descent {
                    at,
                    cost,
                    settled: true,
                });
            }
            Some((length, gain)) if length < 1e-9 || gain <= 1e-13 * cost => {
                return Some(Descent {
                    at,
                    cost,
                    settled: true,
                });
            }
            Some(_) => {}
        }
    }
    Some(Descent {
        at,
        cost,
        settled: false,
    })
}

fn damped_step(square: &Square, gradient: &Logs, damping: f64) -> Option<Logs> {
    let mut damped = *square;
    for i in 0..3 {
        // A constant that no residual sees stays where it is.
        damped[i][i] = square[i][i] * (1.0 + damping) + 1e-12;
    }
    let inverse = inverse(&damped)?;
    let step = [0, 1, 2].map(|i| -(0..3).map(|j| inverse[i][j] * gradient[j]).sum::<f64>());
    let longest = step.iter().fold(0.0, |most: f64, x| most.max(x.abs()));
    let shrink = if longest > LONGEST_STEP {
        LONGEST_STEP / longest
    } else {
        1.0
    };
    longest.is_finite().then(|| step.map(|x| x * shrink))
}

/// The best of descents from several starts: a short look from each, the three best to the end.
pub(super) fn best(model: &Model, starts: &[Logs], noise: f64) -> Option<Descent> {
    let mut looks: Vec<(f64, Logs)> = starts
        .iter()
        .filter_map(|start| Some((cost_of(&model.residuals(start, noise)?), *start)))
        .collect();
    looks.sort_by(|a, b| a.0.total_cmp(&b.0));
    let ends = looks
        .iter()
        .take(6)
        .filter_map(|(_, start)| descend(model, *start, noise));
    ends.min_by(|a, b| a.cost.total_cmp(&b.cost))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn inverse_of_a_known_matrix() {
        // [[2,1,0],[1,3,1],[0,1,4]]: determinant 18; inverse × 18 = [[11,−4,1],[−4,8,−2],[1,−2,5]] (by hand).
        let m = [[2.0, 1.0, 0.0], [1.0, 3.0, 1.0], [0.0, 1.0, 4.0]];
        let want = [[11.0, -4.0, 1.0], [-4.0, 8.0, -2.0], [1.0, -2.0, 5.0]];
        let got = inverse(&m).unwrap();
        for i in 0..3 {
            for j in 0..3 {
                assert!((got[i][j] - want[i][j] / 18.0).abs() < 1e-15);
            }
        }
        assert!(inverse(&[[1.0, 1.0, 0.0], [1.0, 1.0, 0.0], [0.0, 0.0, 1.0]]).is_none());
    }
}
