//! One change of a build, made in its description and as `--set` takes it.

use super::{Asked, swap};
use crate::build::Build;
use crate::description::path;
use crate::description::{ChargerText, Description, DutyText, Written};
use crate::quantity::format::precise;
use crate::quantity::{Amps, Fraction, Money, Rpm};
use std::cmp::Ordering;

/// A change.
#[derive(Clone, Debug)]
pub(super) struct Change {
    /// In words.
    pub(super) words: String,
    /// What it costs; none where no price is known.
    pub(super) cost: Option<Money>,
    /// How far it is from what there is: 0 is no change.
    pub(super) much: f64,
    /// What is changed.
    pub(super) what: What,
}

/// What is changed.
#[derive(Clone, Debug)]
pub(super) enum What {
    /// Another winding or alternator in place of a source.
    Winding { index: usize, id: String },
    /// Another battery.
    Battery { id: String },
    /// An LED lamp in place of an accessory.
    Lamp { index: usize, id: String },
    /// A speed raised.
    Speed { index: usize, to: Rpm },
    /// An accessory's duty cut, in no state above this.
    Duty { index: usize, to: Fraction },
    /// A shop charger while parked.
    Charger { amps: Amps },
}

impl Change {
    /// The build with this change alone; none where it does not fit.
    pub(super) fn alone(&self, asked: &Asked<'_>) -> Option<Build> {
        let (description, _) = made(asked.description, std::iter::once(self))?;
        asked.resolved(&description)
    }
}

/// A description with changes made one after the other, and the assignments that do the same to the
/// file; none where one does not fit.
pub(super) fn made<'c>(
    description: &Description,
    changes: impl IntoIterator<Item = &'c Change>,
) -> Option<(Description, Vec<String>)> {
    let mut made = description.clone();
    let mut set = Vec::new();
    for change in changes {
        set.extend(change.what.make(&mut made)?);
    }
    Some((made, set))
}

impl What {
    /// Changes a description; the assignments that do the same to the file.
    fn make(&self, description: &mut Description) -> Option<Vec<String>> {
        let swapped = match self {
            What::Winding { index, id } => swap::charging(description, *index, id)?,
            What::Battery { id } => swap::battery(description, id)?,
            What::Lamp { index, id } => swap::accessory(description, *index, id)?,
            What::Speed { index, to } => return speed(description, *index, *to),
            What::Duty { index, to } => return duty(description, *index, *to),
            What::Charger { amps } => return charger(description, *amps),
        };
        *description = swapped.description;
        Some(vec![swapped.set])
    }
}

fn speed(description: &mut Description, index: usize, to: Rpm) -> Option<Vec<String>> {
    let (name, rpm) = description.engine.speeds.get_mut(index)?;
    let path = path::key("engine.speeds", name);
    *rpm = Written::exact(to, path.as_str());
    Some(vec![format!("{path}={}", precise(to))])
}

fn duty(description: &mut Description, index: usize, to: Fraction) -> Option<Vec<String>> {
    let accessory = description.accessories.get_mut(index)?;
    let at = path::key(&accessory.path, "duty");
    if let Some(DutyText::ByState { shares, .. }) = &mut accessory.duty {
        let mut set = Vec::new();
        for (state, share) in shares.iter_mut().filter(|(_, share)| share.value > to) {
            let at = path::key(&at, &state.value);
            *share = Written::exact(to, at.as_str());
            set.push(format!("{at}={}", precise(to)));
        }
        return Some(set);
    }
    // One figure for every running state, written or not.
    accessory.duty = Some(DutyText::Everywhere(Written::exact(to, at.as_str())));
    Some(vec![format!("{at}={}", precise(to))])
}

fn charger(description: &mut Description, amps: Amps) -> Option<Vec<String>> {
    description.charger = Some(ChargerText {
        path: "charger".to_owned(),
        amps: Written::exact(amps, "charger.amps"),
        holds: None,
        after: None,
        time: None,
        price: None,
    });
    Some(vec![format!("charger={{amps: {}}}", precise(amps))])
}

/// What changes ask of their owner, in the order in which answers are listed: unknown prices last,
/// then cost, then how many things are changed, then how far.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(super) struct Effort {
    unpriced: usize,
    cost: f64,
    things: usize,
    much: f64,
}

impl Effort {
    /// Of changes made together.
    pub(super) fn of<'c>(changes: impl IntoIterator<Item = &'c Change>) -> Effort {
        let mut effort = Effort::default();
        for change in changes {
            match change.cost {
                Some(cost) => effort.cost += cost.0,
                None => effort.unpriced += 1,
            }
            effort.things += 1;
            effort.much += change.much;
        }
        effort
    }

    /// What it all costs, where every price is known.
    pub(super) fn cost(&self) -> Option<Money> {
        (self.unpriced == 0).then_some(Money(self.cost))
    }

    /// The order in which answers are listed.
    pub(super) fn cmp(&self, other: &Effort) -> Ordering {
        self.rank(other).then(self.much.total_cmp(&other.much))
    }

    /// The same but for how far each change goes.
    pub(super) fn rank(&self, other: &Effort) -> Ordering {
        self.unpriced
            .cmp(&other.unpriced)
            .then(self.cost.total_cmp(&other.cost))
            .then(self.things.cmp(&other.things))
    }
}
