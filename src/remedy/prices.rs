//! What parts cost: the catalogs' own prices, and a list of the user's before them.

use crate::catalog::{Catalogs, Kind};
use crate::description::{bytes_of, read_prices as read_text};
use crate::problem::Refusal;
use crate::quantity::Money;
use std::collections::BTreeMap;
use std::path::Path;

/// Name by which a price list knows a shop charger, which is in no catalog.
pub const CHARGER: &str = "charger";

/// A price list of the user's own.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Prices {
    /// The currency, a label; empty where none is named.
    pub currency: String,
    /// Prices by the part's id.
    pub by_id: BTreeMap<String, Money>,
}

/// Reads a price list: `currency:` and `prices:`, a map from the part's id to its price.
///
/// # Errors
/// [`Refusal`] with every problem found.
pub fn read_prices(path: &Path) -> Result<Prices, Refusal> {
    let name = path.display().to_string();
    let bytes = bytes_of(path, &name)?;
    let text = read_text(&name, &String::from_utf8_lossy(&bytes))?;
    Ok(Prices {
        currency: text.currency.map_or(String::new(), |c| c.value),
        by_id: text
            .prices
            .into_iter()
            .map(|(id, price)| (id, price.value))
            .collect(),
    })
}

impl Prices {
    /// Price of a part: the list's own, else the catalog's.
    #[must_use]
    pub fn of(&self, id: &str, catalog: Option<Money>) -> Option<Money> {
        self.by_id.get(id).copied().or(catalog)
    }

    /// A note on each id of the list that is in no catalog.
    #[must_use]
    pub fn notes(&self, catalogs: &Catalogs) -> Vec<String> {
        let unknown = self.unknown(catalogs).into_iter();
        unknown
            .map(|id| format!("the price list's `{id}` is in no catalog"))
            .collect()
    }

    /// Ids of the list that are in no catalog.
    fn unknown(&self, catalogs: &Catalogs) -> Vec<&str> {
        let known = |id: &str| {
            id == CHARGER
                || Kind::ALL
                    .into_iter()
                    .any(|kind| catalogs.find(kind, id).is_some())
        };
        let ids = self.by_id.keys().map(String::as_str);
        ids.filter(|id| !known(id)).collect()
    }
}
