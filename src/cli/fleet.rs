//! `ampledger fleet`.

use super::args::{Common, FleetArgs, Format};
use super::progress::Progress;
use super::{DOES_NOT, KEEPS_UP, WRONG, input, output};
use ampledger::check::FORMAT;
use ampledger::description::{bytes_of, bytes_within, read_fleet};
use ampledger::fleet::{Fleet, MOST_BYTES, Plan, Row, Totals, judge_all, read_sheet};
use ampledger::report::csv::harmless;
use ampledger::view;
use anyhow::Context;
use std::io::{Read, Write};
use std::path::Path;

/// Judges a fleet. Exit code 2 where a row has an error, though all others are told.
///
/// # Errors
/// The fleet file is not understood; the answer cannot be written.
pub fn run(args: &FleetArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let plan = plan(&args.fleet)?.with_kits(&args.kit);
    let prices = input::prices(args.prices.as_ref())?;
    let mend = (!args.no_remedy).then_some(&prices);
    let progress = Progress::new(plan.entries.len() as u64, "Judging builds");
    let judge = |emit: &mut dyn FnMut(Row) -> anyhow::Result<()>| {
        judge_all(&plan, &catalogs, mend, &|rows| progress.step(rows), emit)
    };
    let totals = match (common.format, &common.output) {
        (Format::Csv, None) => {
            // Each row leaves as soon as it is ready.
            let mut sheet = Sheet::new(std::io::stdout().lock())?;
            let totals = judge(&mut |row| progress.aside(|| sheet.row(&row)))?;
            drop(sheet.finish()?);
            totals
        }
        (Format::Csv, Some(path)) => {
            let mut sheet = Sheet::new(Vec::new())?;
            let totals = judge(&mut |row| sheet.row(&row))?;
            output::whole(path, &sheet.finish()?, common.force)?;
            totals
        }
        _ => {
            let mut rows = Vec::with_capacity(plan.entries.len());
            let totals = judge(&mut |row| {
                rows.push(row);
                Ok(())
            })?;
            progress.done();
            let answer = Fleet {
                format: FORMAT,
                fleet: plan.name.clone(),
                currency: prices.currency.clone(),
                rows,
                totals,
                notes: prices.notes(&catalogs),
            };
            let report = || output::addressed(view::fleet(&answer), &args.hand_over);
            output::write(common, report, &answer)?;
            answer.totals
        }
    };
    Ok(code(&totals))
}

fn code(totals: &Totals) -> u8 {
    if totals.errors > 0 {
        WRONG
    } else if totals.carries + totals.falls_short > 0 {
        DOES_NOT
    } else {
        KEEPS_UP
    }
}

/// Reads a fleet file: CSV by its ending or, on standard input, by its first line; else YAML.
fn plan(file: &str) -> anyhow::Result<Plan> {
    let stdin = file == "-";
    let (name, path) = if stdin {
        ("standard input", Path::new(""))
    } else {
        (file, Path::new(file))
    };
    let is_csv = |ending: &std::ffi::OsStr| ending.eq_ignore_ascii_case("csv");
    let (bytes, sheet) = if stdin {
        let mut bytes = Vec::new();
        std::io::stdin()
            .lock()
            .take(MOST_BYTES + 1)
            .read_to_end(&mut bytes)
            .context("standard input cannot be read")?;
        let sheet = begins_as_sheet(&bytes);
        (bytes, sheet)
    } else if path.extension().is_some_and(is_csv) {
        (bytes_within(path, name, MOST_BYTES)?, true)
    } else {
        (bytes_of(path, name)?, false)
    };
    if sheet {
        return Ok(read_sheet(name, &bytes, path)?);
    }
    let (text, _) = read_fleet(name, &bytes)?;
    Ok(Plan::of_text(&text, path))
}

/// Whether a text's first line is the header of a sheet.
fn begins_as_sheet(bytes: &[u8]) -> bool {
    let line = bytes.split(|b| *b == b'\n').next().unwrap_or_default();
    line.contains(&b',') && !line.contains(&b':')
}

/// Rows as CSV.
struct Sheet<W: Write>(csv::Writer<W>);

impl<W: Write> Sheet<W> {
    fn new(to: W) -> anyhow::Result<Sheet<W>> {
        let mut sheet = Sheet(csv::Writer::from_writer(to));
        sheet.line(&[
            "machine", "build", "count", "kit", "season", "verdict", "lacks_ah", "remedy", "cost",
            "error",
        ])?;
        Ok(sheet)
    }

    fn line(&mut self, fields: &[&str]) -> anyhow::Result<()> {
        self.0
            .write_record(fields)
            .map_err(std::io::Error::from)
            .and_then(|()| self.0.flush())
            .context("the rows cannot be written")
    }

    fn row(&mut self, row: &Row) -> anyhow::Result<()> {
        let outcome = &row.outcome;
        let number = |number: Option<f64>| number.map_or(String::new(), |n| n.to_string());
        let verdict = match (outcome.verdict, &outcome.error) {
            (Some(verdict), _) => verdict.words(),
            (None, None) => "not judged",
            (None, Some(_)) => "",
        };
        self.line(&[
            &harmless(&row.machine),
            &harmless(&row.build),
            &row.count.to_string(),
            &harmless(row.kit.as_deref().unwrap_or_default()),
            &harmless(row.season.as_deref().unwrap_or_default()),
            verdict,
            &number(outcome.lacks_ah.map(|l| l.0)),
            &harmless(outcome.remedy.as_deref().unwrap_or_default()),
            &number(outcome.cost.map(|c| c.0)),
            &harmless(outcome.error.as_deref().unwrap_or_default()),
        ])
    }

    fn finish(self) -> anyhow::Result<W> {
        self.0
            .into_inner()
            .map_err(|e| e.into_error())
            .context("the rows cannot be written")
    }
}
