//! Catalog parts under an entry: the part it names, the part that one names, and so on.

use super::Fault;
use super::context::{Context, Layers, Part};
use crate::build::Origin;
use crate::catalog::{Catalogs, Parted};
use crate::description::AccessoryText;
use crate::problem::{MOST_KEPT, Problem};

/// An entry over its parts, nearest first. What is wrong with them is told at the path of the entry's `part`.
pub(super) fn layers<'a, T: Parted>(
    context: &mut Context,
    own: &'a T,
    path: &str,
) -> Layers<'a, T> {
    let mut parts: Vec<Part<T>> = Vec::new();
    let mut faults: Vec<Fault> = Vec::new();
    let mut wanted = own.part().map(|p| p.value.clone());
    while let Some(id) = wanted.take() {
        if parts.iter().any(|p| p.read.entry.id == id) {
            let followed = parts.iter().map(|p| p.read.entry.id.clone());
            let ids = followed.chain([id]).collect();
            faults.push(Fault::PartCycle { ids });
            break;
        }
        match part(context.catalogs, &id, context.faults.len() < MOST_KEPT) {
            Ok(part) => {
                wanted = T::part(&part.read.text).map(|p| p.value.clone());
                parts.push(part);
            }
            Err(found) => faults.extend(found),
        }
    }
    let broken = !faults.is_empty();
    for fault in faults {
        context.fault(format!("{path}.part"), fault);
    }
    Layers { own, parts, broken }
}

/// The accessories over their parts; no more of them once there is more wrong than is shown.
pub(super) fn of_each<'a>(
    context: &mut Context,
    accessories: &'a [AccessoryText],
) -> Vec<Layers<'a, AccessoryText>> {
    let mut all = Vec::with_capacity(accessories.len());
    for accessory in accessories {
        if context.faults.len() > MOST_KEPT {
            break;
        }
        all.push(layers(context, accessory, &accessory.path));
    }
    all
}

/// The part of an id, read; or what is wrong with it. A suggestion is looked for where it will be `shown`.
fn part<T: Parted>(catalogs: &Catalogs, id: &str, shown: bool) -> Result<Part<T>, Vec<Fault>> {
    match catalogs.part(id) {
        Some(Ok(read)) => {
            let origin = Origin::Catalog(read.entry.words());
            Ok(Part { read, origin })
        }
        Some(Err((entry, refusal))) => {
            let bad = |problem: &Problem| Fault::BadPart {
                id: id.to_owned(),
                file: entry.origin.to_string(),
                why: match problem.path.as_str() {
                    "" => problem.kind.to_string(),
                    key => format!("`{key}`: {}", problem.kind),
                },
            };
            Err(refusal.problems().iter().map(bad).collect())
        }
        None => Err(vec![Fault::UnknownPart {
            id: id.to_owned(),
            kind: T::KIND,
            nearest: shown.then(|| catalogs.nearest(T::KIND, id)).flatten(),
        }]),
    }
}
