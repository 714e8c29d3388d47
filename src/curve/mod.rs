//! A winding by itself: what each source gives against speed at given bus volts, where it begins to
//! give and where it meets the demand, its heat, and the volts of a circuit of its own.
//!
//! A winding into given bus volts is shown as if nothing but those volts opposed it: its regulator is
//! left out of the points, so they are what it can give. Field names are those of the JSON.

mod defaults;
mod demand;
mod heat;
mod own;

pub use defaults::{default_rpms, default_volts};
pub use demand::Demand;
pub use heat::Heat;
pub use own::OwnPoint;

use crate::build::{Build, Source, SourceKind, WindingSource};
use crate::circuit::circuit_of;
use crate::quantity::{Amps, Rpm, Volts, Watts};
use crate::source::{self, Rectifier, Winding};
use serde::Serialize;

/// Cells' volts at which a winding is rated: 14 V on 12 V.
const RATED_CELL: f64 = 14.0 / 6.0;
/// Points of a line that a chart draws.
const LINE_POINTS: u32 = 120;

/// The answer of a study of the windings.
#[derive(Clone, Debug, Serialize)]
pub struct Curve {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// The build's named speeds.
    pub speeds: Vec<NamedSpeed>,
    /// Every source but braking windings, in the order of the build.
    pub windings: Vec<WindingCurve>,
    /// What the accessories on the battery bus draw in each running state of the shift at each bus
    /// volts, and the speed at which all sources on the bus together meet it.
    pub demands: Vec<Demand>,
    /// Bus volts that the chart and the headline figures are for: the highest asked for that no
    /// regulator on the bus is held under.
    pub headline_v: Option<Volts>,
    /// Lines of all sources on the bus together, where there are several: bus volts and points. A
    /// regulator gives nothing above its setpoint.
    #[serde(skip)]
    pub together: Vec<Line>,
}

/// One line of a chart: bus volts, and amps by speed.
pub type Line = (Volts, Vec<(Rpm, Amps)>);

/// A named speed of the engine.
#[derive(Clone, Debug, Serialize)]
pub struct NamedSpeed {
    /// Its name.
    pub name: String,
    /// Its rpm.
    pub rpm: Rpm,
}

/// One source.
#[derive(Clone, Debug, Serialize)]
pub struct WindingCurve {
    /// Its name.
    pub name: String,
    /// What it feeds: `battery`, or the name of its own circuit.
    pub feeds: String,
    /// Whether it is a belt-driven alternator.
    pub alternator: bool,
    /// Its regulator's setpoint at the air temperature.
    pub holds_v: Option<Volts>,
    /// Every speed with every bus volts, speeds first.
    pub points: Vec<CurvePoint>,
    /// Speed at which it begins to give, by bus volts; empty where nothing rectifies it.
    pub cut_in: Vec<CutIn>,
    /// What a winding of the same open-circuit volts and resistance would be rated at.
    pub rated: Option<RatedAmps>,
    /// Its current and heat when shorted, by speed; empty for an alternator.
    pub shorted: Vec<Shorted>,
    /// Its heat under its regulator with the demand on the bus and the battery full, by speed; empty
    /// without a regulator.
    pub regulated: Vec<Heat>,
    /// Volts of its own circuit, by speed; empty where it feeds the battery.
    pub circuit: Vec<OwnPoint>,
    /// Lines for a chart, finely drawn: bus volts and points.
    #[serde(skip)]
    pub lines: Vec<Line>,
}

/// What one source gives at one speed into given bus volts. The fields of the winding are none where
/// there is no winding, those of the rectifier where there is no rectifier.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct CurvePoint {
    /// Engine speed.
    pub rpm: Rpm,
    /// Bus volts.
    pub bus_v: Volts,
    /// Mean current into the bus; none on alternating current, which has no mean (see `circuit`).
    pub dc_a: Option<Amps>,
    /// Rms current of one phase.
    pub winding_rms_a: Option<Amps>,
    /// Heat in the copper of all phases.
    pub copper_loss_w: Option<Watts>,
    /// Greatest reverse volts at a diode.
    pub peak_inverse_v: Option<Volts>,
}

/// Where a source begins to give.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct CutIn {
    /// Bus volts.
    pub bus_v: Volts,
    /// Engine speed above which current flows; none where it never does.
    pub rpm: Option<Rpm>,
}

/// A rating: amps at a speed into bus volts.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct RatedAmps {
    /// Mean amps, at working temperature.
    pub amps: Amps,
    /// At this speed: that of the rating stated, else of the open-circuit volts.
    pub rpm: Rpm,
    /// Into these volts: those of the rating stated, else 14 V on 12 V.
    pub bus_v: Volts,
}

/// A shorted winding at one speed.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct Shorted {
    /// Engine speed.
    pub rpm: Rpm,
    /// Rms current of one phase.
    pub amps: Amps,
    /// Heat in the copper of all phases: what a shunt regulator makes of it with nothing drawn.
    pub copper_loss_w: Watts,
}

/// The study of every winding at these speeds and bus volts. Empty lists stand for
/// [`default_rpms`] and [`default_volts`]. Speeds and volts that are not finite, and negative ones,
/// are left out.
#[must_use]
pub fn curve(build: &Build, rpms: &[Rpm], volts: &[Volts]) -> Curve {
    let volts = given(volts, |v| v.0).unwrap_or_else(|| default_volts(build));
    let rpms = given(rpms, |n| n.0).unwrap_or_else(|| default_rpms(build, &volts));
    let demands = demand::demands(build, &volts);
    let sources = build.sources.iter().enumerate().filter(|(_, s)| !s.braking);
    let windings = sources
        .map(|(index, source)| of_source(build, index, source, &rpms, &volts))
        .collect();
    let speeds = build.speeds.iter().map(|s| NamedSpeed {
        name: s.name.clone(),
        rpm: s.rpm.value,
    });
    Curve {
        format: 1,
        build: build.name.clone(),
        speeds: speeds.collect(),
        windings,
        demands,
        headline_v: headline(build, &volts),
        together: together(build, &rpms, &volts),
    }
}

/// Lines of all sources on the bus together, where there are several.
fn together(build: &Build, rpms: &[Rpm], volts: &[Volts]) -> Vec<Line> {
    if demand::on_bus(build).count() < 2 {
        return Vec::new();
    }
    let corners = |bus: Volts| demand::on_bus(build).filter_map(move |s| cut_in(s, bus));
    let line = |bus: &Volts| {
        let speeds = fine(rpms, corners(*bus));
        let points = speeds
            .into_iter()
            .map(|n| (n, demand::all_give(build, n, *bus)));
        (*bus, points.collect())
    };
    volts.iter().map(line).collect()
}

/// Speeds finely between the least and the greatest, with these corners between.
fn fine(rpms: &[Rpm], corners: impl Iterator<Item = Rpm>) -> Vec<Rpm> {
    let low = rpms.iter().fold(f64::INFINITY, |a, n| a.min(n.0));
    let high = rpms.iter().fold(0.0, |a: f64, n| a.max(n.0));
    let step = (high - low) / f64::from(LINE_POINTS);
    let mut all: Vec<f64> = (0..=LINE_POINTS)
        .map(|k| low + step * f64::from(k))
        .collect();
    all.extend(corners.map(|n| n.0).filter(|n| *n > low && *n < high));
    all.sort_by(f64::total_cmp);
    all.into_iter().map(Rpm).collect()
}

fn given<Q: Copy>(list: &[Q], number: impl Fn(Q) -> f64) -> Option<Vec<Q>> {
    let lawful = |q: &Q| number(*q).is_finite() && number(*q) >= 0.0;
    let kept: Vec<Q> = list.iter().copied().filter(lawful).collect();
    (!kept.is_empty()).then_some(kept)
}

/// The highest of the volts that every regulator on the bus lets through, else the highest.
fn headline(build: &Build, volts: &[Volts]) -> Option<Volts> {
    let on_bus = demand::on_bus(build);
    let ceiling = on_bus
        .filter_map(|s| setpoint(build, s))
        .map(|v| v.0)
        .fold(f64::INFINITY, f64::min);
    let highest = |under: f64| {
        let all = volts.iter().copied().filter(|v| v.0 <= under + 1e-9);
        all.max_by(|a, b| a.0.total_cmp(&b.0))
    };
    highest(ceiling).or_else(|| highest(f64::INFINITY))
}

fn setpoint(build: &Build, source: &Source) -> Option<Volts> {
    let regulator = source.regulator.as_ref();
    regulator.map(|r| r.setpoint(build.air.value))
}

fn of_source(
    build: &Build,
    index: usize,
    source: &Source,
    rpms: &[Rpm],
    volts: &[Volts],
) -> WindingCurve {
    let feeds = circuit_of(build, source);
    let winding = match &source.kind {
        SourceKind::Winding(winding) => Some(winding.as_ref()),
        SourceKind::Alternator(_) => None,
    };
    let pairs = rpms.iter().flat_map(|n| volts.iter().map(|v| (*n, *v)));
    let rectified = winding.is_none_or(|w| w.rectifier.is_some());
    let cut_in = volts.iter().filter(|_| rectified).map(|v| CutIn {
        bus_v: *v,
        rpm: cut_in(source, *v),
    });
    WindingCurve {
        name: source.name.clone(),
        alternator: winding.is_none(),
        holds_v: setpoint(build, source),
        points: pairs.map(|(n, v)| point(source, n, v)).collect(),
        cut_in: cut_in.collect(),
        rated: winding.and_then(|w| rated(build, w)),
        shorted: winding.map_or(Vec::new(), |w| shorted(&w.constants, rpms)),
        regulated: heat::regulated(build, source, rpms),
        circuit: match &feeds {
            Some(_) => own::points(build, index, rpms),
            None => Vec::new(),
        },
        lines: if rectified {
            lines(source, rpms, volts)
        } else {
            Vec::new()
        },
        feeds: feeds.unwrap_or_else(|| "battery".to_owned()),
    }
}

fn point(source: &Source, rpm: Rpm, bus_v: Volts) -> CurvePoint {
    let mut point = CurvePoint {
        rpm,
        bus_v,
        dc_a: None,
        winding_rms_a: None,
        copper_loss_w: None,
        peak_inverse_v: None,
    };
    match &source.kind {
        SourceKind::Alternator(alternator) => point.dc_a = Some(alternator.output(rpm)),
        SourceKind::Winding(winding) => {
            if let Some(rectifier) = &winding.rectifier {
                let out = source::rectified(&winding.constants, rectifier, rpm, bus_v);
                point.dc_a = Some(out.dc);
                point.winding_rms_a = Some(out.winding_rms);
                let loss = source::copper_loss(&winding.constants, out.winding_rms);
                point.copper_loss_w = Some(loss);
                point.peak_inverse_v = Some(out.peak_inverse);
            }
        }
    }
    point
}

/// The speed above which a source gives into these volts; none where it never does.
fn cut_in(source: &Source, bus: Volts) -> Option<Rpm> {
    match &source.kind {
        SourceKind::Winding(winding) => {
            let rectifier: &Rectifier = winding.rectifier.as_ref()?;
            Some(source::cut_in_speed(&winding.constants, rectifier, bus))
        }
        SourceKind::Alternator(alternator) => {
            let points = alternator.curve.points();
            let first = points.iter().position(|(_, amps)| *amps > Amps::ZERO)?;
            let (rpm, _) = points.get(first.saturating_sub(1))?;
            let ratio = alternator.ratio.value.0;
            (ratio > 0.0).then(|| *rpm / ratio)
        }
    }
}

fn rated(build: &Build, winding: &WindingSource) -> Option<RatedAmps> {
    let rectifier = winding.rectifier.as_ref()?;
    let usual = (
        winding.open_circuit.value.1,
        Volts(RATED_CELL * f64::from(build.cells())),
    );
    let stated = winding.rated.as_ref().map(|r| (r.value.1, r.value.2));
    let (rpm, bus_v) = stated.unwrap_or(usual);
    Some(RatedAmps {
        amps: source::rectified_dc(&winding.constants, rectifier, rpm, bus_v),
        rpm,
        bus_v,
    })
}

fn shorted(winding: &Winding, rpms: &[Rpm]) -> Vec<Shorted> {
    let at = |rpm: &Rpm| {
        let amps = source::short_circuit(winding, *rpm);
        Shorted {
            rpm: *rpm,
            amps,
            copper_loss_w: source::copper_loss(winding, amps),
        }
    };
    rpms.iter().map(at).collect()
}

/// Finely drawn lines, one a bus volts.
fn lines(source: &Source, rpms: &[Rpm], volts: &[Volts]) -> Vec<Line> {
    let line = |bus: &Volts| {
        let speeds = fine(rpms, cut_in(source, *bus).into_iter());
        let points = speeds
            .into_iter()
            .map(|n| (n, demand::gives(source, n, *bus)));
        (*bus, points.collect())
    };
    volts.iter().map(line).collect()
}
