//! From a bench table to a winding's constants: open-circuit volts, resistance, inductance, and how well they are known.
//!
//! Least squares of the rectifier's current over ln k, ln R, ln L. The current hardly sees the resistance; where no
//! ohmmeter was used a usual value is leaned on, as weakly as the readings allow, and the answer says so.

mod fit;
mod model;
mod note;
mod read;
mod readings;
mod spread;

pub use note::{Note, Subject};
pub use read::{ReadError, read_csv, readings_of};
pub use readings::{HELD_WITHIN, IdentifyError, Reading, Readings};
pub use spread::Spread;

use crate::quantity::{Amps, Henries, Ohms, Rpm, Volts, VoltsPerRpm, all_finite};
use crate::source::{Phases, Winding};
use model::{Logs, Model};
use serde::Serialize;
use spread::Estimate;

/// One row of the table against the winding found.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct FittedRow {
    /// Speed.
    pub rpm: Rpm,
    /// Bus volts.
    pub bus_v: Volts,
    /// What was read.
    pub measured_a: Amps,
    /// What the winding found gives.
    pub fitted_a: Amps,
    /// Whether the row was used; a row held by a regulator is not.
    pub used: bool,
}

/// A winding's constants from a bench table, between two leads at 20 °C.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Identified {
    /// Open-circuit rms volts per rpm.
    pub open_circuit_v_per_rpm: VoltsPerRpm,
    /// Resistance.
    pub resistance_ohm: Ohms,
    /// Inductance.
    pub inductance_h: Henries,
    /// Root of the mean square of the used rows' differences.
    pub residual_a_rms: Amps,
    /// How well the open-circuit volts are known.
    pub open_circuit_spread: Spread<VoltsPerRpm>,
    /// How well the resistance is known.
    pub resistance_spread: Spread<Ohms>,
    /// How well the inductance is known.
    pub inductance_spread: Spread<Henries>,
    /// Every row with its difference.
    pub rows: Vec<FittedRow>,
    /// What to know about the answer, in plain words.
    pub notes: Vec<Note>,
    /// A `winding:` block to paste into a build.
    pub winding: String,
}

/// Rms share of the greatest reading beyond which no winding is held to fit.
const WORST_FIT: f64 = 0.3;

/// Finds the constants of a winding from its bench table.
///
/// Equation: least squares of (I(k, R, L) − I_read)/I_max over ln k, ln R, ln L, with what was measured of k and R as
/// further terms; the noise of a reading is estimated from what is left, and where R was not measured a usual value
/// (8 % of the EMF, a factor of 3 either way) stands in with the weight that noise gives it.
///
/// Valid for readings of mean current into a steady bus that no regulator holds. Source: derived; the spreads from the
/// inverse of JᵀJ and Student's t.
///
/// # Errors
/// [`IdentifyError`]: figures out of range or too few, no current, no winding that comes near.
pub fn identify(readings: &Readings) -> Result<Identified, IdentifyError> {
    readings.check()?;
    let mut model = Model::new(readings);
    let estimate = spread::estimate(&mut model)?;
    if estimate.residual > WORST_FIT {
        return Err(IdentifyError::NotConverged {
            residual: estimate.residual,
        });
    }
    let winding = model
        .winding(&estimate.at)
        .ok_or(IdentifyError::NotConverged {
            residual: estimate.residual,
        })?;
    let found = report(readings, &model, &estimate, &winding);
    if all_finite(&found) {
        Ok(found)
    } else {
        Err(IdentifyError::NotConverged {
            residual: estimate.residual,
        })
    }
}

/// Constants between two leads at 20 °C for one phase at work, as factors of k, R and L.
fn to_leads(readings: &Readings) -> Logs {
    let (volts, ohms) = model::leads(readings.phases);
    [
        volts / readings.working.emf_factor().0,
        ohms / readings.working.resistance_factor().0,
        ohms,
    ]
}

fn report(
    readings: &Readings,
    model: &Model,
    estimate: &Estimate,
    winding: &Winding,
) -> Identified {
    let factors = to_leads(readings);
    let at_leads = [0, 1, 2].map(|i| estimate.at[i].exp() * factors[i]);
    let rows: Vec<FittedRow> = readings
        .rows
        .iter()
        .map(|row| FittedRow {
            rpm: row.rpm,
            bus_v: row.bus,
            measured_a: row.amps,
            fitted_a: Amps(model.current(winding, row)),
            used: !readings.is_held(row),
        })
        .collect();
    let spread = |i: usize| estimate.spread(i, at_leads[i]);
    let (k, r, l) = (
        VoltsPerRpm(at_leads[0]),
        Ohms(at_leads[1]),
        Henries(at_leads[2]),
    );
    let mut found = Identified {
        open_circuit_v_per_rpm: k,
        resistance_ohm: r,
        inductance_h: l,
        residual_a_rms: Amps(estimate.residual * model.greatest),
        open_circuit_spread: spread(0).map(VoltsPerRpm),
        resistance_spread: spread(1).map(Ohms),
        inductance_spread: spread(2).map(Henries),
        rows,
        notes: Vec::new(),
        winding: winding_block(readings, k, r, l),
    };
    found.notes = note::notes(readings, model, estimate, &found);
    found
}

/// Four significant digits, and nothing that looks like a measurement's noise.
fn rounded(x: f64) -> f64 {
    format!("{x:.3e}").parse().unwrap_or(x)
}

/// A `winding:` block as a build file takes it.
fn winding_block(readings: &Readings, k: VoltsPerRpm, r: Ohms, l: Henries) -> String {
    let fastest = readings
        .rows
        .iter()
        .fold(Rpm::ZERO, |most, row| most.max(row.rpm));
    let mut block = format!(
        "winding:\n  open_circuit: {} V at {} rpm\n  resistance: {} ohm\n  inductance: {} mH\n  poles: {}\n",
        rounded((k * fastest).0),
        fastest.0,
        rounded(r.0),
        rounded(1e3 * l.0),
        readings.poles
    );
    if readings.phases == Phases::Three {
        block += "  phases: 3\n";
    }
    block += &format!("  working: {} °C\n", readings.working.winding.0);
    if readings.working.magnets == crate::source::Magnets::RareEarth {
        block += "  magnets: rare-earth\n";
    }
    block
}
