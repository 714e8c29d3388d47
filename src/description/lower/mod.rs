//! From the keys as serde read them to typed values, all that is wrong gathered on the way.

mod accessory;
mod battery;
mod charging;
mod engine;
mod fit;
mod fleet;
mod leaf;
mod prices;
mod rest;

/// The words that each key of words may have, and what each means.
pub(crate) mod words {
    pub(crate) use super::accessory::{KINDS, LAWS, RETURNS};
    pub(crate) use super::battery::CHEMISTRIES;
    pub(crate) use super::charging::{MAGNETS, RECTIFIERS, REGULATORS};
}

use super::path;
use super::places::Places;
use super::raw::{self, Keys, List, Map, Named, Node};
use super::values::{Value, Values};
use super::{Description, Written};
use crate::problem::words::nearest;
use crate::problem::{MOST_KEPT, Problem, Problems, Shape, ShapeProblem, TextProblem};
use serde::Deserialize;
use std::collections::BTreeMap;
use std::iter::Enumerate;
use std::marker::PhantomData;

/// What lowering reads beside the raw keys, and the problems found so far.
pub(super) struct Lower<'a> {
    places: &'a Places,
    /// Mappings with a misspelt key, and the key that was meant.
    misspelt: BTreeMap<String, Vec<&'static str>>,
    /// Gathered in passing.
    pub(super) problems: Problems,
}

/// The entries of a list that are yet to be read.
struct Entries<'a, T> {
    /// Path of the list.
    list: String,
    values: Enumerate<Values<'a>>,
    each: PhantomData<T>,
}

impl<T> Entries<'_, T> {
    /// Whether none is left.
    fn is_empty(&self) -> bool {
        self.values.size_hint().1 == Some(0)
    }
}

impl<'a> Lower<'a> {
    /// Begins with nothing wrong.
    pub(super) fn new(places: &'a Places) -> Self {
        Lower {
            places,
            misspelt: BTreeMap::new(),
            problems: Problems::default(),
        }
    }

    fn problem(&mut self, problem: Problem) {
        self.problems.push(problem);
    }

    /// Entries of a list or mapping, until more is wrong than is kept.
    fn looked_at<T>(&self, entries: &mut impl Iterator<Item = T>) -> Option<T> {
        entries.next().filter(|_| !self.problems.more())
    }

    /// A key that must be there and is not. Where it is misspelt, or has nothing behind it, that has been told.
    fn missing(&mut self, path: &str, key: &'static str, example: &'static str) {
        let misspelt = self
            .misspelt
            .get(path)
            .is_some_and(|meant| meant.contains(&key));
        if misspelt || self.is_empty(&path::key(path, key)) {
            return;
        }
        self.problem(Problem::value(path, ShapeProblem::Missing { key, example }));
    }

    /// Whether a key is there with nothing behind it.
    fn is_empty(&self, path: &str) -> bool {
        self.places
            .find(path)
            .is_some_and(|found| found.value.is_empty())
    }

    /// A value of another shape than its key wants, or none.
    fn wrong_shape<L, M>(&mut self, node: &Node<L, M>, path: &str, wanted: &'static str) {
        let found = match node {
            Node::Absent => return,
            // a file that is nothing but `~`
            Node::Null if path.is_empty() => Shape::Single,
            Node::Null => {
                // `~` and `null` leave a key out on purpose
                if self.is_empty(path) {
                    self.problem(Problem::value(path, ShapeProblem::NoValue { wanted }));
                }
                return;
            }
            Node::Text(_) => Shape::Single,
            Node::List(_) => Shape::List,
            Node::Mapping(_) => Shape::Mapping,
        };
        self.problem(Problem::value(
            path,
            ShapeProblem::WrongShape { found, wanted },
        ));
    }

    /// The keys of a mapping; those that are not known are told.
    fn keys<'k, T>(&mut self, keys: &'k Keys<T>, path: &str) -> &'k T {
        // one past those that are kept tells that there are more
        for found in keys.unknown.iter().take(MOST_KEPT + 1) {
            let problem = ShapeProblem::UnknownKey {
                found: found.clone(),
                known: keys.known.to_vec(),
            };
            self.problem(Problem::key(path::key(path, found), problem));
            if let Some(meant) = nearest(found, keys.known.iter().copied()) {
                self.misspelt
                    .entry(path.to_owned())
                    .or_default()
                    .push(meant);
            }
        }
        &keys.body
    }

    /// The keys of a mapping, where one stands.
    pub(super) fn map<'k, T>(&mut self, node: &'k Map<T>, path: &str) -> Option<&'k T> {
        match node {
            Node::Mapping(keys) => Some(self.keys(keys, path)),
            other => {
                self.wrong_shape(other, path, "a mapping of keys");
                None
            }
        }
    }

    /// The entries of a list, where one stands; each is read by [`Lower::entry`].
    fn list<T>(&mut self, node: &List<T>, path: &str) -> Option<Entries<'a, T>> {
        match node {
            Node::List(_) => Some(Entries {
                list: path.to_owned(),
                values: self.places.values(path).enumerate(),
                each: PhantomData,
            }),
            other => {
                self.wrong_shape(other, path, "a list");
                None
            }
        }
    }

    /// The next entry of a list and its path, until more is wrong than is kept.
    fn entry<T>(&mut self, entries: &mut Option<Entries<'a, T>>) -> Option<(String, T)>
    where
        T: Deserialize<'a> + Default,
    {
        let entries = entries.as_mut()?;
        let (index, value) = self.looked_at(&mut entries.values)?;
        Some((path::index(&entries.list, index), self.read(value)))
    }

    /// A value in the shape its key has room for.
    pub(super) fn read<T: Deserialize<'a> + Default>(&mut self, value: Value<'a>) -> T {
        T::deserialize(value).unwrap_or_else(|e| {
            // there is room for every shape, and this is not reached
            let (of, what) = ("YAML", e.to_string());
            let (hint, opened) = (None, None);
            self.problem(Problem::whole(TextProblem::Syntax {
                of,
                what,
                hint,
                opened,
            }));
            T::default()
        })
    }

    /// The entries of a mapping with names of the user's choice.
    fn named<'k, T>(&mut self, node: &'k Named<T>, path: &str) -> Option<&'k [(String, T)]> {
        match node {
            Node::Mapping(names) => Some(&names.0),
            other => {
                self.wrong_shape(other, path, "a mapping of names to values");
                None
            }
        }
    }

    /// The whole file, as far as it reads; the problems say what does not.
    pub(super) fn file(&mut self, root: &Map<raw::File>) -> Option<Description> {
        let file = self.map(root, "")?;
        let build = self.name("", "build", &file.build);
        if file.build.is_absent() {
            self.missing("", "build", "build: Orchard mower, evening work");
        }
        let engine = self.engine(&file.engine);
        let charging = self.charging_list(&file.charging);
        let battery = self
            .map(&file.battery, "battery")
            .map(|b| self.battery(b, "battery"));
        let accessories = self.accessories(&file.accessories, "accessories");
        if file.accessories.is_absent() {
            self.missing("", "accessories", "accessories: []");
        }
        let shift = self.shift(&file.shift);
        let air = self.quantity("", "air", &file.air, &crate::quantity::bounds::AIR);
        let parked = self.quantity(
            "",
            "parked",
            &file.parked,
            &crate::quantity::bounds::PARKED_TIME,
        );
        let days = self.days(&file.days);
        let charger = self.charger(&file.charger);
        let may = self.map(&file.may, "may").map(|m| self.may(m));
        let wiring = self
            .map(&file.wiring, "wiring")
            .map(|w| self.wiring(w))
            .unwrap_or_default();
        self.fit(&engine, &accessories, &shift, may.as_ref());
        // without a name there is a problem, and the description serves only to find more of them
        let build = build.unwrap_or_else(|| Written::exact(String::new(), "build"));
        Some(Description {
            build,
            air,
            engine,
            charging,
            battery,
            accessories,
            shift,
            parked,
            days,
            charger,
            may,
            wiring,
        })
    }
}
