//! Accessories whose on-times coincide, or never do.
//!
//! `together: [B]` on A, and `together: [C]` on B, make one group of A, B and C; `apart` likewise. An accessory is in
//! one group at most.

use super::Fault;
use super::context::Context;
use crate::build::{Accessory, Duty, Speed, State};
use crate::description::{AccessoryText, Written};
use crate::problem::MOST_KEPT;
use crate::quantity::Fraction;
use std::collections::BTreeMap;

/// Rounding that a sum of shares may show beyond the whole.
const ROUNDING: f64 = 1e-9;

/// Fills in the groups of resolved accessories from their entries (as many, in the same order).
pub(super) fn link(
    context: &mut Context,
    texts: &[AccessoryText],
    accessories: &mut [Accessory],
    speeds: &[Speed],
) {
    let names: Vec<String> = accessories.iter().map(|a| a.name.clone()).collect();
    let together = groups(context, texts, &names, |t| &t.together);
    let apart = groups(context, texts, &names, |t| &t.apart);
    let (together, apart) = (members(&together), members(&apart));
    for (index, accessory) in accessories.iter_mut().enumerate() {
        accessory.together = others(&together, index);
        accessory.apart = others(&apart, index);
        if !accessory.together.is_empty() && !accessory.apart.is_empty() {
            let name = accessory.name.clone();
            context.fault(accessory.path.clone(), Fault::TogetherAndApart { name });
        }
    }
    for index in 0..accessories.len() {
        // Once a group: at its first member.
        let first = accessories
            .get(index)
            .is_some_and(|a| a.apart.first().is_some_and(|o| *o > index));
        if first {
            overfull(context, accessories, index, speeds);
        }
    }
}

/// The number of each accessory's group: that of its first member.
fn groups(
    context: &mut Context,
    texts: &[AccessoryText],
    names: &[String],
    list: impl Fn(&AccessoryText) -> &Vec<Written<String>>,
) -> Vec<usize> {
    let mut group: Vec<usize> = (0..names.len()).collect();
    // of a name given twice, the first
    let numbered = names.iter().enumerate().rev();
    let places: BTreeMap<&str, usize> = numbered.map(|(i, n)| (n.as_str(), i)).collect();
    for (index, text) in texts.iter().enumerate() {
        for name in list(text) {
            match places.get(name.value.as_str()).copied() {
                Some(other) if other == index => {
                    context.fault(name.path.clone(), Fault::WithItself)
                }
                Some(other) => {
                    let of = |i: usize| group.get(i).copied().unwrap_or(i);
                    let (low, high) = (of(index).min(of(other)), of(index).max(of(other)));
                    group
                        .iter_mut()
                        .filter(|g| **g == high)
                        .for_each(|g| *g = low);
                }
                // with more wrong than is shown, no more is told
                None if context.faults.len() > MOST_KEPT => {}
                None => context.fault(
                    name.path.clone(),
                    Fault::UnknownName {
                        what: "accessory",
                        name: name.value.clone(),
                        known: names.to_vec(),
                    },
                ),
            }
        }
    }
    group
}

/// The number of each accessory's group, and the members of each group.
struct Members<'a> {
    group: &'a [usize],
    of: BTreeMap<usize, Vec<usize>>,
}

fn members(group: &[usize]) -> Members<'_> {
    let mut of: BTreeMap<usize, Vec<usize>> = BTreeMap::new();
    for (index, number) in group.iter().enumerate() {
        of.entry(*number).or_default().push(index);
    }
    Members { group, of }
}

/// The other members of an accessory's group, in the order of the build.
fn others(members: &Members<'_>, index: usize) -> Vec<usize> {
    let own = members.group.get(index).and_then(|g| members.of.get(g));
    let own = own.into_iter().flatten().copied();
    own.filter(|i| *i != index).collect()
}

/// Refuses duties that exclude each other and sum to more than the whole time.
fn overfull(context: &mut Context, accessories: &[Accessory], index: usize, speeds: &[Speed]) {
    let Some(first) = accessories.get(index) else {
        return;
    };
    let members =
        || std::iter::once(first).chain(first.apart.iter().filter_map(|i| accessories.get(*i)));
    let running = speeds
        .iter()
        .enumerate()
        .map(|(i, s)| (State::Running(i), s.name.as_str()));
    for (state, name) in running.chain([(State::Stopped, "stopped"), (State::Crank, "crank")]) {
        let share = |duty: &Duty| duty.share(state);
        let sum: Fraction = members().map(|a| share(&a.duty)).sum();
        if sum.0 > 1.0 + ROUNDING {
            let on = members().filter(|a| share(&a.duty) > Fraction::ZERO);
            let fault = Fault::ApartOverfull {
                state: name.to_owned(),
                names: on.map(|a| a.name.clone()).collect(),
                sum,
            };
            context.fault(format!("{}.apart", first.path), fault);
        }
    }
}
