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
        let shown: Vec<usize> = (0..table.columns.len())
            .filter(|i| table.columns[*i].kind != ColumnKind::Bar)
            .collect();
        let header = shown
            .iter()
            .map(|i| harmless(&table.columns[*i].full_name()))
            .collect();
        let rows = table.rows.iter().map(|row| {
            let cell = |i: &usize| {
                row.cells
                    .get(*i)
                    .map(|cell| field(cell, &table.columns[*i]))
            };
            shown.iter().map(|i| cell(i).unwrap_or_default()).collect()
        });
        self.records(std::iter::once(header).chain(rows));
    }

    fn finish(self) -> String {
        String::from_utf8_lossy(&self.bytes).into_owned()
    }
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
