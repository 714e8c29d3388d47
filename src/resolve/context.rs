//! What the steps of resolving share: the layers a figure may come from, what was assumed, what was wrong.

use super::Fault;
use crate::build::{Assumed, Figure, Origin};
use crate::catalog::{Catalogs, Read};
use crate::description::Written;
use crate::quantity::Volts;
use std::sync::Arc;

/// Grounds of what is assumed.
pub(super) const PRACTICE: &str = "common practice, no source";

/// What is gathered on the way.
pub(super) struct Context<'a> {
    /// Where parts are looked up.
    pub(super) catalogs: &'a Catalogs,
    /// Faults with the path each stands at.
    pub(super) faults: Vec<(String, Fault)>,
    /// What was assumed.
    pub(super) assumed: Vec<Assumed>,
    /// What was assumed of several accessories alike, with their names.
    groups: Vec<(Assumed, Vec<String>)>,
    /// What was assumed of the wiring.
    pub(super) wiring_assumed: Vec<Assumed>,
    /// What the reader should know.
    pub(super) notes: Vec<String>,
}

impl<'a> Context<'a> {
    pub(super) fn new(catalogs: &'a Catalogs) -> Context<'a> {
        Context {
            catalogs,
            faults: Vec::new(),
            assumed: Vec::new(),
            groups: Vec::new(),
            wiring_assumed: Vec::new(),
            notes: Vec::new(),
        }
    }

    /// Records a fault.
    pub(super) fn fault(&mut self, path: impl Into<String>, fault: Fault) {
        self.faults.push((path.into(), fault));
    }

    /// Records an assumption.
    pub(super) fn assume(
        &mut self,
        what: impl Into<String>,
        value: impl Into<String>,
        origin: &str,
    ) {
        self.assumed.push(Assumed {
            what: what.into(),
            value: value.into(),
            origin: origin.to_owned(),
        });
    }

    /// Records an assumption about one accessory, beside those of others of the same value.
    pub(super) fn assume_for(
        &mut self,
        what: &str,
        value: impl Into<String>,
        origin: &str,
        name: &str,
    ) {
        let row = Assumed {
            what: what.to_owned(),
            value: value.into(),
            origin: origin.to_owned(),
        };
        match self.groups.iter_mut().find(|(group, _)| *group == row) {
            Some((_, names)) => names.push(name.to_owned()),
            None => self.groups.push((row, vec![name.to_owned()])),
        }
    }

    /// Lists what was assumed of several, one row for all that share a value; without names where there is but one.
    pub(super) fn tell_groups(&mut self, of: usize) {
        for (row, names) in std::mem::take(&mut self.groups) {
            if of == 1 {
                self.assumed.push(row);
                continue;
            }
            let whose = match names.as_slice() {
                [first, second, third, rest @ ..] if !rest.is_empty() => {
                    format!("{first}, {second}, {third} and {} more", rest.len())
                }
                few => few.join(", "),
            };
            self.assumed.push(Assumed {
                what: format!("{}, {whose}", row.what),
                ..row
            });
        }
    }

    /// The figure where one was found, else the assumed value, recorded as (what, value in words, ground).
    pub(super) fn figure_or<V>(
        &mut self,
        found: Option<Figure<V>>,
        path: String,
        default: V,
        words: (&str, String, &str),
    ) -> Figure<V> {
        found.unwrap_or_else(|| {
            let (what, value, origin) = words;
            self.assume(what, value, origin);
            assumed(default, path, origin)
        })
    }

    /// The same of one of several.
    pub(super) fn figure_or_for<V>(
        &mut self,
        found: Option<Figure<V>>,
        path: String,
        default: V,
        words: (&str, String, &str),
        name: &str,
    ) -> Figure<V> {
        found.unwrap_or_else(|| {
            let (what, value, origin) = words;
            self.assume_for(what, value, origin, name);
            assumed(default, path, origin)
        })
    }
}

/// A figure that was assumed on a ground.
fn assumed<V>(value: V, path: String, origin: &str) -> Figure<V> {
    Figure {
        value,
        origin: Origin::Assumed(origin.to_owned()),
        tolerance: None,
        path,
    }
}

/// Volts that a 12 V system has, for a system of so many cells.
pub(super) fn of_system(volts: Volts, cells: u32) -> Volts {
    volts * (f64::from(cells) / 6.0)
}

/// A catalog part that an entry stands on.
pub(super) struct Part<T> {
    /// The entry and its own keys.
    pub(super) read: Arc<Read<T>>,
    /// Origin of its figures.
    pub(super) origin: Origin,
}

/// An entry as written, over the catalog parts it stands on, nearest first.
pub(super) struct Layers<'a, T> {
    /// As written.
    pub(super) own: &'a T,
    /// The part it names, the part that one names, and so on.
    pub(super) parts: Vec<Part<T>>,
    /// Whether a part it stands on is at fault: what is missing then is no fault of its own.
    pub(super) broken: bool,
}

static STATED: Origin = Origin::Stated;

impl<T> Layers<'_, T> {
    /// The uppermost layer that has a key.
    pub(super) fn get<'s, V: 's>(
        &'s self,
        key: impl Fn(&'s T) -> Option<V>,
    ) -> Option<(V, &'s Origin)> {
        if let Some(found) = key(self.own) {
            return Some((found, &STATED));
        }
        self.parts
            .iter()
            .find_map(|part| key(&part.read.text).map(|found| (found, &part.origin)))
    }

    /// The value of the uppermost layer that has a key.
    pub(super) fn value<'s, V: Clone + 's>(
        &'s self,
        key: impl Fn(&'s T) -> Option<&'s Written<V>>,
    ) -> Option<V> {
        self.get(key).map(|(found, _)| found.value.clone())
    }

    /// The same as a figure, with the path that `--set` takes.
    pub(super) fn figure<'s, V: Clone + 's>(
        &'s self,
        path: &str,
        key: impl Fn(&'s T) -> Option<&'s Written<V>>,
    ) -> Option<Figure<V>> {
        self.get(key)
            .map(|(found, origin)| figure(found, origin.clone(), path))
    }

    /// Id of the part that the entry names.
    pub(super) fn part(&self) -> Option<String> {
        self.parts.first().map(|p| p.read.entry.id.clone())
    }
}

/// A written value as a figure.
pub(super) fn figure<V: Clone>(found: &Written<V>, origin: Origin, path: &str) -> Figure<V> {
    Figure {
        value: found.value.clone(),
        origin,
        tolerance: found.tolerance,
        path: path.to_owned(),
    }
}

/// A value that follows from the file's rules, not from an assumption.
pub(super) fn by_rule<V>(value: V, path: String) -> Figure<V> {
    Figure {
        value,
        origin: Origin::Stated,
        tolerance: None,
        path,
    }
}
