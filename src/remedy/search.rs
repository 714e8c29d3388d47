//! The exact search: every combination of what is offered, cheapest first, with what need not be
//! tried left out.
//!
//! Two things are never tried: a combination that changes all that a cheaper answer changes and more
//! (it is dominated), and part of a combination that fell short (less help does not do where more did
//! not).

use super::Asked;
use super::change::{Change, Effort, made};
use super::offer::Slot;
use crate::build::Build;
use crate::size::{keeps_up, proves};

/// One way of each slot, or none of it.
pub(super) type Choice = Vec<Option<usize>>;

/// A combination and what it asks.
#[derive(Clone, Debug)]
pub(super) struct Candidate {
    pub(super) choice: Choice,
    pub(super) effort: Effort,
}

/// All combinations, least effort first; of equal effort, in the order of the slots.
pub(super) fn candidates(slots: &[Slot]) -> Vec<Candidate> {
    let mut choices: Vec<Choice> = vec![Vec::with_capacity(slots.len())];
    for slot in slots {
        let ways = std::iter::once(None).chain((0..slot.ways.len()).map(Some));
        choices = ways
            .flat_map(|way| {
                choices.iter().map(move |choice| {
                    let mut choice = choice.clone();
                    choice.push(way);
                    choice
                })
            })
            .collect();
    }
    let mut all: Vec<Candidate> = choices
        .into_iter()
        .filter(|choice| choice.iter().any(Option::is_some))
        .map(|choice| Candidate {
            effort: Effort::of(chosen(slots, &choice)),
            choice,
        })
        .collect();
    all.sort_by(|a, b| a.effort.cmp(&b.effort).then(a.choice.cmp(&b.choice)));
    all
}

/// The changes of a choice.
pub(super) fn chosen<'s>(slots: &'s [Slot], choice: &Choice) -> Vec<&'s Change> {
    let pairs = slots.iter().zip(choice);
    pairs
        .filter_map(|(slot, way)| slot.ways.get((*way)?))
        .collect()
}

/// Whether a choice changes at least all that another changes.
fn covers(choice: &Choice, other: &Choice) -> bool {
    let mut pairs = choice.iter().zip(other);
    pairs.all(|(mine, its)| mine.is_some() || its.is_none())
}

/// Whether a choice is part of another: the same ways, or none.
fn part_of(choice: &Choice, other: &Choice) -> bool {
    let mut pairs = choice.iter().zip(other);
    pairs.all(|(mine, its)| mine.is_none() || mine == its)
}

/// How many answers are looked for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Enough {
    /// So many.
    Of(usize),
    /// The first, and those beside it of which one may come before it once no more is changed than
    /// need be: as many as are listed, of the same cost and number of changes.
    First,
}

impl Enough {
    /// Whether the answers found are enough, the next one tried being this.
    fn is(self, found: &[Candidate], next: &Candidate) -> bool {
        match (self, found.first()) {
            (Enough::Of(most), _) => found.len() >= most,
            (Enough::First, Some(first)) => {
                found.len() >= super::MOST || first.effort.rank(&next.effort).is_lt()
            }
            (Enough::First, None) => false,
        }
    }
}

/// The first answers in order of effort, until there are enough, and how many combinations were tried.
pub(super) fn search(
    asked: &Asked<'_>,
    slots: &[Slot],
    enough: Enough,
    progress: &mut dyn FnMut(usize, usize),
) -> (Vec<Candidate>, usize) {
    let all = candidates(slots);
    let mut found: Vec<Candidate> = Vec::new();
    let mut short: Vec<Choice> = Vec::new();
    let mut tried = 0;
    let mut completed: Vec<Choice> = Vec::new();
    let steps = all.len();
    for (index, candidate) in all.into_iter().enumerate() {
        if enough.is(&found, &candidate) {
            break;
        }
        progress(index + 1, steps);
        let choice = &candidate.choice;
        let skipped = |short: &[Choice]| short.iter().any(|s| part_of(choice, s));
        if found.iter().any(|f| covers(choice, &f.choice)) || skipped(&short) {
            continue;
        }
        let whole = completion(slots, choice);
        if !completed.contains(&whole) {
            tried += 1;
            if !holds(asked, slots, &whole) {
                short.push(whole.clone());
            }
            completed.push(whole);
            if skipped(&short) {
                continue;
            }
        }
        tried += 1;
        if holds(asked, slots, choice) {
            found.push(candidate);
        } else {
            short.retain(|s| !part_of(s, choice));
            short.push(choice.clone());
        }
    }
    progress(steps, steps);
    (found, tried)
}

/// A choice with all else that has one way only: no combination with the same ways of the rest helps
/// more. While all of the choice has a price, what has none is left out: combinations with it come after all
/// that have, and a shop charger, say, would mend most of them and rule out nothing.
fn completion(slots: &[Slot], choice: &Choice) -> Choice {
    let priced = |change: &&Change| change.cost.is_some();
    let all_priced = chosen(slots, choice).iter().all(priced);
    let one = |slot: &Slot| match slot.ways.as_slice() {
        [way] if way.cost.is_some() || !all_priced => Some(0),
        _ => None,
    };
    let pairs = slots.iter().zip(choice);
    pairs.map(|(slot, way)| way.or_else(|| one(slot))).collect()
}

/// Whether a choice makes the build keep up, by the full verdict.
fn holds(asked: &Asked<'_>, slots: &[Slot], choice: &Choice) -> bool {
    changed(asked, chosen(slots, choice)).is_some_and(|build| keeps_up(&build) && proves(&build))
}

/// The build with changes made; none where they do not fit together.
pub(super) fn changed<'c>(
    asked: &Asked<'_>,
    changes: impl IntoIterator<Item = &'c Change>,
) -> Option<Build> {
    let (description, _) = made(asked.description, changes)?;
    asked.resolved(&description)
}
