//! The parts and their prices, as a block of the page.

use crate::quantity::Money;
use crate::report::{Cell, Column, Table};
use serde::Serialize;

/// One line of a quote.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Line {
    /// What it is.
    pub name: String,
    /// How many.
    pub count: u32,
    /// Price of one, where it is given.
    pub each: Option<Money>,
}

/// What is bought without a price: wire, fuses, relays.
#[derive(Clone, Debug, PartialEq)]
pub struct Bought {
    /// What it is.
    pub what: String,
    /// Its size.
    pub size: String,
    /// How much.
    pub amount: Cell,
}

/// Parts with prices and their sum. A part without a price is listed and said to be missing from
/// the sum.
#[must_use]
pub fn table(title: &str, lines: &[Line], currency: &str) -> Table {
    summed(priced(title, lines, currency), lines, &[], currency)
}

/// A quote: parts with their prices, and what is bought beside them.
#[must_use]
pub fn with(lines: &[Line], bought: &[Bought], currency: &str) -> Table {
    let rows = bought.iter().map(|b| {
        [
            Cell::name(format!("{}, {}", b.what, b.size)),
            b.amount.clone(),
        ]
    });
    let table = priced("Quote", lines, currency).rows(rows);
    summed(table, lines, bought, currency)
}

/// The parts, one row each.
fn priced(title: &str, lines: &[Line], currency: &str) -> Table {
    let rows = lines.iter().map(|line| {
        let all = line.each.map(|each| each * f64::from(line.count));
        [
            Cell::name(&line.name),
            Cell::count(u64::from(line.count)),
            Cell::maybe(line.each, |each| Cell::money(each, currency)),
            Cell::maybe(all, |all| Cell::money(all, currency)),
        ]
    });
    Table::new(title)
        .columns([
            Column::name("Part"),
            Column::figures("Count"),
            Column::money("Each", currency),
            Column::money("Together", currency),
        ])
        .rows(rows)
}

/// With the sum of what has a price, and what it is without.
fn summed(table: Table, lines: &[Line], bought: &[Bought], currency: &str) -> Table {
    let sum: Money = lines
        .iter()
        .filter_map(|l| Some(l.each? * f64::from(l.count)))
        .sum();
    let table = table.total([
        Cell::name("Sum"),
        Cell::empty(),
        Cell::empty(),
        Cell::money(sum, currency),
    ]);
    let mut missing: Vec<&str> = lines
        .iter()
        .filter(|l| l.each.is_none())
        .map(|l| l.name.as_str())
        .collect();
    if !bought.is_empty() {
        missing.push("wire, fuses and relays");
    }
    if missing.is_empty() {
        table
    } else {
        table.note(format!(
            "Not in the sum, for want of a price: {}.",
            missing.join(", ")
        ))
    }
}
