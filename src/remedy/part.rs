//! What is to be bought for a change.

use super::Asked;
use super::change::{Change, What};
use crate::description::AccessoryText;
use crate::quantity::Money;
use crate::quantity::format::text;
use serde::Serialize;

/// One line of a shopping list.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Part {
    /// What it is, in words.
    pub name: String,
    /// Its id in the catalogs, where it has one.
    pub part: Option<String>,
    /// How many.
    pub count: u64,
    /// Price of one, where it is known.
    pub each: Option<Money>,
}

impl Part {
    /// Puts it on a list: more of a part that is on it at the same price, or a line of its own.
    pub fn put_on(self, list: &mut Vec<Part>) {
        let same =
            |p: &&mut Part| (&p.name, &p.part, p.each) == (&self.name, &self.part, self.each);
        match list.iter_mut().find(same) {
            Some(line) => line.count += self.count,
            None => list.push(self),
        }
    }
}

impl Change {
    /// The part that the change takes; none where a speed is set or a load used less.
    pub(super) fn part(&self, asked: &Asked<'_>) -> Option<Part> {
        let (name, id, count) = match &self.what {
            What::Speed { .. } | What::Duty { .. } => return None,
            What::Charger { amps } => (format!("Shop charger, {}", text(*amps)), None, 1),
            What::Winding { id, .. } | What::Battery { id } => (self.words.clone(), Some(id), 1),
            What::Lamp { index, id } => {
                let part = asked.catalogs.part::<AccessoryText>(id)?.ok()?;
                let lamps = asked.build.accessories.get(*index)?.count;
                (part.entry.title.clone(), Some(id), lamps)
            }
        };
        Some(Part {
            name,
            part: id.cloned(),
            count: u64::from(count),
            each: self
                .cost
                .map(|cost| Money(cost.0 / f64::from(count.max(1)))),
        })
    }
}
