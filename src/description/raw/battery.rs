//! `battery:` as serde reads it.

use super::keys;
use super::node::{Leaf, Map};
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Ohms, Volts};
use crate::schema::form::{Chemistry, Count, Name, Number, Price, Quantity};
use schemars::JsonSchema;
use serde::Deserialize;

keys!(
    /// A lead-acid battery, by its label or as a part of a catalog.
    #[schemars(extend("anyOf" = [{"required": ["part"]}, {"required": ["capacity"]}, {"required": ["reserve_capacity"]}]))]
    Battery {
        /// A battery of the catalogs; keys beside it take the place of its figures.
        #[schemars(with = "Name", example = "battery-flooded-32ah")]
        part: Leaf,
        /// Capacity at the 20-hour rate.
        #[schemars(with = "Quantity<AmpHours>", example = "30 Ah")]
        capacity: Leaf,
        /// Minutes at 25 A from full to 1.75 V a cell.
        #[schemars(with = "Quantity<Hours>", example = "40 min")]
        reserve_capacity: Leaf,
        /// Cold cranking amps: for 30 s at -18 °C down to 1.2 V a cell.
        #[schemars(with = "Quantity<Amps>", example = "300 A")]
        cold_cranking: Leaf,
        /// How it is made: `flooded`, `agm` (absorbed in glass mat) or `gel`.
        #[serde(rename = "type")]
        #[schemars(with = "Chemistry")]
        chemistry: Leaf,
        /// Measured resistance of the whole battery; takes the place of what `cold_cranking` gives.
        #[schemars(with = "Quantity<Ohms>", example = "9 mΩ")]
        resistance: Leaf,
        /// Rested volts when full and when empty, where they were measured.
        rest_volts: Map<RestVolts>,
        /// Charge never to go below; at least what the next cold start needs.
        #[schemars(with = "Quantity<Fraction>", example = "60 %")]
        reserve: Leaf,
        /// Cells in series, 1 to 60: 3 for 6 V, 6 for 12 V (if left out), 12 for 24 V.
        #[schemars(with = "Count", example = 6)]
        cells: Leaf,
        /// How many times as much an aged battery gasses as a new one, 1 to 5.
        #[schemars(with = "Number", example = 2)]
        gassing: Leaf,
        /// What is left of its capacity when new.
        #[schemars(with = "Quantity<Fraction>", example = "85 %")]
        health: Leaf,
        /// Its price, in the currency of your other prices.
        #[schemars(with = "Price", example = 85)]
        price: Leaf,
    }
);

keys!(
    /// Rested volts of the whole battery.
    RestVolts {
        /// When full.
        #[schemars(with = "Quantity<Volts>", example = "12.65 V")]
        full: Leaf,
        /// When empty.
        #[schemars(with = "Quantity<Volts>", example = "11.89 V")]
        empty: Leaf,
    }
);
