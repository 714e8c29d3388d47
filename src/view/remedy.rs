//! Remedies as a report: a short list of ways out, priced, each with what it reaches.

use crate::quantity::{Fraction, Money, format};
use crate::remedy::{Answer, Remedy};
use crate::report::{Cell, Column, Item, Report, Table, Tone};

/// The report of remedies.
#[must_use]
pub fn remedy(answer: &Remedy) -> Report {
    let lacks = answer.lacks_ah.map_or_else(
        || "no charging while the engine runs can help it".to_owned(),
        |charge| format!("it lacks {} a shift", format::text(charge)),
    );
    let count = u32::try_from(answer.answers.len()).unwrap_or(u32::MAX);
    let (tone, lead, sentence) = if answer.keeps_up {
        (
            Tone::Good,
            "Keeps up",
            "nothing is to be mended.".to_owned(),
        )
    } else if let Some(binds) = &answer.binds {
        let sentence = format!("{lacks}. With all changed that may be: {binds}.");
        (Tone::Bad, "No way out", sentence)
    } else {
        let ways = format::count(count, "way out", "ways out");
        (Tone::Bad, "Does not keep up", format!("{lacks}; {ways}."))
    };
    let mut report = Report::new(&answer.build)
        .subtitle("Remedies: combinations of changes that make it keep up")
        .verdict(tone, lead, sentence);
    if !answer.answers.is_empty() {
        report = report
            .table(table(answer))
            .subheading("To try one, set")
            .lines(answer.answers.iter().enumerate().flat_map(commands));
    }
    report.list("Notes", answer.notes.iter().map(Item::new))
}

/// The assignments of an answer as options of `check`, one a line.
fn commands((index, answer): (usize, &Answer)) -> impl Iterator<Item = String> {
    let sets = answer.set.iter().enumerate();
    sets.map(move |(k, set)| {
        let number = if k == 0 {
            (index + 1).to_string()
        } else {
            String::new()
        };
        format!("{number:<3}--set '{set}'")
    })
}

/// Heading of the remedies on a page that holds more.
pub(super) const HEADING: &str = "What mends it";
/// What stands there where nothing need be mended.
pub(super) const NONE_NEEDED: &str = "No remedy needed: it keeps up as it is.";

/// The same in short, for a page that holds more: the ways out with their prices, or what binds.
#[must_use]
pub fn short(report: Report, answer: &Remedy) -> Report {
    if answer.keeps_up {
        return report.heading(HEADING).paragraph(NONE_NEEDED);
    }
    if let Some(binds) = &answer.binds {
        let text = format!("No way out. With all changed that may be: {binds}.");
        return report.heading(HEADING).paragraph(text);
    }
    let order = if is_priced(answer) {
        "Each does it alone; cheapest first. Prices of parts, without work."
    } else {
        "Each does it alone; least change first. No prices are known."
    };
    let mut table = table(answer).note(order);
    table.title = HEADING.to_owned();
    report.table(table)
}

fn is_priced(answer: &Remedy) -> bool {
    answer.answers.iter().any(|a| a.cost.is_some())
}

/// One row a way out.
fn table(answer: &Remedy) -> Table {
    let rows = answer.answers.iter().enumerate().map(|(index, a)| {
        vec![
            Cell::count(index as u64 + 1),
            Cell::name(a.changes.join("; ")),
            match a.cost {
                Some(cost) => money(cost, &answer.currency),
                None if is_priced(answer) => Cell::text("not known").dim(),
                None => Cell::empty(),
            },
            Cell::maybe(a.settles_soc, |soc: Fraction| Cell::percent(soc)),
        ]
    });
    let order = if is_priced(answer) {
        "Cheapest first; prices of parts alone, without work. A price list of yours goes before the catalogs' invented prices: --prices FILE."
    } else {
        "Least change first: no prices are known."
    };
    Table::new("Ways out")
        .columns([
            Column::figures("No."),
            Column::name("Changes"),
            Column::money("Parts", &answer.currency),
            Column::percent("Settles at"),
        ])
        .rows(rows)
        .note(order)
}

fn money(cost: Money, currency: &str) -> Cell {
    Cell::money(cost, currency)
}
