//! Catalog parts under an entry: the part it names, the part that one names, and so on.

use super::Fault;
use super::context::{Context, Layers, Part};
use crate::build::Origin;
use crate::catalog::Kind;
use crate::description::{AccessoryText, BatteryText, ChargingText, StarterText, Written};
use crate::problem::Refusal;

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
    let before = context.faults.len();
    let at = format!("{path}.part");
    let mut wanted = own.part().map(|p| p.value.clone());
    while let Some(id) = wanted {
        if parts.iter().any(|p| p.entry.id == id) {
            let ids = parts
                .iter()
                .map(|p| p.entry.id.clone())
                .chain([id])
                .collect();
            context.fault(at, Fault::PartCycle { ids });
            break;
        }
        let Some(entry) = context.catalogs.find(T::KIND, &id) else {
            let nearest = context.catalogs.nearest(T::KIND, &id);
            context.fault(
                at,
                Fault::UnknownPart {
                    id,
                    kind: T::KIND,
                    nearest,
                },
            );
            break;
        };
        match T::read(&id, &entry.body) {
            Ok(text) => {
                wanted = text.part().map(|p| p.value.clone());
                let origin = Origin::Catalog(entry.words());
                parts.push(Part {
                    entry,
                    text,
                    origin,
                });
            }
            Err(refusal) => {
                for problem in refusal.problems().iter() {
                    let why = match problem.path.as_str() {
                        "" => problem.kind.to_string(),
                        key => format!("`{key}`: {}", problem.kind),
                    };
                    let file = entry.origin.to_string();
                    context.fault(
                        at.clone(),
                        Fault::BadPart {
                            id: id.clone(),
                            file,
                            why,
                        },
                    );
                }
                break;
            }
        }
    }
    let broken = context.faults.len() > before;
    Layers { own, parts, broken }
}
