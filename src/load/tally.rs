//! Sums over a run of cases: their share, the moments of their currents, and what they draw.

use super::LoadSum;
use crate::quantity::Fraction;

/// Variance of currents, A², under which cases count as one.
const ONE: f64 = 1e-12;

/// Sums over cases; the difference of two is that of the cases between.
#[derive(Clone, Copy, Debug, Default)]
pub(crate) struct Tally {
    /// Current from which those of the moments are counted, A.
    origin: f64,
    /// Shares of the time.
    pub(crate) share: f64,
    /// Share times current, its square, its cube.
    moments: [f64; 3],
    /// Share times draw.
    draw: LoadSum,
    /// Share times current times draw.
    tilt: LoadSum,
}

impl Tally {
    /// Of no cases yet, moments counted from a current.
    pub fn counted_from(origin: f64) -> Tally {
        Tally {
            origin,
            ..Tally::default()
        }
    }

    /// Enters a case: its share, its current less the origin, its draw.
    pub fn enter(&mut self, share: f64, current: f64, draw: &LoadSum) {
        self.share += share;
        self.moments[0] += share * current;
        self.moments[1] += share * current * current;
        self.moments[2] += share * current * current * current;
        self.draw += draw.share(Fraction(share));
        self.tilt += draw.share(Fraction(share * current));
    }

    /// What is left without the cases of another.
    pub fn less(&self, other: &Tally) -> Tally {
        Tally {
            origin: self.origin,
            share: self.share - other.share,
            moments: [0, 1, 2].map(|k| self.moments[k] - other.moments[k]),
            draw: self.draw - other.draw,
            tilt: self.tilt - other.tilt,
        }
    }

    /// Their mean draw.
    pub fn mean(&self) -> LoadSum {
        self.draw.share(Fraction(1.0 / self.share))
    }

    /// Their mean current, A.
    pub fn mean_current(&self) -> f64 {
        self.origin + self.moments[0] / self.share
    }

    /// Standard deviation of their currents, A.
    pub fn deviation(&self) -> f64 {
        self.variance().max(0.0).sqrt()
    }

    fn variance(&self) -> f64 {
        let mean = self.moments[0] / self.share;
        self.moments[1] / self.share - mean * mean
    }

    /// Two draws with shares that keep the cases' share, mean, variance and third moment of
    /// current: the two-point Gauss rule of their distribution. Each draw is composed as the
    /// cases near it are, by the regression of every law on the current.
    ///
    /// ```text
    /// x± = μ + σ (γ/2 ± √(1 + γ²/4)),   w± = ½ (1 ∓ (γ/2) / √(1 + γ²/4))
    /// ```
    /// where μ mean, σ² variance, γ skewness of the currents. Source: derived (moment matching).
    pub fn nodes(&self) -> [(f64, LoadSum); 2] {
        if self.share <= 0.0 {
            return [(0.0, LoadSum::NONE); 2];
        }
        let mean = self.moments[0] / self.share;
        let variance = self.variance();
        let centre = self.mean();
        if variance < ONE {
            return [(self.share, centre), (0.0, LoadSum::NONE)];
        }
        let tilt = self.tilt.share(Fraction(1.0 / self.share)) - centre.share(Fraction(mean));
        let tilt = tilt.share(Fraction(1.0 / variance));
        let third = self.moments[2] / self.share - 3.0 * mean * variance - mean * mean * mean;
        let sigma = variance.sqrt();
        let half_skew = 0.5 * third / (variance * sigma);
        let root = (1.0 + half_skew * half_skew).sqrt();
        [1.0, -1.0].map(|sign| {
            let away = sigma * (half_skew + sign * root);
            let weight = 0.5 * (1.0 - sign * half_skew / root);
            (self.share * weight, centre + tilt.share(Fraction(away)))
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Amps, Volts};

    /// Binomial of three at 0.3: mean 0.9, variance 0.63, third central moment 0.252 (textbook).
    #[test]
    fn the_nodes_keep_three_moments() {
        let cases = [(0.343, 0.0), (0.441, 1.0), (0.189, 2.0), (0.027, 3.0)];
        let mut tally = Tally {
            origin: 0.9,
            ..Tally::default()
        };
        for (share, amps) in cases {
            tally.enter(share, amps - 0.9, &LoadSum::current_of(Amps(amps)));
        }
        let nodes = tally
            .nodes()
            .map(|(p, sum)| (p, sum.current_at(Volts(12.6)).0));
        let moment = |n: i32| {
            nodes
                .iter()
                .map(|(p, x)| p * (x - 0.9).powi(n))
                .sum::<f64>()
        };
        for (have, want) in [
            (moment(0), 1.0),
            (moment(1), 0.0),
            (moment(2), 0.63),
            (moment(3), 0.252),
        ] {
            assert!((have - want).abs() < 1e-12, "{have} for {want}");
        }
        assert!((tally.deviation() - 0.63_f64.sqrt()).abs() < 1e-12);
    }
}
