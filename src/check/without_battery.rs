//! The check of a build without a battery: judged on volts.

use super::answer::{Check, StateRow};
use super::{FORMAT, cautions};
use crate::build::Build;
use crate::circuit::{Circuit, verdict_on_volts};
use crate::quantity::{AmpHours, Amps, Minutes, Volts, Watts};

/// Checks a build without a battery; rows and findings of its circuits are left to the caller.
pub(super) fn check(build: &Build, circuits: &[Circuit]) -> Check {
    let ruling = verdict_on_volts(build, circuits);
    Check {
        format: FORMAT,
        build: build.name.clone(),
        air_c: build.air.value,
        system_v: Volts(2.0 * f64::from(build.cells())),
        verdict: ruling.verdict,
        judged: ruling.tightest.is_some(),
        sentence: ruling.sentence,
        shifts_carried: None,
        lacks_ah: None,
        lacks_a: None,
        beyond_charging: None,
        fails: None,
        storage: None,
        rundown: None,
        balance_ah: None,
        settles_soc: None,
        lowest_soc: None,
        reserve_soc: None,
        reserve_from: None,
        states: states(build, circuits),
        steps: Vec::new(),
        accessories: Vec::new(),
        circuits: Vec::new(),
        spare_a: None,
        changes: Vec::new(),
        findings: Vec::new(),
        assumed: build.assumed.clone(),
        cautions: cautions(build),
        notes: build.notes.clone(),
    }
}

/// One row a running state: what the first rectified winding gives, all on. Volts are in the
/// circuits' own rows.
fn states(build: &Build, circuits: &[Circuit]) -> Vec<StateRow> {
    let Some(circuit) = circuits
        .iter()
        .find(|c| !c.alternating)
        .or(circuits.first())
    else {
        return Vec::new();
    };
    circuit
        .states
        .iter()
        .map(|s| {
            let drawn = circuit.drawn(&s.name);
            StateRow {
                state: s.name.clone(),
                rpm: build.rpm(s.state),
                minutes: Minutes::from(s.time),
                available_a: drawn,
                source_a: drawn,
                loads_a: drawn,
                battery_a: Amps::ZERO,
                bus_v: s.volts,
                worst_battery_a: Amps::ZERO,
                worst_bus_v: s.volts,
                ah: AmpHours::ZERO,
                winding_w: Watts(s.copper.0),
            }
        })
        .collect()
}
