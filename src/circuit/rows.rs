//! Circuits as the rows of an answer.

use super::Circuit;
use crate::build::Build;
use crate::check::answer::{AccessoryRow, CircuitRow};
use crate::quantity::Fraction;

/// One row a circuit.
#[must_use]
pub fn circuit_rows(circuits: &[Circuit]) -> Vec<CircuitRow> {
    circuits
        .iter()
        .map(|circuit| CircuitRow {
            name: circuit.name.clone(),
            alternating: circuit.alternating,
            volts: circuit.volts(),
        })
        .collect()
}

/// One row an accessory on any of the circuits, in the order of the circuits. `share` is left at
/// nothing: it is a share of all accessories' charge, which whoever adds the battery's knows.
#[must_use]
pub fn accessory_rows(build: &Build, circuits: &[Circuit]) -> Vec<AccessoryRow> {
    let mut rows = Vec::new();
    for circuit in circuits {
        for on in &circuit.accessories {
            let Some(accessory) = build.accessories.get(on.accessory) else {
                continue;
            };
            rows.push(AccessoryRow {
                name: accessory.name.clone(),
                count: accessory.count,
                circuit: circuit.name.clone(),
                ah: on.ah,
                share: Fraction::ZERO,
                missed_ah: on.missed,
                amps: on.by_state(|s| s.amps),
                volts: on.by_state(|s| s.volts),
                duty: on.by_state(|s| s.duty),
            });
        }
    }
    rows
}
