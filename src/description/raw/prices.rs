//! A price list as serde reads it.

use super::keys;
use super::node::{Leaf, Named};
use crate::schema::form::{Name, Price};
use schemars::JsonSchema;
use serde::Deserialize;

keys!(
    /// A price list: prices of the user's own, by the id of the catalog part.
    #[schemars(extend("required" = ["prices"]))]
    Prices {
        /// The currency, a label.
        #[schemars(with = "Name", example = &"EUR")]
        currency: Leaf,
        /// Prices by the part's id. `charger` is a shop charger.
        #[schemars(with = "Named<Price>", extend("examples" = [{"winding-20a": 199}]))]
        prices: Named<Leaf>,
    }
);
