//! `charging:` as serde reads it.

use super::keys;
use super::node::{Leaf, List, Map};
use serde::Deserialize;

keys!(
    /// An entry of `charging:`, and of a catalog.
    Charging {
        name: Leaf,
        part: Leaf,
        winding: Map<Winding>,
        alternator: Map<Alternator>,
        rectifier: Map<Rectifier>,
        regulator: Map<Regulator>,
        price: Leaf,
    }
);

keys!(
    /// `winding:`.
    Winding {
        rated: Leaf,
        open_circuit: Leaf,
        resistance: Leaf,
        inductance: Leaf,
        readings: List<Map<Reading>>,
        poles: Leaf,
        phases: Leaf,
        working: Leaf,
        magnets: Leaf,
        scale: Leaf,
        feeds: Leaf,
        braking: Leaf,
    }
);

keys!(
    /// A row of `readings:`.
    Reading {
        rpm: Leaf,
        volts: Leaf,
        amps: Leaf,
    }
);

keys!(
    /// `alternator:`.
    Alternator {
        curve: List<Leaf>,
        ratio: Leaf,
        at: Leaf,
        tested: Leaf,
        working: Leaf,
    }
);

keys!(
    /// `rectifier:` where it is a mapping.
    Rectifier {
        kind: Leaf,
        drop: Leaf,
    }
);

keys!(
    /// `regulator:`.
    Regulator {
        holds: Leaf,
        kind: Leaf,
        per_degree: Leaf,
    }
);
