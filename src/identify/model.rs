//! The readings as a problem of least squares, in the logarithms of one phase's constants at work.

use super::readings::{Reading, Readings};
use crate::quantity::{Henries, Ohms, VoltsPerRpm};
use crate::source::{Phases, Rectifier, Winding, rectified_dc};

/// ln k, ln R, ln L of one phase, in volts per rpm, ohms, henries.
pub(super) type Logs = [f64; 3];

/// Spread of a measured open-circuit voltage, one sigma of its logarithm: a multimeter. Common practice, no source.
const OPEN_CIRCUIT_SPREAD: f64 = 0.01;
/// Spread of a measured resistance, one sigma of its logarithm: an ohmmeter with its leads' resistance taken off.
/// Common practice, no source.
const RESISTANCE_SPREAD: f64 = 0.03;
/// Spread of the usual resistance where none is measured, one sigma of its logarithm: a factor of 3 either way.
const USUAL_SPREAD: f64 = 1.1;

/// A constant held near a value: ln value ± sigma.
#[derive(Clone, Copy, Debug)]
pub(super) struct Prior {
    /// Which of the three.
    pub index: usize,
    /// ln of the value.
    pub centre: f64,
    /// One sigma of the ln.
    pub sigma: f64,
}

/// Rows, and what is known beside them.
#[derive(Clone, Debug)]
pub(super) struct Model {
    /// Rows in use.
    pub rows: Vec<Reading>,
    /// Measured constants, and the usual resistance where none is.
    pub priors: Vec<Prior>,
    /// The greatest reading, A.
    pub greatest: f64,
    rectifier: Rectifier,
    poles: u32,
    phases: Phases,
}

/// Between two leads for one phase: volts and ohms (or henries).
pub(super) fn leads(phases: Phases) -> (f64, f64) {
    match phases {
        Phases::One => (1.0, 1.0),
        Phases::Three => (3.0_f64.sqrt(), 2.0),
    }
}

impl Model {
    /// From checked readings.
    pub(super) fn new(readings: &Readings) -> Model {
        let rows: Vec<Reading> = readings
            .rows
            .iter()
            .filter(|row| !readings.is_held(row))
            .copied()
            .collect();
        let greatest = rows
            .iter()
            .fold(0.0, |most, row| f64::max(most, row.amps.0));
        let (volts, ohms) = leads(readings.phases);
        let mut priors = Vec::new();
        if let Some(k) = readings.open_circuit {
            let one = k.0 / volts * readings.working.emf_factor().0;
            priors.push(Prior {
                index: 0,
                centre: one.ln(),
                sigma: OPEN_CIRCUIT_SPREAD,
            });
        }
        if let Some(r) = readings.resistance {
            let one = r.0 / ohms * readings.working.resistance_factor().0;
            priors.push(Prior {
                index: 1,
                centre: one.ln(),
                sigma: RESISTANCE_SPREAD,
            });
        }
        let (rectifier, poles, phases) = (readings.rectifier, readings.poles, readings.phases);
        Model {
            rows,
            priors,
            greatest,
            rectifier,
            poles,
            phases,
        }
    }

    /// Holds the resistance near a usual value, where none was measured.
    pub(super) fn lean_on(&mut self, usual: Ohms) {
        if self.priors.iter().all(|prior| prior.index != 1) {
            self.priors.push(Prior {
                index: 1,
                centre: usual.0.ln(),
                sigma: USUAL_SPREAD,
            });
        }
    }

    /// The rows alone.
    pub(super) fn without_measured(&self) -> Model {
        Model {
            priors: Vec::new(),
            ..self.clone()
        }
    }

    /// The winding of given constants; none outside what a winding can be.
    pub(super) fn winding(&self, at: &Logs) -> Option<Winding> {
        let [k, r, l] = at.map(f64::exp);
        Winding::new(VoltsPerRpm(k), Ohms(r), Henries(l), self.poles, self.phases).ok()
    }

    /// Current of one row, A.
    pub(super) fn current(&self, winding: &Winding, row: &Reading) -> f64 {
        rectified_dc(winding, &self.rectifier, row.rpm, row.bus).0
    }

    /// All differences in units of their spread: rows with `noise` as a share of the greatest reading, then priors.
    pub(super) fn residuals(&self, at: &Logs, noise: f64) -> Option<Vec<f64>> {
        let winding = self.winding(at)?;
        let scale = 1.0 / (noise * self.greatest);
        let rows = self
            .rows
            .iter()
            .map(|row| (self.current(&winding, row) - row.amps.0) * scale);
        let priors = self
            .priors
            .iter()
            .map(|p| (at[p.index] - p.centre) / p.sigma);
        let all: Vec<f64> = rows.chain(priors).collect();
        all.iter().all(|x| x.is_finite()).then_some(all)
    }

    /// Slopes of [`residuals`](Self::residuals) against the three logarithms, by central differences.
    pub(super) fn slopes(&self, at: &Logs, noise: f64) -> Option<Vec<Logs>> {
        const STEP: f64 = 1e-5;
        let mut slopes = vec![[0.0; 3]; self.rows.len() + self.priors.len()];
        for index in 0..3 {
            let (mut up, mut down) = (*at, *at);
            up[index] += STEP;
            down[index] -= STEP;
            let (up, down) = (self.residuals(&up, noise)?, self.residuals(&down, noise)?);
            for (slope, (a, b)) in slopes.iter_mut().zip(up.iter().zip(&down)) {
                slope[index] = (a - b) / (2.0 * STEP);
            }
        }
        Some(slopes)
    }

    /// Starting points: open-circuit volts from just above what the rows need to four times that, a usual resistance,
    /// and the inductance that gives the strongest row.
    pub(super) fn starts(&self) -> Vec<Logs> {
        let Some(strongest) = self
            .rows
            .iter()
            .max_by(|a, b| a.amps.0.total_cmp(&b.amps.0))
        else {
            return Vec::new();
        };
        let known = |index| {
            self.priors
                .iter()
                .find(|p| p.index == index)
                .map(|p| p.centre.exp())
        };
        let least = self.least_open_circuit();
        let share = [1.02, 1.06, 1.12, 1.2, 1.35, 1.55, 1.8, 2.2, 2.8, 4.0];
        let volts = match known(0) {
            Some(k) => vec![k],
            None => share.map(|s| s * least).to_vec(),
        };
        let mut starts = Vec::new();
        for k in volts {
            let emf = k * strongest.rpm.0;
            for part in [0.02, 0.08, 0.25] {
                let r = known(1).unwrap_or(part * emf / strongest.amps.0);
                if let Some(l) = self.inductance(k, r, strongest) {
                    starts.push([k.ln(), r.ln(), l.ln()]);
                }
            }
        }
        starts
    }

    /// Volts per rpm under which some row could not have its current.
    fn least_open_circuit(&self) -> f64 {
        let flowing = self
            .rows
            .iter()
            .filter(|row| row.amps.0 > 0.02 * self.greatest);
        let needed = |row: &Reading| {
            let opposing = (row.bus + self.rectifier.drops()).0;
            let peaks = match (self.rectifier, self.phases) {
                (Rectifier::FullWave { .. }, Phases::Three) => 6.0_f64.sqrt(),
                _ => std::f64::consts::SQRT_2,
            };
            opposing / (peaks * row.rpm.0)
        };
        flowing.map(needed).fold(1e-6, f64::max)
    }

    /// The inductance of one phase that gives a row's current, searched by halving; one next to nothing where even that
    /// gives less.
    fn inductance(&self, k: f64, r: f64, row: &Reading) -> Option<f64> {
        let current = |l: f64| {
            let at = [k.ln(), r.ln(), l.ln()];
            self.winding(&at).map(|w| self.current(&w, row))
        };
        let (mut low, mut high) = (1e-8_f64, 10.0_f64);
        for _ in 0..50 {
            let middle = (low * high).sqrt();
            if current(middle)? > row.amps.0 {
                low = middle;
            } else {
                high = middle;
            }
        }
        Some((low * high).sqrt())
    }

    /// A usual resistance for these constants: 8 % of the EMF at the strongest row's current.
    pub(super) fn usual_resistance(&self, at: &Logs) -> Ohms {
        let strongest = self
            .rows
            .iter()
            .max_by(|a, b| a.amps.0.total_cmp(&b.amps.0));
        let emf = |row: &Reading| at[0].exp() * row.rpm.0;
        Ohms(strongest.map_or(1.0, |row| 0.08 * emf(row) / row.amps.0.max(1e-3)))
    }
}
