//! Copper conductors: cross-section, gauge, resistance.

use super::tables::{Ground, certainty};
use crate::catalog::Certainty;
use crate::quantity::parse::parse;
use crate::quantity::{Celsius, Metres, Ohms, SquareMm};
use crate::source::{copper_at, copper_factor};
use serde::{Deserialize, Serialize};

/// Metres of a thousand feet. Source: the international foot, 0.3048 m.
const METRES_PER_1000_FT: f64 = 304.8;
/// Temperature of the gauge list's resistances.
const GAUGE_LIST_AT: Celsius = Celsius(75.0);

/// In which sizes wire is bought.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Gauge {
    /// Square millimetres.
    #[default]
    Metric,
    /// American wire gauge.
    Awg,
}

/// One size of wire.
#[derive(Clone, Debug, PartialEq)]
pub struct Conductor {
    /// Cross-section of the copper.
    pub section: SquareMm,
    /// Its gauge, `12` or `1/0`; none for a metric size.
    pub gauge: Option<String>,
    /// Resistance of one metre at 20 °C, at most.
    pub metre: Ohms,
    /// What its figures rest on.
    pub grounds: Vec<Ground>,
}

impl Conductor {
    /// Resistance of a length at a temperature.
    ///
    /// ```text
    /// R = r L (1 + 0.00393 (T − 20))
    /// ```
    /// where r ohms of a metre at 20 °C, L metres, T °C. Valid from −100 to 250 °C. Source: IEC 60028.
    #[must_use]
    pub fn resistance(&self, length: Metres, at: Celsius) -> Ohms {
        copper_at(self.metre * length.0, at)
    }

    /// Its name in a sentence: `2.5 mm²`, `12 AWG`.
    #[must_use]
    pub fn name(&self) -> String {
        match &self.gauge {
            Some(gauge) => format!("{gauge} AWG"),
            None => crate::quantity::format::text(self.section),
        }
    }
}

/// The lists of conductors.
#[derive(Clone, Debug, Default, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Conductors {
    class_5: Vec<MetricRow>,
    road_vehicle: Vec<MetricRow>,
    gauge: Vec<GaugeRow>,
    least: Vec<LeastRow>,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct MetricRow {
    mm2: f64,
    milliohm_per_m: f64,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct GaugeRow {
    awg: String,
    ohm_per_1000_ft_at_75: f64,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct LeastRow {
    list: ListName,
    mm2: Option<f64>,
    awg: Option<String>,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

#[derive(Clone, Copy, Debug, Deserialize, PartialEq)]
#[serde(rename_all = "lowercase")]
enum ListName {
    Metric,
    Gauge,
}

/// The thinnest wire that is laid.
#[derive(Clone, Debug, PartialEq)]
pub struct Least {
    /// Its cross-section.
    pub section: SquareMm,
    /// What says so.
    pub ground: Ground,
}

impl Conductors {
    /// The sizes on offer, thinnest first, from the thinnest that is laid.
    ///
    /// A metric size is offered when IEC 60228 class 5 and the road-vehicle list both have it, with
    /// the greater of their two resistances: whichever cable is on the reel then does.
    #[must_use]
    pub fn offered(&self, gauge: Gauge) -> Vec<Conductor> {
        let least = self.least(gauge).map_or(SquareMm::ZERO, |l| l.section);
        let mut all: Vec<Conductor> = match gauge {
            Gauge::Metric => self
                .class_5
                .iter()
                .filter_map(|row| self.metric(row))
                .collect(),
            Gauge::Awg => self.gauge.iter().filter_map(GaugeRow::conductor).collect(),
        };
        all.retain(|c| c.section >= least);
        all.sort_by(|a, b| a.section.0.total_cmp(&b.section.0));
        all
    }

    /// The thinnest wire that is laid by itself.
    #[must_use]
    pub fn least(&self, gauge: Gauge) -> Option<Least> {
        let list = match gauge {
            Gauge::Metric => ListName::Metric,
            Gauge::Awg => ListName::Gauge,
        };
        let row = self.least.iter().find(|row| row.list == list)?;
        let section = match (&row.awg, row.mm2) {
            (Some(awg), _) => section_of(awg)?,
            (None, Some(mm2)) => SquareMm(mm2),
            (None, None) => return None,
        };
        Some(Least {
            section,
            ground: Ground::new("thinnest wire", &row.source, row.certainty),
        })
    }

    /// The gauge that is not thinner than a cross-section; none beyond the list.
    #[must_use]
    pub fn gauge_not_thinner(&self, section: SquareMm) -> Option<String> {
        self.gauge
            .iter()
            .filter_map(|row| Some((section_of(&row.awg)?, &row.awg)))
            .filter(|(s, _)| *s >= section * (1.0 - 1e-9))
            .min_by(|a, b| a.0.0.total_cmp(&b.0.0))
            .map(|(_, awg)| awg.clone())
    }

    fn metric(&self, row: &MetricRow) -> Option<Conductor> {
        let other = self.road_vehicle.iter().find(|o| o.mm2 == row.mm2)?;
        let ground = |r: &MetricRow| Ground::new("conductor resistance", &r.source, r.certainty);
        Some(Conductor {
            section: SquareMm(row.mm2),
            gauge: None,
            metre: Ohms(row.milliohm_per_m.max(other.milliohm_per_m) * 1e-3),
            grounds: vec![ground(row), ground(other)],
        })
    }
}

impl GaugeRow {
    fn conductor(&self) -> Option<Conductor> {
        let hot = self.ohm_per_1000_ft_at_75 / METRES_PER_1000_FT;
        Some(Conductor {
            section: section_of(&self.awg)?,
            gauge: Some(self.awg.clone()),
            metre: Ohms(hot / copper_factor(GAUGE_LIST_AT).0),
            grounds: vec![Ground::new(
                "conductor resistance",
                &self.source,
                self.certainty,
            )],
        })
    }
}

/// Cross-section of a gauge, `12` or `1/0`.
pub(super) fn section_of(awg: &str) -> Option<SquareMm> {
    parse::<SquareMm>(&format!("{awg} AWG"))
        .ok()
        .map(|m| m.value)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::wire::Tables;

    fn list(gauge: Gauge) -> Vec<Conductor> {
        Tables::builtin().conductors.offered(gauge)
    }

    /// NBS Handbook 100, solid copper at 20 °C, ohm per 1000 ft (22–12 AWG read in a reprint, the rest
    /// from memory): a stranded wire lies 0 to 4 % above. NEC prints its solid 12 AWG as 1.93 at 75 °C.
    #[test]
    fn stranded_gauges_lie_just_above_solid_copper() {
        let solid = [
            ("16", 4.016),
            ("14", 2.525),
            ("12", 1.588),
            ("10", 0.9989),
            ("8", 0.6282),
            ("6", 0.3951),
            ("4", 0.2485),
            ("2", 0.1563),
            ("1/0", 0.09827),
            ("2/0", 0.07793),
            ("4/0", 0.04901),
        ];
        let offered = list(Gauge::Awg);
        for (gauge, ohm_per_kft) in solid {
            let row = offered
                .iter()
                .find(|c| c.gauge.as_deref() == Some(gauge))
                .unwrap();
            let ratio = row.metre.0 * 304.8 / ohm_per_kft;
            assert!((1.0..1.04).contains(&ratio), "{gauge} AWG: {ratio}");
        }
        let twelve = offered
            .iter()
            .find(|c| c.gauge.as_deref() == Some("12"))
            .unwrap();
        let printed = twelve.resistance(Metres(304.8), Celsius(75.0));
        assert!((printed.0 - 1.98).abs() < 1e-9, "{printed:?}");
    }

    /// Copper of 1/58 ohm mm²/m (IEC 60028): the greatest resistance that a standard allows a
    /// flexible conductor lies 7 to 17 % above that of its nominal cross-section.
    #[test]
    fn metric_sizes_lie_above_copper_of_their_nominal_section() {
        let offered = list(Gauge::Metric);
        let sizes: Vec<f64> = offered.iter().map(|c| c.section.0).collect();
        assert_eq!(
            sizes,
            [
                1.0, 1.5, 2.5, 4.0, 6.0, 10.0, 16.0, 25.0, 35.0, 50.0, 70.0, 95.0
            ]
        );
        for c in &offered {
            let ratio = c.metre.0 * 58.0 * c.section.0;
            assert!((1.07..1.17).contains(&ratio), "{}: {ratio}", c.name());
        }
        // IEC 60228 class 5: 2.5 mm² at most 7.98 mΩ/m at 20 °C; 7.98 × 1.1179 = 8.921 at 50 °C (arithmetic).
        assert!((offered[2].resistance(Metres(1.0), Celsius(50.0)).0 - 8.9209e-3).abs() < 1e-6);
    }

    #[test]
    fn thinner_wire_has_more_resistance() {
        for gauge in [Gauge::Metric, Gauge::Awg] {
            for pair in list(gauge).windows(2) {
                assert!(pair[0].section < pair[1].section && pair[0].metre > pair[1].metre);
            }
        }
    }

    #[test]
    fn the_gauge_beside_a_metric_size_is_never_thinner() {
        let conductors = Tables::builtin().conductors;
        // ASTM B258: 14 AWG 2.081 mm², 13 none in the list, 12 AWG 3.309 mm².
        assert_eq!(
            conductors.gauge_not_thinner(SquareMm(2.0)).as_deref(),
            Some("14")
        );
        assert_eq!(
            conductors.gauge_not_thinner(SquareMm(2.5)).as_deref(),
            Some("12")
        );
        assert_eq!(
            conductors.gauge_not_thinner(SquareMm(95.0)).as_deref(),
            Some("4/0")
        );
        assert_eq!(conductors.gauge_not_thinner(SquareMm(120.0)), None);
    }
}
