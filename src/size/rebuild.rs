//! A rebuilder's view: every catalog winding in place of the one there is.

use super::knob::{self, Knob};
use super::parts::{self, Fitted};
use crate::build::{Build, SourceKind, State};
use crate::description::charging::RegulatorKind;
use crate::quantity::{Amps, Rpm, Volts, Watts};
use crate::source::{Phases, copper_loss, rectified, short_circuit};
use serde::Serialize;

/// Volts a cell of a rested battery: the bus at which windings are compared.
const COMPARED_AT_CELL: f64 = 2.1;

/// One catalog winding fitted.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct WindingRow {
    /// Its id.
    pub id: String,
    /// What it is.
    pub title: String,
    /// Its rated amps (of an alternator: what it gives at the highest named speed).
    pub rated_a: Amps,
    /// Whether the build keeps up with it.
    pub keeps_up: bool,
    /// Lowest running speed of the shift.
    pub idle_rpm: Rpm,
    /// Open-circuit rms volts between its leads there, at work; none for an alternator.
    pub idle_open_v: Option<Volts>,
    /// What it gives there into a rested battery.
    pub idle_a: Amps,
    /// What it gives at the highest running speed into a rested battery.
    pub top_a: Amps,
    /// Greatest copper loss at the highest speed: giving all it can, or shorted by a shunt regulator.
    pub heat_w: Option<Watts>,
    /// What the regulator (or, without one, the rectifier) must carry at the highest speed: mean amps,
    /// rms amps of the shorted winding for a shunt regulator.
    pub carries_a: Amps,
    /// Greatest reverse volts a diode sees.
    pub peak_inverse_v: Option<Volts>,
}

/// The rows of fitted windings: those that keep up first, each group by rated amps.
pub(super) fn rows(fitted: &[Fitted], index: usize) -> Vec<WindingRow> {
    let mut rows: Vec<WindingRow> = fitted.iter().filter_map(|f| row(f, index)).collect();
    rows.sort_by(|a, b| {
        let by_verdict = b.keeps_up.cmp(&a.keeps_up);
        by_verdict.then(a.rated_a.0.total_cmp(&b.rated_a.0))
    });
    rows
}

/// Lowest and highest running speed of the shift.
fn speeds(build: &Build) -> Option<(Rpm, Rpm)> {
    let running = (0..build.speeds.len()).filter(|s| knob::occurs(build, State::Running(*s)));
    let rpms: Vec<f64> = running
        .filter_map(|s| build.speeds.get(s))
        .map(|s| s.rpm.value.0)
        .collect();
    let low = rpms.iter().copied().reduce(f64::min)?;
    let high = rpms.iter().copied().reduce(f64::max)?;
    Some((Rpm(low), Rpm(high)))
}

fn row(fitted: &Fitted, index: usize) -> Option<WindingRow> {
    let build = &fitted.build;
    let (idle, top) = speeds(build)?;
    let bus = Volts(COMPARED_AT_CELL * f64::from(build.cells()));
    let source = build.sources.get(index)?;
    let mut row = WindingRow {
        id: fitted.id.clone(),
        title: fitted.title.clone(),
        rated_a: Amps(parts::size(build, &Knob::Winding(index))),
        keeps_up: fitted.keeps_up,
        idle_rpm: idle,
        idle_open_v: None,
        idle_a: Amps::ZERO,
        top_a: Amps::ZERO,
        heat_w: None,
        carries_a: Amps::ZERO,
        peak_inverse_v: None,
    };
    match &source.kind {
        SourceKind::Alternator(alternator) => {
            row.idle_a = alternator.output(idle);
            row.top_a = alternator.output(top);
            row.carries_a = row.top_a;
        }
        SourceKind::Winding(winding) => {
            let constants = &winding.constants;
            let rectifier = winding.rectifier.as_ref()?;
            let at_top = rectified(constants, rectifier, top, bus);
            let line = match constants.phases() {
                Phases::One => 1.0,
                Phases::Three => 3f64.sqrt(),
            };
            row.idle_open_v = Some(constants.emf(idle) * line);
            row.idle_a = rectified(constants, rectifier, idle, bus).dc;
            row.top_a = at_top.dc;
            row.peak_inverse_v = Some(at_top.peak_inverse);
            let shunt = source
                .regulator
                .as_ref()
                .is_some_and(|r| r.kind == RegulatorKind::Shunt);
            let shorted = short_circuit(constants, top);
            let (rms, carries) = if shunt {
                (at_top.winding_rms.max(shorted), shorted)
            } else {
                (at_top.winding_rms, at_top.dc)
            };
            row.heat_w = Some(copper_loss(constants, rms));
            row.carries_a = carries;
        }
    }
    Some(row)
}
