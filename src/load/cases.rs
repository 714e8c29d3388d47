//! Cases of what may be on at once while they are put together: every share and draw in one row,
//! so that ten cycling accessories take no more room than one.

use super::LoadSum;
use super::coincidence::{Cycler, MOST_CASES};
use crate::quantity::{Fraction, Volts};

/// Cases in a row.
#[derive(Clone, Debug)]
pub(super) struct Cases {
    /// Classes of lower working limit.
    pub(super) classes: usize,
    /// Share of the time of each.
    pub(super) shares: Vec<f64>,
    /// By case, then by class: `sums[case * classes + class]`.
    pub(super) sums: Vec<LoadSum>,
}

impl Cases {
    /// The one case of what is always on.
    pub(super) fn steady(steady: &[LoadSum], classes: usize) -> Cases {
        let mut sums = steady.to_vec();
        sums.resize(classes, LoadSum::NONE);
        Cases {
            classes,
            shares: vec![1.0],
            sums,
        }
    }

    pub(super) fn len(&self) -> usize {
        self.shares.len()
    }

    fn rows(&self) -> impl Iterator<Item = (f64, &[LoadSum])> {
        let sums = self.sums.chunks_exact(self.classes);
        self.shares.iter().copied().zip(sums)
    }

    /// Each case with each possibility of a cycler.
    pub(super) fn joined(&self, cycler: &Cycler) -> Cases {
        let count = self.len() * cycler.cases.len();
        let mut shares = Vec::with_capacity(count);
        let mut sums = Vec::with_capacity(count * self.classes);
        for (p, row) in self.rows() {
            for (share, more) in &cycler.cases {
                shares.push(p * share.0);
                sums.extend(row.iter().zip(more).map(|(a, b)| *a + *b));
            }
        }
        Cases {
            classes: self.classes,
            shares,
            sums,
        }
    }

    /// The cases in the order of their current at some volts, and those currents.
    pub(super) fn sorted(&self, reference: Volts) -> (Cases, Vec<f64>) {
        let current = |(_, row): (f64, &[LoadSum])| {
            let all: LoadSum = row.iter().copied().sum();
            all.current_at(reference).0
        };
        let mut order: Vec<(f64, usize)> = self
            .rows()
            .map(current)
            .enumerate()
            .map(|(case, current)| (current, case))
            .collect();
        order.sort_by(|a, b| a.0.total_cmp(&b.0));
        let mut sums = Vec::with_capacity(self.sums.len());
        for (_, case) in &order {
            sums.extend_from_slice(&self.sums[case * self.classes..(case + 1) * self.classes]);
        }
        let sorted = Cases {
            classes: self.classes,
            shares: order.iter().map(|(_, case)| self.shares[*case]).collect(),
            sums,
        };
        (
            sorted,
            order.into_iter().map(|(current, _)| current).collect(),
        )
    }

    /// Merges neighbours in current into [`MOST_CASES`] / 2 cells of equal width; each cell becomes
    /// two cases that keep its share, mean and variance of current.
    pub(super) fn merged(&self, reference: Volts) -> Cases {
        let (sorted, currents) = self.sorted(reference);
        let (low, high) = (currents[0], currents[currents.len() - 1]);
        let cells = MOST_CASES / 2;
        let width = (high - low) / cells as f64;
        let mut out = Cases {
            classes: self.classes,
            shares: Vec::with_capacity(MOST_CASES),
            sums: Vec::with_capacity(MOST_CASES * self.classes),
        };
        if width <= 0.0 {
            out.take_mean(&sorted, 0, sorted.len());
            return out;
        }
        let mut from = 0;
        for cell in 0..cells {
            let edge = if cell + 1 == cells {
                f64::INFINITY
            } else {
                low + width * (cell + 1) as f64
            };
            let mut to = from;
            while to < currents.len() && currents[to] < edge {
                to += 1;
            }
            out.take_halves(&sorted, &currents[from..to], from);
            from = to;
        }
        out
    }

    /// Splits a cell at its mean; each half becomes its weighted mean, which keeps the cell's mean
    /// and, being two points, nearly all of its variance.
    fn take_halves(&mut self, cell: &Cases, currents: &[f64], from: usize) {
        let shares = &cell.shares[from..from + currents.len()];
        let share: f64 = shares.iter().sum();
        if share <= 0.0 {
            return;
        }
        let weighted = shares.iter().zip(currents).map(|(p, i)| p * i);
        let mean = weighted.sum::<f64>() / share;
        let split = currents.partition_point(|i| *i < mean);
        for (start, end) in [(0, split), (split, currents.len())] {
            if shares[start..end].iter().any(|p| *p > 0.0) {
                self.take_mean(cell, from + start, from + end);
            }
        }
    }

    /// Takes the weighted mean of a run of cases as one.
    fn take_mean(&mut self, of: &Cases, start: usize, end: usize) {
        let share: f64 = of.shares[start..end].iter().sum();
        let at = self.sums.len();
        self.sums.resize(at + self.classes, LoadSum::NONE);
        for (p, row) in of.rows().take(end).skip(start) {
            for (into, sum) in self.sums[at..].iter_mut().zip(row) {
                *into += sum.share(Fraction(p / share));
            }
        }
        self.shares.push(share);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::build::Draw;
    use crate::quantity::{Amps, Ohms, Watts};

    const REFERENCE: Volts = Volts(12.6);

    /// The plain form: each case a list of its own, as the definition has it.
    fn plain(steady: &[LoadSum], cyclers: &[Cycler], classes: usize) -> Vec<(f64, Vec<LoadSum>)> {
        let mut first = steady.to_vec();
        first.resize(classes, LoadSum::NONE);
        let mut cases = vec![(1.0, first)];
        for cycler in cyclers {
            let mut all = Vec::new();
            for (p, sums) in &cases {
                for (share, more) in &cycler.cases {
                    let mut together: Vec<LoadSum> = sums.clone();
                    together.iter_mut().zip(more).for_each(|(a, b)| *a += *b);
                    all.push((p * share.0, together));
                }
            }
            cases = if all.len() > MOST_CASES {
                plainly_merged(all)
            } else {
                all
            };
        }
        cases.sort_by(|a, b| current(&a.1).total_cmp(&current(&b.1)));
        cases
    }

    fn current(sums: &[LoadSum]) -> f64 {
        sums.iter()
            .copied()
            .sum::<LoadSum>()
            .current_at(REFERENCE)
            .0
    }

    fn plainly_merged(mut cases: Vec<(f64, Vec<LoadSum>)>) -> Vec<(f64, Vec<LoadSum>)> {
        cases.sort_by(|a, b| current(&a.1).total_cmp(&current(&b.1)));
        let (low, high) = (current(&cases[0].1), current(&cases[cases.len() - 1].1));
        let cells = MOST_CASES / 2;
        let width = (high - low) / cells as f64;
        let mut out = Vec::new();
        for cell in 0..cells {
            let within = |c: &&(f64, Vec<LoadSum>)| {
                let over = cell == 0 || current(&c.1) >= low + width * cell as f64;
                over && (cell + 1 == cells || current(&c.1) < low + width * (cell + 1) as f64)
            };
            let cell: Vec<&(f64, Vec<LoadSum>)> = cases.iter().filter(within).collect();
            let share: f64 = cell.iter().map(|c| c.0).sum();
            let mean = cell.iter().map(|c| c.0 * current(&c.1)).sum::<f64>() / share;
            for heavy in [false, true] {
                let of_half = |c: &&&(f64, Vec<LoadSum>)| (current(&c.1) >= mean) == heavy;
                let half: Vec<&(f64, Vec<LoadSum>)> =
                    cell.iter().filter(of_half).copied().collect();
                let share: f64 = half.iter().map(|c| c.0).sum();
                if share > 0.0 {
                    let mut sums = vec![LoadSum::NONE; half[0].1.len()];
                    for (p, each) in half {
                        for (into, sum) in sums.iter_mut().zip(each) {
                            *into += sum.share(Fraction(p / share));
                        }
                    }
                    out.push((share, sums));
                }
            }
        }
        out
    }

    /// To the bit what the plain form gives, with few cyclers and many, one class and three.
    #[test]
    fn as_the_plain_form() {
        for classes in [1, 3] {
            for count in [0, 1, 5, 7, 12] {
                let single = |k: usize| {
                    let draw = match k % 3 {
                        0 => Draw::Current(Amps(0.4 + 0.3 * k as f64)),
                        1 => Draw::Power(Watts(9.0 + 7.0 * k as f64)),
                        _ => Draw::Resistance(Ohms(30.0 / (1.0 + k as f64))),
                    };
                    let share = Fraction(0.15 + 0.06 * k as f64);
                    Cycler::single(share, k % classes, classes, LoadSum::of(draw, 1))
                };
                let cyclers: Vec<Cycler> = (0..count).map(single).collect();
                let steady = [LoadSum::of(Draw::Current(Amps(2.0)), 1)];
                let mut cases = Cases::steady(&steady, classes);
                for cycler in &cyclers {
                    cases = cases.joined(cycler);
                    if cases.len() > MOST_CASES {
                        cases = cases.merged(REFERENCE);
                    }
                }
                let (cases, currents) = cases.sorted(REFERENCE);
                let plain = plain(&steady, &cyclers, classes);
                assert_eq!(cases.len(), plain.len(), "{count} of {classes}");
                for ((row, have), (share, sums)) in cases.rows().zip(&currents).zip(&plain) {
                    assert_eq!(
                        (row.0, row.1),
                        (*share, sums.as_slice()),
                        "{count} of {classes}"
                    );
                    assert_eq!(*have, current(sums));
                }
            }
        }
    }
}
