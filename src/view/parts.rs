//! What the catalogs hold: a table a kind, or one part in full.

use crate::catalog::{Kind, Listed};
use crate::report::{Cell, Column, Report, Table};

/// The report of parts in short.
#[must_use]
pub fn parts(title: &str, listed: &[Listed]) -> Report {
    let count = listed.len();
    let subtitle = match count {
        1 => "1 part".to_owned(),
        _ => format!("{count} parts"),
    };
    let mut report = Report::new(title).subtitle(subtitle);
    for kind in Kind::ALL {
        let rows: Vec<&Listed> = listed.iter().filter(|l| l.kind == kind.key()).collect();
        if !rows.is_empty() {
            report = report.table(table(kind, &rows));
        }
    }
    report
}

/// What the table of a kind is called.
fn heading(kind: Kind) -> &'static str {
    match kind {
        Kind::Charging => "Windings and alternators",
        Kind::Battery => "Batteries",
        Kind::Starter => "Starters",
        Kind::Accessory => "Accessories",
        Kind::Kit => "Kits",
    }
}

fn table(kind: Kind, rows: &[&Listed]) -> Table {
    let rows = rows.iter().map(|l| {
        [
            Cell::name(&l.id),
            Cell::text(&l.title),
            Cell::text(&l.figures),
            Cell::maybe(l.price, |price| Cell::money(price, "")),
        ]
    });
    Table::new(heading(kind))
        .columns([
            Column::name("Id"),
            Column::text("What it is"),
            Column::text("Figures"),
            Column::money("Price", ""),
        ])
        .rows(rows)
}

/// The report of one part in full.
#[must_use]
pub fn part(listed: &Listed) -> Report {
    let source = match listed.source.as_str() {
        "" => "not said",
        source => source,
    };
    let file = format!("{}, under `{}`", listed.file, listed.kind);
    let more = [
        ("figures from", source),
        ("certainty", &listed.certainty),
        ("stands in", &file),
    ];
    let keys = listed
        .keys
        .iter()
        .map(|row| (row.key.as_str(), row.value.as_str()));
    let rows = keys
        .chain(more)
        .map(|(key, value)| [Cell::name(key), Cell::text(value)]);
    Report::new(&listed.id)
        .subtitle(&listed.title)
        .table(
            Table::new("")
                .columns([Column::name("Key"), Column::text("Value")])
                .rows(rows),
        )
        .lines([how_to_take(listed)])
}

/// How a build takes it.
fn how_to_take(listed: &Listed) -> String {
    let id = &listed.id;
    if listed.kind == Kind::Kit.key() {
        format!("ampledger check BUILD --with {id}")
    } else {
        format!("part: {id}")
    }
}
