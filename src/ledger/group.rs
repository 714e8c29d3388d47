//! Accessories that cycle, grouped by how their on-times depend on one another.

use crate::build::{Accessory, State};
use crate::bus::Cuts;
use crate::load::LoadSum;
use crate::load::coincidence::Cycler;
use crate::quantity::Fraction;

/// What is always on in a state, by class of lower limit, and what cycles in it.
///
/// `active` are accessories on the bus with some duty in the state, with their index in the build,
/// in its order.
pub(super) fn cyclers(
    active: &[(usize, &Accessory)],
    state: State,
    cuts: &Cuts,
) -> (Vec<LoadSum>, Vec<Cycler>) {
    let classes = cuts.classes();
    let mut steady = vec![LoadSum::NONE; classes];
    let mut cycling = Vec::new();
    let mut done = vec![false; active.len()];
    for k in 0..active.len() {
        if done[k] {
            continue;
        }
        done[k] = true;
        let (_, accessory) = active[k];
        let share = accessory.duty.share(state);
        if share >= Fraction::ONE {
            steady[cuts.class(accessory.works.low)] += sum_of(accessory);
            continue;
        }
        let mut members = vec![member(accessory, state, cuts)];
        for j in companions(active, k) {
            let (_, companion) = active[j];
            if companion.duty.share(state) < Fraction::ONE {
                done[j] = true;
                members.push(member(companion, state, cuts));
            }
        }
        cycling.push(match members.as_slice() {
            [(share, class, sum)] => Cycler::single(*share, *class, classes, *sum),
            _ if accessory.apart.is_empty() => Cycler::together(&members, classes),
            _ => Cycler::apart(&members, classes),
        });
    }
    (steady, cycling)
}

/// Those after one that its group names, in the order of the build.
fn companions(active: &[(usize, &Accessory)], k: usize) -> Vec<usize> {
    let (_, accessory) = active[k];
    let named = accessory.together.iter().chain(&accessory.apart);
    let mut found: Vec<usize> = named
        .filter_map(|other| active.binary_search_by_key(other, |(index, _)| *index).ok())
        .filter(|j| *j > k)
        .collect();
    found.sort_unstable();
    found.dedup();
    found
}

fn sum_of(accessory: &Accessory) -> LoadSum {
    LoadSum::of(accessory.draw.value, accessory.count)
}

fn member(accessory: &Accessory, state: State, cuts: &Cuts) -> (Fraction, usize, LoadSum) {
    (
        accessory.duty.share(state),
        cuts.class(accessory.works.low),
        sum_of(accessory),
    )
}
