//! A report as Markdown (tables as in the common extension), all text escaped.

use super::model::{Block, Item, Report};
use super::table::{Align, Cell, Column, ColumnKind, Row, Table};
use super::text::clean;
use crate::chart::terminal;

/// The report as Markdown, ending with a line feed.
#[must_use]
pub fn render(report: &Report) -> String {
    let mut parts = Vec::new();
    if !report.title.is_empty() {
        parts.push(format!("# {}", escape(&report.title)));
    }
    parts.extend(report.subtitle.as_ref().map(|text| escape_line(text)));
    let made = report
        .made_for
        .as_ref()
        .map(|name| format!("For {}", escape(name)));
    let made: Vec<String> = made
        .into_iter()
        .chain(report.date.as_ref().map(|d| escape(d)))
        .collect();
    if !made.is_empty() {
        parts.push(made.join(", "));
    }
    parts.extend(report.blocks.iter().map(block));
    parts.retain(|part| !part.is_empty());
    parts.join("\n\n") + "\n"
}

fn block(block: &Block) -> String {
    match block {
        Block::Verdicts(verdicts) => joined(
            verdicts.iter().map(|verdict| {
                let caption = verdict.caption.as_ref().map(|c| format!("{}: ", escape(c)));
                let caption = caption.unwrap_or_default();
                format!(
                    "> **{caption}{}:** {}",
                    escape(&verdict.lead),
                    escape(&verdict.sentence)
                )
            }),
            "\n>\n",
        ),
        Block::Heading(level, text) => {
            format!(
                "{} {}",
                "#".repeat(usize::from(*level).clamp(1, 5) + 1),
                escape(text)
            )
        }
        Block::Paragraph(text) => escape_line(text),
        Block::Facts(facts) => joined(
            facts
                .iter()
                .map(|f| format!("- {}: **{}**", escape(&f.label), escape(&f.value.text))),
            "\n",
        ),
        Block::Table(table) => self::table(table),
        Block::Chart(chart) => {
            let drawn = terminal::draw(
                chart,
                terminal::Style {
                    width: 78,
                    ascii: false,
                },
            );
            let drawn: Vec<String> = drawn.iter().map(|l| clean(l, false)).collect();
            let note = chart
                .note
                .as_ref()
                .map(|n| format!("\n\n{}", escape(n)))
                .unwrap_or_default();
            format!("### {}\n\n{}{note}", escape(&chart.title), fenced(&drawn))
        }
        Block::List(items) => joined(items.iter().map(item), "\n"),
        Block::Cautions(cautions) => {
            let lines = cautions.iter().map(|c| format!("- {}", escape_line(c)));
            format!("## Cautions\n\n{}", joined(lines, "\n"))
        }
        Block::Lines(lines) => fenced(lines),
    }
}

fn joined(parts: impl Iterator<Item = String>, between: &str) -> String {
    parts.collect::<Vec<_>>().join(between)
}

fn item(item: &Item) -> String {
    let lead = item
        .lead
        .as_ref()
        .map(|lead| format!("**{}**: ", escape(lead)))
        .unwrap_or_default();
    let code = item
        .code
        .as_ref()
        .map(|code| format!(" {}", code_span(code)))
        .unwrap_or_default();
    let source = item
        .source
        .as_ref()
        .map(|s| format!(" ({})", escape(s)))
        .unwrap_or_default();
    let text = if lead.is_empty() {
        escape_line(&item.text)
    } else {
        escape(&item.text)
    };
    format!("- {lead}{text}{code}{source}")
}

fn table(table: &Table) -> String {
    let shown: Vec<usize> = (0..table.columns.len())
        .filter(|i| table.columns[*i].kind != ColumnKind::Bar)
        .collect();
    let mut lines = Vec::new();
    if !table.title.is_empty() {
        lines.push(format!("## {}\n", escape(&table.title)));
    }
    let columns: Vec<&Column> = shown.iter().map(|i| &table.columns[*i]).collect();
    lines.push(line(columns.iter().map(|column| heading(column))));
    lines.push(line(columns.iter().map(|column| match column.align() {
        Align::Left => "---".to_owned(),
        Align::Right => "---:".to_owned(),
    })));
    lines.extend(
        table
            .rows
            .iter()
            .map(|row| line(shown.iter().map(|i| cell(row, *i)))),
    );
    if let Some(note) = &table.note {
        lines.push(format!("\n{}", escape(note)));
    }
    lines.join("\n")
}

fn heading(column: &Column) -> String {
    let unit = column.unit.as_ref().filter(|_| column.unit_in_heading);
    let unit = unit
        .map(|unit| format!(", {}", escape(unit)))
        .unwrap_or_default();
    format!("{}{unit}", escape(&column.name))
}

fn cell(row: &Row, index: usize) -> String {
    let text = row
        .cells
        .get(index)
        .map(|cell: &Cell| escape(&cell.text))
        .unwrap_or_default();
    if row.total && !text.is_empty() {
        format!("**{text}**")
    } else {
        text
    }
}

fn line(cells: impl Iterator<Item = String>) -> String {
    format!("| {} |", joined(cells, " | "))
}

/// Lines kept as they are, in a fence longer than any run of backticks in them.
fn fenced(lines: &[String]) -> String {
    let longest = lines.iter().map(|l| longest_run(l)).max().unwrap_or(0);
    let fence = "`".repeat(longest.max(2) + 1);
    let lines: Vec<String> = lines.iter().map(|l| clean(l, false)).collect();
    format!("{fence}text\n{}\n{fence}", lines.join("\n"))
}

fn code_span(code: &str) -> String {
    let fence = "`".repeat(longest_run(code) + 1);
    let pad = if code.starts_with('`') || code.ends_with('`') {
        " "
    } else {
        ""
    };
    format!("{fence}{pad}{}{pad}{fence}", clean(code, false))
}

/// Length of the longest run of backticks.
fn longest_run(text: &str) -> usize {
    text.split(|c| c != '`').map(str::len).max().unwrap_or(0)
}

/// A text that shows as it is: no markup of Markdown or HTML comes through.
#[must_use]
pub fn escape(text: &str) -> String {
    let mut escaped = String::with_capacity(text.len());
    for character in clean(text, false).chars() {
        match character {
            '<' => escaped.push_str("&lt;"),
            '>' => escaped.push_str("&gt;"),
            '&' => escaped.push_str("&amp;"),
            '\\' | '`' | '*' | '_' | '[' | ']' | '|' | '~' | '$' => {
                escaped.push('\\');
                escaped.push(character);
            }
            other => escaped.push(other),
        }
    }
    escaped
}

/// The same at the beginning of a line, where `-`, `#` or `1.` would begin a list or a heading.
fn escape_line(text: &str) -> String {
    let text = escape(text.trim_start());
    let digits = text.bytes().take_while(u8::is_ascii_digit).count();
    let after = text[digits..].chars().next();
    match after {
        Some('#' | '+' | '-' | '=' | '!') if digits == 0 => format!("\\{text}"),
        Some('.' | ')') if digits > 0 => format!("{}\\{}", &text[..digits], &text[digits..]),
        _ => text,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::Amps;
    use crate::report::Tone;

    #[test]
    fn what_would_begin_a_list_or_heading_does_not() {
        for (text, wanted) in [
            ("- x", "\\- x"),
            ("# x", "\\# x"),
            ("12. x", "12\\. x"),
            ("12 x", "12 x"),
            ("a - x", "a - x"),
        ] {
            assert_eq!(escape_line(text), wanted);
        }
    }

    #[test]
    fn code_holds_its_backticks() {
        assert_eq!(code_span("a`b"), "``a`b``");
        assert_eq!(code_span("`a"), "`` `a ``");
        let report = Report::new("").lines(["a", "```", "b"]);
        assert_eq!(render(&report), "````text\na\n```\nb\n````\n");
    }

    #[test]
    fn a_table_says_its_sides_units_and_sums() {
        let table = Table::new("T")
            .columns([
                Column::name("State"),
                Column::number::<Amps>("Draw"),
                Column::bar(),
            ])
            .row([Cell::name("idle"), Cell::signed(Amps(-1.5), 1)])
            .total([Cell::name("All"), Cell::fixed(Amps(2.0), 1)])
            .note("n");
        let wanted = "## T\n\n| State | Draw, A |\n| --- | ---: |\n| idle | −1.5 |\n\
                      | **All** | **2.0** |\n\nn\n";
        assert_eq!(render(&Report::new("").table(table)), wanted);
    }

    #[test]
    fn verdict_items_and_cautions() {
        let report = Report::new("a*b")
            .verdict(Tone::Bad, "Falls short", "lacks 3 Ah")
            .list(
                "Changes",
                [Item::new("more")
                    .lead(Tone::Plain, "Note")
                    .code("--set 'a=b'")
                    .source("s")],
            )
            .cautions(["c"]);
        let wanted = "# a\\*b\n\n> **Falls short:** lacks 3 Ah\n\n## Changes\n\n\
                      - **Note**: more `--set 'a=b'` (s)\n\n## Cautions\n\n- c\n";
        assert_eq!(render(&report), wanted);
    }
}
