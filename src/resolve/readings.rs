//! Bench readings of a winding: constants by least squares over all of them, not by one.

use super::Fault;
use super::charging::Place;
use super::context::{Context, by_rule};
use crate::build::{Figure, Origin};
use crate::description::ReadingText;
use crate::identify::{Identified, IdentifyError, Reading, Readings, identify};
use crate::quantity::{Henries, Ohms, Rpm, Volts, format};
use crate::source::{Known, Rectifier};

/// The constants that bench readings lead to, as figures.
pub(super) struct Bench {
    /// Open-circuit volts at the speed they were stated at, or at the fastest reading's.
    pub(super) open_circuit: Figure<(Volts, Rpm)>,
    /// Resistance at 20 °C.
    pub(super) resistance: Figure<Ohms>,
    /// Inductance.
    pub(super) inductance: Figure<Henries>,
}

/// Constants from readings taken through a rectifier with the winding at its working temperature, and from what else
/// is `known`; rows at `setpoint` are left out.
///
/// # Errors
/// A fault and the path it stands at: too few figures, no current, no winding that comes near the readings.
pub(super) fn bench(
    context: &mut Context,
    place: Place,
    rows: &[ReadingText],
    (known, rectifier): (&Known, Rectifier),
    (setpoint, stated_at): (Option<Volts>, Option<Rpm>),
) -> Result<Bench, (String, Fault)> {
    let reading = |row: &ReadingText| Reading {
        rpm: row.rpm.value,
        bus: row.volts.value,
        amps: row.amps.value,
    };
    let readings = Readings {
        rows: rows.iter().map(reading).collect(),
        open_circuit: known.open_circuit,
        resistance: known.resistance,
        poles: known.poles,
        phases: known.phases,
        rectifier,
        setpoint,
        working: known.working,
    };
    let found = identify(&readings).map_err(|error| {
        let at = match error {
            IdentifyError::Row { row } => format!("readings[{row}]"),
            IdentifyError::Stated { what } => what.to_owned(),
            IdentifyError::Poles { .. } => "poles".to_owned(),
            _ => "readings".to_owned(),
        };
        let path = format!("{}.winding.{at}", place.path);
        (path, Fault::Readings(error))
    })?;
    let fastest = readings.rows.iter().map(|row| row.rpm);
    let rpm = stated_at.unwrap_or_else(|| fastest.fold(Rpm::ZERO, Rpm::max));
    tell(context, place, &found, rpm);
    let path = |key: &str| format!("{}.winding.{key}", place.path);
    Ok(Bench {
        open_circuit: by_rule(
            (found.open_circuit_v_per_rpm * rpm, rpm),
            path("open_circuit"),
        ),
        resistance: by_rule(found.resistance_ohm, path("resistance")),
        inductance: by_rule(found.inductance_h, path("inductance")),
    })
}

/// Notes what the readings lead to, how well the winding found fits them, and what is to be known of it.
fn tell(context: &mut Context, place: Place, found: &Identified, rpm: Rpm) {
    let used = found.rows.iter().filter(|row| row.used).count();
    context.notes.push(format!(
        "{}: its {} lead to {} at {}, {} and {} between the leads at 20 °C, which gives them back within {} rms",
        place.name,
        format::count(used as u32, "bench reading", "bench readings"),
        format::text(found.open_circuit_v_per_rpm * rpm),
        format::text(rpm),
        format::text(found.resistance_ohm),
        format::text(found.inductance_h),
        format::text(found.residual_a_rms),
    ));
    for note in &found.notes {
        context.notes.push(format!("{}: {note}", place.name));
    }
}

impl Bench {
    /// The same with every figure's origin that of the readings.
    pub(super) fn of(mut self, origin: &Origin) -> Bench {
        self.open_circuit.origin = origin.clone();
        self.resistance.origin = origin.clone();
        self.inductance.origin = origin.clone();
        self
    }
}
