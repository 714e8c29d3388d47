//! Sums over the fleet, by kit and season: a machine counts once in each.

use super::kits::Kits;
use super::row::Row;
use crate::catalog::Catalogs;
use crate::check::answer::Verdict;
use crate::quantity::Money;
use crate::remedy::{Part, Prices};
use serde::Serialize;
use std::sync::Arc;

/// Sums over all rows.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct Totals {
    /// Rows of the answer.
    pub rows: u64,
    /// Rows with an error.
    pub errors: u64,
    /// Machines that keep up; where kits or seasons are crossed a machine counts in each.
    pub keeps_up: u64,
    /// Machines that carry some shifts.
    pub carries: u64,
    /// Machines that fall short.
    pub falls_short: u64,
    /// Machines with nothing to judge: no battery, and nothing that states its volts.
    pub unjudged: u64,
    /// By kit and season, in the order in which they first occur.
    pub groups: Vec<Group>,
}

/// Sums over the machines in one kit and season.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct Group {
    /// The kit.
    pub kit: Option<Arc<str>>,
    /// The season.
    pub season: Option<Arc<str>>,
    /// Machines, those with an error left out.
    pub machines: u64,
    /// Machines that keep up.
    pub keeps_up: u64,
    /// Machines that carry some shifts.
    pub carries: u64,
    /// Machines that fall short.
    pub falls_short: u64,
    /// Machines with nothing to judge.
    pub unjudged: u64,
    /// Rows with an error.
    pub errors: u64,
    /// What the kits cost, where their price is known.
    pub kits_cost: Option<Money>,
    /// What the remedies cost, as far as their prices are known.
    pub remedies_cost: Money,
    /// Machines whose remedy has a part without a price.
    pub unpriced: u64,
    /// Machines that do not keep up and for which no remedy was found.
    pub unmended: u64,
    /// Kits and remedies, as far as their prices are known.
    pub cost: Money,
    /// What to buy: the kits' parts, then the remedies'.
    pub parts: Vec<Part>,
}

/// Sums on the way.
#[derive(Default)]
pub(super) struct Tally {
    totals: Totals,
    /// What each group's remedies take.
    remedies: Vec<Vec<Part>>,
}

impl Tally {
    /// Counts a row.
    pub(super) fn add(&mut self, row: &Row) {
        self.totals.rows += 1;
        let same = |g: &Group| g.kit == row.kit && g.season == row.season;
        let found = self.totals.groups.iter().position(same);
        let place = found.unwrap_or_else(|| {
            self.totals.groups.push(Group {
                kit: row.kit.clone(),
                season: row.season.clone(),
                ..Group::default()
            });
            self.remedies.push(Vec::new());
            self.totals.groups.len() - 1
        });
        let (group, remedies) = (&mut self.totals.groups[place], &mut self.remedies[place]);
        if row.outcome.error.is_some() {
            group.errors += 1;
            self.totals.errors += 1;
            return;
        }
        let count = u64::from(row.count);
        group.machines += count;
        let Some(verdict) = row.outcome.verdict else {
            group.unjudged += count;
            self.totals.unjudged += count;
            return;
        };
        let (of_group, of_all) = match verdict {
            Verdict::KeepsUp => (&mut group.keeps_up, &mut self.totals.keeps_up),
            Verdict::Carries => (&mut group.carries, &mut self.totals.carries),
            Verdict::FallsShort => (&mut group.falls_short, &mut self.totals.falls_short),
        };
        *of_group += count;
        *of_all += count;
        if verdict == Verdict::KeepsUp {
            return;
        }
        match (&row.outcome.remedy, row.outcome.cost) {
            (Some(_), Some(cost)) => group.remedies_cost += cost * f64::from(row.count),
            (Some(_), None) => group.unpriced += count,
            (None, _) => group.unmended += count,
        }
        for part in row.outcome.parts.iter().cloned() {
            let all = part.count * count;
            Part { count: all, ..part }.put_on(remedies);
        }
    }

    /// The sums, with the kits' prices and parts.
    pub(super) fn finish(mut self, kits: &Kits, catalogs: &Catalogs, prices: &Prices) -> Totals {
        for (group, remedies) in self.totals.groups.iter_mut().zip(self.remedies) {
            if let Some(kit) = &group.kit {
                let machines = group.machines as f64;
                group.kits_cost = kits
                    .price(kit, catalogs, prices)
                    .map(|price| price * machines);
                for part in kits.parts(kit, catalogs, prices) {
                    let count = part.count * group.machines;
                    Part { count, ..part }.put_on(&mut group.parts);
                }
            }
            group.cost = group.kits_cost.unwrap_or(Money::ZERO) + group.remedies_cost;
            for part in sorted(remedies) {
                part.put_on(&mut group.parts);
            }
        }
        self.totals
    }
}

/// Parts by their names, so that the list does not hang on the order of the machines.
fn sorted(mut parts: Vec<Part>) -> Vec<Part> {
    let each = |p: &Part| p.each.map_or(f64::INFINITY, |m| m.0);
    parts.sort_by(|a, b| {
        a.name
            .cmp(&b.name)
            .then_with(|| a.part.cmp(&b.part))
            .then(each(a).total_cmp(&each(b)))
    });
    parts
}
