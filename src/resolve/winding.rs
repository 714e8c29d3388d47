//! A winding: what is known of it completed to constants, or refused where its figures contradict each other.

use super::Fault;
use super::charging::Place;
use super::context::{Context, Layers, PRACTICE, by_rule, of_system};
use super::readings::{Bench, bench};
use crate::build::{Figure, Origin, WindingSource};
use crate::description::{ChargingText, RatedText, ReadingText, WindingText, Written};
use crate::quantity::{
    Amps, Celsius, Fraction, Henries, Ohms, Rpm, Tolerance, Volts, VoltsPerRpm, format,
};
use crate::source::{
    Constants, ConstantsError, Known, Magnets, Phases, Rating, Rectifier, Winding, Working,
    rectified_dc, typical_open_circuit,
};

/// A winding's temperature at work. Common practice, no source (80 to 120 °C).
const WORKING: Celsius = Celsius(100.0);
/// Rated bus volts of a 12 V system. Common practice, no source.
const RATED_BUS: Volts = Volts(14.0);
/// How far an assumed resistance may lie off. Common practice, no source.
const ASSUMED_RESISTANCE: Fraction = Fraction(0.3);

/// How far a rating may lie from what a measured inductance gives before it is noted.
const RATING_OFF: Fraction = Fraction(0.1);

/// Which way a winding's figures take to its inductance.
struct Way {
    /// Measured.
    inductance: Option<Figure<Henries>>,
    /// Rated; none beside a measured inductance.
    rated: Option<Figure<(Amps, Rpm, Volts)>>,
    /// The rating; beside a measured inductance it only checks it.
    rating: Option<Rating>,
    /// Constants from bench readings; what was measured of them beside is in them.
    bench: Option<Bench>,
}

/// The winding of an entry; none where a fault leaves nothing to go by.
pub(super) fn winding(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
    rectifier: Option<Rectifier>,
) -> Option<WindingSource> {
    let at = format!("{}.winding", place.path);
    let path = |key: &str| format!("{at}.{key}");
    let poles = poles(context, layers, &at)?;
    let phases = phases(context, layers, place);
    let working = working(context, layers, place);
    let magnets = magnets(context, layers, place, working.value);
    let scale = scale(layers, path("scale"));
    let mut volts = layers.figure(&path("open_circuit"), |t| {
        key(t, |w| w.open_circuit.as_ref())
    });
    let mut ohms = layers.figure(&path("resistance"), |t| key(t, |w| w.resistance.as_ref()));
    let temperatures = Working {
        winding: working.value,
        magnets,
    };
    let measured = (volts.as_ref().map(per_rpm), ohms.as_ref().map(|f| f.value));
    let mut known = stated(measured, (poles, phases), rectifier, temperatures);
    let stated_at = volts.as_ref().map(|f| f.value.1);
    let mut way = way(context, layers, place, (&known, stated_at))?;
    if let Some(bench) = way.bench.take() {
        known.open_circuit = Some(per_rpm(&bench.open_circuit));
        known.resistance = Some(bench.resistance.value);
        way.inductance = Some(bench.inductance);
        volts = Some(bench.open_circuit);
        ohms = Some(bench.resistance);
    }
    known.inductance = way.inductance.as_ref().map(|f| f.value);
    known.rated = way.rating;
    let complete = told(context, &at, known.complete())?;
    let constants = told(context, &at, scaled(&complete.winding, scale.value))?;
    if way.inductance.is_some() {
        tell_rating(context, place, &complete, rectifier, way.rating);
    }
    let rpm = way.rating.map_or(Rpm(3600.0), |r| r.rpm);
    let open_circuit =
        volts.unwrap_or_else(|| assumed_open_circuit(context, place, &complete, (rpm, phases)));
    let resistance = ohms.unwrap_or_else(|| assumed_resistance(context, place, &complete));
    Some(WindingSource {
        open_circuit,
        resistance,
        inductance: way.inductance,
        rated: way.rated,
        poles,
        phases: phases.count(),
        working,
        magnets,
        scale,
        rectifier,
        constants,
    })
}

fn scale(layers: &Layers<ChargingText>, path: String) -> Figure<Fraction> {
    let found = layers.figure(&path, |t| key(t, |w| w.scale.as_ref()));
    found.unwrap_or_else(|| by_rule(Fraction::ONE, path))
}

/// What is stated or measured of a winding, its inductance and its rating left to be added.
fn stated(
    (open_circuit, resistance): (Option<VoltsPerRpm>, Option<Ohms>),
    (poles, phases): (u32, Phases),
    rectifier: Option<Rectifier>,
    working: Working,
) -> Known {
    Known {
        open_circuit,
        resistance,
        inductance: None,
        rated: None,
        poles,
        phases,
        rectifier,
        working,
    }
}

fn scaled(winding: &Winding, scale: Fraction) -> Result<Winding, ConstantsError> {
    winding.scaled(scale).map_err(Into::into)
}

/// Volts at a speed as volts for each rpm.
fn per_rpm(stated: &Figure<(Volts, Rpm)>) -> VoltsPerRpm {
    stated.value.0 / stated.value.1
}

fn poles(context: &mut Context, layers: &Layers<ChargingText>, at: &str) -> Option<u32> {
    let found = layers.value(|t| key(t, |w| w.poles.as_ref()));
    if found.is_none() {
        context.fault(at, Fault::Missing { keys: "`poles`" });
    }
    found
}

/// The value; or none, and the fault told.
fn told<V>(context: &mut Context, at: &str, found: Result<V, ConstantsError>) -> Option<V> {
    found
        .map_err(|error| context.fault(at, Fault::Winding(error)))
        .ok()
}

fn working(context: &mut Context, layers: &Layers<ChargingText>, place: Place) -> Figure<Celsius> {
    let path = format!("{}.winding.working", place.path);
    let found = layers.figure(&path, |t| key(t, |w| w.working.as_ref()));
    let value = format::temperature(WORKING);
    let words = ("temperature of the winding at work", value, PRACTICE);
    context.figure_or_for(found, path, WORKING, words, place.name)
}

/// A key of the winding.
fn key<'t, V>(
    text: &'t ChargingText,
    key: impl Fn(&'t WindingText) -> Option<&'t Written<V>>,
) -> Option<&'t Written<V>> {
    text.winding.as_ref().and_then(key)
}

fn phases(context: &mut Context, layers: &Layers<ChargingText>, place: Place) -> Phases {
    match layers.value(|t| key(t, |w| w.phases.as_ref())) {
        Some(3) => Phases::Three,
        Some(_) => Phases::One,
        None => {
            context.assume_for("phases of the winding", "1", PRACTICE, place.name);
            Phases::One
        }
    }
}

/// The magnets matter only where the winding is corrected for its temperature.
fn magnets(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
    working: Celsius,
) -> Magnets {
    layers
        .value(|t| key(t, |w| w.magnets.as_ref()))
        .unwrap_or_else(|| {
            if working != crate::source::MEASURED_AT {
                context.assume_for("magnets", "ferrite", PRACTICE, place.name);
            }
            Magnets::Ferrite
        })
}

/// What is known beside the way, and the speed at which open-circuit volts are stated.
type Beside<'a> = (&'a Known, Option<Rpm>);

/// Inductance, bench readings or rating: of one layer, so that those written beside `part:` displace those of the part.
fn way(
    context: &mut Context,
    layers: &Layers<ChargingText>,
    place: Place,
    beside: Beside,
) -> Option<Way> {
    let at = format!("{}.winding", place.path);
    let setpoint = layers.value(|t| t.regulator.as_ref().and_then(|r| r.holds.as_ref()));
    let texts = std::iter::once((layers.own, &Origin::Stated))
        .chain(layers.parts.iter().map(|p| (&p.read.text, &p.origin)));
    for (text, origin) in texts {
        let Some(winding) = text.winding.as_ref() else {
            continue;
        };
        let through = beside
            .0
            .rectifier
            .filter(|_| winding.inductance.is_none() && !winding.readings.is_empty());
        let Some(rectifier) = through else {
            match way_of(context, winding, origin, place) {
                Some(way) => return Some(way),
                None => continue,
            }
        };
        let (known, stated_at) = beside;
        let found = bench(
            context,
            place,
            &winding.readings,
            (known, rectifier),
            (setpoint, stated_at),
        );
        return found
            .map_err(|(path, fault)| context.fault(path, fault))
            .ok()
            .map(|bench| Way {
                inductance: None,
                rated: None,
                rating: None,
                bench: Some(bench.of(origin)),
            });
    }
    let keys = "`rated`, `inductance` or `readings`";
    context.fault(at, Fault::Missing { keys });
    None
}

/// The way of one layer: a measured inductance before readings on alternating current, and those before a rating.
fn way_of(context: &mut Context, text: &WindingText, origin: &Origin, place: Place) -> Option<Way> {
    let at = format!("{}.winding", place.path);
    if let Some(found) = &text.inductance {
        let usual = of_system(RATED_BUS, place.cells);
        let rating = text.rated.as_ref();
        let path = format!("{at}.inductance");
        return Some(Way {
            inductance: Some(super::context::figure(found, origin.clone(), &path)),
            rated: None,
            rating: rating.map(|r| rating_of(&r.value, r.value.volts.unwrap_or(usual))),
            bench: None,
        });
    }
    let (rating, tolerance, path) = match (strongest(&text.readings), &text.rated) {
        (Some((index, row)), _) => {
            if text.readings.len() > 1 {
                context.notes.push(format!(
                    "{}: of its {} bench readings the one of most amps gives the inductance",
                    place.name,
                    text.readings.len()
                ));
            }
            let rating = Rating {
                amps: row.amps.value,
                rpm: row.rpm.value,
                bus: row.volts.value,
            };
            (
                rating,
                row.amps.tolerance,
                format!("{at}.readings[{index}].amps"),
            )
        }
        (None, Some(found)) => {
            let bus = rated_bus(context, found.value.volts, place);
            (
                rating_of(&found.value, bus),
                found.tolerance,
                format!("{at}.rated"),
            )
        }
        (None, None) => return None,
    };
    Some(Way {
        inductance: None,
        rated: Some(Figure {
            value: (rating.amps, rating.rpm, rating.bus),
            origin: origin.clone(),
            tolerance,
            path,
        }),
        rating: Some(rating),
        bench: None,
    })
}

/// The reading of most amps: the one that the inductance decides most. Each is a rated point of its own.
fn strongest(readings: &[ReadingText]) -> Option<(usize, &ReadingText)> {
    let rows = readings.iter().enumerate();
    rows.max_by(|(_, a), (_, b)| a.amps.value.0.total_cmp(&b.amps.value.0))
}

fn rating_of(text: &RatedText, bus: Volts) -> Rating {
    Rating {
        amps: text.amps,
        rpm: text.rpm,
        bus,
    }
}

/// The bus volts of a rating, assumed where it does not say.
fn rated_bus(context: &mut Context, stated: Option<Volts>, place: Place) -> Volts {
    stated.unwrap_or_else(|| {
        let usual = of_system(RATED_BUS, place.cells);
        let what = "bus volts of the rating";
        context.assume_for(what, format::text(usual), PRACTICE, place.name);
        usual
    })
}

/// Notes where a measured inductance and a rating beside it disagree.
fn tell_rating(
    context: &mut Context,
    place: Place,
    complete: &Constants,
    rectifier: Option<Rectifier>,
    beside: Option<Rating>,
) {
    let (Some(rectifier), Some(rating)) = (rectifier, beside) else {
        return;
    };
    let gives: Amps = rectified_dc(&complete.winding, &rectifier, rating.rpm, rating.bus);
    if (gives - rating.amps).abs() > rating.amps * RATING_OFF.0 {
        context.notes.push(format!(
            "{}: by its inductance it gives {} at {} into {}, where it is rated {}; the inductance is used",
            place.name,
            format::text(gives),
            format::text(rating.rpm),
            format::text(rating.bus),
            format::text(rating.amps)
        ));
    }
}

/// The assumed open-circuit volts, written at the rated speed; half the usual band is their tolerance.
fn assumed_open_circuit(
    context: &mut Context,
    place: Place,
    complete: &Constants,
    (rpm, phases): (Rpm, Phases),
) -> Figure<(Volts, Rpm)> {
    let usual = typical_open_circuit(phases);
    let spread = (usual.band.high - usual.band.low).0 / 2.0 / usual.value.0;
    let volts = complete.open_circuit * rpm;
    let origin = format!(
        "{} times the rated bus volts ({} to {} are met with): common practice, from memory; measure them",
        usual.value.0, usual.band.low.0, usual.band.high.0
    );
    let value = format!("{} at {}", format::text(volts), format::text(rpm));
    context.assume_for("open-circuit volts", value, &origin, place.name);
    Figure {
        value: (volts, rpm),
        origin: Origin::Assumed(origin),
        tolerance: Some(Tolerance {
            relative: Fraction(spread),
        }),
        path: format!("{}.winding.open_circuit", place.path),
    }
}

fn assumed_resistance(context: &mut Context, place: Place, complete: &Constants) -> Figure<Ohms> {
    let origin = "8 % of the open-circuit volts lost in it at the rated current: common practice, from memory";
    let value = format::text(complete.resistance);
    context.assume_for("winding resistance at 20 °C", value, origin, place.name);
    Figure {
        value: complete.resistance,
        origin: Origin::Assumed(origin.to_owned()),
        tolerance: Some(Tolerance {
            relative: ASSUMED_RESISTANCE,
        }),
        path: format!("{}.winding.resistance", place.path),
    }
}
