//! Catalog parts under an entry: the part it names, the part that one names, and so on.

use super::Fault;
use super::context::{Context, Layers, Part};
use crate::build::Origin;
use crate::catalog::{Catalogs, Kind};
use crate::description::{AccessoryText, BatteryText, ChargingText, StarterText, Written};
use crate::problem::{Problem, Refusal};

/// An entry of a build file that may name a catalog part.
pub(super) trait Parted: Sized {
    /// The kind of its parts.
    const KIND: Kind;
    /// The part it names.
    fn part(&self) -> Option<&Written<String>>;
    /// Reads the keys of a catalog entry; `name` is what messages call it.
    fn read(name: &str, body: &str) -> Result<Self, Refusal>;
}

/// Declares the entries that may name a part.
macro_rules! parted {
    ($($text:ident, $kind:ident, $read:ident;)*) => { $(
        impl Parted for $text {
            const KIND: Kind = Kind::$kind;
            fn part(&self) -> Option<&Written<String>> {
                self.part.as_ref()
            }
            fn read(name: &str, body: &str) -> Result<Self, Refusal> {
                crate::description::$read(name, body)
            }
        }
    )* };
}
parted! {
    ChargingText, Charging, read_charging;
    BatteryText, Battery, read_battery;
    StarterText, Starter, read_starter;
    AccessoryText, Accessory, read_accessory;
}

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
        if parts.iter().any(|p| p.entry.id == id) {
            let followed = parts.iter().map(|p| p.entry.id.clone());
            let ids = followed.chain([id]).collect();
            faults.push(Fault::PartCycle { ids });
            break;
        }
        match part(context.catalogs, &id) {
            Ok(part) => {
                wanted = T::part(&part.text).map(|p| p.value.clone());
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

/// The part of an id, read; or what is wrong with it.
fn part<T: Parted>(catalogs: &Catalogs, id: &str) -> Result<Part<T>, Vec<Fault>> {
    let Some(entry) = catalogs.find(T::KIND, id) else {
        return Err(vec![Fault::UnknownPart {
            id: id.to_owned(),
            kind: T::KIND,
            nearest: catalogs.nearest(T::KIND, id),
        }]);
    };
    match T::read(id, &entry.body) {
        Ok(text) => {
            let origin = Origin::Catalog(entry.words());
            Ok(Part {
                entry,
                text,
                origin,
            })
        }
        Err(refusal) => {
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
    }
}
