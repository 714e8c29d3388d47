//! One entry of `charging:`: a winding with its rectifier and regulator, or an alternator.

use super::Fault;
use super::accessories::Circuit;
use super::alternator::belt;
use super::context::{Context, Layers, PRACTICE};
use super::winding::winding;
use crate::build::{Regulator, Source, SourceKind};
use crate::description::charging::{RectifierKind, RegulatorKind};
use crate::description::{ChargingText, WindingText};
use crate::quantity::{Volts, VoltsPerKelvin, format};
use crate::source::Rectifier;

/// Drop of one diode. Common practice, no source.
const DROP: Volts = Volts(0.9);
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

/// A name for each entry: as written, the part's, or what it does; numbered where two would be alike.
pub(super) fn names(layers: &[Layers<ChargingText>]) -> Vec<String> {
    let mut names: Vec<String> = Vec::with_capacity(layers.len());
    for layer in layers {
        let name = layer.value(|t| t.name.as_ref());
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
        let what = "forward drop of one diode";
        context.assume_for(what, format::text(DROP), PRACTICE, place.name);
        DROP
    });
    Some(Some(match kind {
        RectifierKind::HalfWave => Rectifier::HalfWave { drop },
        _ => Rectifier::FullWave { drop },
    }))
}

/// The regulator, its open figures assumed.
pub(super) fn regulator(
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
        context.assume_for("kind of regulator", "series", PRACTICE, place.name);
        RegulatorKind::Series
    });
    let per_degree = layers.value(|t| t.regulator.as_ref().and_then(|r| r.per_degree.as_ref()));
    let per_degree = per_degree.unwrap_or_else(|| {
        let what = "change of the setpoint with temperature";
        let origin = "a regulator that is not compensated";
        context.assume_for(what, "0 mV/K", origin, place.name);
        VoltsPerKelvin::ZERO
    });
    Some(Regulator {
        holds,
        kind,
        per_degree,
    })
}
