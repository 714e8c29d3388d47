//! The parts and their prices, as a block of the page.

use crate::quantity::Money;
use crate::report::{Cell, Column, Table};

/// One line of a quote.
#[derive(Clone, Debug, PartialEq)]
pub struct Line {
    /// What it is.
    pub name: String,
    /// How many.
    pub count: u32,
    /// Price of one, where it is given.
    pub each: Option<Money>,
}

/// Parts with prices and their sum. A part without a price is listed and said to be missing from
/// the sum.
#[must_use]
pub fn table(title: &str, lines: &[Line], currency: &str) -> Table {
    let rows = lines.iter().map(|line| {
        let all = line.each.map(|each| each * f64::from(line.count));
        [
            Cell::name(&line.name),
            Cell::count(u64::from(line.count)),
            Cell::maybe(line.each, |each| Cell::money(each, currency)),
            Cell::maybe(all, |all| Cell::money(all, currency)),
        ]
    });
    let sum: Money = lines
        .iter()
        .filter_map(|l| Some(l.each? * f64::from(l.count)))
        .sum();
    let missing: Vec<&str> = lines
        .iter()
        .filter(|l| l.each.is_none())
        .map(|l| l.name.as_str())
        .collect();
    let table = Table::new(title)
        .columns([
            Column::name("Part"),
            Column::figures("Count"),
            Column::money("Each", currency),
            Column::money("Together", currency),
        ])
        .rows(rows)
        .total([
            Cell::name("Sum"),
            Cell::empty(),
            Cell::empty(),
            Cell::money(sum, currency),
        ]);
    if missing.is_empty() {
        table
    } else {
        table.note(format!(
            "No price given for: {}. The sum is without it.",
            missing.join(", ")
        ))
    }
}
