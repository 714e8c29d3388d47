//! Charts in plain characters, for a terminal and for Markdown.

use super::scale::Scale;
use super::{Bars, Body, Chart, Layer, Plane, Role, Shape};

/// How a chart is drawn in characters.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Style {
    /// Columns at most.
    pub width: usize,
    /// Only characters of ASCII.
    pub ascii: bool,
}

/// Rows of the plotted area.
const ROWS: usize = 12;

/// Draws a chart: its lines, without blanks at their ends.
#[must_use]
pub fn draw(chart: &Chart, style: Style) -> Vec<String> {
    let lines = match &chart.body {
        Body::Plane(plane) => draw_plane(plane, style),
        Body::Bars(bars) => draw_bars(bars, style),
    };
    lines
        .into_iter()
        .map(|line| {
            // Spelling a sign in ASCII may lengthen a line.
            let line = crate::report::text::clean(line.trim_end(), style.ascii);
            let line: String = line.chars().take(style.width).collect();
            line.trim_end().to_owned()
        })
        .collect()
}

/// The character of a role: in an area its filling, in a line the line.
fn glyph(role: Role, ascii: bool) -> char {
    let (full, plain) = match role {
        Role::Supply => ('━', '='),
        Role::Draw => ('·', '.'),
        Role::Pays => ('/', '/'),
        Role::Band => (':', ':'),
        Role::Charge => ('•', '*'),
        Role::Limit => ('╌', '-'),
        Role::Other => ('+', '+'),
    };
    if ascii { plain } else { full }
}

/// Characters in rows and columns.
struct Canvas {
    rows: Vec<Vec<char>>,
    x: Scale,
    y: Scale,
}

impl Canvas {
    fn put(&mut self, column: usize, row: f64, character: char) {
        if let Some(cell) = index(row).and_then(|r| self.rows.get_mut(r)?.get_mut(column)) {
            *cell = character;
        }
    }
    fn columns(&self) -> usize {
        self.rows.first().map_or(0, Vec::len)
    }
    /// The number at a column's middle.
    fn at(&self, column: usize) -> f64 {
        self.x.number(column as f64)
    }
    /// A layer, column by column.
    fn layer(&mut self, layer: &Layer, ascii: bool) {
        let character = glyph(layer.role, ascii);
        let mut before: Option<f64> = None;
        for column in 0..self.columns() {
            let x = self.at(column);
            match &layer.shape {
                Shape::Area(pieces) => {
                    if let Some((low, high)) = area_at(pieces, x) {
                        let (bottom, top) = (self.y.place(low).round(), self.y.place(high).round());
                        let mut row = top;
                        while row < bottom || (row - top).abs() < 0.5 {
                            self.put(column, row, character);
                            row += 1.0;
                        }
                    }
                }
                Shape::Line(pieces) => {
                    let row = line_at(pieces, x).map(|y| self.y.place(y).round());
                    if let (Some(old), Some(new)) = (before, row) {
                        let (top, bottom) = (old.min(new), old.max(new));
                        let mut between = top + 1.0;
                        while between < bottom {
                            self.put(column, between, if ascii { '|' } else { '│' });
                            between += 1.0;
                        }
                    }
                    if let Some(row) = row {
                        self.put(column, row, character);
                    }
                    before = row;
                }
            }
        }
    }
    fn column_of(&self, x: f64) -> Option<usize> {
        index(self.x.place(x).round()).filter(|c| *c < self.columns())
    }
}

/// A place as an index; none below zero or without a number.
fn index(place: f64) -> Option<usize> {
    (place.is_finite() && (0.0..1e6).contains(&place)).then_some(place as usize)
}

/// Lower and upper line of an area at an x.
fn area_at(pieces: &[Vec<(f64, f64, f64)>], x: f64) -> Option<(f64, f64)> {
    let piece = pieces
        .iter()
        .find(|p| p.first().is_some_and(|f| f.0 <= x) && p.last().is_some_and(|l| x <= l.0))?;
    let low: Vec<(f64, f64)> = piece.iter().map(|(x, low, _)| (*x, *low)).collect();
    let high: Vec<(f64, f64)> = piece.iter().map(|(x, _, high)| (*x, *high)).collect();
    Some((height_at(&low, x)?, height_at(&high, x)?))
}

/// Height of a line at an x.
fn line_at(pieces: &[Vec<(f64, f64)>], x: f64) -> Option<f64> {
    pieces.iter().find_map(|piece| height_at(piece, x))
}

/// Height of a piece of a line at an x: on the straight between its neighbours.
fn height_at(points: &[(f64, f64)], x: f64) -> Option<f64> {
    if let [(only, y)] = points {
        return (*only == x).then_some(*y);
    }
    let pair = points
        .windows(2)
        .find(|pair| pair[0].0 <= x && x <= pair[1].0)?;
    let ((x0, y0), (x1, y1)) = (pair[0], pair[1]);
    Some(if x1 > x0 {
        y0 + (y1 - y0) * (x - x0) / (x1 - x0)
    } else {
        y1
    })
}

fn draw_plane(plane: &Plane, style: Style) -> Vec<String> {
    let gutter = 8;
    let columns = style.width.saturating_sub(gutter + 1).clamp(16, 100);
    let mut canvas = Canvas {
        rows: vec![vec![' '; columns]; ROWS],
        x: Scale::new(
            &plane.x,
            0.0,
            (columns - 1) as f64,
            (columns / 9).clamp(2, 9),
            false,
        ),
        y: Scale::new(&plane.y, (ROWS - 1) as f64, 0.0, 5, true),
    };
    for reference in &plane.references {
        for column in 0..columns {
            if !reference.upright {
                let row = canvas.y.place(reference.at).round();
                canvas.put(column, row, glyph(reference.role, style.ascii));
            }
        }
        if let Some(column) = canvas.column_of(reference.at).filter(|_| reference.upright) {
            (0..ROWS).for_each(|row| {
                canvas.put(column, row as f64, if style.ascii { '|' } else { '┆' })
            });
        }
    }
    plane
        .layers
        .iter()
        .for_each(|layer| canvas.layer(layer, style.ascii));
    for mark in &plane.marks {
        if let Some(column) = canvas.column_of(mark.x) {
            let row = canvas.y.place(mark.y).round();
            canvas.put(column, row, if style.ascii { 'o' } else { '●' });
        }
    }
    let mut lines: Vec<String> = span_names(plane, &canvas, gutter).into_iter().collect();
    lines.extend(body(&canvas, gutter, style.ascii));
    lines.extend(legend(plane, style));
    lines
}

/// The names of the spans above the chart, each where it has room.
fn span_names(plane: &Plane, canvas: &Canvas, gutter: usize) -> Option<String> {
    let mut line = vec![' '; gutter + canvas.columns() + 1];
    let mut any = false;
    for span in &plane.spans {
        let (Some(from), Some(to)) = (canvas.column_of(span.from), canvas.column_of(span.to))
        else {
            continue;
        };
        let name: Vec<char> = span.label.chars().collect();
        if name.len() < to - from {
            let start = gutter + 1 + from + (to - from - name.len()) / 2;
            for (offset, character) in name.into_iter().enumerate() {
                if let Some(cell) = line.get_mut(start + offset) {
                    *cell = character;
                    any = true;
                }
            }
        }
    }
    any.then(|| line.into_iter().collect())
}

/// Rows with the ticks of the y axis, then the x axis with its ticks.
fn body(canvas: &Canvas, gutter: usize, ascii: bool) -> Vec<String> {
    let (wall, corner, floor, tick) = if ascii {
        ('|', '+', '-', '+')
    } else {
        ('│', '└', '─', '┬')
    };
    let mut lines = Vec::new();
    for (row, characters) in canvas.rows.iter().enumerate() {
        let text = canvas
            .y
            .ticks
            .iter()
            .find(|(at, _)| index(canvas.y.place(*at).round()) == Some(row))
            .map_or("", |(_, text)| text);
        let cells: String = characters.iter().collect();
        lines.push(format!("{text:>width$}{wall}{cells}", width = gutter));
    }
    let mut axis = vec![floor; canvas.columns()];
    let mut texts = vec![' '; gutter + canvas.columns() + 1];
    for (at, text) in &canvas.x.ticks {
        let Some(column) = canvas.column_of(*at) else {
            continue;
        };
        axis[column] = tick;
        let length = text.chars().count();
        let start = (gutter + 1 + column)
            .saturating_sub(length / 2)
            .min(texts.len() - length.min(texts.len()));
        for (offset, character) in text.chars().enumerate() {
            if let Some(cell) = texts.get_mut(start + offset) {
                *cell = character;
            }
        }
    }
    lines.push(format!(
        "{:gutter$}{corner}{}",
        "",
        axis.into_iter().collect::<String>()
    ));
    lines.push(texts.into_iter().collect());
    lines
}

/// What each character stands for, wrapped to the width.
fn legend(plane: &Plane, style: Style) -> Vec<String> {
    let layers = plane
        .layers
        .iter()
        .filter(|l| !l.label.is_empty() && !is_empty(&l.shape))
        .map(|l| format!("{} {}", glyph(l.role, style.ascii), l.label));
    let lines = plane
        .references
        .iter()
        .filter(|r| !r.label.is_empty())
        .map(|r| {
            let upright = if style.ascii { '|' } else { '┆' };
            let sign = if r.upright {
                upright
            } else {
                glyph(r.role, style.ascii)
            };
            format!("{sign} {}", r.label)
        });
    let marks = plane
        .marks
        .iter()
        .filter(|m| !m.label.is_empty())
        .map(|m| format!("{} {}", if style.ascii { 'o' } else { '●' }, m.label));
    let mut wrapped: Vec<String> = Vec::new();
    for entry in layers.chain(lines).chain(marks) {
        let room = style.width.max(20);
        match wrapped.last_mut() {
            Some(line) if line.chars().count() + 3 + entry.chars().count() <= room => {
                line.push_str("   ");
                line.push_str(&entry);
            }
            _ => wrapped.push(format!("  {entry}")),
        }
    }
    wrapped
}

fn is_empty(shape: &Shape) -> bool {
    match shape {
        Shape::Line(pieces) => pieces.is_empty(),
        Shape::Area(pieces) => pieces.is_empty(),
    }
}

/// Bars: name, bar, value.
fn draw_bars(bars: &Bars, style: Style) -> Vec<String> {
    let longest =
        |texts: &mut dyn Iterator<Item = &str>| texts.map(|t| t.chars().count()).max().unwrap_or(0);
    let names = longest(&mut bars.bars.iter().map(|b| b.label.as_str())).min(style.width / 3);
    let values = longest(&mut bars.bars.iter().map(|b| b.value.as_str()));
    let room = style.width.saturating_sub(names + values + 4).clamp(4, 60);
    bars.bars
        .iter()
        .map(|bar| {
            let name: String = bar.label.chars().take(names).collect();
            format!(
                "{name:<names$}  {} {}",
                strip(bar.length, room, style.ascii),
                bar.value
            )
        })
        .collect()
}

/// A bar in eighths of a character (whole characters in ASCII); at least a sliver where it is not nothing.
#[must_use]
pub fn strip(length: f64, room: usize, ascii: bool) -> String {
    const EIGHTHS: [&str; 8] = ["", "▏", "▎", "▍", "▌", "▋", "▊", "▉"];
    let eighths = (length.clamp(0.0, 1.0) * room as f64 * 8.0).round();
    let eighths = index(eighths).unwrap_or(0).max(usize::from(length > 0.0));
    if ascii {
        return "#".repeat((eighths + 4) / 8);
    }
    format!("{}{}", "█".repeat(eighths / 8), EIGHTHS[eighths % 8])
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::chart::Plot;
    use crate::quantity::{Amps, Hours};

    #[test]
    fn a_strip_is_as_long_as_its_share() {
        assert_eq!(strip(1.0, 4, false), "████");
        assert_eq!(strip(0.5, 4, false), "██");
        assert_eq!(strip(0.28, 4, false), "█▏");
        assert_eq!(strip(1e-9, 4, false), "▏");
        assert_eq!(strip(0.0, 4, false), "");
        assert_eq!(strip(0.5, 4, true), "##");
    }

    fn chart() -> Chart {
        let steps =
            [(0.0, 1.0, 8.0), (1.0, 2.0, 2.0)].map(|(a, b, y)| (Hours(a), Hours(b), Amps(y)));
        Plot::<Hours, Amps>::new("t")
            .step_area(
                "drawn",
                Role::Draw,
                [(Hours(0.0), Hours(2.0), Amps(0.0), Amps(4.0))],
            )
            .steps("can give", Role::Supply, steps)
            .mark("low", Hours(1.5), Amps(2.0))
            .finish("d")
    }

    #[test]
    fn steps_areas_and_marks_stand_where_they_belong() {
        let lines = draw(
            &chart(),
            Style {
                width: 40,
                ascii: true,
            },
        );
        let row = |start: &str| {
            lines
                .iter()
                .find(|l| l.starts_with(start))
                .cloned()
                .expect("a row")
        };
        // 31 columns: the step falls after the sixteenth, at 1 h.
        assert_eq!(row("     8 A|"), "     8 A|================");
        assert!(
            row("       4|").ends_with("|................|.............."),
            "{lines:#?}"
        );
        assert!(row("       2|").ends_with("=======o======="), "{lines:#?}");
        assert_eq!(
            lines.last().map(String::as_str),
            Some("  . drawn   = can give   o low")
        );
    }

    #[test]
    fn no_line_is_wider_than_asked() {
        for width in [30, 40, 79, 80, 200] {
            for ascii in [false, true] {
                for line in draw(&chart(), Style { width, ascii }) {
                    assert!(line.chars().count() <= width, "{width}: {line}");
                }
            }
        }
    }
}
