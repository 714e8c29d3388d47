//! Tables: columns that know their unit, cells that know their number.

use crate::quantity::format::{self, Written};
use crate::quantity::{Fraction, Hours, Minutes, Money};

/// What a text means to the reader. Never the only sign: the words say it too.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Tone {
    /// As it is.
    #[default]
    Plain,
    /// Of less weight: units, origins.
    Dim,
    /// In order.
    Good,
    /// Worth a look.
    Warn,
    /// Not in order.
    Bad,
}

/// To which side a column is set.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Align {
    /// Left: words.
    Left,
    /// Right: numbers.
    Right,
}

/// What a column holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ColumnKind {
    /// The name of the row: the row's heading; may wrap.
    Name,
    /// Words; may wrap.
    Text,
    /// Numbers; never wraps.
    Number,
    /// A bar of the cell's share; takes what width is left, and is left out where it would only
    /// repeat a number.
    Bar,
}

/// A column.
#[derive(Clone, Debug, PartialEq)]
pub struct Column {
    /// Its name.
    pub name: String,
    /// Unit of its numbers, in full precision as CSV gives them.
    pub unit: Option<String>,
    /// Whether the unit stands in the heading (the cells then hold the number alone).
    pub unit_in_heading: bool,
    /// What it holds.
    pub kind: ColumnKind,
}

impl Column {
    fn of(name: impl Into<String>, kind: ColumnKind, unit: &str, unit_in_heading: bool) -> Column {
        let unit = Some(unit.to_owned()).filter(|u| !u.is_empty());
        Column {
            name: name.into(),
            unit,
            unit_in_heading,
            kind,
        }
    }
    /// The rows' names.
    pub fn name(name: impl Into<String>) -> Column {
        Column::of(name, ColumnKind::Name, "", false)
    }
    /// Words.
    pub fn text(name: impl Into<String>) -> Column {
        Column::of(name, ColumnKind::Text, "", false)
    }
    /// Numbers of one quantity, unit in the heading: cells by [`Cell::fixed`] or [`Cell::signed`].
    pub fn number<Q: Written>(name: impl Into<String>) -> Column {
        Column::of(name, ColumnKind::Number, Q::UNIT, true)
    }
    /// Numbers of one quantity, each with its unit: cells by [`Cell::measured`].
    pub fn measured<Q: Written>(name: impl Into<String>) -> Column {
        Column::of(name, ColumnKind::Number, Q::UNIT, false)
    }
    /// Durations: cells by [`Cell::duration`]; minutes in CSV.
    pub fn duration(name: impl Into<String>) -> Column {
        Column::of(name, ColumnKind::Number, "min", false)
    }
    /// Shares: cells by [`Cell::percent`].
    pub fn percent(name: impl Into<String>) -> Column {
        Column::of(name, ColumnKind::Number, "%", false)
    }
    /// Money: cells by [`Cell::money`]; the currency stands in the heading.
    pub fn money(name: impl Into<String>, currency: &str) -> Column {
        Column::of(name, ColumnKind::Number, currency, true)
    }
    /// Counts, and figures of several units: cells by [`Cell::count`] or [`Cell::measured`].
    pub fn figures(name: impl Into<String>) -> Column {
        Column::of(name, ColumnKind::Number, "", false)
    }
    /// A bar of a share: cells by [`Cell::bar`].
    pub fn bar() -> Column {
        Column::of("", ColumnKind::Bar, "", false)
    }
    /// Numbers to the right, words to the left.
    #[must_use]
    pub fn align(&self) -> Align {
        if self.kind == ColumnKind::Number {
            Align::Right
        } else {
            Align::Left
        }
    }
    /// The name with its unit, as CSV and Markdown head a column: `Draw (A)`.
    #[must_use]
    pub fn full_name(&self) -> String {
        match &self.unit {
            Some(unit) if self.name.is_empty() => unit.clone(),
            Some(unit) => format!("{} ({unit})", self.name),
            None => self.name.clone(),
        }
    }
}

/// A cell.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Cell {
    /// What the reader sees.
    pub text: String,
    /// The number behind it in full precision, in `unit`.
    pub number: Option<f64>,
    /// Unit of the number.
    pub unit: Option<String>,
    /// What it means.
    pub tone: Tone,
    /// Length of its bar as a share of the longest, where it is a bar.
    pub bar: Option<f64>,
}

impl Cell {
    fn quantity<Q: Written>(quantity: Q, text: String) -> Cell {
        let number = Some(quantity.number()).filter(|n| n.is_finite());
        let unit = Some(Q::UNIT.to_owned()).filter(|u| !u.is_empty());
        Cell {
            text,
            number,
            unit,
            ..Cell::default()
        }
    }
    /// Nothing.
    #[must_use]
    pub fn empty() -> Cell {
        Cell::default()
    }
    /// Words.
    pub fn text(text: impl Into<String>) -> Cell {
        Cell {
            text: text.into(),
            ..Cell::default()
        }
    }
    /// A row's name.
    pub fn name(text: impl Into<String>) -> Cell {
        Cell::text(text)
    }
    /// A number with the column's decimals; the unit stands in the heading.
    #[must_use]
    pub fn fixed<Q: Written>(quantity: Q, decimals: usize) -> Cell {
        Cell::quantity(quantity, format::fixed(quantity, decimals))
    }
    /// The same with a plus sign on what is above zero.
    #[must_use]
    pub fn signed<Q: Written>(quantity: Q, decimals: usize) -> Cell {
        Cell::quantity(quantity, format::signed(quantity, decimals))
    }
    /// A number with its unit: `14.2 V`.
    #[must_use]
    pub fn measured<Q: Written>(quantity: Q) -> Cell {
        Cell::quantity(quantity, format::text(quantity))
    }
    /// The same with a plus sign on what is above zero.
    #[must_use]
    pub fn measured_signed<Q: Written>(quantity: Q) -> Cell {
        Cell::quantity(quantity, format::text_signed(quantity))
    }
    /// A duration: `1 h 35 min`.
    #[must_use]
    pub fn duration(time: Minutes) -> Cell {
        Cell::quantity(time, format::duration(Hours::from_minutes(time.0)))
    }
    /// A share: `85 %`.
    #[must_use]
    pub fn percent(share: Fraction) -> Cell {
        Cell::quantity(share, format::percent(share))
    }
    /// A temperature: `2 °C`.
    #[must_use]
    pub fn temperature(value: crate::quantity::Celsius) -> Cell {
        Cell::quantity(value, format::temperature(value))
    }
    /// An amount of money with two decimals; the currency stands in the heading.
    #[must_use]
    pub fn money(amount: Money, currency: &str) -> Cell {
        let unit = Some(currency.to_owned()).filter(|c| !c.is_empty());
        Cell {
            unit,
            ..Cell::quantity(amount, format::fixed(amount, 2))
        }
    }
    /// A count.
    #[must_use]
    pub fn count(number: u64) -> Cell {
        Cell {
            text: number.to_string(),
            number: Some(number as f64),
            ..Cell::default()
        }
    }
    /// A bar: its length as a share of the longest, held between nothing and the whole.
    #[must_use]
    pub fn bar(share: Fraction) -> Cell {
        let length = if share.is_finite() {
            share.0.clamp(0.0, 1.0)
        } else {
            0.0
        };
        Cell {
            bar: Some(length),
            ..Cell::default()
        }
    }
    /// One of two: the quantity's cell where there is one, else an empty cell.
    #[must_use]
    pub fn maybe<Q>(quantity: Option<Q>, cell: impl FnOnce(Q) -> Cell) -> Cell {
        quantity.map_or_else(Cell::empty, cell)
    }
    /// With a tone.
    #[must_use]
    pub fn tone(mut self, tone: Tone) -> Cell {
        self.tone = tone;
        self
    }
    /// In order.
    #[must_use]
    pub fn good(self) -> Cell {
        self.tone(Tone::Good)
    }
    /// Not in order.
    #[must_use]
    pub fn bad(self) -> Cell {
        self.tone(Tone::Bad)
    }
    /// Worth a look.
    #[must_use]
    pub fn warn(self) -> Cell {
        self.tone(Tone::Warn)
    }
    /// Of less weight.
    #[must_use]
    pub fn dim(self) -> Cell {
        self.tone(Tone::Dim)
    }
}

/// A row.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Row {
    /// One cell a column.
    pub cells: Vec<Cell>,
    /// A sum of the rows above, set off by a rule.
    pub total: bool,
}

/// A table.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Table {
    /// Title; may be empty where a heading stands above.
    pub title: String,
    /// Columns.
    pub columns: Vec<Column>,
    /// Rows, sums last.
    pub rows: Vec<Row>,
    /// A line under it.
    pub note: Option<String>,
    /// The table that CSV writes alone, header in the first line.
    pub main: bool,
}

impl Table {
    /// A table without columns.
    pub fn new(title: impl Into<String>) -> Table {
        Table {
            title: title.into(),
            ..Table::default()
        }
    }
    /// With a column more.
    #[must_use]
    pub fn column(mut self, column: Column) -> Table {
        self.columns.push(column);
        self
    }
    /// With columns more.
    #[must_use]
    pub fn columns(mut self, columns: impl IntoIterator<Item = Column>) -> Table {
        self.columns.extend(columns);
        self
    }
    /// With a row more: a missing cell is empty, one too many is dropped.
    #[must_use]
    pub fn row(self, cells: impl IntoIterator<Item = Cell>) -> Table {
        self.push(cells, false)
    }
    /// With rows more.
    #[must_use]
    pub fn rows<R: IntoIterator<Item = Cell>>(self, rows: impl IntoIterator<Item = R>) -> Table {
        rows.into_iter().fold(self, Table::row)
    }
    /// With a row of sums.
    #[must_use]
    pub fn total(self, cells: impl IntoIterator<Item = Cell>) -> Table {
        self.push(cells, true)
    }
    /// With a line under it.
    #[must_use]
    pub fn note(mut self, note: impl Into<String>) -> Table {
        self.note = Some(note.into());
        self
    }
    /// As the one table that CSV writes, alone and with its header in the first line.
    #[must_use]
    pub fn main(mut self) -> Table {
        self.main = true;
        self
    }
    fn push(mut self, cells: impl IntoIterator<Item = Cell>, total: bool) -> Table {
        let mut cells: Vec<Cell> = cells.into_iter().collect();
        cells.resize(self.columns.len(), Cell::empty());
        self.rows.push(Row { cells, total });
        self
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Amps, Celsius};

    #[test]
    fn a_row_has_a_cell_for_each_column() {
        let table = Table::new("")
            .columns([Column::name("a"), Column::text("b")])
            .row([Cell::name("x")])
            .row([Cell::name("x"), Cell::text("y"), Cell::text("z")]);
        assert!(table.rows.iter().all(|row| row.cells.len() == 2));
    }

    #[test]
    fn a_cell_keeps_the_whole_number_behind_its_text() {
        let cell = Cell::fixed(Amps(-0.04), 1);
        assert_eq!(
            (cell.text.as_str(), cell.number, cell.unit.as_deref()),
            ("0.0", Some(-0.04), Some("A"))
        );
        let cell = Cell::percent(Fraction(0.255));
        assert_eq!((cell.text.as_str(), cell.number), ("26 %", Some(25.5)));
        let cell = Cell::fixed(Amps(f64::NAN), 1);
        assert_eq!((cell.text.as_str(), cell.number), (format::NO_NUMBER, None));
        assert_eq!(Cell::temperature(Celsius(-10.0)).text, "−10 °C");
        assert_eq!(Cell::maybe(None::<Amps>, Cell::measured), Cell::empty());
    }

    #[test]
    fn a_bar_is_held_between_nothing_and_the_whole() {
        for (share, length) in [(-1.0, 0.0), (0.5, 0.5), (7.0, 1.0), (f64::NAN, 0.0)] {
            assert_eq!(Cell::bar(Fraction(share)).bar, Some(length));
        }
    }

    #[test]
    fn headings_with_units() {
        assert_eq!(Column::number::<Amps>("Draw").full_name(), "Draw (A)");
        assert_eq!(Column::number::<Amps>("").full_name(), "A");
        assert_eq!(Column::money("Price", "").full_name(), "Price");
    }
}
