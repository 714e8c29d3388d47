//! The values of a build that bear a tolerance, each listed once, and drawn.
//!
//! One walk over the description does both, so that the list and the draws cannot disagree. A drawn
//! value takes its place in the description as if the user had written it there; the build is then
//! resolved anew, so that all that follows from it (a winding's inductance from its rating, a capacity
//! from reserve minutes) follows. What bears on no verdict (prices, wires, inrush) is left as it is.

use super::amount::Amount;
use super::law::Law;
use crate::description::{Written, path};
use crate::quantity::Fraction;
use serde::Serialize;

/// A value with a tolerance.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Toleranced {
    /// What it is, in words: `draw of work lamps`.
    pub what: String,
    /// Its path, as `--set` takes it.
    pub path: String,
    /// The value about which it is spread, as a build file has it.
    pub value: String,
    /// How far it may lie from the value, as a share of it.
    pub tolerance: Fraction,
    /// How it is spread.
    pub law: Law,
}

/// Where a value stands and what it is called.
#[derive(Clone, Copy)]
pub(super) struct Place<'a> {
    /// Path of the mapping.
    pub(super) at: &'a str,
    /// Its key.
    pub(super) key: &'a str,
    /// What it is.
    pub(super) what: &'a str,
    /// Whose; empty where there is but one.
    pub(super) of: &'a str,
}

impl Place<'_> {
    fn path(self) -> String {
        path::key(self.at, self.key)
    }

    fn words(self) -> String {
        if self.of.is_empty() {
            self.what.to_owned()
        } else {
            format!("{}, {}", self.what, self.of)
        }
    }
}

/// What the walk is for.
pub(super) enum Purpose<'a> {
    /// List the values.
    List(Vec<Toleranced>),
    /// Put draws in their places: a share of its distribution for each value.
    Draw(&'a [f64]),
    /// The same, and keep what was put where, as `--set` takes it.
    Write(&'a [f64], Vec<String>),
}

/// A walk over the values with a tolerance.
pub(super) struct Walk<'a> {
    pub(super) purpose: Purpose<'a>,
    /// Values met so far.
    pub(super) met: usize,
}

impl<'a> Walk<'a> {
    pub(super) fn new(purpose: Purpose<'a>) -> Walk<'a> {
        Walk { purpose, met: 0 }
    }

    /// The values listed.
    pub(super) fn listed(self) -> Vec<Toleranced> {
        match self.purpose {
            Purpose::List(list) => list,
            _ => Vec::new(),
        }
    }

    /// What was put where.
    pub(super) fn written(self) -> Vec<String> {
        match self.purpose {
            Purpose::Write(_, set) => set,
            _ => Vec::new(),
        }
    }

    /// One value, the user's own or else that of a part.
    pub(super) fn value<T: Amount>(
        &mut self,
        place: Place,
        own: &mut Option<Written<T>>,
        part: Option<&Written<T>>,
        bounds: &T::Bounds,
    ) {
        self.value_typed(place, own, part, bounds, T::typed);
    }

    /// The same, written in a way of its own.
    pub(super) fn value_typed<T: Amount>(
        &mut self,
        place: Place,
        own: &mut Option<Written<T>>,
        part: Option<&Written<T>>,
        bounds: &T::Bounds,
        typed: impl Fn(T) -> String,
    ) {
        let (stated, law) = match (own.as_ref(), part) {
            (Some(stated), _) => (stated, Law::Uniform),
            (None, Some(stated)) => (stated, Law::Normal),
            (None, None) => return,
        };
        if let Some(value) = self.one(place, stated, law, bounds, &typed) {
            let path = place.path();
            self.put(|| format!("{path}={}", typed(value)));
            *own = Some(Written::exact(value, path));
        }
    }

    /// A value that must be there.
    pub(super) fn stated<T: Amount>(
        &mut self,
        place: Place,
        own: &mut Written<T>,
        bounds: &T::Bounds,
    ) {
        if let Some(value) = self.one(place, own, Law::Uniform, bounds, &T::typed) {
            self.put(|| format!("{}={}", own.path, value.typed()));
            own.value = value;
            own.tolerance = None;
        }
    }

    /// A value that was assumed, with a tolerance of its own.
    pub(super) fn assumed<T: Amount>(
        &mut self,
        place: Place,
        own: &mut Option<Written<T>>,
        assumed: &Written<T>,
        bounds: &T::Bounds,
    ) {
        if own.is_some() {
            return;
        }
        if let Some(value) = self.one(place, assumed, Law::Uniform, bounds, &T::typed) {
            let path = place.path();
            self.put(|| format!("{path}={}", value.typed()));
            *own = Some(Written::exact(value, path));
        }
    }

    /// Lists a value, or draws it; none where it bears no tolerance or is only listed.
    pub(super) fn one<T: Amount>(
        &mut self,
        place: Place,
        stated: &Written<T>,
        law: Law,
        bounds: &T::Bounds,
        typed: &impl Fn(T) -> String,
    ) -> Option<T> {
        let tolerance = spread(stated)?;
        let share = self.next(|| Toleranced {
            what: place.words(),
            path: place.path(),
            value: typed(stated.value),
            tolerance,
            law,
        })?;
        Some(stated.value.drawn(law.factor(tolerance, share), bounds))
    }

    /// Lists what is described, or gives the share that is drawn for it.
    pub(super) fn next(&mut self, described: impl FnOnce() -> Toleranced) -> Option<f64> {
        let number = self.met;
        self.met += 1;
        match &mut self.purpose {
            Purpose::List(list) => {
                list.push(described());
                None
            }
            Purpose::Draw(shares) | Purpose::Write(shares, _) => shares.get(number).copied(),
        }
    }

    /// Keeps what was put where, if that is asked for.
    pub(super) fn put(&mut self, assignment: impl FnOnce() -> String) {
        if let Purpose::Write(_, set) = &mut self.purpose {
            set.push(assignment());
        }
    }

    /// Whether values are put in their places.
    pub(super) fn draws(&self) -> bool {
        !matches!(self.purpose, Purpose::List(_))
    }

    /// Walks what may be absent as if it were there; it stays absent if nothing was put into it.
    pub(super) fn within<T: Default>(
        &mut self,
        slot: &mut Option<T>,
        walk: impl FnOnce(&mut Walk<'a>, &mut T),
    ) {
        let (was, met) = (slot.is_some(), self.met);
        let mut inner = slot.take().unwrap_or_default();
        walk(self, &mut inner);
        if was || (self.draws() && self.met > met) {
            *slot = Some(inner);
        }
    }
}

/// The tolerance of a value, where it has one.
pub(super) fn spread<T>(stated: &Written<T>) -> Option<Fraction> {
    let relative = stated.tolerance?.relative;
    (relative > Fraction::ZERO).then_some(relative)
}
