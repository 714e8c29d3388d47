//! Price lists.

use super::Lower;
use crate::description::{PricesText, path, raw};
use crate::quantity::bounds;

impl Lower<'_> {
    /// A price list.
    pub(in crate::description) fn prices(&mut self, raw: &raw::Prices, at: &str) -> PricesText {
        if raw.prices.is_absent() {
            self.missing(at, "prices", "prices: {winding-20a: 199}");
        }
        let list = path::key(at, "prices");
        let mut prices = Vec::new();
        for (id, leaf) in self.named(&raw.prices, &list).unwrap_or_default() {
            if let Some(price) = self.quantity_at(path::key(&list, id), leaf, &bounds::PRICE) {
                prices.push((id.clone(), price));
            }
        }
        PricesText {
            currency: self.name(at, "currency", &raw.currency),
            prices,
        }
    }
}
