//! Which accessories are on at once, and how often.
//!
//! Cycling accessories coincide by chance. Full enumeration of n of them has 2^n cases; here
//! neighbouring cases are merged whenever there are more than [`MOST_CASES`], keeping the mean
//! and the variance of what they draw, so the cost grows with n and not with 2^n. Up to six
//! independent cycling accessories nothing is merged and the result is the enumeration.

use super::LoadSum;
use super::cases::Cases;
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
        let mut cases = Cases::steady(steady, classes);
        let mut heaviest = cases.sums.clone();
        for cycler in cyclers {
            cases = cases.joined(cycler);
            if cases.len() > MOST_CASES {
                cases = cases.merged(reference);
            }
            if let Some(most) = heaviest_case(cycler, reference) {
                heaviest.iter_mut().zip(most).for_each(|(a, b)| *a += *b);
            }
        }
        let (cases, currents) = cases.sorted(reference);
        Coincidences::from_cases(cases, currents, heaviest)
    }

    fn from_cases(cases: Cases, currents: Vec<f64>, heaviest: Vec<LoadSum>) -> Coincidences {
        let Cases {
            classes,
            shares,
            sums,
        } = cases;
        let totals: Vec<LoadSum> = sums
            .chunks_exact(classes)
            .map(|row| row.iter().copied().sum())
            .collect();
        let origin = shares.iter().zip(&currents).map(|(p, i)| p * i).sum();
        let mut running = Tally::counted_from(origin);
        let mut tallies = Vec::with_capacity(shares.len() + 1);
        tallies.push(running);
        for (share, (total, current)) in shares.iter().zip(totals.iter().zip(&currents)) {
            running.enter(*share, current - origin, total);
            tallies.push(running);
        }
        let heaviest_total: LoadSum = heaviest.iter().copied().sum();
        Coincidences {
            shares,
            sums,
            filaments: heaviest_total.has_filaments(),
            classes,
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
