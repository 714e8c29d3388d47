//! The accessories: each entry completed, then named apart and put into groups.

use super::Fault;
use super::context::{Context, Layers, of_system};
use super::draw::{draw, drops_out};
use super::duty::duty;
use super::wiring::{Usual, wire};
use crate::build::{Accessory, Draw, Inrush, Speed, Works};
use crate::description::AccessoryText;
use crate::description::accessory::LoadKind;
use crate::quantity::{Amps, Volts, format};
use std::collections::{BTreeMap, BTreeSet};

/// Volts below which electronics and constant currents of a 12 V system drop out. Common practice, no source.
const DROP_OUT: Volts = Volts(10.5);
/// Constant currents from here on are taken for motors, below for electronics.
const MOTOR_FROM: Amps = Amps(1.0);

/// A circuit of a winding's own.
pub(super) struct Circuit {
    /// Its name.
    pub(super) name: String,
    /// Alternating current.
    pub(super) ac: bool,
    /// Grounded by the interlock.
    pub(super) braking: bool,
}

/// What accessories are resolved in.
pub(super) struct Surroundings<'a> {
    pub(super) speeds: &'a [Speed],
    pub(super) circuits: &'a [Circuit],
    pub(super) cells: u32,
    pub(super) has_battery: bool,
    pub(super) wiring: Usual,
}

/// The accessories of a build, in the order written; none where a fault leaves nothing to go by.
pub(super) fn accessories(
    context: &mut Context,
    texts: &[AccessoryText],
    around: &Surroundings,
) -> Option<Vec<Accessory>> {
    let layers = super::parts::of_each(context, texts);
    if layers.len() < texts.len() {
        return None;
    }
    let names = names(context, &layers);
    let mut all = Vec::with_capacity(layers.len());
    for (layers, name) in layers.iter().zip(names) {
        all.push(accessory(context, layers, name, around));
    }
    context.tell_groups(usize::MAX);
    let mut all: Vec<Accessory> = all.into_iter().collect::<Option<_>>()?;
    super::groups::link(context, texts, &mut all, around.speeds);
    Some(all)
}

/// A name for each: as written, the part's, the part's title; numbered where parts bring the same one.
fn names(context: &mut Context, layers: &[Layers<AccessoryText>]) -> Vec<String> {
    let written = |layer: &Layers<AccessoryText>| layer.own.name.as_ref().map(|n| n.value.clone());
    let all_written: BTreeSet<String> = layers.iter().filter_map(written).collect();
    let mut written_before = BTreeSet::new();
    let mut taken: BTreeSet<String> = BTreeSet::new();
    // the last number given to each name, so that many alike are not counted through again for each
    let mut numbers: BTreeMap<String, usize> = BTreeMap::new();
    let mut names = Vec::with_capacity(layers.len());
    for (index, layer) in layers.iter().enumerate() {
        let written = layer.own.name.as_ref();
        let base = match (written, layer.parts.first()) {
            (Some(name), _) => name.value.clone(),
            (None, Some(part)) => match &part.read.text.name {
                Some(name) => name.value.clone(),
                None => part.read.entry.title.clone(),
            },
            (None, None) => format!("accessory {}", index + 1),
        };
        if let Some(name) = written
            && !written_before.insert(base.clone())
        {
            context.fault(name.path.clone(), Fault::NameTwice { name: base.clone() });
        }
        // a written name is not taken by a part's before its turn
        let is_taken =
            |name: &str| taken.contains(name) || (written.is_none() && all_written.contains(name));
        let mut name = base.clone();
        if is_taken(&name) {
            let number = numbers.entry(base.clone()).or_insert(1);
            while is_taken(&name) {
                *number += 1;
                name = format!("{base} ({number})");
            }
        }
        taken.insert(name.clone());
        names.push(name);
    }
    names
}

/// One entry completed.
fn accessory(
    context: &mut Context,
    layers: &Layers<AccessoryText>,
    name: String,
    around: &Surroundings,
) -> Option<Accessory> {
    if layers.broken {
        return None;
    }
    let path = layers.own.path.as_str();
    let place = (path, name.as_str());
    let duty = duty(context, layers, place, around.speeds);
    let accepts_ac = layers.value(|t| t.accepts_ac.as_ref()).unwrap_or(false);
    let draw = draw(context, layers, place, around.cells);
    let circuit = circuit(
        context,
        layers,
        place,
        draw.as_ref().map(|d| d.value),
        accepts_ac,
        around,
    );
    let draw = draw?;
    let coil = layers.value(|t| t.coil.as_ref());
    let kind = layers
        .value(|t| t.kind.as_ref())
        .unwrap_or_else(|| kind(draw.value, coil.is_some()));
    Some(Accessory {
        path: path.to_owned(),
        part: layers.part(),
        count: layers.value(|t| t.count.as_ref()).unwrap_or(1),
        works: works(context, layers, &name, draw.value, around.cells),
        inrush: layers.value(|t| t.inrush.as_ref()).map(|i| Inrush {
            times: i.times,
            time: i.time,
        }),
        circuit,
        parked: layers.value(|t| t.parked.as_ref()).unwrap_or(Amps::ZERO),
        coil,
        together: Vec::new(),
        apart: Vec::new(),
        price: layers.value(|t| t.price.as_ref()),
        lumens: layers.value(|t| t.lumens.as_ref()),
        kind,
        accepts_ac,
        wire: wire(layers, &around.wiring),
        name,
        draw,
        duty,
    })
}

/// The circuit it hangs on, none for the battery's; refuses what must not hang there.
fn circuit(
    context: &mut Context,
    layers: &Layers<AccessoryText>,
    (path, name): (&str, &str),
    draw: Option<Draw>,
    accepts_ac: bool,
    around: &Surroundings,
) -> Option<String> {
    let wanted = layers
        .get(|t| t.circuit.as_ref())
        .map(|(c, _)| c)
        .filter(|c| c.value != "battery");
    let Some(wanted) = wanted else {
        if !around.has_battery {
            context.fault(path, Fault::NoBus);
        }
        return None;
    };
    let Some(circuit) = around.circuits.iter().find(|c| c.name == wanted.value) else {
        let known = around
            .circuits
            .iter()
            .filter(|c| !c.braking)
            .map(|c| c.name.clone());
        let fault = Fault::UnknownName {
            what: "circuit",
            name: wanted.value.clone(),
            known: known.collect(),
        };
        context.fault(format!("{path}.circuit"), fault);
        return None;
    };
    if circuit.braking {
        let name = name.to_owned();
        context.fault(format!("{path}.circuit"), Fault::OnBrakingWinding { name });
    } else if circuit.ac && !accepts_ac && draw.is_some_and(drops_out) {
        let power = matches!(draw, Some(Draw::Power(_)));
        let name = name.to_owned();
        context.fault(format!("{path}.circuit"), Fault::NeedsDc { name, power });
    }
    Some(circuit.name.clone())
}

/// The volts within which it works. Electronics and constant currents drop out under 1.75 V a cell.
fn works(
    context: &mut Context,
    layers: &Layers<AccessoryText>,
    name: &str,
    draw: Draw,
    cells: u32,
) -> Works {
    if let Some(works) = layers.value(|t| t.works.as_ref()) {
        return Works {
            low: Some(works.low),
            high: Some(works.high),
            stated: true,
        };
    }
    let low = drops_out(draw).then(|| {
        let low = of_system(DROP_OUT, cells);
        let origin = "1.75 V a cell: common practice, no source";
        context.assume_for(
            "volts under which it drops out",
            format::text(low),
            origin,
            name,
        );
        low
    });
    Works {
        low,
        high: None,
        stated: false,
    }
}

/// What its current is to a switch, where it does not say: guessed from what it draws.
fn kind(draw: Draw, coil: bool) -> LoadKind {
    match draw {
        _ if coil => LoadKind::Coil,
        Draw::Filament { .. } => LoadKind::Lamp,
        Draw::Resistance(_) => LoadKind::Heater,
        Draw::Power(_) => LoadKind::Electronics,
        Draw::Current(amps) if amps >= MOTOR_FROM => LoadKind::Motor,
        Draw::Current(_) => LoadKind::Electronics,
    }
}
