//! What to know about the constants found, in plain words.

use super::model::Model;
use super::readings::Readings;
use super::spread;
use super::spread::Estimate;
use super::{Identified, to_leads};
use crate::quantity::{Amps, Fraction, Henries, Ohms, Volts, VoltsPerRpm, format};
use serde::{Serialize, Serializer};
use std::fmt;

/// One of the three constants.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Subject {
    /// Open-circuit rms volts per rpm.
    OpenCircuit(VoltsPerRpm),
    /// Resistance.
    Resistance(Ohms),
    /// Inductance.
    Inductance(Henries),
}

impl Subject {
    fn name(self) -> &'static str {
        match self {
            Subject::OpenCircuit(_) => "open-circuit volts",
            Subject::Resistance(_) => "resistance",
            Subject::Inductance(_) => "inductance",
        }
    }

    fn value(self) -> String {
        match self {
            Subject::OpenCircuit(k) => format::text(k),
            Subject::Resistance(r) => format::text(r),
            Subject::Inductance(l) => format::text(l),
        }
    }

    /// What to measure.
    fn remedy(self) -> &'static str {
        match self {
            Subject::OpenCircuit(_) => {
                "measure AC volts between the leads with nothing connected, at a steady speed"
            }
            Subject::Resistance(_) => {
                "measure it between the leads with an ohmmeter, less what its own leads read when touched"
            }
            Subject::Inductance(_) => "add readings at higher speeds, where it limits the current",
        }
    }
}

/// Something to know about the constants found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Note {
    /// Rows left out because a regulator held the bus.
    Held {
        /// How many.
        rows: usize,
        /// The setpoint.
        setpoint: Volts,
    },
    /// The readings do not pin a constant down.
    NotPinned {
        /// Low end of its 95 % interval.
        low: Subject,
        /// High end, where the readings set one.
        high: Option<Subject>,
    },
    /// A measured constant does not go with the readings.
    Disagrees {
        /// What was measured.
        measured: Subject,
        /// What the readings alone lead to.
        alone: Subject,
    },
    /// What is left grows or falls steadily with speed.
    Trend,
    /// The readings scatter about the winding found.
    Scatter {
        /// Rms of what is left.
        rms: Amps,
        /// The same as a share of the greatest reading.
        share: Fraction,
    },
}

impl fmt::Display for Note {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Note::Held { rows, setpoint } => write!(
                f,
                "{} at the regulator's {} left out: there the amps show what was asked for, not what the winding can give",
                format::count(*rows as u32, "reading", "readings"),
                format::text(*setpoint)
            ),
            Note::NotPinned { low, high } => {
                let upwards = high.map_or("up".to_owned(), |high| format!("to {}", high.value()));
                write!(
                    f,
                    "the readings do not pin down the {}: anything from {} {upwards} fits about as well; {}",
                    low.name(),
                    low.value(),
                    low.remedy()
                )
            }
            Note::Disagrees { measured, alone } => write!(
                f,
                "the measured {} of {} does not go with the readings, which alone lead to {}; check both",
                measured.name(),
                measured.value(),
                alone.value()
            ),
            Note::Trend => write!(
                f,
                "what is left follows the speed: losses in the iron, or a regulator that acts in some of the readings"
            ),
            Note::Scatter { rms, share } => write!(
                f,
                "the readings scatter by {} ({} of the greatest) about the winding found",
                format::text(*rms),
                format::percent(*share)
            ),
        }
    }
}

impl Serialize for Note {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_str(self)
    }
}

/// A 95 % interval wider than this share of the value either way is not pinned down.
const PINNED: f64 = 0.25;
/// A measured constant this many sigmas from what the readings alone lead to disagrees.
const FAR: f64 = 2.5;
/// Scatter worth a note, as a share of the greatest reading.
const SCATTER: f64 = 0.04;
/// Correlation of what is left with speed that makes a trend, and the least share that is worth a note.
const TREND: (f64, f64) = (0.8, 0.01);

/// All notes.
pub(super) fn notes(
    readings: &Readings,
    model: &Model,
    estimate: &Estimate,
    found: &Identified,
) -> Vec<Note> {
    let mut notes = Vec::new();
    let held = found.rows.iter().filter(|row| !row.used).count();
    if let (true, Some(setpoint)) = (held > 0, readings.setpoint) {
        notes.push(Note::Held {
            rows: held,
            setpoint,
        });
    }
    let (k, r, l) = (
        &found.open_circuit_spread,
        &found.resistance_spread,
        &found.inductance_spread,
    );
    let intervals = [
        (
            Subject::OpenCircuit(k.low_95),
            k.high_95.map(Subject::OpenCircuit),
        ),
        (
            Subject::Resistance(r.low_95),
            r.high_95.map(Subject::Resistance),
        ),
        (
            Subject::Inductance(l.low_95),
            l.high_95.map(Subject::Inductance),
        ),
    ];
    for (index, (low, high)) in intervals.into_iter().enumerate() {
        if (estimate.t * estimate.sigma[index]).exp() > 1.0 + PINNED {
            notes.push(Note::NotPinned { low, high });
        }
    }
    notes.extend(disagreements(readings, model, found));
    if trend(found).abs() > TREND.0 && estimate.residual > TREND.1 {
        notes.push(Note::Trend);
    }
    if estimate.residual > SCATTER {
        notes.push(Note::Scatter {
            rms: found.residual_a_rms,
            share: Fraction(estimate.residual),
        });
    }
    notes
}

/// Measured constants against what the readings say without them, where there are enough.
fn disagreements(readings: &Readings, model: &Model, found: &Identified) -> Vec<Note> {
    let mut notes = Vec::new();
    let used = found.rows.iter().filter(|row| row.used).count();
    let measured = readings.open_circuit.is_some() || readings.resistance.is_some();
    if !measured || used < 4 {
        return notes;
    }
    let mut alone = model.without_measured();
    let Ok(estimate) = spread::estimate(&mut alone) else {
        return notes;
    };
    let factors = to_leads(readings);
    for prior in &model.priors {
        let far = (estimate.at[prior.index] - prior.centre).abs();
        if far <= FAR * prior.sigma.hypot(estimate.sigma[prior.index]) {
            continue;
        }
        let value = estimate.at[prior.index].exp() * factors[prior.index];
        match (prior.index, readings.open_circuit, readings.resistance) {
            (0, Some(k), _) => notes.push(Note::Disagrees {
                measured: Subject::OpenCircuit(k),
                alone: Subject::OpenCircuit(VoltsPerRpm(value)),
            }),
            (1, _, Some(r)) => notes.push(Note::Disagrees {
                measured: Subject::Resistance(r),
                alone: Subject::Resistance(Ohms(value)),
            }),
            _ => {}
        }
    }
    notes
}

/// Correlation of the used rows' differences with speed; 0 for fewer than five rows.
fn trend(found: &Identified) -> f64 {
    let used: Vec<(f64, f64)> = found
        .rows
        .iter()
        .filter(|row| row.used)
        .map(|row| (row.rpm.0, (row.fitted_a - row.measured_a).0))
        .collect();
    if used.len() < 5 {
        return 0.0;
    }
    let n = used.len() as f64;
    let mean = |pick: fn(&(f64, f64)) -> f64| used.iter().map(pick).sum::<f64>() / n;
    let (x, y) = (mean(|p| p.0), mean(|p| p.1));
    let (mut xx, mut yy, mut xy) = (0.0, 0.0, 0.0);
    for (a, b) in &used {
        xx += (a - x) * (a - x);
        yy += (b - y) * (b - y);
        xy += (a - x) * (b - y);
    }
    if xx > 0.0 && yy > 0.0 {
        xy / (xx * yy).sqrt()
    } else {
        0.0
    }
}
