//! Which accessories are on at once, and how often.
//!
//! Cycling accessories coincide by chance. Full enumeration of n of them has 2^n cases; here
//! neighbouring cases are merged whenever there are more than [`MOST_CASES`], keeping the mean
//! and the variance of what they draw, so the cost grows with n and not with 2^n. Up to six
//! independent cycling accessories nothing is merged and the result is the enumeration.

use super::LoadSum;
use super::tally::Tally;
use crate::quantity::{Fraction, Volts};
use std::ops::Range;

/// Cases kept before neighbours are merged.
pub const MOST_CASES: usize = 96;

/// One thing that cycles: its possible draws and how often each holds.
/// The shares sum to one; the draw is by class of lower working limit.
#[derive(Clone, Debug)]
pub struct Cycler {
    /// Share of the time and draw by class, one entry a possibility.
    pub cases: Vec<(Fraction, Vec<LoadSum>)>,
}

/// All cases of what may be on at once in one state.
#[derive(Clone, Debug)]
pub struct Coincidences {
    shares: Vec<f64>,
    /// By case, then by class: `sums[case * classes + class]`.
    sums: Vec<LoadSum>,
    totals: Vec<LoadSum>,
    heaviest: Vec<LoadSum>,
    heaviest_total: LoadSum,
    filaments: bool,
    classes: usize,
    /// Current of each case at the reference volts, rising.
    currents: Vec<f64>,
    /// Sums over the cases before each, and over all.
    tallies: Vec<Tally>,
}

impl Coincidences {
    /// From what is always on (by class of lower working limit) and what cycles.
    ///
    /// `reference` is the voltage at which cases are put in order of their current for merging:
    /// a rested battery's.
    #[must_use]
    pub fn new(steady: &[LoadSum], cyclers: &[Cycler], reference: Volts) -> Coincidences {
        let classes = steady.len().max(1);
        let mut cases: Vec<(f64, Vec<LoadSum>)> = vec![(1.0, padded(steady, classes))];
        let mut heaviest = cases[0].1.clone();
        for cycler in cyclers {
            cases = joined(&cases, cycler);
            if cases.len() > MOST_CASES {
                cases = merged(cases, reference);
            }
            if let Some(most) = heaviest_case(cycler, reference) {
                add(&mut heaviest, most);
            }
        }
        sort_by_current(&mut cases, reference);
        Coincidences::from_cases(&cases, heaviest, reference)
    }

    fn from_cases(
        cases: &[(f64, Vec<LoadSum>)],
        heaviest: Vec<LoadSum>,
        reference: Volts,
    ) -> Coincidences {
        let totals: Vec<LoadSum> = cases
            .iter()
            .map(|(_, sums)| sums.iter().copied().sum())
            .collect();
        let currents: Vec<f64> = totals
            .iter()
            .map(|total| total.current_at(reference).0)
            .collect();
        let origin = cases.iter().zip(&currents).map(|((p, _), i)| p * i).sum();
        let mut running = Tally::counted_from(origin);
        let mut tallies = vec![running];
        for ((share, _), (total, current)) in cases.iter().zip(totals.iter().zip(&currents)) {
            running.enter(*share, current - origin, total);
            tallies.push(running);
        }
        let heaviest_total: LoadSum = heaviest.iter().copied().sum();
        Coincidences {
            shares: cases.iter().map(|(p, _)| *p).collect(),
            sums: cases
                .iter()
                .flat_map(|(_, sums)| sums.iter().copied())
                .collect(),
            filaments: heaviest_total.has_filaments(),
            classes: heaviest.len(),
            totals,
            currents,
            tallies,
            heaviest,
            heaviest_total,
        }
    }

    /// Number of cases.
    #[must_use]
    pub fn len(&self) -> usize {
        self.shares.len()
    }

    /// Whether there is no case; there always is one.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.shares.is_empty()
    }

    /// Share of the time of each case and what it draws in all, lightest first.
    pub fn cases(&self) -> impl Iterator<Item = (Fraction, &LoadSum)> {
        self.shares.iter().map(|p| Fraction(*p)).zip(&self.totals)
    }

    /// What one case draws, by class of lower working limit.
    #[must_use]
    pub fn by_class(&self, case: usize) -> &[LoadSum] {
        &self.sums[case * self.classes..(case + 1) * self.classes]
    }

    /// What everything draws that may be on at once, by class.
    #[must_use]
    pub fn heaviest(&self) -> &[LoadSum] {
        &self.heaviest
    }

    /// What everything draws that may be on at once, in all.
    #[must_use]
    pub fn heaviest_total(&self) -> LoadSum {
        self.heaviest_total
    }

    /// The mean draw.
    #[must_use]
    pub fn mean(&self) -> LoadSum {
        self.tally(0..self.len()).mean()
    }

    /// Share of the time of one case.
    pub(crate) fn share(&self, case: usize) -> f64 {
        self.shares[case]
    }

    /// What one case draws in all.
    pub(crate) fn total(&self, case: usize) -> &LoadSum {
        &self.totals[case]
    }

    /// The first case at or after one of which something holds that holds of all heavier ones.
    pub(crate) fn first_from(&self, from: usize, holds: impl Fn(&LoadSum) -> bool) -> usize {
        from + self.totals[from..].partition_point(|sum| !holds(sum))
    }

    /// The first case of some whose current at the reference volts is at or above another.
    pub(crate) fn first_above(&self, range: Range<usize>, amps: f64) -> usize {
        range.start + self.currents[range].partition_point(|current| *current < amps)
    }

    /// Sums over some cases.
    pub(crate) fn tally(&self, range: Range<usize>) -> Tally {
        self.tallies[range.end].less(&self.tallies[range.start])
    }

    /// Whether any filament is among them.
    #[must_use]
    pub fn has_filaments(&self) -> bool {
        self.filaments
    }
}

impl Cycler {
    /// One accessory on for a share of the time.
    #[must_use]
    pub fn single(share: Fraction, class: usize, classes: usize, sum: LoadSum) -> Cycler {
        Cycler {
            cases: vec![
                (share.rest(), in_class(class, classes, LoadSum::NONE)),
                (share, in_class(class, classes, sum)),
            ],
        }
    }

    /// Accessories whose on-times coincide: whenever a lesser duty is on, the greater ones are.
    #[must_use]
    pub fn together(members: &[(Fraction, usize, LoadSum)], classes: usize) -> Cycler {
        let mut order: Vec<_> = members.to_vec();
        order.sort_by(|a, b| b.0.0.total_cmp(&a.0.0));
        let mut cases = Vec::with_capacity(order.len() + 1);
        let mut sums = vec![LoadSum::NONE; classes];
        let mut above = 1.0;
        for (share, class, sum) in order {
            cases.push((Fraction(above - share.0), sums.clone()));
            sums[class] += sum;
            above = share.0;
        }
        cases.push((Fraction(above), sums));
        Cycler { cases: kept(cases) }
    }

    /// Accessories never on at once: one of them, or none.
    #[must_use]
    pub fn apart(members: &[(Fraction, usize, LoadSum)], classes: usize) -> Cycler {
        let on: f64 = members.iter().map(|m| m.0.0).sum();
        let mut cases = vec![(Fraction((1.0 - on).max(0.0)), vec![LoadSum::NONE; classes])];
        cases.extend(
            members
                .iter()
                .map(|(share, class, sum)| (*share, in_class(*class, classes, *sum))),
        );
        Cycler { cases: kept(cases) }
    }
}

fn kept(mut cases: Vec<(Fraction, Vec<LoadSum>)>) -> Vec<(Fraction, Vec<LoadSum>)> {
    cases.retain(|(share, _)| share.0 > 0.0);
    cases
}

fn in_class(class: usize, classes: usize, sum: LoadSum) -> Vec<LoadSum> {
    let mut sums = vec![LoadSum::NONE; classes];
    sums[class] = sum;
    sums
}

fn padded(sums: &[LoadSum], classes: usize) -> Vec<LoadSum> {
    let mut all = sums.to_vec();
    all.resize(classes, LoadSum::NONE);
    all
}

fn add(into: &mut [LoadSum], sums: &[LoadSum]) {
    for (a, b) in into.iter_mut().zip(sums) {
        *a += *b;
    }
}

fn total_current(sums: &[LoadSum], reference: Volts) -> f64 {
    sums.iter()
        .copied()
        .sum::<LoadSum>()
        .current_at(reference)
        .0
}

fn heaviest_case(cycler: &Cycler, reference: Volts) -> Option<&[LoadSum]> {
    cycler
        .cases
        .iter()
        .filter(|(share, _)| share.0 > 0.0)
        .max_by(|a, b| total_current(&a.1, reference).total_cmp(&total_current(&b.1, reference)))
        .map(|(_, sums)| sums.as_slice())
}

fn joined(cases: &[(f64, Vec<LoadSum>)], cycler: &Cycler) -> Vec<(f64, Vec<LoadSum>)> {
    let mut all = Vec::with_capacity(cases.len() * cycler.cases.len());
    for (p, sums) in cases {
        for (share, more) in &cycler.cases {
            let mut together = sums.clone();
            add(&mut together, more);
            all.push((p * share.0, together));
        }
    }
    all
}

fn sort_by_current(cases: &mut Vec<(f64, Vec<LoadSum>)>, reference: Volts) {
    let mut keyed: Vec<(f64, (f64, Vec<LoadSum>))> = std::mem::take(cases)
        .into_iter()
        .map(|case| (total_current(&case.1, reference), case))
        .collect();
    keyed.sort_by(|a, b| a.0.total_cmp(&b.0));
    cases.extend(keyed.into_iter().map(|(_, case)| case));
}

/// Merges neighbours in current into [`MOST_CASES`] / 2 cells of equal width; each cell becomes
/// two cases that keep its share, mean and variance of current.
fn merged(mut cases: Vec<(f64, Vec<LoadSum>)>, reference: Volts) -> Vec<(f64, Vec<LoadSum>)> {
    sort_by_current(&mut cases, reference);
    let currents: Vec<f64> = cases
        .iter()
        .map(|c| total_current(&c.1, reference))
        .collect();
    let (low, high) = (currents[0], currents[currents.len() - 1]);
    let cells = MOST_CASES / 2;
    let width = (high - low) / cells as f64;
    if width <= 0.0 {
        return vec![weighted(&cases)];
    }
    let mut out = Vec::with_capacity(MOST_CASES);
    let mut from = 0;
    for cell in 0..cells {
        let edge = if cell + 1 == cells {
            f64::INFINITY
        } else {
            low + width * (cell + 1) as f64
        };
        let mut to = from;
        while to < cases.len() && currents[to] < edge {
            to += 1;
        }
        halved(&cases[from..to], &currents[from..to], &mut out);
        from = to;
    }
    out
}

/// Splits a cell at its mean; each half becomes its weighted mean, which keeps the cell's mean
/// and, being two points, nearly all of its variance.
fn halved(cell: &[(f64, Vec<LoadSum>)], currents: &[f64], out: &mut Vec<(f64, Vec<LoadSum>)>) {
    let share: f64 = cell.iter().map(|c| c.0).sum();
    if share <= 0.0 {
        return;
    }
    let mean = cell.iter().zip(currents).map(|(c, i)| c.0 * i).sum::<f64>() / share;
    let split = currents.partition_point(|i| *i < mean);
    for half in [&cell[..split], &cell[split..]] {
        if half.iter().any(|c| c.0 > 0.0) {
            out.push(weighted(half));
        }
    }
}

fn weighted(cases: &[(f64, Vec<LoadSum>)]) -> (f64, Vec<LoadSum>) {
    let share: f64 = cases.iter().map(|c| c.0).sum();
    let classes = cases[0].1.len();
    let mut sums = vec![LoadSum::NONE; classes];
    for (p, each) in cases {
        for (into, sum) in sums.iter_mut().zip(each) {
            *into += sum.share(Fraction(p / share));
        }
    }
    (share, sums)
}
