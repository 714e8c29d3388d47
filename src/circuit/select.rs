//! Which accessories of a circuit are on at once: all that may be, or as few as can be.

use super::hangs;
use crate::build::{Accessory, Build};
use crate::load;
use crate::quantity::{Fraction, Volts};

/// Volts a cell at which draws are held against each other.
const NOMINAL_CELL: f64 = 2.0;

/// The accessories of one circuit that may be on, with their shares of the time.
pub(super) struct Active<'a> {
    build: &'a Build,
    /// Index, share of the time, current at nominal volts: greatest current first.
    all: Vec<(usize, Fraction, f64)>,
}

impl<'a> Active<'a> {
    /// Those of a circuit whose share of the time is above nothing.
    pub(super) fn new(
        build: &'a Build,
        circuit: &str,
        share: impl Fn(&Accessory) -> Fraction,
    ) -> Active<'a> {
        let nominal = Volts(NOMINAL_CELL * f64::from(build.cells()));
        let amps = |a: &Accessory| f64::from(a.count) * load::current(a.draw.value, nominal).0;
        let mut all: Vec<(usize, Fraction, f64)> = build
            .accessories
            .iter()
            .enumerate()
            .filter(|(_, a)| hangs(build, a, circuit))
            .map(|(k, a)| (k, share(a), amps(a)))
            .filter(|(_, share, _)| *share > Fraction::ZERO)
            .collect();
        all.sort_by(|a, b| b.2.total_cmp(&a.2));
        Active { build, all }
    }

    /// Its share of the time; nothing where it is not on.
    pub(super) fn share(&self, accessory: usize) -> Fraction {
        let found = self.all.iter().find(|(k, _, _)| *k == accessory);
        found.map_or(Fraction::ZERO, |(_, share, _)| *share)
    }

    /// All that may be on at once: of those never on together, the greater.
    pub(super) fn all_on(&self) -> Vec<usize> {
        self.added_to(Vec::new())
    }

    /// All that may be on at once with one of them.
    pub(super) fn all_on_with(&self, accessory: usize) -> Vec<usize> {
        self.added_to(vec![accessory])
    }

    /// As few as can be with one of them: it, what is always on, and what is on whenever it is.
    pub(super) fn fewest_on_with(&self, accessory: usize) -> Vec<usize> {
        let own = self.share(accessory);
        let bound = |k: usize, share: Fraction| {
            let linked = self.get(accessory).is_some_and(|a| a.together.contains(&k));
            share >= Fraction::ONE || (linked && share >= own)
        };
        let on = self.all.iter().map(|(k, share, _)| (*k, *share));
        let mut on: Vec<usize> = on
            .filter(|(k, share)| *k == accessory || bound(*k, *share))
            .map(|(k, _)| k)
            .collect();
        on.sort_unstable();
        on
    }

    fn get(&self, k: usize) -> Option<&Accessory> {
        self.build.accessory(k)
    }

    fn added_to(&self, mut on: Vec<usize>) -> Vec<usize> {
        for (k, _, _) in &self.all {
            let apart = |j: &usize| self.get(*j).is_some_and(|a| a.apart.contains(k));
            if !on.contains(k) && !on.iter().any(apart) {
                on.push(*k);
            }
        }
        on.sort_unstable();
        on
    }
}
