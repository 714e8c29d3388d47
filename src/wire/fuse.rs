//! Fuses: ratings of ISO 8820-3, what they carry, and how soon they open.

use super::tables::{Ground, ShareRow, certainty};
use crate::catalog::Certainty;
use crate::quantity::{Amps, Fraction, Hours};
use serde::Deserialize;

/// The share of its rating that a blade fuse may pass for ten minutes. Source: ISO 8820-3, from memory.
pub const PASSES: Fraction = Fraction(1.35);

/// Ratings, operating times and rules.
#[derive(Clone, Debug, Default, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Fuses {
    ratings: Vec<RatingRow>,
    times: Vec<TimeRow>,
    loading: Vec<ShareRow>,
    lawful_ceiling: Vec<ShareRow>,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct RatingRow {
    amps: f64,
    kind: String,
    colour: Option<String>,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct TimeRow {
    kind: String,
    percent: f64,
    least_s: f64,
    most_s: Option<f64>,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

/// One fuse.
#[derive(Clone, Debug, PartialEq)]
pub struct Fuse {
    /// Its rating.
    pub rating: Amps,
    /// `blade` or `large blade`.
    pub kind: String,
    /// Its colour, where it has one.
    pub colour: Option<String>,
    /// What it rests on.
    pub ground: Ground,
}

impl Fuses {
    /// The ratings, smallest first.
    #[must_use]
    pub fn ratings(&self) -> Vec<Fuse> {
        let mut all: Vec<Fuse> = self
            .ratings
            .iter()
            .map(|row| Fuse {
                rating: Amps(row.amps),
                kind: row.kind.clone(),
                colour: row.colour.clone(),
                ground: Ground::new("fuse ratings", &row.source, row.certainty),
            })
            .collect();
        all.sort_by(|a, b| a.rating.0.total_cmp(&b.rating.0));
        all
    }

    /// Most of its rating that a fuse carries steadily.
    #[must_use]
    pub fn loading(&self) -> Option<(Fraction, Ground)> {
        self.loading.first().map(|row| {
            (
                Fraction(row.share),
                Ground::new("fuse loading", &row.source, row.certainty),
            )
        })
    }

    /// The greatest fuse that boat law allows a wire below 50 V, from its table amps.
    #[must_use]
    pub fn lawful_ceiling(&self, table: Amps) -> Option<(Amps, Ground)> {
        self.lawful_ceiling.first().map(|row| {
            let ground = Ground::new("lawful fuse", &row.source, row.certainty);
            (table * Fraction(row.share), ground)
        })
    }

    /// The smallest fuse that carries a steady load.
    #[must_use]
    pub fn for_load(&self, load: Amps) -> Option<Fuse> {
        let (share, _) = self.loading()?;
        self.ratings()
            .into_iter()
            .find(|fuse| load.0 <= fuse.rating.0 * share.0 * (1.0 + 1e-12))
    }

    /// The shortest time in which a fuse may open at a current; none where it holds for a hundred hours.
    ///
    /// Between the standard's points straight lines in log time against log current; beyond the
    /// last the same I²t. Valid for: the bands' edges. Source: ISO 8820-3, from memory.
    #[must_use]
    pub fn least_time(&self, fuse: &Fuse, current: Amps) -> Option<Hours> {
        let points: Vec<(f64, f64)> = self
            .times
            .iter()
            .filter(|row| row.kind == fuse.kind)
            .map(|row| (row.percent / 100.0, row.least_s))
            .collect();
        on_curve(&points, current / fuse.rating)
    }

    /// The longest time in which it opens; none where it need not open.
    #[must_use]
    pub fn most_time(&self, fuse: &Fuse, current: Amps) -> Option<Hours> {
        let points: Vec<(f64, f64)> = self
            .times
            .iter()
            .filter(|row| row.kind == fuse.kind)
            .filter_map(|row| Some((row.percent / 100.0, row.most_s?)))
            .collect();
        on_curve(&points, current / fuse.rating)
    }

    /// What a fuse's operating times rest on.
    #[must_use]
    pub fn times_ground(&self, fuse: &Fuse) -> Option<Ground> {
        self.times
            .iter()
            .find(|row| row.kind == fuse.kind)
            .map(|row| Ground::new("fuse times", &row.source, row.certainty))
    }
}

/// Seconds at a multiple of the rating, from points of multiple and seconds, multiples rising.
fn on_curve(points: &[(f64, f64)], multiple: f64) -> Option<Hours> {
    let first = points.first()?;
    if multiple < first.0 {
        return None;
    }
    let seconds = points
        .windows(2)
        .find(|pair| multiple <= pair[1].0)
        .map(|pair| {
            let ((m0, t0), (m1, t1)) = (pair[0], pair[1]);
            let along = (multiple / m0).ln() / (m1 / m0).ln();
            t0 * (t1 / t0).powf(along)
        })
        .or_else(|| points.last().map(|(m, t)| t * (m / multiple).powi(2)))?;
    Some(Hours::from_seconds(seconds))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::wire::Tables;

    /// K033: 10 A at 125 % asks for 12.5 A, next rating 15 A (general electronics text).
    #[test]
    fn a_fuse_carries_its_load_at_four_fifths() {
        let fuses = Tables::builtin().fuses;
        let rating = |load: f64| fuses.for_load(Amps(load)).map(|f| f.rating.0);
        assert_eq!(rating(10.0), Some(15.0));
        assert_eq!(rating(8.0), Some(10.0));
        assert_eq!(rating(8.01), Some(15.0));
        assert_eq!(rating(0.02), Some(1.0));
        assert_eq!(rating(80.0), Some(100.0));
        assert_eq!(rating(80.1), None);
    }

    /// K030: 33 CFR 183.455(c)(1), 12 AWG at 105 °C: 1.5 × 45 = 67.5 A.
    #[test]
    fn the_lawful_ceiling() {
        let (ceiling, _) = Tables::builtin().fuses.lawful_ceiling(Amps(45.0)).unwrap();
        assert_eq!(ceiling, Amps(67.5));
    }

    /// Points of the ISO 8820-3 bands (from memory), and the power law between two of them.
    #[test]
    fn times_lie_on_the_bands() {
        let fuses = Tables::builtin().fuses;
        let ten = fuses.for_load(Amps(8.0)).unwrap();
        let least = |amps: f64| fuses.least_time(&ten, Amps(amps)).map(Hours::seconds);
        let most = |amps: f64| fuses.most_time(&ten, Amps(amps)).map(Hours::seconds);
        assert_eq!((least(10.0), most(10.0)), (None, None));
        let near =
            |a: Option<f64>, b: f64| assert!((a.unwrap() / b - 1.0).abs() < 1e-9, "{a:?} for {b}");
        near(least(13.5), 0.75);
        near(most(13.5), 600.0);
        near(least(20.0), 0.15);
        near(most(60.0), 0.1);
        // Halfway in log current between 200 and 350 % the time is √(0.15 × 0.04).
        near(least(10.0 * (2.0f64 * 3.5).sqrt()), (0.15f64 * 0.04).sqrt());
        // Beyond 600 % the same I²t: at 1200 % a quarter of the time.
        near(least(120.0), 0.005);
    }
}
