//! Bench tables as written: the keys of a build's charging entry, or a CSV table with those keys in its comments.

use super::readings::{Reading, Readings};
use crate::cells::{otherwise_separated, stray_mark};
use crate::description::charging::{RectifierKind, RectifierText};
use crate::description::{ChargingText, read_charging};
use crate::problem::Refusal;
use crate::quantity::bounds::{self, Bounds, OutOfBounds};
use crate::quantity::parse::parse;
use crate::quantity::unit::Unit;
use crate::quantity::{Amps, Rpm, Volts};
use crate::source::{Phases, Rectifier, Working};
use std::fmt;

/// Forward drop of one diode where none is written. Common practice, no source.
const USUAL_DROP: Volts = Volts(0.9);

/// Why a bench table cannot be read.
#[derive(Debug)]
pub enum ReadError {
    /// The keys have problems, each with its place.
    Keys(Refusal),
    /// A key that is needed is not there.
    Missing {
        /// The key, with an example.
        what: &'static str,
    },
    /// The readings were not taken through a rectifier.
    NoRectifier,
    /// The table has no row under a header.
    Empty,
    /// The header lacks a column.
    Column {
        /// The column.
        name: &'static str,
    },
    /// A cell is not a number of its column's unit.
    Cell {
        /// Line of the file, from 1.
        line: u64,
        /// The column.
        column: &'static str,
        /// What stands there.
        found: String,
    },
    /// A cell lies beyond what its column may hold.
    OutOfBounds {
        /// Line of the file, from 1.
        line: u64,
        /// What stands there.
        found: String,
        /// The limit that it breaks.
        broken: OutOfBounds,
    },
    /// The table itself cannot be taken apart.
    Table {
        /// Line of the file, from 1, where it is known.
        line: Option<u64>,
        /// What is wrong.
        why: String,
    },
}

impl fmt::Display for ReadError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            ReadError::Keys(refusal) => write!(f, "{refusal}"),
            ReadError::Missing { what } => write!(f, "the readings need {what}"),
            ReadError::NoRectifier => {
                write!(
                    f,
                    "`rectifier` is `none`: readings of mean amps are taken through a rectifier"
                )
            }
            ReadError::Empty => write!(
                f,
                "there is no reading: a row needs `rpm`, `volts` and `amps`"
            ),
            ReadError::Column { name } => write!(f, "the table's header has no column `{name}`"),
            ReadError::Cell {
                line,
                column,
                found,
            } => {
                write!(f, "line {line}: `{found}` is no number for `{column}`")
            }
            ReadError::OutOfBounds {
                line,
                found,
                broken,
            } => write!(f, "line {line}: {broken}: `{found}`"),
            ReadError::Table {
                line: Some(line),
                why,
            } => write!(f, "line {line}: {why}"),
            ReadError::Table { line: None, why } => write!(f, "{why}"),
        }
    }
}

impl std::error::Error for ReadError {}

/// The bench table of a charging entry: `winding: {readings: [...], poles, ...}`, `rectifier`, `regulator: {holds}`.
/// Without `working` the rows were taken at 20 °C; without a drop a diode's is 0.9 V.
///
/// # Errors
/// [`ReadError`]: a key that is needed is not there, or there is no rectifier.
pub fn readings_of(text: &ChargingText) -> Result<Readings, ReadError> {
    let readings = without_rows(text)?;
    if readings.rows.is_empty() {
        Err(ReadError::Empty)
    } else {
        Ok(readings)
    }
}

fn without_rows(text: &ChargingText) -> Result<Readings, ReadError> {
    let winding = text.winding.as_ref();
    let winding = winding.ok_or(ReadError::Missing {
        what: "`winding`, with at least `poles: 12`",
    })?;
    let poles = winding.poles.as_ref().ok_or(ReadError::Missing {
        what: "`poles: 12` in `winding`",
    })?;
    let rectifier = text.rectifier.as_ref();
    let rectifier = rectifier.ok_or(ReadError::Missing {
        what: "`rectifier: full-wave` or `half-wave`",
    })?;
    let mut working = Working::AS_MEASURED;
    if let Some(temperature) = &winding.working {
        working.winding = temperature.value;
    }
    if let Some(magnets) = &winding.magnets {
        working.magnets = magnets.value;
    }
    let row = |row: &crate::description::ReadingText| Reading {
        rpm: row.rpm.value,
        bus: row.volts.value,
        amps: row.amps.value,
    };
    let setpoint = text
        .regulator
        .as_ref()
        .and_then(|regulator| regulator.holds.as_ref());
    Ok(Readings {
        rows: winding.readings.iter().map(row).collect(),
        open_circuit: winding.open_circuit.as_ref().map(|k| k.value.0 / k.value.1),
        resistance: winding.resistance.as_ref().map(|r| r.value),
        poles: poles.value,
        phases: match &winding.phases {
            Some(phases) if phases.value == 3 => Phases::Three,
            _ => Phases::One,
        },
        rectifier: rectifier_of(rectifier)?,
        setpoint: setpoint.map(|holds| holds.value),
        working,
    })
}

fn rectifier_of(text: &RectifierText) -> Result<Rectifier, ReadError> {
    let drop = text.drop.as_ref().map_or(USUAL_DROP, |drop| drop.value);
    match text.kind.value {
        RectifierKind::HalfWave => Ok(Rectifier::HalfWave { drop }),
        RectifierKind::FullWave => Ok(Rectifier::FullWave { drop }),
        RectifierKind::None => Err(ReadError::NoRectifier),
    }
}

/// A bench table as CSV: a header with `rpm`, `volts` and `amps` in any order, numbers in those units, and before it the
/// keys of a charging entry as comments:
///
/// ```text
/// # winding:
/// #   poles: 12
/// #   resistance: 0.14 ohm
/// # rectifier: full-wave
/// rpm,volts,amps
/// 1800,12.8,3.2
/// 3600,14.1,15.0
/// ```
///
/// `name` is what messages call the file.
///
/// # Errors
/// [`ReadError`], with the line where there is one.
pub fn read_csv(name: &str, text: &str) -> Result<Readings, ReadError> {
    if let Some(stray) = stray_mark(text) {
        let (what, hint) = stray.told();
        return Err(ReadError::Table {
            line: Some(1 + text[..stray.byte()].matches('\n').count() as u64),
            why: format!("{what}: {hint}"),
        });
    }
    let remarks = comments(text);
    if remarks.trim().is_empty() {
        return Err(ReadError::Missing {
            what: "the winding's keys above the table, a `#` before each line: `# winding: {poles: 12}`, `# rectifier: full-wave`",
        });
    }
    let keys = read_charging(name, &remarks).map_err(ReadError::Keys)?;
    let mut readings = without_rows(&keys)?;
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .trim(csv::Trim::All)
        .from_reader(text.as_bytes());
    let header = reader.headers().map_err(|e| table(&e))?.clone();
    let above = text
        .lines()
        .take_while(|line| line.starts_with('#'))
        .count() as u64;
    let [rpm, volts, amps] = columns(&header, above + 1)?;
    for record in reader.records() {
        let record = record.map_err(|e| table(&e))?;
        readings.rows.push(Reading {
            rpm: cell(&record, rpm, Rpm, &bounds::TURNING)?,
            bus: cell(&record, volts, Volts, &bounds::READING_VOLTS)?,
            amps: cell(&record, amps, Amps, &bounds::READING_CURRENT)?,
        });
    }
    if readings.rows.is_empty() {
        Err(ReadError::Empty)
    } else {
        Ok(readings)
    }
}

/// The places of the columns in a header, which stands on a line.
fn columns(header: &csv::StringRecord, line: u64) -> Result<[(usize, &'static str); 3], ReadError> {
    let wrong = |why: String| ReadError::Table {
        line: Some(line),
        why,
    };
    if otherwise_separated(header.get(0).unwrap_or_default()) {
        let why = "separate the columns with commas: `rpm,volts,amps`";
        return Err(wrong(why.to_owned()));
    }
    let column = |name: &'static str| {
        let mut cells = header.iter().enumerate();
        let mut found = || cells.find(|(_, cell)| cell.eq_ignore_ascii_case(name));
        let (place, _) = found().ok_or(ReadError::Column { name })?;
        match found() {
            None => Ok((place, name)),
            Some(_) => Err(wrong(format!(
                "the table's header has the column `{name}` twice"
            ))),
        }
    };
    Ok([column("rpm")?, column("volts")?, column("amps")?])
}

/// The comments alone, every line and column where it was.
fn comments(text: &str) -> String {
    let keep = |line: &str| match line.strip_prefix('#') {
        Some(rest) => format!(" {rest}\n"),
        None => "\n".to_owned(),
    };
    text.lines().map(keep).collect()
}

fn table(error: &csv::Error) -> ReadError {
    let why = match error.kind() {
        csv::ErrorKind::UnequalLengths {
            expected_len, len, ..
        } => format!("{len} cells under {expected_len} columns"),
        _ => error.to_string(),
    };
    ReadError::Table {
        line: error.position().map(csv::Position::line),
        why,
    }
}

/// A number in the column's unit, with or without the unit written, within what it may be.
fn cell<Q: Unit>(
    record: &csv::StringRecord,
    (index, column): (usize, &'static str),
    of: fn(f64) -> Q,
    bounds: &Bounds<Q>,
) -> Result<Q, ReadError> {
    let found = record.get(index).unwrap_or_default();
    let line = record.position().map_or(0, csv::Position::line);
    let value = match found.parse::<f64>() {
        Ok(number) if number.is_finite() => of(number),
        _ => match parse::<Q>(found) {
            Ok(measured) => measured.value,
            Err(_) => {
                let found = found.to_owned();
                return Err(ReadError::Cell {
                    line,
                    column,
                    found,
                });
            }
        },
    };
    match bounds.check(value) {
        Ok(()) => Ok(value),
        Err(broken) => Err(ReadError::OutOfBounds {
            line,
            found: found.to_owned(),
            broken,
        }),
    }
}
