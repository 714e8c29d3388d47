//! An entry of `accessories:` as serde reads it.

use super::keys;
use super::node::{Leaf, List, Map, Named};
use crate::quantity::{Amps, Celsius, Fraction, Henries, Metres, Volts};
use crate::schema::form::{
    Between, Count, Draw, Duty, Law, LoadKind, Name, Names, Number, Price, Quantity, Returns,
    Surge, YesNo,
};
use schemars::JsonSchema;
use serde::Deserialize;

keys!(
    /// Something that draws: by its name and draw, or as a part of a catalog.
    #[schemars(extend("anyOf" = [{"required": ["part"]}, {"required": ["name", "draw"]}]))]
    Accessory {
        /// What it is called, once in a build.
        #[schemars(with = "Name", example = "Work lights")]
        name: Leaf,
        /// An accessory of the catalogs; keys beside it take the place of its figures.
        #[schemars(with = "Name", example = "work-light-led-27w")]
        part: Leaf,
        /// How many of them, switched together, 1 to 1000.
        #[schemars(with = "Count", example = 4)]
        count: Leaf,
        /// What one draws. The unit is its law: `W` a constant power, `A` a constant current, `ohm` a resistance.
        #[schemars(with = "Draw", example = "55 W", example = "4 A", example = "3.1 ohm ± 8 %")]
        draw: Leaf,
        /// How the current follows the volts, where the unit of `draw` does not say it: a heater stated in watts is a
        /// `resistance`, a bulb a `filament`.
        #[schemars(with = "Law")]
        law: Leaf,
        /// The volts at which `draw` holds.
        #[schemars(with = "Quantity<Volts>", example = "13.5 V")]
        at: Leaf,
        /// Share of the time it is on: one for every state in which the engine runs, or a mapping of states (`crank` and
        /// `stopped` too) to shares; then off in every state not named. Left out, it is on whenever the engine runs.
        #[schemars(with = "Duty")]
        duty: Named<Leaf>,
        /// Volts between which it works: below it drops out, above it is told of.
        #[schemars(with = "Between")]
        works: Leaf,
        /// Surge when switched on, for wire and fuse.
        #[schemars(with = "Surge")]
        inrush: Leaf,
        /// The circuit of a winding's own that it hangs on: the name a winding `feeds`. Left out, the battery.
        #[schemars(with = "Name", example = &"lighting")]
        circuit: Leaf,
        /// What it draws with the key off.
        #[schemars(with = "Quantity<Amps>", example = "8 mA")]
        parked: Leaf,
        /// Inductance of its coil: on a rectified circuit without a battery it smooths its own current.
        #[schemars(with = "Quantity<Henries>", example = "60 mH")]
        coil: Leaf,
        /// Accessories by name that are on whenever this one is, as far as their duties go.
        #[schemars(with = "Names")]
        together: List<Leaf>,
        /// Accessories by name that are never on with this one.
        #[schemars(with = "Names")]
        apart: List<Leaf>,
        /// Price of one, in the currency of your other prices.
        #[schemars(with = "Price", example = 38)]
        price: Leaf,
        /// Length of its wire, one way.
        #[schemars(with = "Quantity<Metres>", example = "2.4 m")]
        run: Leaf,
        /// Accessories with the same name here share one wire and fuse.
        #[schemars(with = "Name", example = &"lamps")]
        feed: Leaf,
        /// What it is, for its surge and its limits.
        #[schemars(with = "LoadKind")]
        kind: Leaf,
        /// Most volts lost in its wire, as a share of the system's.
        #[schemars(with = "Quantity<Fraction>", example = "3 %")]
        max_drop: Leaf,
        /// How its current comes back: through the machine's frame, or a second wire.
        #[schemars(with = "Returns")]
        returns: Leaf,
        /// Temperature class of its wire's insulation.
        #[schemars(with = "Quantity<Celsius>", example = "105 °C")]
        insulation: Leaf,
        /// Whether electronics of constant power or current also run on alternating current.
        #[schemars(with = "YesNo")]
        accepts_ac: Leaf,
        /// Light of one, in lumens at the volts of `at`: for swaps of equal light.
        #[schemars(with = "Number", example = 2500)]
        lumens: Leaf,
    }
);

keys!(
    /// Accessories added to a machine together.
    #[schemars(extend("required" = ["accessories"]))]
    Kit {
        /// What it adds, as under `accessories:` of a build.
        accessories: List<Map<Accessory>>,
        /// Price of it all, fitting included; the sum of its parts if left out.
        #[schemars(with = "Price", example = 260)]
        price: Leaf,
    }
);
