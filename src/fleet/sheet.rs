//! A fleet as CSV: `machine,build,count,kit`, and if wanted `air` and `set`.

use super::files;
use super::plan::{Entry, Plan, some_kit};
use crate::cells::{otherwise_separated, stray_mark};
use crate::description::{Assignment, unprintable};
use crate::problem::{Problem, Refusal, ShapeProblem, Source, TextProblem};
use crate::quantity::parse;
use crate::quantity::{Celsius, bounds};
use csv::StringRecord;
use std::path::Path;
use std::sync::Arc;

/// Most bytes of a fleet as CSV: some hundred thousand machines.
pub const MOST_BYTES: u64 = 16 << 20;

/// The columns, in the order in which messages list them.
const COLUMNS: [&str; 6] = ["machine", "build", "count", "kit", "air", "set"];
/// How a header is written.
const EXAMPLE: &str = "machine,build,count,kit";

/// Where each column stands, if it is there.
struct Header([Option<usize>; COLUMNS.len()]);

impl Header {
    /// A field of a record, without the blanks around it; empty where it is not there.
    fn field<'r>(&self, record: &'r StringRecord, column: &str) -> &'r str {
        let place = COLUMNS.iter().position(|c| *c == column);
        let place = place.and_then(|k| self.0[k]);
        place.and_then(|k| record.get(k)).unwrap_or_default().trim()
    }

    fn columns(&self) -> usize {
        self.0.iter().flatten().count()
    }
}

/// Reads a fleet from CSV. `name` is what messages call it, `path` where it stands.
///
/// # Errors
/// [`Refusal`]: not UTF-8, too large, a header that is not understood. What is wrong with one row is that row's
/// own fault and hides no other.
pub fn read_sheet(name: &str, bytes: &[u8], path: &Path) -> Result<Plan, Refusal> {
    let text = text(name, bytes)?;
    if let Some(stray) = stray_mark(text) {
        let (what, hint) = stray.told();
        let problem = TextProblem::Syntax {
            of: "CSV",
            what: what.to_owned(),
            hint: Some(hint.to_owned()),
            opened: None,
        };
        let at = stray.byte();
        return Err(refused(name, text, problem, at..at + 1));
    }
    let mut reader = csv::ReaderBuilder::new()
        .flexible(true)
        .has_headers(false)
        .from_reader(text.as_bytes());
    let mut records = reader.records();
    let header = loop {
        match records.next() {
            Some(Ok(record)) if record.iter().all(|f| f.trim().is_empty()) => {}
            Some(Ok(record)) => break header(name, text, &record)?,
            _ => {
                let empty = Problem::text(TextProblem::Empty, 0..0);
                let help = format!("a fleet begins with its columns: `{EXAMPLE}`");
                return Err(refusal(name, text, empty.with_help(help)));
            }
        }
    };
    let folder = files::folder(path);
    let mut entries = Vec::new();
    for record in records {
        match record {
            Ok(record) if record.iter().all(|f| f.trim().is_empty()) => {}
            Ok(record) => {
                let line = record.position().map_or(0, csv::Position::line);
                let row = row(&header, &record, &format!("{name}:{line}"));
                if row.fault.is_some() {
                    entries.push(row);
                } else {
                    entries.extend(files::found(row, &folder));
                }
            }
            Err(error) => entries.push(broken(name, &error)),
        }
    }
    if entries.is_empty() {
        let missing = ShapeProblem::Missing {
            key: "row",
            example: "mower,mower.yaml,2,",
        };
        return Err(refused(
            name,
            text,
            missing,
            text.trim_end().len()..text.len(),
        ));
    }
    Ok(Plan {
        name: files::stem(path),
        folder,
        entries,
    })
}

fn text<'b>(name: &str, bytes: &'b [u8]) -> Result<&'b str, Refusal> {
    if bytes.len() as u64 > MOST_BYTES {
        let most = MOST_BYTES;
        return Err(refused(name, "", TextProblem::TooLarge { most }, 0..0));
    }
    let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    let text = std::str::from_utf8(bytes).map_err(|error| {
        let at = error.valid_up_to();
        let byte = bytes.get(at).copied().unwrap_or_default();
        let shown = String::from_utf8_lossy(bytes);
        refused(name, &shown, TextProblem::NotUtf8 { byte }, at..at + 3)
    })?;
    let odd = |c: char| c != '\r' && unprintable(c);
    match text.char_indices().find(|(_, c)| odd(*c)) {
        None => Ok(text),
        Some((at, found)) => {
            let problem = TextProblem::Unprintable { found };
            Err(refused(name, text, problem, at..at + found.len_utf8()))
        }
    }
}

fn refused(
    name: &str,
    text: &str,
    problem: impl Into<crate::problem::ProblemKind>,
    at: std::ops::Range<usize>,
) -> Refusal {
    refusal(name, text, Problem::text(problem, at))
}

fn refusal(name: &str, text: &str, problem: Problem) -> Refusal {
    let source = Source {
        name: name.to_owned(),
        text: text.to_owned(),
        ..Source::default()
    };
    Refusal::new(source, problem)
}

fn unknown(found: &str) -> ShapeProblem {
    ShapeProblem::UnknownKey {
        found: found.to_owned(),
        known: COLUMNS.to_vec(),
    }
}

/// The columns of the first line.
fn header(name: &str, text: &str, record: &StringRecord) -> Result<Header, Refusal> {
    let mut columns = [None; COLUMNS.len()];
    let start = record.position().map_or(0, |p| p.byte() as usize);
    let line = text[start..].lines().next().unwrap_or_default();
    if otherwise_separated(line) {
        let unknown = unknown(line);
        let problem = Problem::text(unknown, start..start + line.len());
        let help = format!("separate the columns with commas: `{EXAMPLE}`");
        return Err(refusal(name, text, problem.with_help(help)));
    }
    for (place, field) in record.iter().enumerate() {
        let field = field.trim().to_lowercase();
        let at = start + line.to_lowercase().find(&field).unwrap_or(0);
        let at = at..at + field.len();
        match COLUMNS.iter().position(|c| *c == field) {
            Some(k) if columns[k].is_none() => columns[k] = Some(place),
            Some(_) => {
                let first = at.clone();
                let twice = TextProblem::DuplicateKey { key: field, first };
                return Err(refused(name, text, twice, at));
            }
            None => {
                return Err(refused(name, text, unknown(&field), at));
            }
        }
    }
    for (k, key) in COLUMNS.iter().enumerate().take(2) {
        if columns[k].is_none() {
            let missing = ShapeProblem::Missing {
                key,
                example: EXAMPLE,
            };
            return Err(refused(name, text, missing, start..start + line.len()));
        }
    }
    Ok(Header(columns))
}

/// One row; what is wrong with it is kept in it.
fn row(header: &Header, record: &StringRecord, at: &str) -> Entry {
    let field = |column| header.field(record, column);
    let mut fault: Option<String> = None;
    let mut wrong = |why: String| {
        fault.get_or_insert(format!("{at}: {why}"));
    };
    if record.len() > header.columns() {
        wrong(format!(
            "{} fields under {} columns: a field with a comma in it stands in quotation marks",
            record.len(),
            header.columns()
        ));
    }
    if field("build").is_empty() {
        wrong("no `build`".to_owned());
    }
    let count = count(field("count")).unwrap_or_else(|why| {
        wrong(why);
        0
    });
    let air = air(field("air")).unwrap_or_else(|why| {
        wrong(why);
        None
    });
    let set = field("set")
        .split(';')
        .filter(|text| !text.trim().is_empty());
    let set: Vec<Assignment> = set
        .filter_map(|text| match Assignment::parse(text.trim()) {
            Ok(assignment) => Some(assignment),
            Err(problem) => {
                wrong(problem.to_string());
                None
            }
        })
        .collect();
    Entry {
        machine: field("machine").into(),
        build: field("build").into(),
        count,
        kit: some_kit(field("kit")),
        season: None,
        air,
        set: set.into(),
        fault: fault.map(Arc::from),
    }
}

/// How many machines a row is for: one where it does not say.
fn count(text: &str) -> Result<u32, String> {
    match text.parse::<u32>() {
        _ if text.is_empty() => Ok(1),
        Ok(count) if (1..=100_000).contains(&count) => Ok(count),
        _ => Err(format!(
            "`count` is `{text}`, a whole number from 1 to 100000 is needed"
        )),
    }
}

/// The air temperature of a row, where it says one.
fn air(text: &str) -> Result<Option<Celsius>, String> {
    if text.is_empty() {
        return Ok(None);
    }
    let told = |problem: &dyn std::fmt::Display| format!("`air` is `{text}`: {problem}");
    let air = parse::parse::<Celsius>(text).map_err(|problem| told(&problem))?;
    let checked = bounds::AIR.check(air.value);
    checked.map_err(|problem| told(&problem))?;
    Ok(Some(air.value))
}

/// A row that is no CSV.
fn broken(name: &str, error: &csv::Error) -> Entry {
    let line = error.position().map_or(0, csv::Position::line);
    Entry {
        machine: "".into(),
        build: "".into(),
        count: 0,
        kit: None,
        season: None,
        air: None,
        set: [].into(),
        fault: Some(format!("{name}:{line}: {error}").into()),
    }
}
