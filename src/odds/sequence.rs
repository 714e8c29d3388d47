//! Points that fill a unit cube evenly, however many of them are taken: the Halton sequence with its
//! digits permuted at random.

/// Cells a coordinate is divided into, at least: more than there will ever be points.
const CELLS: u64 = 1 << 40;

/// A sequence of points in the unit cube of some dimensions; the same seed gives the same points,
/// and each point can be had by itself.
///
/// ```text
/// i = Σ aₖ pᵏ,   x = Σ π_k(aₖ) p^−(k+1) + ½ p^−K
/// ```
/// where i the point's number, p the dimension's prime (2, 3, 5, …), aₖ its k-th digit, πₖ a random
/// permutation of the digits 0 … p − 1 of its own for each k and dimension, K the digits kept (p^K at
/// least 2^40, so that x is never 0 or 1). Valid for: up to p^K points. Source: Halton 1960; the
/// permutations after A. B. Owen, "A randomized Halton algorithm in R", 2017. They keep what the plain
/// sequence does along each axis and take away its stripes in the planes of the greater primes.
#[derive(Clone, Debug)]
pub struct Sequence {
    axes: Vec<Axis>,
}

/// One coordinate.
#[derive(Clone, Debug)]
struct Axis {
    base: u64,
    /// The permutation of each digit, the first of the number (the coarsest of the coordinate) first.
    digits: Vec<Vec<u32>>,
}

impl Sequence {
    /// The sequence of a seed in so many dimensions. A dimension's coordinates do not depend on how many there are.
    #[must_use]
    pub fn new(dimensions: usize, seed: u64) -> Sequence {
        let axis = |(number, base): (usize, u64)| {
            let mut random = Random::new(seed, number as u64);
            let mut digits = Vec::new();
            let mut cells = 1_u64;
            while cells < CELLS {
                digits.push(random.permutation(base));
                cells = cells.saturating_mul(base);
            }
            Axis { base, digits }
        };
        Sequence {
            axes: primes(dimensions)
                .into_iter()
                .enumerate()
                .map(axis)
                .collect(),
        }
    }

    /// A point: one coordinate a dimension, each between 0 and 1, neither included.
    #[must_use]
    pub fn point(&self, number: u64) -> Vec<f64> {
        self.axes.iter().map(|axis| axis.at(number)).collect()
    }
}

impl Axis {
    fn at(&self, number: u64) -> f64 {
        let mut left = number;
        let mut width = 1.0;
        let mut x = 0.0;
        for permutation in &self.digits {
            width /= self.base as f64;
            let digit = (left % self.base) as usize;
            left /= self.base;
            x += width * f64::from(permutation.get(digit).copied().unwrap_or_default());
        }
        x + 0.5 * width
    }
}

/// The first primes, by division.
fn primes(count: usize) -> Vec<u64> {
    let mut found: Vec<u64> = Vec::with_capacity(count);
    let mut candidate = 2;
    while found.len() < count {
        let divides = |p: &u64| candidate % p == 0;
        let small = |p: &&u64| **p * **p <= candidate;
        if !found.iter().take_while(small).any(divides) {
            found.push(candidate);
        }
        candidate += 1;
    }
    found
}

/// Random 64-bit numbers.
///
/// Source: SplitMix64 of Steele, Lea and Flood, "Fast splittable pseudorandom number generators", 2014.
struct Random(u64);

/// The step of the generator's state, and the multipliers of its mixing.
const GOLDEN: u64 = 0x9e37_79b9_7f4a_7c15;
const MIX: [u64; 2] = [0xbf58_476d_1ce4_e5b9, 0x94d0_49bb_1331_11eb];

impl Random {
    /// A stream of its own for each axis of a seed.
    fn new(seed: u64, axis: u64) -> Random {
        let mut of_seed = Random(seed);
        Random(of_seed.next() ^ axis.wrapping_mul(GOLDEN))
    }

    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(GOLDEN);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(MIX[0]);
        z = (z ^ (z >> 27)).wrapping_mul(MIX[1]);
        z ^ (z >> 31)
    }

    /// A number below a limit, each as likely to within 2⁻⁵⁰.
    fn below(&mut self, limit: u64) -> u64 {
        ((u128::from(self.next()) * u128::from(limit)) >> 64) as u64
    }

    /// The numbers below a limit in random order (Fisher and Yates).
    fn permutation(&mut self, limit: u64) -> Vec<u32> {
        let mut order: Vec<u32> = (0..limit as u32).collect();
        for last in (1..order.len()).rev() {
            let other = self.below(last as u64 + 1) as usize;
            order.swap(last, other);
        }
        order
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The first outputs of the generator for state 1234567, as its published implementations print
    /// them (from memory of a widely copied test vector).
    #[test]
    fn generator_as_published() {
        let mut random = Random(1_234_567);
        let first: Vec<u64> = (0..3).map(|_| random.next()).collect();
        assert_eq!(
            first,
            [
                6_457_827_717_110_365_317,
                3_203_168_211_198_807_973,
                9_817_491_932_198_370_423
            ]
        );
    }

    #[test]
    fn first_primes() {
        // Euclid's list.
        assert_eq!(primes(10), [2, 3, 5, 7, 11, 13, 17, 19, 23, 29]);
        assert_eq!(primes(100).last(), Some(&541));
    }

    /// What Halton's construction promises: of p^k points in a row that begin at a multiple of p^k,
    /// each of the p^k equal parts of the axis holds one.
    #[test]
    fn every_part_of_an_axis_holds_one_point() {
        let sequence = Sequence::new(5, 7);
        for (axis, base) in primes(5).into_iter().enumerate() {
            let parts = base.pow(if base < 5 { 4 } else { 2 });
            for block in [0, 1, 9] {
                let mut held = vec![0; parts as usize];
                for number in block * parts..(block + 1) * parts {
                    let x = sequence.point(number)[axis];
                    assert!(x > 0.0 && x < 1.0);
                    held[(x * parts as f64) as usize] += 1;
                }
                assert!(held.iter().all(|n| *n == 1), "axis {axis}, block {block}");
            }
        }
    }

    /// The mean of Π 2xⱼ over the cube is 1; independent draws would miss it by
    /// √((4/3)⁸ − 1) / √4096 = 0.047 (one sigma), even points by a fraction of that.
    #[test]
    fn evener_than_chance_in_eight_dimensions() {
        let sequence = Sequence::new(8, 3);
        let n = 4096;
        let sum: f64 = (0..n)
            .map(|i| sequence.point(i).iter().map(|x| 2.0 * x).product::<f64>())
            .sum();
        assert!((sum / n as f64 - 1.0).abs() < 0.02, "{}", sum / n as f64);
    }

    /// The 39th and 40th axes (primes 167 and 173), whose plain sequences march in step for their
    /// first 167 points: permuted, their correlation over 512 points is that of chance, whose sigma
    /// is 1/√512 = 0.044.
    #[test]
    fn great_primes_do_not_march_in_step() {
        let sequence = Sequence::new(40, 1);
        let n = 512;
        let points: Vec<Vec<f64>> = (0..n).map(|i| sequence.point(i)).collect();
        let r: f64 = points
            .iter()
            .map(|p| (p[38] - 0.5) * (p[39] - 0.5) * 12.0)
            .sum::<f64>()
            / n as f64;
        assert!(r.abs() < 4.0 * 0.044, "{r}");
    }

    #[test]
    fn a_seed_is_a_sequence_and_dimensions_only_add_to_it() {
        let (few, many) = (Sequence::new(3, 42), Sequence::new(30, 42));
        for i in [0, 1, 77, 5000] {
            assert_eq!(few.point(i), many.point(i)[..3]);
        }
        assert_ne!(few.point(5), Sequence::new(3, 43).point(5));
    }
}
