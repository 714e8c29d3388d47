//! A belt-driven alternator: its output curve, pulley ratio and heat. It holds a setpoint whether or not one is written.

use super::Fault;
use super::charging::{Place, regulator};
use super::context::{Context, Layers, PRACTICE, of_system};
use crate::build::{Alternator, Regulator, Source, SourceKind};
use crate::description::charging::RegulatorKind;
use crate::description::{AlternatorText, ChargingText, Written};
use crate::quantity::{Celsius, Kelvins, Volts, VoltsPerKelvin, format};
use crate::source::OutputCurve;

/// Setpoint of an alternator's regulator on a 12 V system. Common practice, no source.
const HOLDS: Volts = Volts(14.4);
/// Volts of an alternator's output curve on a 12 V system. ISO 8854, from memory.
const CURVE_AT: Volts = Volts(13.5);
/// Temperature of an alternator's output curve. ISO 8854, from memory.
const CURVE_TESTED: Celsius = Celsius(23.0);
/// Temperature of an alternator at work. Common practice, no source.
const WORKING: Celsius = Celsius(90.0);
/// Ground of the curve's conditions.
const ISO: &str = "the conditions of ISO 8854, from memory";

/// The alternator of an entry; none where a fault leaves nothing to go by.
pub(super) fn belt(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
) -> Option<Source> {
    let entry = format!("{}.alternator", place.path);
    let path = |key: &str| format!("{entry}.{key}");
    if !place.has_battery {
        context.fault(place.path, Fault::FeedsNoBattery);
    }
    let curve = curve(context, layers, &entry)?;
    let ratio = layers.figure(&path("ratio"), |t| key(t, |a| a.ratio.as_ref()));
    let Some(ratio) = ratio else {
        let keys = "`ratio` (alternator turns for one of the engine)";
        context.fault(entry, Fault::Missing { keys });
        return None;
    };
    let at = layers.figure(&path("at"), |t| key(t, |a| a.at.as_ref()));
    let usual = of_system(CURVE_AT, place.cells);
    let words = ("volts of the alternator's curve", format::text(usual), ISO);
    let at = context.figure_or(at, path("at"), usual, words);
    let hotter = hotter(context, layers);
    let regulator = match layers.get(|t| t.regulator.as_ref()) {
        Some(_) => regulator(context, layers, place),
        None => Some(usual_regulator(context, place)),
    };
    Some(Source {
        name: place.name.to_owned(),
        path: place.path.to_owned(),
        part: layers.part(),
        kind: SourceKind::Alternator(Box::new(Alternator {
            curve,
            ratio,
            at,
            hotter,
        })),
        circuit: None,
        braking: false,
        regulator,
        price: layers.value(|t| t.price.as_ref()),
    })
}

/// A key of the alternator.
fn key<'t, V>(
    text: &'t ChargingText,
    key: impl Fn(&'t AlternatorText) -> Option<&'t Written<V>>,
) -> Option<&'t Written<V>> {
    text.alternator.as_ref().and_then(key)
}

/// The output curve, of the uppermost layer that has one.
fn curve(context: &mut Context, layers: &Layers<ChargingText>, entry: &str) -> Option<OutputCurve> {
    let points = layers.get(|t| {
        let points = t.alternator.as_ref().map(|a| &a.curve)?;
        (!points.is_empty()).then_some(points)
    });
    let Some((points, _)) = points else {
        context.fault(entry, Fault::Missing { keys: "`curve`" });
        return None;
    };
    match OutputCurve::new(points.iter().map(|p| (p.value.1, p.value.0)).collect()) {
        Ok(curve) => Some(curve),
        Err(error) => {
            context.fault(format!("{entry}.curve"), Fault::Curve(error));
            None
        }
    }
}

/// How much hotter it works than its curve was taken.
fn hotter(context: &mut Context, layers: &Layers<ChargingText>) -> Kelvins {
    let tested = layers.value(|t| key(t, |a| a.tested.as_ref()));
    let tested = tested.unwrap_or_else(|| {
        let value = format::temperature(CURVE_TESTED);
        context.assume("temperature of the alternator's curve", value, ISO);
        CURVE_TESTED
    });
    let working = layers.value(|t| key(t, |a| a.working.as_ref()));
    let working = working.unwrap_or_else(|| {
        let value = format::temperature(WORKING);
        context.assume("alternator's temperature at work", value, PRACTICE);
        WORKING
    });
    working.above(tested)
}

/// The regulator that an alternator has without saying so.
fn usual_regulator(context: &mut Context, place: Place) -> Regulator {
    let path = format!("{}.regulator.holds", place.path);
    let holds = of_system(HOLDS, place.cells);
    let what = "setpoint of the alternator's regulator";
    let holds = context.figure_or(None, path, holds, (what, format::text(holds), PRACTICE));
    Regulator {
        holds,
        kind: RegulatorKind::Series,
        per_degree: VoltsPerKelvin::ZERO,
    }
}
