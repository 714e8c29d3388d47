//! Machines × kits: every build of a fleet judged, in parallel, told in the order of the file.
//!
//! A fleet file is YAML or CSV; it names build files, how many machines there are of each, the kit to fit or the
//! kits to try. A build that cannot be read has its own row with its error and hides no other. Rows are told as they
//! become ready, a batch at a time, so that the memory taken does not grow with the builds beyond their rows. Rows that
//! say the same (file, kit, air, changes) are judged once.

mod files;
mod kits;
mod plan;
mod row;
mod sheet;
mod solve;
mod totals;

pub use plan::{Entry, NO_KIT, Plan};
pub use row::{Outcome, Row, one_line};
pub use sheet::{MOST_BYTES, read_sheet};
pub use totals::{Group, Totals};

use crate::catalog::Catalogs;
use crate::remedy::Prices;
use kits::Kits;
use rayon::prelude::*;
use serde::Serialize;
use solve::Shop;
use std::collections::HashMap;
use std::sync::Arc;
use totals::Tally;

/// Builds judged before their rows are told.
const BATCH: usize = 256;

/// The whole answer.
#[derive(Clone, Debug, Serialize)]
pub struct Fleet {
    /// Version of these names.
    pub format: u32,
    /// Name of the fleet.
    pub fleet: String,
    /// Currency of the costs, a label; empty where none is named.
    pub currency: String,
    /// One a machine, kit and season, in the order of the file.
    pub rows: Vec<Row>,
    /// Sums.
    pub totals: Totals,
    /// Notes: prices of parts that are in no catalog.
    pub notes: Vec<String>,
}

/// What a row's outcome depends on: file, kit, air to the bit, changes and faults.
type Asked = (Arc<str>, Option<Arc<str>>, Option<u64>, String);

fn asked(entry: &Entry) -> Asked {
    let mut changes = String::new();
    for text in entry
        .set
        .iter()
        .map(|s| s.text.as_str())
        .chain(entry.fault.as_deref())
    {
        changes.push_str(text);
        changes.push('\n');
    }
    let air = entry.air.map(|air| air.0.to_bits());
    (entry.build.clone(), entry.kit.clone(), air, changes)
}

/// Judges every row of a plan; with prices, the first remedy of each that does not keep up is looked for. `told` is called with the number of rows more that are judged, on any thread; `emit`
/// with each row, in order.
///
/// # Errors
/// Those of `emit`, which stop it.
pub fn judge_all<E>(
    plan: &Plan,
    catalogs: &Catalogs,
    prices: Option<&Prices>,
    told: &(dyn Fn(u64) + Sync),
    emit: &mut dyn FnMut(Row) -> Result<(), E>,
) -> Result<Totals, E> {
    let shop = Shop {
        plan,
        catalogs,
        kits: Kits::of(plan, catalogs),
        prices,
    };
    let mut tally = Tally::default();
    // Looked up only, never walked: its order has no bearing.
    let mut known: HashMap<Asked, Arc<Outcome>> = HashMap::new();
    let mut left = plan.entries.as_slice();
    while !left.is_empty() {
        let (rows, new) = batch(left, &mut known);
        let outcomes: Vec<(&Entry, Arc<Outcome>)> = new
            .into_par_iter()
            .map(|entry| {
                let outcome = Arc::new(shop.outcome(entry));
                told(1);
                (entry, outcome)
            })
            .collect();
        told((rows.len() - outcomes.len()) as u64);
        for (entry, outcome) in outcomes {
            known.insert(asked(entry), outcome);
        }
        for entry in rows {
            let outcome = known.get(&asked(entry)).cloned().unwrap_or_default();
            let row = Row::new(entry, outcome);
            tally.add(&row);
            emit(row)?;
        }
        left = &left[rows.len()..];
    }
    let none = Prices::default();
    Ok(tally.finish(&shop.kits, catalogs, prices.unwrap_or(&none)))
}

/// The next rows, and those among them that are not known yet, each once.
fn batch<'p>(
    left: &'p [Entry],
    known: &mut HashMap<Asked, Arc<Outcome>>,
) -> (&'p [Entry], Vec<&'p Entry>) {
    let mut new: Vec<&Entry> = Vec::with_capacity(BATCH);
    let mut rows = 0;
    for entry in left {
        if new.len() >= BATCH {
            break;
        }
        rows += 1;
        known.entry(asked(entry)).or_insert_with(|| {
            new.push(entry);
            Arc::default()
        });
    }
    (&left[..rows], new)
}
