//! A report as CSV for a spreadsheet: units in the headings, numbers in full precision.
//!
//! Where a table is marked as the main one it stands alone, its header in the
//! first line. Else every part follows under a line with its title, parts set
//! apart by an empty line. Charts are left out: their numbers are in the tables.

use super::model::{Block, Item, Report};
use super::table::{Cell, Column, ColumnKind, Table};
use crate::quantity::format::MINUS;
use ::csv::{Terminator, WriterBuilder};

/// The report as CSV.
#[must_use]
pub fn render(report: &Report) -> String {
    let mut sheet = Sheet::default();
    if let Some(main) = report.tables().find(|table| table.main) {
        sheet.table(main);
        return sheet.finish();
    }
    sheet.line([report.title.as_str()]);
    for (label, text) in [
        ("", &report.subtitle),
        ("for", &report.made_for),
        ("date", &report.date),
    ] {
        if let Some(text) = text {
            sheet.line([label, text].into_iter().filter(|t| !t.is_empty()));
        }
    }
    for block in &report.blocks {
        sheet.block(block);
    }
    sheet.finish()
}

#[derive(Default)]
struct Sheet {
    bytes: Vec<u8>,
    after_heading: bool,
}

impl Sheet {
    /// Lines of fields, as they are.
    fn records(&mut self, records: impl IntoIterator<Item = Vec<String>>) {
        let mut writer = WriterBuilder::new()
            .flexible(true)
            .terminator(Terminator::Any(b'\n'))
            .from_writer(&mut self.bytes);
        for record in records {
            // Writing to memory does not fail.
            let _ = writer.write_record(&record);
        }
        let _ = writer.flush();
    }

    /// A line of texts, each made harmless.
    fn line<'a>(&mut self, fields: impl IntoIterator<Item = &'a str>) {
        self.records([fields.into_iter().map(harmless).collect()]);
    }

    /// An empty line between parts, none after a heading.
    fn gap(&mut self) {
        if !std::mem::take(&mut self.after_heading) {
            self.bytes.push(b'\n');
        }
    }

    fn block(&mut self, block: &Block) {
        if matches!(block, Block::Chart(_)) {
            return;
        }
        self.gap();
        match block {
            Block::Verdicts(verdicts) => {
                for verdict in verdicts {
                    let caption = verdict.caption.as_deref().unwrap_or("Verdict");
                    self.line([caption, &verdict.lead, &verdict.sentence]);
                }
            }
            Block::Heading(_, text) => {
                self.line([text.as_str()]);
                self.after_heading = true;
            }
            Block::Paragraph(text) => self.line([text.as_str()]),
            Block::Facts(facts) => {
                self.records(facts.iter().map(|fact| {
                    let (value, unit) = full(&fact.value);
                    vec![harmless(&fact.label), value, unit]
                }));
            }
            Block::Table(table) => {
                if !table.title.is_empty() {
                    self.line([table.title.as_str()]);
                }
                self.table(table);
                if let Some(note) = &table.note {
                    self.line([note.as_str()]);
                }
            }
            Block::Chart(_) => {}
            Block::List(items) => items.iter().for_each(|item| self.item(item)),
            Block::Cautions(cautions) => {
                self.line(["Cautions"]);
                cautions.iter().for_each(|text| self.line([text.as_str()]));
            }
            Block::Lines(lines) => lines.iter().for_each(|text| self.line([text.as_str()])),
        }
    }

    fn item(&mut self, item: &Item) {
        let lead = item.lead.as_deref().unwrap_or_default();
        let code = item.code.as_deref().unwrap_or_default();
        let source = item.source.as_deref().unwrap_or_default();
        self.line([lead, item.text.as_str(), code, source]);
    }

    fn table(&mut self, table: &Table) {
        let shown: Vec<(usize, bool)> = (0..table.columns.len())
            .filter(|i| table.columns[*i].kind != ColumnKind::Bar)
            .map(|i| (i, is_of_several_units(table, i)))
            .collect();
        let header = shown.iter().flat_map(|(i, several)| {
            let name = table.columns[*i].full_name();
            let unit = several.then(|| format!("{name}, unit"));
            std::iter::once(harmless(&name)).chain(unit.map(|unit| harmless(&unit)))
        });
        let rows = table.rows.iter().map(|row| {
            let cells = shown.iter().flat_map(|(i, several)| {
                let cell = row.cells.get(*i).cloned().unwrap_or_default();
                if *several {
                    let (value, unit) = full(&cell);
                    vec![value, unit]
                } else {
                    vec![field(&cell, &table.columns[*i])]
                }
            });
            cells.collect()
        });
        self.records(std::iter::once(header.collect()).chain(rows));
    }

    fn finish(self) -> String {
        String::from_utf8_lossy(&self.bytes).into_owned()
    }
}

/// Whether a column holds figures of several units: they then stand in a column after it.
fn is_of_several_units(table: &Table, index: usize) -> bool {
    let mut cells = table.rows.iter().filter_map(|row| row.cells.get(index));
    table.columns[index].unit.is_none()
        && cells.any(|cell| cell.number.is_some() && cell.unit.is_some())
}

/// A cell in a column: the full number where its unit is the column's, else what the reader sees.
fn field(cell: &Cell, column: &Column) -> String {
    match cell.number {
        Some(number) if cell.unit == column.unit => format!("{number}"),
        _ => harmless(&cell.text),
    }
}

/// A figure alone: its full number and unit, or its text.
fn full(cell: &Cell) -> (String, String) {
    match cell.number {
        Some(number) => (
            format!("{number}"),
            harmless(cell.unit.as_deref().unwrap_or_default()),
        ),
        None => (harmless(&cell.text), String::new()),
    }
}

/// A text that no spreadsheet takes for a formula: one that begins with `=`, `+`, `-`, `@`, a tab
/// or a line end (their wide forms too, and after blanks) gets an apostrophe before it. The true
/// minus sign becomes `-`.
#[must_use]
pub fn harmless(text: &str) -> String {
    let text = text.replace('\u{0}', " ").replace(MINUS, "-");
    let begins = text.starts_with(['\t', '\r', '\n'])
        || text
            .trim_start()
            .starts_with(['=', '+', '-', '@', '＝', '＋', '－', '＠']);
    if begins { format!("'{text}") } else { text }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Amps, Fraction, Minutes, Money, Volts};

    #[test]
    fn numbers_are_whole_and_in_the_unit_of_the_heading() {
        let table = Table::new("T")
            .columns([
                Column::name("State"),
                Column::duration("Time"),
                Column::percent("Share"),
                Column::money("Price", "EUR"),
                Column::number::<Amps>("Draw"),
            ])
            .row([
                Cell::name("a, b"),
                Cell::duration(Minutes(95.25)),
                Cell::percent(Fraction(0.123_456)),
                Cell::money(Money(12.5), "EUR"),
                Cell::fixed(Amps(-1.0 / 3.0), 1),
            ]);
        let wanted = "State,Time (min),Share (%),Price (EUR),Draw (A)\n\
                      \"a, b\",95.25,12.3456,12.5,-0.3333333333333333\n";
        assert_eq!(render(&Report::new("x").table(table.main())), wanted);
    }

    #[test]
    fn a_cell_of_another_unit_keeps_its_words() {
        let table = Table::new("")
            .columns([
                Column::name("n"),
                Column::number::<Amps>("Draw"),
                Column::figures("Any"),
            ])
            .row([
                Cell::name("a"),
                Cell::measured(Volts(12.5)),
                Cell::measured(Volts(12.5)),
            ])
            .row([Cell::name("b"), Cell::empty(), Cell::count(3)])
            .main();
        assert_eq!(
            render(&Report::new("").table(table)),
            "n,Draw (A),Any,\"Any, unit\"\na,12.5 V,12.5,V\nb,,3,\n"
        );
    }

    #[test]
    fn parts_are_set_apart() {
        let report = Report::new("R")
            .verdict(crate::report::Tone::Good, "Keeps up", "s")
            .facts([("Reserve", Cell::percent(Fraction(0.6)))])
            .heading("H")
            .lines(["-l"])
            .cautions(["c"]);
        let wanted = "R\n\nVerdict,Keeps up,s\n\nReserve,60,%\n\nH\n'-l\n\nCautions\nc\n";
        assert_eq!(render(&report), wanted);
    }
}
