//! A winding: what is known of it completed to constants, or refused where its figures contradict each other.

use super::Fault;
use super::charging::Place;
use super::context::{Context, Layers, PRACTICE, by_rule, of_system};
use crate::build::{Figure, Origin, WindingSource};
use crate::description::{ChargingText, WindingText, Written};
use crate::quantity::{
    Amps, Celsius, Fraction, Henries, Ohms, Rpm, Tolerance, Volts, VoltsPerRpm, format,
};
use crate::source::{
    Constants, Known, Magnets, Phases, Rating, Rectifier, Working, rectified_dc,
    typical_open_circuit,
};

/// A winding's temperature at work. Common practice, no source (80 to 120 °C).
const WORKING: Celsius = Celsius(100.0);
/// Rated bus volts of a 12 V system. Common practice, no source.
const RATED_BUS: Volts = Volts(14.0);
/// How far an assumed resistance may lie off. Common practice, no source.
const ASSUMED_RESISTANCE: Fraction = Fraction(0.3);

/// How far a rating may lie from what a measured inductance gives before it is noted.
const RATING_OFF: Fraction = Fraction(0.1);

/// Which of the ways to the inductance a winding's figures take.
enum Way {
    /// Measured, or of a bench table; with the rating that stands beside it, where one does.
    Measured(Figure<Henries>, Option<Rating>),
    Rated(Figure<(Amps, Rpm, Volts)>),
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
    let Some(poles) = layers.value(|t| key(t, |w| w.poles.as_ref())) else {
        context.fault(at, Fault::Missing { keys: "`poles`" });
        return None;
    };
    let phases = phases(context, layers, place);
    let working = layers.figure(&path("working"), |t| key(t, |w| w.working.as_ref()));
    let what = format!("temperature at work, {}", place.name);
    let words = (what.as_str(), format::temperature(WORKING), PRACTICE);
    let working = context.figure_or(working, path("working"), WORKING, words);
    let magnets = magnets(context, layers, place, working.value);
    let scale = layers
        .figure(&path("scale"), |t| key(t, |w| w.scale.as_ref()))
        .unwrap_or_else(|| by_rule(Fraction::ONE, path("scale")));
    let way = way(context, layers, place)?;
    let open_circuit = layers.figure(&path("open_circuit"), |t| {
        key(t, |w| w.open_circuit.as_ref())
    });
    let resistance = layers.figure(&path("resistance"), |t| key(t, |w| w.resistance.as_ref()));
    let (inductance, rated, beside) = match way {
        Way::Measured(inductance, beside) => (Some(inductance), None, beside),
        Way::Rated(rated) => (None, Some(rated), None),
    };
    let rating = rated.as_ref().map(|r| Rating {
        amps: r.value.0,
        rpm: r.value.1,
        bus: r.value.2,
    });
    let known = Known {
        open_circuit: open_circuit.as_ref().map(|f| per_rpm(f.value)),
        resistance: resistance.as_ref().map(|f| f.value),
        inductance: inductance.as_ref().map(|f| f.value),
        rated: rating,
        poles,
        phases,
        rectifier,
        working: Working {
            winding: working.value,
            magnets,
        },
    };
    let found = known
        .complete()
        .and_then(|c| Ok((c, c.winding.scaled(scale.value)?)));
    let (complete, constants) = match found {
        Ok(found) => found,
        Err(error) => {
            context.fault(at, Fault::Winding(error));
            return None;
        }
    };
    tell_rating(context, place, &complete, rectifier, beside);
    let rated_rpm = rating.map_or(Rpm(3600.0), |r| r.rpm);
    let open_circuit = open_circuit
        .unwrap_or_else(|| assumed_open_circuit(context, place, &complete, rated_rpm, phases));
    let resistance = resistance.unwrap_or_else(|| assumed_resistance(context, place, &complete));
    Some(WindingSource {
        open_circuit,
        resistance,
        inductance,
        rated,
        poles,
        phases: phases.count(),
        working,
        magnets,
        scale,
        rectifier,
        constants,
    })
}

/// A key of the winding.
fn key<'t, V>(
    text: &'t ChargingText,
    key: impl Fn(&'t WindingText) -> Option<&'t Written<V>>,
) -> Option<&'t Written<V>> {
    text.winding.as_ref().and_then(key)
}

fn per_rpm((volts, rpm): (Volts, Rpm)) -> VoltsPerRpm {
    volts / rpm
}

fn phases(context: &mut Context, layers: &Layers<ChargingText>, place: Place) -> Phases {
    match layers.value(|t| key(t, |w| w.phases.as_ref())) {
        Some(3) => Phases::Three,
        Some(_) => Phases::One,
        None => {
            context.assume(format!("phases, {}", place.name), "1", PRACTICE);
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
                context.assume(format!("magnets, {}", place.name), "ferrite", PRACTICE);
            }
            Magnets::Ferrite
        })
}

/// Inductance or rating: of one layer, so that one written beside `part:` displaces that of the part. Within a layer a
/// measured inductance comes before a rating, which then only checks it.
fn way(context: &mut Context, layers: &Layers<ChargingText>, place: Place) -> Option<Way> {
    let at = format!("{}.winding", place.path);
    let texts = std::iter::once((layers.own, &Origin::Stated))
        .chain(layers.parts.iter().map(|p| (&p.text, &p.origin)));
    let usual = of_system(RATED_BUS, place.cells);
    for (text, origin) in texts {
        let Some(winding) = &text.winding else {
            continue;
        };
        if let Some(found) = &winding.inductance {
            let beside = winding.rated.as_ref().map(|r| Rating {
                amps: r.value.amps,
                rpm: r.value.rpm,
                bus: r.value.volts.unwrap_or(usual),
            });
            let found = super::context::figure(found, origin.clone(), &format!("{at}.inductance"));
            return Some(Way::Measured(found, beside));
        }
        if let Some(found) = &winding.rated {
            let bus = found.value.volts.unwrap_or_else(|| {
                let what = format!("bus volts of the rating, {}", place.name);
                context.assume(what, format::text(usual), PRACTICE);
                usual
            });
            return Some(Way::Rated(Figure {
                value: (found.value.amps, found.value.rpm, bus),
                origin: origin.clone(),
                tolerance: found.tolerance,
                path: format!("{at}.rated"),
            }));
        }
    }
    let keys = "`rated`, `inductance` or `readings`";
    context.fault(at, Fault::Missing { keys });
    None
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
    rpm: Rpm,
    phases: Phases,
) -> Figure<(Volts, Rpm)> {
    let usual = typical_open_circuit(phases);
    let spread = (usual.band.high - usual.band.low).0 / 2.0 / usual.value.0;
    let volts = complete.open_circuit * rpm;
    let what = format!("open-circuit volts, {}", place.name);
    let origin = format!(
        "{} times the rated bus volts ({} to {} are met with): common practice, from memory; measure them",
        usual.value.0, usual.band.low.0, usual.band.high.0
    );
    context.assume(
        what,
        format!("{} at {}", format::text(volts), format::text(rpm)),
        &origin,
    );
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
    let what = format!("winding resistance at 20 °C, {}", place.name);
    let origin = "8 % of the open-circuit volts lost in it at the rated current: common practice, from memory";
    context.assume(what, format::text(complete.resistance), origin);
    Figure {
        value: complete.resistance,
        origin: Origin::Assumed(origin.to_owned()),
        tolerance: Some(Tolerance {
            relative: ASSUMED_RESISTANCE,
        }),
        path: format!("{}.winding.resistance", place.path),
    }
}
