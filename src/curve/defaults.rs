//! Speeds and bus volts where none are asked for.

use super::{cut_in, demand, setpoint};
use crate::build::{Build, SourceKind};
use crate::quantity::{Rpm, Volts};

/// Volts a cell without a setpoint: nominal, charging, and the usual setpoint.
const USUAL_CELL: [f64; 3] = [12.0 / 6.0, 13.5 / 6.0, 14.4 / 6.0];
/// How far past the fastest speed and before the first output.
const BEYOND: f64 = 1.05;
/// Most steps between the first and the last speed.
const MOST_STEPS: f64 = 14.0;
/// Even steps.
const STEPS: [f64; 9] = [5.0, 10.0, 20.0, 50.0, 100.0, 200.0, 250.0, 500.0, 1000.0];

/// Bus volts where none are given: 12 V and 13.5 V on a 12 V system, and the setpoints of the
/// regulators on the bus at the air temperature, or 14.4 V without one. Rising.
#[must_use]
pub fn default_volts(build: &Build) -> Vec<Volts> {
    let cells = f64::from(build.cells());
    let mut setpoints: Vec<f64> = demand::on_bus(build)
        .filter_map(|s| setpoint(build, s))
        .map(|v| v.0)
        .collect();
    if setpoints.is_empty() {
        setpoints.push(USUAL_CELL[2] * cells);
    }
    let mut all = vec![USUAL_CELL[0] * cells, USUAL_CELL[1] * cells];
    all.extend(setpoints);
    all.sort_by(f64::total_cmp);
    all.dedup_by(|a, b| (*a - *b).abs() < 1e-9);
    all.into_iter().map(Volts).collect()
}

/// Speeds where none are given: even steps from below the first output (and the slowest named speed)
/// to 5 % past the fastest named speed. Rising.
#[must_use]
pub fn default_rpms(build: &Build, volts: &[Volts]) -> Vec<Rpm> {
    let named = || build.speeds.iter().map(|s| s.rpm.value.0);
    let stated = build.sources.iter().filter_map(|s| match &s.kind {
        SourceKind::Winding(w) => Some(w.open_circuit.value.1.0),
        SourceKind::Alternator(_) => None,
    });
    let fastest = named().fold(0.0, f64::max);
    let top = if fastest > 0.0 {
        fastest
    } else {
        stated.fold(1000.0, f64::max)
    } * BEYOND;
    let sources = build.sources.iter().filter(|s| !s.braking);
    let first = sources.flat_map(|s| volts.iter().filter_map(|v| cut_in(s, *v)));
    let lowest = first.map(|n| n.0).chain(named()).fold(top, f64::min);
    let low = (lowest / BEYOND).min(0.9 * top);
    let wanted = (top - low) / MOST_STEPS;
    let step = STEPS.into_iter().find(|s| *s >= wanted).unwrap_or(2000.0);
    let (from, to) = ((low / step).floor(), (top / step).ceil());
    let count = (to - from).clamp(1.0, 100.0) as u32;
    (0..=count)
        .map(|k| Rpm((from + f64::from(k)) * step))
        .collect()
}
