//! The build file as serde reads it: every key, no value understood yet.
//!
//! The keys of these structs are the only list of keys there is, and what is said of each is what `ampledger schema`
//! says of it.

mod accessory;
mod battery;
mod charging;
mod fleet;
pub(crate) mod node;
mod prices;

pub(crate) use accessory::{Accessory, Kit};
pub(crate) use battery::Battery;
pub(crate) use charging::{Alternator, Charging, Reading, Rectifier, Regulator, Winding};
pub(crate) use fleet::{Fleet, Machine};
pub(crate) use node::{Keys, Leaf, List, Map, Named, Node};
pub(crate) use prices::Prices;

use crate::quantity::{Amps, Celsius, Fraction, Hours, Ohms, Rpm, Volts};
use crate::schema::form::{Count, Name, Price, Quantity, Returns, StepForm, YesNo};
use schemars::JsonSchema;
use serde::Deserialize;

/// A struct of keys, each absent unless written.
macro_rules! keys {
    ($(#[$doc:meta])* $name:ident { $($(#[$attr:meta])* $key:ident: $type:ty,)* }) => {
        #[derive(Clone, Debug, Default, Deserialize, JsonSchema)]
        #[serde(default, deny_unknown_fields)]
        $(#[$doc])*
        pub(crate) struct $name { $($(#[$attr])* pub(crate) $key: $type,)* }
    };
}
use keys;

keys!(
    /// A machine, what charges it, what draws, and how it works: the build file of ampledger.
    #[schemars(extend("required" = ["build", "engine", "charging", "accessories", "shift"]))]
    File {
        /// What the build is called: the title of every answer.
        #[schemars(with = "Name", example = "Orchard mower, evening work")]
        build: Leaf,
        /// Temperature of the air the machine works and starts in; 20 °C if left out.
        #[schemars(with = "Quantity<Celsius>", example = "2 °C", example = "28 °F")]
        air: Leaf,
        /// The engine: its speeds and its starter.
        engine: Map<Engine>,
        /// What charges: windings and alternators. `[]` for a machine that has none.
        charging: List<Map<Charging>>,
        /// The battery. Left out, every load hangs on a winding's own circuit.
        battery: Map<Battery>,
        /// What draws. `[]` for a bare machine.
        accessories: List<Map<Accessory>>,
        /// One shift in the order worked: `crank`, `stopped` (key on, engine off) or the name of a speed, each but
        /// `crank` with its time.
        #[schemars(with = "Vec<StepForm>")]
        shift: List<Step>,
        /// Key off between two shifts; 14 h if left out.
        #[schemars(with = "Quantity<Hours>", example = "15 h")]
        parked: Leaf,
        /// A week of it: shifts on successive days, then days parked.
        days: Map<Days>,
        /// A shop charger plugged in between shifts.
        charger: Map<Charger>,
        /// What a remedy may change. Left out, all that the catalogs allow.
        may: Map<May>,
        /// How the wires run, unless an accessory says otherwise.
        wiring: Map<Wiring>,
    }
);

/// `crank`, or `{state: time}`.
pub(crate) type Step = Named<Leaf>;

keys!(
    /// The engine: its speeds and its starter.
    #[schemars(extend("required" = ["speeds"]))]
    Engine {
        /// Speeds of the crankshaft by name, any number of them. The names are the states of the shift and of duties.
        #[schemars(with = "Named<Quantity<Rpm>>", extend("examples" = [{"idle": "1800 rpm", "governed": "3400 rpm"}]))]
        speeds: Named<Leaf>,
        /// The starter. Left out, the engine is started by hand.
        starter: Map<Starter>,
    }
);

keys!(
    /// An electric starter.
    Starter {
        /// A starter of the catalogs; keys beside it take the place of its figures.
        #[schemars(with = "Name", example = "starter-twin-small")]
        part: Leaf,
        /// Current while it cranks a warm engine (27 °C). Rises in the cold.
        #[schemars(with = "Quantity<Amps>", example = "150 A")]
        draw: Leaf,
        /// Time of one start.
        #[schemars(with = "Quantity<Hours>", example = "2.5 s")]
        time: Leaf,
        /// Starts in a row that the battery must hold in reserve, 1 to 20.
        #[schemars(with = "Count", example = 3)]
        starts: Leaf,
        /// Rest between two of them.
        #[schemars(with = "Quantity<Hours>", example = "10 s")]
        rest: Leaf,
        /// Resistance of the starter's cables, there and back.
        #[schemars(with = "Quantity<Ohms>", example = "2 mΩ")]
        cable: Leaf,
        /// Least volts at the starter that still turn the engine; without it 1.5 V a cell (9 V of 12 V), in the cold as in the warm.
        #[schemars(with = "Quantity<Volts>", example = "7.2 V")]
        least_volts: Leaf,
    }
);

keys!(
    /// A week of it.
    #[schemars(extend("required" = ["shifts", "parked"]))]
    Days {
        /// Shifts on successive days, 1 to 366.
        #[schemars(with = "Count", example = 5)]
        shifts: Leaf,
        /// Days without a shift after them, 0 to 366.
        #[schemars(with = "Count", example = 2)]
        parked: Leaf,
    }
);

keys!(
    /// A shop charger.
    #[schemars(extend("required" = ["amps"]))]
    Charger {
        /// The most current it gives.
        #[schemars(with = "Quantity<Amps>", example = "6 A")]
        amps: Leaf,
        /// The voltage at which it tapers.
        #[schemars(with = "Quantity<Volts>", example = "14.4 V")]
        holds: Leaf,
        /// Time between key off and plugging in.
        #[schemars(with = "Quantity<Hours>", example = "30 min")]
        after: Leaf,
        /// How long it stays on; until the next shift if left out.
        #[schemars(with = "Quantity<Hours>", example = "8 h")]
        time: Leaf,
        /// Its price, in the currency of your other prices.
        #[schemars(with = "Price", example = 60)]
        price: Leaf,
    }
);

keys!(
    /// What a remedy may change.
    May {
        /// Speeds by name, each raised to this at most.
        #[schemars(with = "Named<Quantity<Rpm>>", extend("examples" = [{"idle": "2000 rpm"}]))]
        speeds: Named<Leaf>,
        /// Duties by the accessory's name, each cut to this at least.
        #[schemars(with = "Named<Quantity<Fraction>>", extend("examples" = [{"Seat heater": "30 %"}]))]
        duty: Named<Leaf>,
        /// Swap filament lamps for LED lamps of equal light.
        #[schemars(with = "YesNo")]
        lamps: Leaf,
        /// Fit another winding.
        #[schemars(with = "YesNo")]
        winding: Leaf,
        /// Fit another battery.
        #[schemars(with = "YesNo")]
        battery: Leaf,
        /// Use a shop charger while parked.
        #[schemars(with = "YesNo")]
        charger: Leaf,
    }
);

keys!(
    /// How wires run, unless an accessory says otherwise.
    Wiring {
        /// Temperature class of the insulation.
        #[schemars(with = "Quantity<Celsius>", example = "105 °C")]
        insulation: Leaf,
        /// Whether the wires run through the engine space.
        #[schemars(with = "YesNo")]
        engine_space: Leaf,
        /// Current-carrying conductors bundled together, 1 to 200.
        #[schemars(with = "Count", example = 4)]
        bundle: Leaf,
        /// How the current comes back: through the machine's frame, or a second wire.
        #[schemars(with = "Returns")]
        returns: Leaf,
        /// Most volts lost in the wire, as a share of the system's.
        #[schemars(with = "Quantity<Fraction>", example = "3 %")]
        max_drop: Leaf,
        /// Contact rating of the switches that are fitted: a load above it takes a relay.
        #[schemars(with = "Quantity<Amps>", example = "15 A")]
        switch: Leaf,
    }
);
