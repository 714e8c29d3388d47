//! A report as one page to hand over: no script, no network, light and dark, screen and paper.

pub mod style;

use super::flow::flowing;
use super::model::{Block, Fact, Item, Report, Verdict};
use super::table::{Align, Cell, Column, ColumnKind, Row, Table, Tone};
use super::text::clean;
use crate::chart::{Chart, svg};
use maud::{DOCTYPE, Markup, PreEscaped, html};

/// The report as a whole HTML document.
#[must_use]
pub fn render(report: &Report) -> String {
    let blocks = blocks(&report.blocks);
    html! {
        (DOCTYPE)
        html lang="en" {
            head {
                meta charset="utf-8";
                meta name="viewport" content="width=device-width, initial-scale=1";
                meta name="color-scheme" content="light dark";
                title { (clean(&report.title, false)) }
                style { (PreEscaped(style::sheet())) }
            }
            body {
                main {
                    header {
                        h1 { (clean(&report.title, false)) }
                        @if let Some(subtitle) = &report.subtitle { p class="dim" { (flow(subtitle)) } }
                        @if report.made_for.is_some() || report.date.is_some() {
                            p class="dim made" {
                                @if let Some(name) = &report.made_for { span { "For " (clean(name, false)) } }
                                @if let Some(date) = &report.date { span { (clean(date, false)) } }
                            }
                        }
                    }
                    (blocks)
                }
            }
        }
    }
    .into_string()
}

/// The blocks in order; charts that follow each other share a box, so that paper can hold them
/// side by side.
fn blocks(blocks: &[Block]) -> Markup {
    let mut number = 0usize;
    let same = |a: &Block, b: &Block| matches!((a, b), (Block::Chart(_), Block::Chart(_)));
    html! {
        @for group in blocks.chunk_by(same) {
            @let class = if group.len() > 1 { "charts several" } else { "charts" };
            @let charts = matches!(group, [Block::Chart(_), ..]);
            @let drawn = group.iter().map(|block| {
                number += 1;
                self::block(block, number)
            });
            @if charts {
                div class=(class) { @for block in drawn { (block) } }
            } @else {
                @for block in drawn { (block) }
            }
        }
    }
}

fn block(block: &Block, number: usize) -> Markup {
    match block {
        Block::Verdicts(verdicts) => html! {
            div class="verdicts" { @for verdict in verdicts { (self::verdict(verdict)) } }
        },
        Block::Heading(level, text) => heading(*level, text),
        Block::Paragraph(text) => html! { p { (flow(text)) } },
        Block::Facts(facts) => self::facts(facts),
        Block::Table(table) => self::table(table, number),
        Block::Chart(chart) => self::chart(chart, number),
        Block::List(items) => html! { ul { @for item in items { (self::item(item)) } } },
        Block::Cautions(cautions) => html! {
            section class="cautions" {
                h2 { "Cautions" }
                ul { @for text in cautions { li { (flow(text)) } } }
            }
        },
        Block::Lines(lines) => html! {
            pre tabindex="0" { @for line in lines { (clean(line, false)) "\n" } }
        },
    }
}

/// Running text: a number and its unit are not parted at a line's end.
fn flow(text: &str) -> String {
    flowing(&clean(text, false))
}

fn heading(level: u8, text: &str) -> Markup {
    let text = clean(text, false);
    match level {
        0 | 1 => html! { h2 { (text) } },
        2 => html! { h3 { (text) } },
        _ => html! { h4 { (text) } },
    }
}

/// Class of a tone.
fn class(tone: Tone) -> Option<&'static str> {
    match tone {
        Tone::Plain => None,
        Tone::Dim => Some("dim"),
        Tone::Good => Some("good"),
        Tone::Warn => Some("warn"),
        Tone::Bad => Some("bad"),
    }
}

fn verdict(verdict: &Verdict) -> Markup {
    html! {
        div class=(format!("verdict {}", class(verdict.tone).unwrap_or_default()).trim_end()) {
            @if let Some(caption) = &verdict.caption { p class="dim" { (clean(caption, false)) } }
            p {
                @if !verdict.lead.is_empty() { strong { (clean(&verdict.lead, false)) ":" } " " }
                (flow(&verdict.sentence))
            }
        }
    }
}

fn facts(facts: &[Fact]) -> Markup {
    html! {
        dl class="facts" {
            @for fact in facts {
                div {
                    dt { (clean(&fact.label, false)) }
                    dd class=[class(fact.value.tone)] { (content(&fact.value)) }
                }
            }
        }
    }
}

/// A cell's text; a number carries its full precision for whoever reads the page by machine.
fn content(cell: &Cell) -> Markup {
    html! {
        @match cell.number {
            Some(number) => { data value=(format!("{number}")) { (flow(&cell.text)) } }
            None => { (flow(&cell.text)) }
        }
    }
}

/// A table in a box of its own that scrolls where the window is narrower.
fn table(table: &Table, number: usize) -> Markup {
    let label = format!("t{number}");
    let titled = !table.title.is_empty();
    html! {
        @if titled { h2 id=(label) { (clean(&table.title, false)) } }
        div class="scroll" tabindex="0" role="region" aria-labelledby=[titled.then_some(&label)]
            aria-label=[(!titled).then_some("Table")] {
            table {
                thead { tr {
                    @for column in &table.columns {
                        th scope="col" class=(column_class(column)) {
                            (clean(&column.name, false))
                            @if let Some(unit) = column.unit.as_ref().filter(|_| column.unit_in_heading) {
                                " " span class="unit" { (clean(unit, false)) }
                            }
                            @if column.kind == ColumnKind::Bar { span class="unseen" { "as a bar" } }
                        }
                    }
                } }
                tbody { @for row in &table.rows { (self::row(table, row)) } }
            }
        }
        @if let Some(note) = &table.note { p class="dim note" { (flow(note)) } }
    }
}

fn column_class(column: &Column) -> &'static str {
    match (column.kind, column.align()) {
        (ColumnKind::Name, _) => "name",
        (ColumnKind::Bar, _) => "bar",
        (_, Align::Left) => "text",
        (_, Align::Right) => "number",
    }
}

fn row(table: &Table, row: &Row) -> Markup {
    html! {
        tr class=[row.total.then_some("total")] {
            @for (column, cell) in table.columns.iter().zip(&row.cells) {
                @let class = format!("{} {}", column_class(column), class(cell.tone).unwrap_or_default());
                @if column.kind == ColumnKind::Name {
                    th scope="row" class=(class.trim_end()) { (content(cell)) }
                } @else if let Some(length) = cell.bar {
                    td class="bar" aria-hidden="true" {
                        span style=(format!("width:{:.1}%", length * 100.0)) {}
                    }
                } @else {
                    td class=(class.trim_end()) { (content(cell)) }
                }
            }
        }
    }
}

/// A chart, drawn for wide and for narrow windows; the style sheet shows one.
fn chart(chart: &Chart, number: usize) -> Markup {
    html! {
        figure {
            h2 { (clean(&chart.title, false)) }
            div class="wide" { (svg::draw(chart, svg::WIDE, &format!("w{number}"))) }
            div class="narrow" { (svg::draw(chart, svg::NARROW, &format!("n{number}"))) }
            @if let Some(note) = &chart.note { figcaption { (clean(note, false)) } }
        }
    }
}

fn item(item: &Item) -> Markup {
    html! {
        li {
            @if let Some(lead) = &item.lead {
                strong class=[class(item.tone)] { (clean(lead, false)) ":" } " "
            }
            (flow(&item.text))
            @if let Some(code) = &item.code { " " code { (clean(code, false)) } }
            @if let Some(source) = &item.source { " " span class="dim" { "(" (clean(source, false)) ")" } }
        }
    }
}

/// One chart as an SVG picture of its own, with the page's colours.
#[must_use]
pub fn picture(chart: &crate::chart::Chart) -> String {
    let drawn = svg::draw(chart, svg::WIDE, "chart").into_string();
    let style = format!("<style>{}</style>", style::sheet());
    // The style goes inside the picture, after its opening tag.
    match drawn.find('>') {
        Some(end) => format!("{}{style}{}\n", &drawn[..=end], &drawn[end + 1..]),
        None => drawn,
    }
}
