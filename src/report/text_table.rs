//! Tables as text: number columns keep their width, words wrap, and a table that is too wide for
//! the page is cut into tables one above the other, each with the names of its rows.

use super::flow::{TIE, flowing};
use super::table::{Align, Cell, Column, ColumnKind, Row, Table, Tone};
use super::text::{Style, clean};
use crate::chart::terminal;
use comfy_table::{
    Cell as Painted, CellAlignment, Color, ColumnConstraint, ContentArrangement, LineStyle,
    TableStyle, Width,
};
use unicode_width::UnicodeWidthStr;

/// Columns between two columns.
const GAP: usize = 2;
/// Least width of a bar; it is left out where there is less.
const LEAST_BAR: usize = 6;
/// Greatest width of a bar.
const MOST_BAR: usize = 24;
/// Names do not wrap below this width to make room for a bar.
const NAMES_BESIDE_BAR: usize = 20;
/// Words wrap down to this width.
const LEAST_WORDS: usize = 12;

/// How a column of text is laid out.
#[derive(Clone, Copy, Debug)]
pub(super) struct Layout {
    align: Align,
    shrinks: bool,
}

impl Layout {
    /// As wide as its content.
    pub(super) fn fixed(align: Align) -> Layout {
        Layout {
            align,
            shrinks: false,
        }
    }
    /// As wide as its content or as there is room.
    pub(super) fn shrinking(align: Align) -> Layout {
        Layout {
            align,
            shrinks: true,
        }
    }
}

/// A column that is to be written: its index, its least and its natural width.
#[derive(Clone, Copy, Debug)]
struct Span {
    index: usize,
    least: usize,
    natural: usize,
}

/// The lines of a table.
pub(super) fn render(table: &Table, style: &Style) -> Vec<String> {
    let mut lines = Vec::new();
    for part in parts(table, style) {
        if !lines.is_empty() {
            lines.push(String::new());
        }
        lines.extend(render_part(table, &part, style));
    }
    lines
}

/// The columns of each part: all where they fit, else as many as fit beside the rows' names.
fn parts(table: &Table, style: &Style) -> Vec<Vec<Span>> {
    let spans: Vec<Span> = (0..table.columns.len())
        .filter(|i| table.columns[*i].kind != ColumnKind::Bar)
        .map(|i| span(table, i, style))
        .collect();
    let leads = usize::from(
        table
            .columns
            .first()
            .is_some_and(|c| c.kind == ColumnKind::Name),
    );
    let (names, others) = spans.split_at(leads.min(spans.len()));
    let width = |part: &[Span]| {
        part.iter()
            .map(|s| s.least + GAP)
            .sum::<usize>()
            .saturating_sub(GAP)
    };
    let mut parts = vec![names.to_vec()];
    for other in others {
        let last = parts.len() - 1;
        let with: Vec<Span> = parts[last].iter().copied().chain([*other]).collect();
        if width(&with) <= style.width || parts[last].len() <= names.len() {
            parts[last] = with;
        } else {
            parts.push(names.iter().copied().chain([*other]).collect());
        }
    }
    parts
}

/// Least and natural width of a column.
fn span(table: &Table, index: usize, style: &Style) -> Span {
    let column = &table.columns[index];
    let cells = table.rows.iter().filter_map(|row| row.cells.get(index));
    let content = cells
        .map(|cell| length(&clean(&cell.text, style.ascii)))
        .max()
        .unwrap_or(0);
    let heading = heading(column, style);
    let words = heading
        .split_whitespace()
        .map(length)
        .max()
        .unwrap_or(0)
        .max(unit_length(column));
    let natural = content.max(length(&heading)).max(unit_length(column));
    let least = match column.kind {
        ColumnKind::Number | ColumnKind::Bar => content.max(words),
        ColumnKind::Name | ColumnKind::Text => natural.min(LEAST_WORDS.max(words)),
    };
    Span {
        index,
        least,
        natural,
    }
}

fn heading(column: &Column, style: &Style) -> String {
    clean(&column.name, style.ascii)
}

fn unit_length(column: &Column) -> usize {
    column
        .unit
        .as_ref()
        .filter(|_| column.unit_in_heading)
        .map_or(0, |u| length(u))
}

fn length(text: &str) -> usize {
    text.width()
}

/// Gives each column its width: natural where all fit, else the widest shrinks first.
fn widths(part: &[Span], room: usize) -> Vec<usize> {
    let mut widths: Vec<usize> = part.iter().map(|s| s.natural).collect();
    let gaps = GAP * part.len().saturating_sub(1);
    while widths.iter().sum::<usize>() + gaps > room {
        let widest = (0..part.len())
            .filter(|i| widths[*i] > part[*i].least)
            .max_by_key(|i| {
                (
                    widths[*i] - part[*i].least.min(widths[*i]),
                    std::cmp::Reverse(*i),
                )
            });
        match widest {
            Some(index) => widths[index] -= 1,
            None => break,
        }
    }
    widths
}

/// One part: heading, rule, rows.
fn render_part(table: &Table, part: &[Span], style: &Style) -> Vec<String> {
    let mut columns: Vec<usize> = part.iter().map(|s| s.index).collect();
    let with_bar = bar_beside(table, part, style.width);
    let mut widths = match &with_bar {
        Some((_, widths)) => widths.clone(),
        None => widths(part, style.width),
    };
    let used: usize = widths.iter().sum::<usize>() + GAP * part.len();
    let bar_width = style.width.saturating_sub(used).min(MOST_BAR);
    if let Some((index, _)) = with_bar {
        columns.push(index);
        widths.push(bar_width);
    }
    let headed = table.columns.iter().any(|c| !c.name.is_empty());
    let header = headed.then(|| header(table, &columns, &widths, style));
    let mut rows: Vec<Vec<(String, Tone)>> = Vec::new();
    for (number, row) in table.rows.iter().enumerate() {
        if row.total && number > 0 && !table.rows[number - 1].total {
            rows.push(rule(table, row, &columns, &widths, style));
        }
        rows.push(
            columns
                .iter()
                .zip(&widths)
                .map(|(i, width)| painted(table, row, *i, *width, style))
                .collect(),
        );
    }
    let aligns: Vec<Align> = columns.iter().map(|i| table.columns[*i].align()).collect();
    draw(&aligns, &widths, header, rows, style)
}

/// The column of bars and the widths of the others beside it, where there is room for bars without
/// names in less than [`NAMES_BESIDE_BAR`].
fn bar_beside(table: &Table, part: &[Span], room: usize) -> Option<(usize, Vec<usize>)> {
    let bar = table
        .columns
        .iter()
        .position(|c| c.kind == ColumnKind::Bar)?;
    let roomy: Vec<Span> = part
        .iter()
        .map(|s| match table.columns[s.index].kind {
            ColumnKind::Number => *s,
            _ => Span {
                least: s.least.max(s.natural.min(NAMES_BESIDE_BAR)),
                ..*s
            },
        })
        .collect();
    let room = room.checked_sub(LEAST_BAR + GAP)?;
    let widths = widths(&roomy, room);
    let used = widths.iter().sum::<usize>() + GAP * part.len().saturating_sub(1);
    (used <= room && part.len() + 1 == table.columns.len()).then_some((bar, widths))
}

fn painted(table: &Table, row: &Row, index: usize, width: usize, style: &Style) -> (String, Tone) {
    let Some(cell) = row.cells.get(index) else {
        return (String::new(), Tone::Plain);
    };
    if table.columns[index].kind == ColumnKind::Bar {
        let strip = cell
            .bar
            .map(|b| terminal::strip(b, width, style.ascii))
            .unwrap_or_default();
        return (strip, cell.tone);
    }
    (at_hyphens(shown(cell, style), width), cell.tone)
}

/// A text whose longest words are broken after a hyphen: ids wrap where they may be read on.
fn at_hyphens(text: String, width: usize) -> String {
    if length(&text) <= width {
        return text;
    }
    let broken = |word: &str| -> String {
        let mut lines = vec![String::new()];
        for piece in word.split_inclusive('-') {
            match lines.last_mut() {
                Some(line) if length(line) + length(piece) <= width => line.push_str(piece),
                _ => lines.push(piece.to_owned()),
            }
        }
        lines.retain(|line| !line.is_empty());
        lines.join("\n")
    };
    let words = text.split(' ').map(|word| match length(word) > width {
        true => broken(word),
        false => word.to_owned(),
    });
    words.collect::<Vec<_>>().join(" ")
}

fn shown(cell: &Cell, style: &Style) -> String {
    clean(&cell.text, style.ascii)
}

/// A short rule above each sum.
fn rule(
    table: &Table,
    row: &Row,
    columns: &[usize],
    widths: &[usize],
    style: &Style,
) -> Vec<(String, Tone)> {
    let sign = if style.ascii { "-" } else { "─" };
    let filled = |index: &usize| {
        table.columns[*index].kind == ColumnKind::Number
            && row
                .cells
                .get(*index)
                .is_some_and(|cell| !cell.text.is_empty())
    };
    columns
        .iter()
        .zip(widths)
        .map(|(index, width)| {
            (
                if filled(index) {
                    sign.repeat(*width)
                } else {
                    String::new()
                },
                Tone::Dim,
            )
        })
        .collect()
}

/// Headings, set low so that their last words stand on one line, the units below them.
fn header(table: &Table, columns: &[usize], widths: &[usize], style: &Style) -> Vec<String> {
    let wrapped: Vec<Vec<String>> = columns
        .iter()
        .zip(widths)
        .map(|(index, width)| wrap(&heading(&table.columns[*index], style), *width))
        .collect();
    let height = wrapped.iter().map(Vec::len).max().unwrap_or(0);
    let units = columns.iter().any(|i| unit_length(&table.columns[*i]) > 0);
    columns
        .iter()
        .zip(wrapped)
        .map(|(index, lines)| {
            let column = &table.columns[*index];
            let mut all = vec![String::new(); height - lines.len()];
            all.extend(lines);
            if units {
                let unit = column.unit.as_deref().filter(|_| column.unit_in_heading);
                all.push(clean(unit.unwrap_or_default(), style.ascii));
            }
            all.join("\n")
        })
        .collect()
}

/// Lays out rows without a heading: shrinking columns give way.
pub(super) fn lay_out(
    columns: &[Layout],
    rows: Vec<Vec<(String, Tone)>>,
    style: &Style,
) -> Vec<String> {
    let rows: Vec<Vec<(String, Tone)>> = rows
        .into_iter()
        .map(|row| {
            row.into_iter()
                .map(|(text, tone)| (clean(&text, style.ascii), tone))
                .collect()
        })
        .collect();
    let spans: Vec<Span> = columns
        .iter()
        .enumerate()
        .map(|(index, layout)| {
            let natural = rows
                .iter()
                .filter_map(|r| r.get(index))
                .map(|(t, _)| length(t))
                .max();
            let natural = natural.unwrap_or(0);
            let least = if layout.shrinks {
                natural.min(LEAST_WORDS)
            } else {
                natural
            };
            Span {
                index,
                least,
                natural,
            }
        })
        .collect();
    let aligns: Vec<Align> = columns.iter().map(|c| c.align).collect();
    draw(&aligns, &widths(&spans, style.width), None, rows, style)
}

/// Words in lines of at most this width; a word that is longer is cut.
pub(super) fn wrap(text: &str, width: usize) -> Vec<String> {
    let words = text.split_whitespace().collect::<Vec<_>>().join(" ");
    if words.is_empty() {
        return Vec::new();
    }
    if length(&words) <= width {
        return vec![words];
    }
    let style = Style {
        width,
        ..Style::default()
    };
    let tied = flowing(&words);
    let lines = draw(
        &[Align::Left],
        &[width],
        None,
        vec![vec![(tied, Tone::Plain)]],
        &style,
    );
    lines
        .into_iter()
        .map(|line| line.replace(TIE, " "))
        .collect()
}

/// Hands a table with settled widths to the painter.
fn draw(
    aligns: &[Align],
    widths: &[usize],
    header: Option<Vec<String>>,
    rows: Vec<Vec<(String, Tone)>>,
    style: &Style,
) -> Vec<String> {
    let rule = if style.ascii { '-' } else { '─' };
    let line = LineStyle::none().fill(rule);
    let mut table = comfy_table::Table::new();
    table.load_style(TableStyle::new().header_separator(line));
    table.set_content_arrangement(ContentArrangement::Disabled);
    if style.colour {
        table.enforce_styling();
        table.style_text_only();
    } else {
        table.force_no_tty();
    }
    if let Some(header) = header {
        table.set_header(header);
    }
    for row in rows {
        table.add_row(row.into_iter().map(|(text, tone)| paint(text, tone)));
    }
    let last = widths.len().saturating_sub(1);
    for (index, (align, width)) in aligns.iter().zip(widths).enumerate() {
        let Some(column) = table.column_mut(index) else {
            continue;
        };
        let gap = if index == last { 0 } else { GAP };
        let width = u16::try_from((*width).max(1) + gap).unwrap_or(u16::MAX);
        column.set_padding((0, u16::try_from(gap).unwrap_or(0)));
        column.set_constraint(ColumnConstraint::Absolute(Width::Fixed(width)));
        column.set_cell_alignment(match align {
            Align::Left => CellAlignment::Left,
            Align::Right => CellAlignment::Right,
        });
    }
    table
        .lines()
        .map(|line| line.trim_end().to_owned())
        .collect()
}

fn paint(text: String, tone: Tone) -> Painted {
    let bare = text.is_empty();
    let cell = Painted::new_owned(text);
    match tone {
        _ if bare => cell,
        Tone::Plain => cell,
        Tone::Dim => cell.fg(Color::DarkGrey),
        Tone::Good => cell.fg(Color::DarkGreen),
        Tone::Warn => cell.fg(Color::DarkYellow),
        Tone::Bad => cell.fg(Color::DarkRed),
    }
}

#[cfg(test)]
mod tests;
