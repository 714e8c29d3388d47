//! One entry of `charging:`: a winding or an alternator, with its rectifier and regulator.

use super::Fault;
use super::accessories::Circuit;
use super::context::{Context, Layers, PRACTICE, of_system};
use super::winding::winding;
use crate::build::{Alternator, Figure, Regulator, Source, SourceKind};
use crate::description::charging::{RectifierKind, RegulatorKind};
use crate::description::{AlternatorText, ChargingText, WindingText, Written};
use crate::quantity::{Celsius, Volts, VoltsPerKelvin, format};
use crate::source::{OutputCurve, Rectifier};

/// Drop of one diode. Common practice, no source.
const DROP: Volts = Volts(0.9);
/// Setpoint of an alternator's regulator on a 12 V system. Common practice, no source.
const ALTERNATOR_HOLDS: Volts = Volts(14.4);
/// Conditions of an alternator's output curve, of a 12 V system. ISO 8854, from memory.
const CURVE_AT: Volts = Volts(13.5);
const CURVE_TESTED: Celsius = Celsius(23.0);
/// Temperature of an alternator at work. Common practice, no source.
const ALTERNATOR_WORKING: Celsius = Celsius(90.0);

/// What a winding feeds that says nothing else.
const BATTERY: &str = "battery";

/// What an entry is resolved in.
#[derive(Clone, Copy)]
pub(super) struct Place<'a> {
    /// Path of the entry, `charging[0]`.
    pub(super) path: &'a str,
    /// Its name in the answers.
    pub(super) name: &'a str,
    /// Cells in series of the system.
    pub(super) cells: u32,
    /// Whether there is a battery.
    pub(super) has_battery: bool,
}

/// Whether an entry's own winding displaces a part's alternator, or the other way about.
fn is_alternator(layers: &Layers<ChargingText>) -> Result<bool, Fault> {
    let both = |t: &ChargingText| t.winding.is_some() && t.alternator.is_some();
    if both(layers.own) {
        return Err(Fault::WindingOrAlternator { both: true });
    }
    let kind = layers
        .get(|t| (t.winding.is_some() || t.alternator.is_some()).then_some(t.alternator.is_some()));
    match kind {
        Some((alternator, _)) => Ok(alternator),
        None => Err(Fault::WindingOrAlternator { both: false }),
    }
}

/// One source; none where a fault leaves nothing to go by.
pub(super) fn source(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
) -> Option<Source> {
    if layers.broken {
        return None;
    }
    let alternator = match is_alternator(layers) {
        Ok(alternator) => alternator,
        Err(fault) => {
            context.fault(place.path, fault);
            return None;
        }
    };
    if alternator {
        return belt(context, layers, place);
    }
    let circuit = circuit(layers, place.name);
    let feeds = layers.value(|t| t.winding.as_ref().and_then(|w| w.feeds.as_ref()));
    let braking = circuit.as_ref().is_some_and(|c| c.braking);
    if braking && feeds.is_some_and(|f| f == BATTERY) {
        context.fault(
            format!("{}.winding.feeds", place.path),
            Fault::BrakingFeedsBattery,
        );
    }
    let rectifier = rectifier(context, layers, place)?;
    let regulator = regulator(context, layers, place);
    connections(
        context,
        layers,
        place,
        (circuit.is_some(), rectifier, regulator.is_some()),
    );
    let winding = winding(context, layers, place, rectifier)?;
    Some(Source {
        name: place.name.to_owned(),
        path: place.path.to_owned(),
        part: layers.part(),
        kind: SourceKind::Winding(Box::new(winding)),
        circuit: circuit.map(|c| c.name),
        braking,
        regulator,
        price: layers.value(|t| t.price.as_ref()),
    })
}

/// The circuit of its own that an entry feeds; a braking winding has one whether or not it is named.
pub(super) fn circuit(layers: &Layers<ChargingText>, name: &str) -> Option<Circuit> {
    fn winding(t: &ChargingText) -> Option<&WindingText> {
        t.winding.as_ref()
    }
    let feeds = layers.value(|t| winding(t).and_then(|w| w.feeds.as_ref()));
    let braking = layers
        .value(|t| winding(t).and_then(|w| w.braking.as_ref()))
        .unwrap_or(false);
    let ac = layers.value(|t| t.rectifier.as_ref().map(|r| &r.kind)) == Some(RectifierKind::None);
    let feeds = feeds.filter(|f| f != BATTERY);
    let name = match feeds {
        Some(feeds) => feeds,
        None if braking => name.to_owned(),
        None => return None,
    };
    Some(Circuit { name, ac, braking })
}

/// A name for each entry: as written, the part's, its title, or what it does; numbered where two would be alike.
pub(super) fn names(layers: &[Layers<ChargingText>]) -> Vec<String> {
    let mut names: Vec<String> = Vec::with_capacity(layers.len());
    for layer in layers {
        let title = layer.parts.first().map(|p| p.entry.title.clone());
        let name = layer.value(|t| t.name.as_ref()).or(title);
        let base = name.unwrap_or_else(|| match circuit(layer, "braking") {
            Some(circuit) => format!("{} winding", circuit.name),
            None if layer.get(|t| t.alternator.as_ref()).is_some() => "alternator".to_owned(),
            None => "charging winding".to_owned(),
        });
        let mut name = base.clone();
        let mut number = 1;
        while names.contains(&name) {
            number += 1;
            name = format!("{base} ({number})");
        }
        names.push(name);
    }
    names
}

/// What must not be connected: alternating current to the battery, a regulator to alternating current.
fn connections(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
    (own_circuit, rectifier, regulated): (bool, Option<Rectifier>, bool),
) {
    if rectifier.is_none() && regulated {
        context.fault(format!("{}.regulator", place.path), Fault::RegulatorOnAc);
    }
    if rectifier.is_none() && !own_circuit {
        context.fault(format!("{}.rectifier", place.path), Fault::AcIntoBattery);
    } else if !own_circuit && !place.has_battery {
        context.fault(place.path, Fault::FeedsNoBattery);
    }
    let phases = layers.value(|t| t.winding.as_ref().and_then(|w| w.phases.as_ref()));
    if phases == Some(3) && !matches!(rectifier, Some(Rectifier::FullWave { .. })) {
        context.fault(
            format!("{}.rectifier", place.path),
            Fault::ThreePhaseNeedsBridge,
        );
    }
}

/// The rectifier: the outer none is a fault, the inner none is `rectifier: none`.
fn rectifier(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
) -> Option<Option<Rectifier>> {
    let Some(kind) = layers.value(|t| t.rectifier.as_ref().map(|r| &r.kind)) else {
        let keys = "`rectifier` (half-wave, full-wave or none)";
        context.fault(place.path, Fault::Missing { keys });
        return None;
    };
    if kind == RectifierKind::None {
        return Some(None);
    }
    let drop = layers.value(|t| t.rectifier.as_ref().and_then(|r| r.drop.as_ref()));
    let drop = drop.unwrap_or_else(|| {
        let what = format!("forward drop of one diode, {}", place.name);
        context.assume(what, format::text(DROP), PRACTICE);
        DROP
    });
    Some(Some(match kind {
        RectifierKind::HalfWave => Rectifier::HalfWave { drop },
        _ => Rectifier::FullWave { drop },
    }))
}

/// The regulator, its open figures assumed.
fn regulator(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
) -> Option<Regulator> {
    layers.get(|t| t.regulator.as_ref())?;
    let path = |key: &str| format!("{}.regulator.{key}", place.path);
    let holds = layers.figure(&path("holds"), |t| {
        t.regulator.as_ref().and_then(|r| r.holds.as_ref())
    });
    let Some(holds) = holds else {
        context.fault(
            format!("{}.regulator", place.path),
            Fault::Missing { keys: "`holds`" },
        );
        return None;
    };
    let kind = layers.value(|t| t.regulator.as_ref().and_then(|r| r.kind.as_ref()));
    let kind = kind.unwrap_or_else(|| {
        context.assume(
            format!("kind of regulator, {}", place.name),
            "series",
            PRACTICE,
        );
        RegulatorKind::Series
    });
    let per_degree = layers.value(|t| t.regulator.as_ref().and_then(|r| r.per_degree.as_ref()));
    let per_degree = per_degree.unwrap_or_else(|| {
        let what = format!("change of the setpoint with temperature, {}", place.name);
        context.assume(what, "0 mV/K", "a regulator that is not compensated");
        VoltsPerKelvin::ZERO
    });
    Some(Regulator {
        holds,
        kind,
        per_degree,
    })
}

/// A belt-driven alternator. It holds a setpoint whether or not one is written.
fn belt(context: &mut Context, layers: &Layers<ChargingText>, place: Place) -> Option<Source> {
    let curve = layers.get(|t| {
        let points = t.alternator.as_ref().map(|a| &a.curve)?;
        (!points.is_empty()).then_some(points)
    });
    let Some((points, _)) = curve else {
        context.fault(
            format!("{}.alternator", place.path),
            Fault::Missing { keys: "`curve`" },
        );
        return None;
    };
    let curve: Vec<_> = points.iter().map(|p| (p.value.1, p.value.0)).collect();
    let curve = match OutputCurve::new(curve) {
        Ok(curve) => curve,
        Err(error) => {
            context.fault(
                format!("{}.alternator.curve", place.path),
                Fault::Curve(error),
            );
            return None;
        }
    };
    if !place.has_battery {
        context.fault(place.path, Fault::FeedsNoBattery);
    }
    let path = |key: &str| format!("{}.alternator.{key}", place.path);
    let ratio = layers.figure(&path("ratio"), |t| alternator(t, |a| a.ratio.as_ref()));
    let Some(ratio) = ratio else {
        let keys = "`ratio` (alternator turns for one of the engine)";
        context.fault(
            format!("{}.alternator", place.path),
            Fault::Missing { keys },
        );
        return None;
    };
    let iso = "the conditions of ISO 8854, from memory";
    let at = layers.figure(&path("at"), |t| alternator(t, |a| a.at.as_ref()));
    let usual = of_system(CURVE_AT, place.cells);
    let words = ("volts of the alternator's curve", format::text(usual), iso);
    let at = context.figure_or(at, path("at"), usual, words);
    let tested = layers
        .value(|t| alternator(t, |a| a.tested.as_ref()))
        .unwrap_or_else(|| {
            context.assume(
                "temperature of the alternator's curve",
                format::temperature(CURVE_TESTED),
                iso,
            );
            CURVE_TESTED
        });
    let working = layers
        .value(|t| alternator(t, |a| a.working.as_ref()))
        .unwrap_or_else(|| {
            let value = format::temperature(ALTERNATOR_WORKING);
            context.assume("alternator's temperature at work", value, PRACTICE);
            ALTERNATOR_WORKING
        });
    let kind = Alternator {
        curve,
        ratio,
        at,
        hotter: working.above(tested),
    };
    let regulator = match layers.get(|t| t.regulator.as_ref()) {
        Some(_) => regulator(context, layers, place),
        None => Some(alternator_regulator(context, place)),
    };
    Some(Source {
        name: place.name.to_owned(),
        path: place.path.to_owned(),
        part: layers.part(),
        kind: SourceKind::Alternator(Box::new(kind)),
        circuit: None,
        braking: false,
        regulator,
        price: layers.value(|t| t.price.as_ref()),
    })
}

fn alternator<'t, V>(
    text: &'t ChargingText,
    key: impl Fn(&'t AlternatorText) -> Option<&'t Written<V>>,
) -> Option<&'t Written<V>> {
    text.alternator.as_ref().and_then(key)
}

/// The regulator that an alternator has without saying so.
fn alternator_regulator(context: &mut Context, place: Place) -> Regulator {
    let path = format!("{}.regulator.holds", place.path);
    let holds = of_system(ALTERNATOR_HOLDS, place.cells);
    let words = (
        "setpoint of the alternator's regulator",
        format::text(holds),
        PRACTICE,
    );
    let holds: Figure<Volts> = context.figure_or(None, path, holds, words);
    Regulator {
        holds,
        kind: RegulatorKind::Series,
        per_degree: VoltsPerKelvin::ZERO,
    }
}
