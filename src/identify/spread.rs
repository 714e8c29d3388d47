//! How well the constants are known.

use super::fit::{self, Square};
use super::model::{Logs, Model};
use super::readings::IdentifyError;
use crate::quantity::Fraction;
use serde::Serialize;

/// How well a constant is known.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Spread<Q> {
    /// One standard deviation, as a share of the value.
    pub one_sigma: Fraction,
    /// Low end of the interval that holds the true value in 95 of 100 such tables.
    pub low_95: Q,
    /// High end of it; none where the readings set no upper limit.
    pub high_95: Option<Q>,
}

impl<Q> Spread<Q> {
    /// The same with the ends as another quantity.
    pub(super) fn map<P>(self, form: impl Fn(Q) -> P + Copy) -> Spread<P> {
        Spread {
            one_sigma: self.one_sigma,
            low_95: form(self.low_95),
            high_95: self.high_95.map(form),
        }
    }
}

/// The fit and its spreads, one phase at work.
#[derive(Clone, Copy, Debug)]
pub(super) struct Estimate {
    /// ln k, ln R, ln L.
    pub at: Logs,
    /// One sigma of each.
    pub sigma: Logs,
    /// Quantile of Student's t for 95 %.
    pub t: f64,
    /// Rms of the rows' differences as a share of the greatest reading.
    pub residual: f64,
}

impl Estimate {
    /// Spread of a constant of a given value.
    pub(super) fn spread(&self, index: usize, value: f64) -> Spread<f64> {
        let reach = (self.t * self.sigma[index]).exp();
        Spread {
            one_sigma: Fraction(self.sigma[index]),
            low_95: value / reach,
            high_95: Some(value * reach).filter(|high| high.is_finite()),
        }
    }
}

/// Noise of a reading, as a share of the greatest, where the rows are too few to tell. Common practice, no source.
const USUAL_NOISE: f64 = 0.02;
/// Least noise: what a display's last digit leaves.
const LEAST_NOISE: f64 = 1e-4;

/// Fits, estimates the noise from what is left, and fits again with it, until it holds.
pub(super) fn estimate(model: &mut Model) -> Result<Estimate, IdentifyError> {
    let starts = model.starts();
    let failed = IdentifyError::NotConverged { residual: 1.0 };
    let mut noise = USUAL_NOISE;
    let mut found = fit::best(model, &starts, noise).ok_or(failed)?;
    let usual = model.usual_resistance(&found.at);
    model.lean_on(usual);
    let mut free = model.rows.len() as f64;
    for _ in 0..20 {
        found = fit::descend(model, found.at, noise).ok_or(failed)?;
        free = freedom(model, &found.at, noise).ok_or(failed)?;
        let next = noise_of(model, &found.at, free).ok_or(failed)?;
        let steady = (next / noise - 1.0).abs() < 1e-3;
        noise = next;
        if steady {
            break;
        }
    }
    let found = fit::descend(model, found.at, noise).ok_or(failed)?;
    let residual = rms(model, &found.at).ok_or(failed)?;
    if !found.settled {
        return Err(IdentifyError::NotConverged { residual });
    }
    let sigma = sigmas(model, &found.at, noise).ok_or(failed)?;
    Ok(Estimate {
        at: found.at,
        sigma,
        t: student_95(free),
        residual,
    })
}

/// Rms of the rows' differences as a share of the greatest reading.
fn rms(model: &Model, at: &Logs) -> Option<f64> {
    let rows = model.rows.len();
    let residuals = model.residuals(at, 1.0)?;
    let sum: f64 = residuals.iter().take(rows).map(|x| x * x).sum();
    Some((sum / rows as f64).sqrt())
}

/// One sigma of each constant: the greater of what equal noise of all rows gives, and what each row's own difference
/// gives.
///
/// Equation: C = (JᵀJ)⁻¹, and C [Σ e²/(1 − h)² j jᵀ + Σ p pᵀ] C, where j a row's slopes, e its difference in units of
/// the noise, h = jᵀ C j its leverage, p a prior's slopes. Valid for any noise that differs from row to row. Source:
/// MacKinnon and White, 1985, "Some heteroskedasticity-consistent covariance matrix estimators with improved finite
/// sample properties", J. Econometrics 29, form HC3 (from memory).
fn sigmas(model: &Model, at: &Logs, noise: f64) -> Option<Logs> {
    let slopes = model.slopes(at, noise)?;
    let residuals = model.residuals(at, noise)?;
    let c = fit::inverse(&fit::normal(&slopes))?;
    let rows = model.rows.len();
    let weighed: Vec<Logs> = slopes
        .iter()
        .zip(&residuals)
        .enumerate()
        .map(|(n, (row, e))| {
            let own = if n < rows {
                e.abs() / (1.0 - leverage(row, &c)).max(0.05)
            } else {
                1.0
            };
            row.map(|slope| own * slope)
        })
        .collect();
    let middle = fit::normal(&weighed);
    let by_rows = |i: usize| -> f64 {
        (0..3)
            .map(|j| {
                (0..3)
                    .map(|k| c[i][j] * middle[j][k] * c[k][i])
                    .sum::<f64>()
            })
            .sum()
    };
    Some([0, 1, 2].map(|i| c[i][i].max(by_rows(i)).sqrt()))
}

/// jᵀ C j.
fn leverage(row: &Logs, c: &Square) -> f64 {
    (0..3)
        .map(|i| (0..3).map(|j| row[i] * c[i][j] * row[j]).sum::<f64>())
        .sum()
}

/// Rows less the constants they had to decide: n − tr(J_rows C J_rowsᵀ), where C is the covariance.
fn freedom(model: &Model, at: &Logs, noise: f64) -> Option<f64> {
    let slopes = model.slopes(at, noise)?;
    let covariance = fit::inverse(&fit::normal(&slopes))?;
    let decided: f64 = slopes
        .iter()
        .take(model.rows.len())
        .map(|row| leverage(row, &covariance))
        .sum();
    Some(model.rows.len() as f64 - decided)
}

/// Noise of a reading: what is left over the rows' freedom; at least the usual where that is less than two rows.
fn noise_of(model: &Model, at: &Logs, free: f64) -> Option<f64> {
    let rms = rms(model, at)?;
    let told = rms * (model.rows.len() as f64 / free.max(0.5)).sqrt();
    Some(if free < 1.9 {
        told.max(USUAL_NOISE)
    } else {
        told.max(LEAST_NOISE)
    })
}

/// Two-sided 95 % quantile of Student's t for a number of degrees of freedom, rounded down; 2 where the rows are too few to
/// tell the noise and the usual one stands in.
fn student_95(free: f64) -> f64 {
    if free < 1.9 {
        return 2.0;
    }
    let whole = free.floor() as usize;
    STUDENT_95
        .get(whole.saturating_sub(1))
        .copied()
        .unwrap_or(1.96)
}

/// Student's t, two-sided 95 %, for 1 to 30 degrees of freedom. Source: any statistical table.
const STUDENT_95: [f64; 30] = [
    12.706, 4.303, 3.182, 2.776, 2.571, 2.447, 2.365, 2.306, 2.262, 2.228, 2.201, 2.179, 2.160,
    2.145, 2.131, 2.120, 2.110, 2.101, 2.093, 2.086, 2.080, 2.074, 2.069, 2.064, 2.060, 2.056,
    2.052, 2.048, 2.045, 2.042,
];
