//! The kits of a fleet: each read once, and what it takes to fit one.

use super::plan::Plan;
use crate::catalog::{Catalogs, Kind};
use crate::description::AccessoryText;
use crate::quantity::Money;
use crate::remedy::{Part, Prices};
use crate::resolve::{Kit, find_kit};
use std::collections::BTreeMap;
use std::sync::Arc;

/// Kits by the name that the fleet file gives them.
#[derive(Debug, Default)]
pub(super) struct Kits(BTreeMap<Arc<str>, Result<Kit, String>>);

impl Kits {
    /// All kits that a plan names: of the catalogs, or files beside the fleet file.
    pub(super) fn of(plan: &Plan, catalogs: &Catalogs) -> Kits {
        let mut kits = Kits::default();
        for name in plan.entries.iter().filter_map(|e| e.kit.as_ref()) {
            if kits.0.contains_key(name) {
                continue;
            }
            let beside = plan.folder.join(&**name);
            let of_catalog = catalogs.find(Kind::Kit, name).is_some();
            let found = if !of_catalog && beside.exists() {
                find_kit(catalogs, &beside.to_string_lossy())
            } else {
                find_kit(catalogs, name)
            };
            let found = found.map_err(|error| match error {
                crate::resolve::KitError::Refused(refusal) => super::row::one_line(&refusal),
                other => other.to_string(),
            });
            kits.0.insert(name.clone(), found);
        }
        kits
    }

    /// The kit of a name.
    pub(super) fn find(&self, name: &str) -> Result<&Kit, String> {
        match self.0.get(name) {
            Some(Ok(kit)) => Ok(kit),
            Some(Err(why)) => Err(why.clone()),
            None => Err(format!("no kit `{name}`")),
        }
    }

    /// What fitting one of a kit costs, where that is known: its own price, or the sum of its parts'.
    pub(super) fn price(&self, name: &str, catalogs: &Catalogs, prices: &Prices) -> Option<Money> {
        let kit = self.find(name).ok()?;
        if let Some(price) = prices.of(name, kit.price) {
            return Some(price);
        }
        let each = |part: &Part| Some(part.each? * part.count as f64);
        let prices: Option<Vec<Money>> = parts(kit, catalogs, prices).iter().map(each).collect();
        prices.map(|prices| prices.into_iter().sum())
    }

    /// The parts of one of a kit.
    pub(super) fn parts(&self, name: &str, catalogs: &Catalogs, prices: &Prices) -> Vec<Part> {
        self.find(name)
            .map_or_else(|_| Vec::new(), |kit| parts(kit, catalogs, prices))
    }
}

fn parts(kit: &Kit, catalogs: &Catalogs, prices: &Prices) -> Vec<Part> {
    let one = |a| part(a, catalogs, prices);
    kit.accessories.iter().map(one).collect()
}

fn part(accessory: &AccessoryText, catalogs: &Catalogs, prices: &Prices) -> Part {
    let id = accessory.part.as_ref().map(|p| p.value.clone());
    let read = id
        .as_ref()
        .and_then(|id| catalogs.part::<AccessoryText>(id)?.ok());
    let title = read.as_ref().map(|read| read.entry.title.clone());
    let own = accessory.name.as_ref().map(|n| n.value.clone());
    let price = |text: &AccessoryText| text.price.as_ref().map(|p| p.value);
    let each = price(accessory).or_else(|| price(&read.as_ref()?.text));
    Part {
        name: title.or(own).or_else(|| id.clone()).unwrap_or_default(),
        each: id.as_ref().map_or(each, |id| prices.of(id, each)),
        part: id,
        count: u64::from(accessory.count.as_ref().map_or(1, |c| c.value)),
    }
}
