//! A fleet file as serde reads it.

use super::keys;
use super::node::{Leaf, List, Map, Named};
use crate::quantity::Celsius;
use crate::schema::form::{Count, Name, Names, Quantity};
use schemars::JsonSchema;
use serde::Deserialize;

keys!(
    /// Machines and the kits to try on them: the fleet file of ampledger.
    #[schemars(extend("required" = ["machines"]))]
    Fleet {
        /// What the fleet is called: the title of the answer. The file's name if left out.
        #[schemars(with = "Name", example = "Village yard")]
        fleet: Leaf,
        /// Kits to try on every machine that names none of its own: ids of the catalogs, or files beside this one;
        /// `none` is the machine as it is.
        #[schemars(with = "Names")]
        kits: List<Leaf>,
        /// Air temperatures to try on every machine that names none of its own, each with a name.
        #[schemars(with = "Named<Quantity<Celsius>>", extend("examples" = [{"winter": "-8 °C", "summer": "28 °C"}]))]
        seasons: Named<Leaf>,
        /// The machines, answered in the order written.
        machines: List<Map<Machine>>,
    }
);

keys!(
    /// A machine, or several alike.
    #[schemars(extend("required" = ["build"]))]
    Machine {
        /// What it is called; its build file's name if left out.
        #[schemars(with = "Name", example = "Verge mower")]
        machine: Leaf,
        /// Its build file, or a pattern of several, beside this file.
        #[schemars(with = "Name", example = "mower.yaml", example = "mowers/*.yaml")]
        build: Leaf,
        /// How many of it there are, 1 to 100000; 1 if left out.
        #[schemars(with = "Count", example = 4)]
        count: Leaf,
        /// The kit to fit, in place of the kits tried on all; `none` for none.
        #[schemars(with = "Name", example = "night-work")]
        kit: Leaf,
        /// Air temperature, in place of the build's own and of the seasons.
        #[schemars(with = "Quantity<Celsius>", example = "-5 °C")]
        air: Leaf,
        /// Changes to its build, as `--set` of `check` takes them: one, or a list.
        #[schemars(with = "Names")]
        set: List<Leaf>,
    }
);
