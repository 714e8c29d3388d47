//! Where the values with a tolerance stand in an entry of `charging:`.

use super::amount::{Amount, typed_factor};
use super::law::Law;
use super::toleranced::{Place, Toleranced, Walk, spread};
use super::walk::{Below, Ground, place};
use crate::build::{Figure, Origin, SourceKind, WindingSource};
use crate::description::charging::RectifierKind;
use crate::description::{
    AlternatorText, ChargingText, RectifierText, RegulatorText, WindingText, Written, path,
};
use crate::quantity::{Amps, Fraction, Rpm, bounds};

/// An entry and the parts under it.
#[derive(Clone, Copy)]
struct Entry<'a> {
    at: &'a str,
    name: &'a str,
    below: &'a Below<ChargingText>,
}

/// Walks an entry.
pub(super) fn charging(walk: &mut Walk, own: &mut ChargingText, ground: &Ground, index: usize) {
    let (Some(below), Some(source)) = (
        ground.charging.get(index),
        ground.nominal.sources.get(index),
    ) else {
        return;
    };
    let at = own.path.clone();
    let entry = Entry {
        at: &at,
        name: &source.name,
        below,
    };
    match &source.kind {
        SourceKind::Winding(nominal) => {
            walk.within(&mut own.winding, |walk, own| {
                winding(walk, own, entry, nominal)
            });
        }
        SourceKind::Alternator(_) => {
            walk.within(&mut own.alternator, |walk, own| {
                alternator(walk, own, entry)
            });
        }
    }
    rectifier(walk, &mut own.rectifier, entry);
    regulator(walk, &mut own.regulator, entry);
}

fn winding(walk: &mut Walk, own: &mut WindingText, entry: Entry, nominal: &WindingSource) {
    let at = path::key(entry.at, "winding");
    let of = |key, what| Place {
        of: entry.name,
        ..place(&at, key, what)
    };
    way(walk, own, entry, of);
    let part = of_part(entry, |w| w.open_circuit.as_ref());
    let volts = of("open_circuit", "open-circuit volts");
    let assumed = assumption(&nominal.open_circuit, part.is_some());
    walk.value(volts, &mut own.open_circuit, part, &bounds::OPEN_CIRCUIT);
    if let Some(assumed) = assumed {
        walk.assumed(
            volts,
            &mut own.open_circuit,
            &assumed,
            &bounds::OPEN_CIRCUIT,
        );
    }
    let part = of_part(entry, |w| w.resistance.as_ref());
    let ohms = of("resistance", "winding resistance");
    let assumed = assumption(&nominal.resistance, part.is_some());
    walk.value(ohms, &mut own.resistance, part, &bounds::WINDING_RESISTANCE);
    if let Some(assumed) = assumed {
        walk.assumed(
            ohms,
            &mut own.resistance,
            &assumed,
            &bounds::WINDING_RESISTANCE,
        );
    }
    let part = of_part(entry, |w| w.working.as_ref());
    let working = of("working", "winding's temperature");
    walk.value(working, &mut own.working, part, &bounds::WORKING);
    let part = of_part(entry, |w| w.scale.as_ref());
    let scale = of("scale", "scale of the winding");
    walk.value_typed(scale, &mut own.scale, part, &bounds::SCALE, typed_factor);
}

/// Inductance or rating, of the uppermost layer that has either: a rating beside an inductance only checks it.
fn way<'a>(
    walk: &mut Walk,
    own: &mut WindingText,
    entry: Entry,
    of: impl Fn(&'a str, &'a str) -> Place<'a>,
) {
    let has = |w: &WindingText| w.inductance.is_some() || w.rated.is_some();
    let part = if has(own) {
        None
    } else {
        entry.below.first(|t| t.winding.as_ref().filter(|w| has(w)))
    };
    let inductance = of("inductance", "winding inductance");
    let rated = of("rated", "rated current");
    if own.inductance.is_some() || part.is_some_and(|w| w.inductance.is_some()) {
        let part = part.and_then(|w| w.inductance.as_ref());
        walk.value(inductance, &mut own.inductance, part, &bounds::INDUCTANCE);
    } else {
        let part = part.and_then(|w| w.rated.as_ref());
        walk.value(rated, &mut own.rated, part, &bounds::RATED_CURRENT);
    }
}

/// A key of the uppermost part's winding that has it.
fn of_part<'a, V: 'a>(entry: Entry<'a>, key: impl Fn(&'a WindingText) -> Option<V>) -> Option<V> {
    entry.below.first(|t| t.winding.as_ref().and_then(&key))
}

/// An assumed figure as if it were written, where it is one.
fn assumption<T: Copy>(nominal: &Figure<T>, of_part: bool) -> Option<Written<T>> {
    let assumed = matches!(nominal.origin, Origin::Assumed(_)) && !of_part;
    assumed.then(|| Written {
        value: nominal.value,
        tolerance: nominal.tolerance,
        path: nominal.path.clone(),
    })
}

fn alternator(walk: &mut Walk, own: &mut AlternatorText, entry: Entry) {
    let at = path::key(entry.at, "alternator");
    let of = |key, what| place(&at, key, what).of(entry.name);
    let below = entry.below;
    curve(walk, &mut own.curve, entry, of("curve", "output curve"));
    let part = below.first(|t| t.alternator.as_ref()?.ratio.as_ref());
    let ratio = of("ratio", "pulley ratio");
    walk.value_typed(ratio, &mut own.ratio, part, &bounds::RATIO, typed_factor);
    let part = below.first(|t| t.alternator.as_ref()?.tested.as_ref());
    let tested = of("tested", "temperature of the output curve");
    walk.value(tested, &mut own.tested, part, &bounds::WORKING);
    let part = below.first(|t| t.alternator.as_ref()?.working.as_ref());
    let working = of("working", "alternator's temperature");
    walk.value(working, &mut own.working, part, &bounds::WORKING);
}

/// An output curve is one value: all of its points lie off to the same side.
fn curve(walk: &mut Walk, own: &mut Vec<Written<(Amps, Rpm)>>, entry: Entry, place: Place) {
    let (rows, law) = if own.is_empty() {
        let rows = entry.below.first(|t| {
            let rows = &t.alternator.as_ref()?.curve;
            (!rows.is_empty()).then_some(rows.as_slice())
        });
        (rows.unwrap_or_default(), Law::Normal)
    } else {
        (own.as_slice(), Law::Uniform)
    };
    let widest = rows
        .iter()
        .filter_map(spread)
        .fold(Fraction::ZERO, Fraction::max);
    if widest <= Fraction::ZERO {
        return;
    }
    let at = path::key(place.at, place.key);
    let listed = |rows: &[Written<(Amps, Rpm)>]| {
        let rows: Vec<String> = rows.iter().map(|row| row.value.typed()).collect();
        format!("[{}]", rows.join(", "))
    };
    let share = walk.next(|| Toleranced {
        what: format!("{}, {}", place.what, place.of),
        path: at.clone(),
        value: listed(rows),
        tolerance: widest,
        law,
    });
    let Some(share) = share else { return };
    let drawn = |(index, row): (usize, &Written<(Amps, Rpm)>)| {
        let factor = spread(row).map_or(1.0, |r| law.factor(r, share));
        let value = row.value.drawn(factor, &bounds::CURVE_CURRENT);
        Written::exact(value, path::index(&at, index))
    };
    let rows: Vec<_> = rows.iter().enumerate().map(drawn).collect();
    walk.put(|| format!("{at}={}", listed(&rows)));
    *own = rows;
}

fn rectifier(walk: &mut Walk, own: &mut Option<RectifierText>, entry: Entry) {
    let at = path::key(entry.at, "rectifier");
    let place = place(&at, "drop", "forward drop of a diode").of(entry.name);
    if let Some(drop) = own.as_mut().and_then(|own| own.drop.as_mut()) {
        walk.stated(place, drop, &bounds::DROP);
        return;
    }
    let part = entry.below.first(|t| t.rectifier.as_ref()?.drop.as_ref());
    let kind = own.as_ref().map(|own| own.kind.clone());
    let kind = kind.or_else(|| {
        entry
            .below
            .first(|t| Some(t.rectifier.as_ref()?.kind.clone()))
    });
    let (Some(part), Some(kind)) = (part, kind) else {
        return;
    };
    let word = match kind.value {
        RectifierKind::HalfWave => "half-wave",
        RectifierKind::FullWave => "full-wave",
        RectifierKind::None => return,
    };
    let Some(volts) = walk.one(place, part, Law::Normal, &bounds::DROP, &Amount::typed) else {
        return;
    };
    walk.put(|| format!("{at}={{kind: {word}, drop: {}}}", volts.typed()));
    *own = Some(RectifierText {
        kind,
        drop: Some(Written::exact(volts, path::key(&at, "drop"))),
    });
}

fn regulator(walk: &mut Walk, own: &mut Option<RegulatorText>, entry: Entry) {
    let at = path::key(entry.at, "regulator");
    let met = walk.met;
    let was = own.is_some();
    let mut inner = own.take().unwrap_or(RegulatorText {
        path: at.clone(),
        holds: None,
        kind: None,
        per_degree: None,
    });
    let below = entry.below;
    let part = below.first(|t| t.regulator.as_ref()?.holds.as_ref());
    let holds = place(&at, "holds", "regulator's setpoint").of(entry.name);
    walk.value(holds, &mut inner.holds, part, &bounds::HOLDS);
    let part = below.first(|t| t.regulator.as_ref()?.per_degree.as_ref());
    let per_degree = place(&at, "per_degree", "setpoint's change with temperature").of(entry.name);
    walk.value(per_degree, &mut inner.per_degree, part, &bounds::PER_DEGREE);
    if was || (walk.draws() && walk.met > met) {
        *own = Some(inner);
    }
}
