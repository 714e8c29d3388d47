//! What a wire may carry: 33 CFR 183.425 table 5 as the yardstick, and what lowers it.
//!
//! The table is boat law. No such law binds a mower; it is used because it is public, tells
//! insulation classes apart and is meant for vehicles with batteries and engines.

use super::conductor::section_of;
use super::tables::{Ground, certainty};
use crate::catalog::Certainty;
use crate::quantity::{Amps, Celsius, Fraction, SquareMm};
use serde::Deserialize;

/// Air that the table is for.
pub const TABLE_AIR: Celsius = Celsius(30.0);
/// Air of an engine space. Source: 33 CFR 183.425 table 5 note 1.
pub const ENGINE_SPACE_AIR: Celsius = Celsius(50.0);

/// The table and its notes.
#[derive(Clone, Debug, Default, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Ampacity {
    classes_c: Vec<f64>,
    amps: Vec<AmpsRow>,
    engine_space: Vec<EngineRow>,
    bundle: Vec<BundleRow>,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct AmpsRow {
    awg: String,
    amps: Vec<f64>,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct EngineRow {
    class_c: f64,
    factor: f64,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct BundleRow {
    conductors_from: u32,
    factor: f64,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

/// Where a wire lies.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Laid {
    /// Temperature its insulation bears.
    pub insulation: Celsius,
    /// Through the engine space.
    pub engine_space: bool,
    /// Air outside it.
    pub air: Celsius,
    /// Conductors bundled together, itself counted.
    pub bundle: u32,
}

/// What a place makes of the table.
#[derive(Clone, Debug, PartialEq)]
pub struct Place {
    /// Class of the table that the insulation reaches.
    pub class: Celsius,
    /// Air about the wire.
    pub ambient: Celsius,
    /// Share of the table's amps left by the heat.
    pub heat: Fraction,
    /// Share left by the bundle.
    pub bundle: Fraction,
    /// What the shares rest on.
    pub grounds: Vec<Ground>,
}

impl Ampacity {
    /// The classes of insulation, lowest first.
    pub fn classes(&self) -> impl Iterator<Item = Celsius> {
        self.classes_c.iter().map(|c| Celsius(*c))
    }

    /// What a place makes of the table; none for insulation below its lowest class.
    #[must_use]
    pub fn place(&self, laid: &Laid) -> Option<Place> {
        let class = self.classes().filter(|c| *c <= laid.insulation).last()?;
        let mut grounds = Vec::new();
        let base = if laid.engine_space {
            ENGINE_SPACE_AIR
        } else {
            TABLE_AIR
        };
        let mut heat = Fraction::ONE;
        if laid.engine_space {
            let row = self
                .engine_space
                .iter()
                .find(|row| row.class_c == class.0)?;
            grounds.push(Ground::new("engine space", &row.source, row.certainty));
            heat = Fraction(row.factor);
        }
        let ambient = base.max(laid.air);
        if ambient > base {
            heat = Fraction(heat.0 * hotter(class, base, ambient).0);
        }
        let row = self
            .bundle
            .iter()
            .rfind(|row| row.conductors_from <= laid.bundle.max(1))?;
        if row.factor < 1.0 {
            grounds.push(Ground::new("bundled wires", &row.source, row.certainty));
        }
        Some(Place {
            class,
            ambient,
            heat,
            bundle: Fraction(row.factor),
            grounds,
        })
    }

    /// What one wire may carry in air of 30 °C by the table: the amps of its gauge, and for a
    /// cross-section between two gauges those of the thinner one. None below the table.
    #[must_use]
    pub fn single(&self, section: SquareMm, class: Celsius) -> Option<(Amps, Ground)> {
        let column = self.classes_c.iter().position(|c| *c == class.0)?;
        self.amps
            .iter()
            .filter_map(|row| Some((section_of(&row.awg)?, row)))
            .filter(|(s, _)| *s <= section * (1.0 + 1e-9))
            .max_by(|a, b| a.0.0.total_cmp(&b.0.0))
            .and_then(|(_, row)| {
                let amps = Amps(*row.amps.get(column)?);
                Some((amps, Ground::new("ampacity", &row.source, row.certainty)))
            })
    }
}

impl Place {
    /// Share of the table's amps that is left.
    #[must_use]
    pub fn share(&self) -> Fraction {
        Fraction(self.heat.0 * self.bundle.0)
    }

    /// Temperature of the copper at a share of what it may carry.
    ///
    /// ```text
    /// T = Ta + (Tins − Ta) (I / Imax)²
    /// ```
    /// where Ta air, Tins insulation class (°C), I current, Imax what the wire may carry there.
    /// Valid for: a steady current. Source: textbook heat balance, losses in proportion to the rise.
    #[must_use]
    pub fn copper(&self, load: Fraction) -> Celsius {
        let rise = self.class.above(self.ambient);
        self.ambient.warmer(rise * (load.0 * load.0))
    }
}

/// Share of the amps left when the air is hotter than that they are stated for.
///
/// ```text
/// k = √((Tins − Ta) / (Tins − T0))
/// ```
/// where Tins insulation class, Ta air, T0 air of the stated amps (°C). Valid for: Tins above Ta and
/// T0; nothing is left at Ta = Tins. Source: textbook heat balance, heat in proportion to I².
#[must_use]
pub fn hotter(class: Celsius, stated: Celsius, air: Celsius) -> Fraction {
    let (left, whole) = (class.above(air).0, class.above(stated).0);
    if left <= 0.0 || whole <= 0.0 {
        return Fraction::ZERO;
    }
    Fraction((left / whole).sqrt())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::wire::Tables;

    fn amps(awg: &str, class: f64, engine_space: bool, bundle: u32) -> f64 {
        let table = Tables::builtin().ampacity;
        let laid = Laid {
            insulation: Celsius(class),
            engine_space,
            air: Celsius(20.0),
            bundle,
        };
        let place = table.place(&laid).unwrap();
        let (single, _) = table.single(section_of(awg).unwrap(), place.class).unwrap();
        (single * place.share()).0
    }

    /// K027, K028 and K029: 33 CFR 183.425 table 5, its note 1, and a derated
    /// table printed beside it.
    #[test]
    fn printed_ampacities() {
        assert_eq!(amps("14", 105.0, false, 1), 35.0);
        assert!((amps("10", 105.0, true, 1) - 51.0).abs() < 1e-12);
        assert!((amps("18", 105.0, true, 5) - 10.2).abs() < 1e-12);
        // Two conductors are no bundle yet; 25 are the last step.
        assert_eq!(amps("14", 105.0, false, 2), 35.0);
        assert_eq!(amps("14", 105.0, false, 30), 14.0);
    }

    /// The heat balance agrees with the engine-space factors to 0.01 but for 200 °C, where the law
    /// keeps all.
    #[test]
    fn engine_space_agrees_with_the_heat_balance() {
        let table = Tables::builtin().ampacity;
        for row in table.engine_space.iter().filter(|row| row.class_c < 200.0) {
            let balance = hotter(Celsius(row.class_c), TABLE_AIR, ENGINE_SPACE_AIR).0;
            assert!(
                (row.factor - balance).abs() < 0.01,
                "{}: {balance}",
                row.class_c
            );
        }
    }

    #[test]
    fn a_size_between_two_gauges_carries_what_the_thinner_does() {
        let table = Tables::builtin().ampacity;
        // 2.5 mm² lies between 14 AWG (2.08 mm², 25 A at 80 °C) and 12 AWG (3.31 mm², 35 A).
        let (amps, _) = table.single(SquareMm(2.5), Celsius(80.0)).unwrap();
        assert_eq!(amps, Amps(25.0));
        assert!(table.single(SquareMm(0.5), Celsius(80.0)).is_none());
    }

    #[test]
    fn insulation_between_two_classes_counts_as_the_lower() {
        let table = Tables::builtin().ampacity;
        let laid = |insulation: f64, air: f64| Laid {
            insulation: Celsius(insulation),
            engine_space: false,
            air: Celsius(air),
            bundle: 1,
        };
        assert_eq!(table.place(&laid(85.0, 20.0)).unwrap().class, Celsius(80.0));
        assert!(table.place(&laid(55.0, 20.0)).is_none());
        // Air of 45 °C about 80 °C insulation: √(35 / 50) = 0.8367 (arithmetic).
        let hot = table.place(&laid(80.0, 45.0)).unwrap();
        assert!((hot.heat.0 - 0.836_66).abs() < 1e-5);
        // Fully loaded the copper is as hot as its insulation bears; at half load a quarter of the rise.
        assert_eq!(hot.copper(Fraction::ONE), Celsius(80.0));
        assert!((hot.copper(Fraction(0.5)).0 - 53.75).abs() < 1e-12);
        assert_eq!(table.place(&laid(60.0, 70.0)).unwrap().heat, Fraction::ZERO);
    }

    /// K022: FAA AC 43.13-1B 11-66d(6) (formula from memory) puts a wire of 200 °C at
    /// 20 A of 26 A in air of 50 °C at 181.6 °C by a root law that it calls conservative; heat in
    /// proportion to I² gives less.
    #[test]
    fn the_aircraft_estimate_is_the_hotter() {
        let place = Place {
            class: Celsius(200.0),
            ambient: Celsius(50.0),
            heat: Fraction::ONE,
            bundle: Fraction::ONE,
            grounds: Vec::new(),
        };
        let load: f64 = 20.0 / 26.0;
        let aircraft = 50.0 + 150.0 * load.sqrt();
        assert!((aircraft - 181.6).abs() < 0.5);
        let here = place.copper(Fraction(load)).0;
        assert!((here - 138.76).abs() < 0.01 && here < aircraft, "{here}");
    }
}
