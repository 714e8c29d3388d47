//! The build file as serde reads it: every key, no value understood yet.
//!
//! The keys of these structs are the only list of keys there is.

mod charging;
pub(crate) mod node;

pub(crate) use charging::{Alternator, Charging, Reading, Rectifier, Regulator, Winding};
pub(crate) use node::{Keys, Leaf, List, Map, Named, Node};

use serde::Deserialize;

/// A struct of keys, each absent unless written.
macro_rules! keys {
    ($(#[$doc:meta])* $name:ident { $($(#[$attr:meta])* $key:ident: $type:ty,)* }) => {
        $(#[$doc])*
        #[derive(Clone, Debug, Default, Deserialize)]
        #[serde(default, deny_unknown_fields)]
        pub(crate) struct $name { $($(#[$attr])* pub(crate) $key: $type,)* }
    };
}
use keys;

keys!(
    /// The whole file.
    File {
        build: Leaf,
        air: Leaf,
        engine: Map<Engine>,
        charging: List<Map<Charging>>,
        battery: Map<Battery>,
        accessories: List<Map<Accessory>>,
        shift: List<Step>,
        parked: Leaf,
        days: Map<Days>,
        charger: Map<Charger>,
        may: Map<May>,
        wiring: Map<Wiring>,
    }
);

/// `crank`, or `{state: time}`.
pub(crate) type Step = Named<Leaf>;

keys!(
    /// `engine:`.
    Engine {
        speeds: Named<Leaf>,
        starter: Map<Starter>,
    }
);

keys!(
    /// `engine.starter:`, and a starter of a catalog.
    Starter {
        part: Leaf,
        draw: Leaf,
        time: Leaf,
        starts: Leaf,
        rest: Leaf,
        cable: Leaf,
        least_volts: Leaf,
    }
);

keys!(
    /// `battery:`, and a battery of a catalog.
    Battery {
        part: Leaf,
        capacity: Leaf,
        reserve_capacity: Leaf,
        cold_cranking: Leaf,
        #[serde(rename = "type")]
        chemistry: Leaf,
        resistance: Leaf,
        rest_volts: Map<RestVolts>,
        reserve: Leaf,
        cells: Leaf,
        gassing: Leaf,
        health: Leaf,
        price: Leaf,
    }
);

keys!(
    /// `battery.rest_volts:`.
    RestVolts {
        full: Leaf,
        empty: Leaf,
    }
);

keys!(
    /// An entry of `accessories:`, of a kit, and of a catalog.
    Accessory {
        name: Leaf,
        part: Leaf,
        count: Leaf,
        draw: Leaf,
        law: Leaf,
        at: Leaf,
        duty: Named<Leaf>,
        works: Leaf,
        inrush: Leaf,
        circuit: Leaf,
        parked: Leaf,
        coil: Leaf,
        together: List<Leaf>,
        apart: List<Leaf>,
        price: Leaf,
        run: Leaf,
        feed: Leaf,
        kind: Leaf,
        max_drop: Leaf,
        returns: Leaf,
        insulation: Leaf,
        accepts_ac: Leaf,
        lumens: Leaf,
    }
);

keys!(
    /// A kit of a catalog.
    Kit {
        accessories: List<Map<Accessory>>,
        price: Leaf,
    }
);

keys!(
    /// `days:`.
    Days {
        shifts: Leaf,
        parked: Leaf,
    }
);

keys!(
    /// `charger:`.
    Charger {
        amps: Leaf,
        holds: Leaf,
        after: Leaf,
        time: Leaf,
        price: Leaf,
    }
);

keys!(
    /// `may:`.
    May {
        speeds: Named<Leaf>,
        duty: Named<Leaf>,
        lamps: Leaf,
        winding: Leaf,
        battery: Leaf,
        charger: Leaf,
    }
);

keys!(
    /// `wiring:`.
    Wiring {
        insulation: Leaf,
        engine_space: Leaf,
        bundle: Leaf,
        returns: Leaf,
        max_drop: Leaf,
        switch: Leaf,
    }
);
