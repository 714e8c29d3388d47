//! Entry points: bytes or a file to a [`Description`], with every problem of the file at once.

use super::fleet::FleetText;
use super::lower::Lower;
use super::raw::{self, Map};
use super::set::{self, Assignment};
use super::{
    AccessoryText, BatteryText, ChargingText, Description, KitText, PricesText, StarterText, open,
    scan, second,
};
use crate::problem::{FileProblem, Problem, Problems, Refusal, Source};
use serde::de::DeserializeOwned;
use std::path::Path;

/// Reads a build file from its bytes. `name` is what messages call it.
///
/// # Errors
/// [`Refusal`] with every problem found, in the order of the file.
pub fn read(name: &str, bytes: &[u8]) -> Result<(Description, Source), Refusal> {
    read_set(name, bytes, &[])
}

/// Reads a build file with `--set` assignments put into its text first.
///
/// # Errors
/// As [`read`]; and assignments that cannot be done.
pub fn read_set(
    name: &str,
    bytes: &[u8],
    assignments: &[Assignment],
) -> Result<(Description, Source), Refusal> {
    let (source, problems) = open_text(name, bytes)?;
    let (source, problems) = if assignments.is_empty() {
        (source, problems)
    } else {
        set::set(source, assignments)?
    };
    let outcome = lowered(source, problems, |low, root| low.file(root));
    let Outcome {
        value,
        source,
        problems,
    } = outcome;
    match value {
        Some(description) if problems.is_empty() => Ok((description, source)),
        // with more wrong than is shown, no more is looked for
        partial => {
            let partial = partial.filter(|_| !problems.more());
            Err(Refusal::new(source, problems).with_partial(partial))
        }
    }
}

/// Reads a build file from a path.
///
/// # Errors
/// As [`read`]; and files that are missing, unreadable, or a folder.
pub fn read_file(
    path: &Path,
    assignments: &[Assignment],
) -> Result<(Description, Source), Refusal> {
    let name = path.display().to_string();
    let bytes = bytes_of(path, &name)?;
    read_set(&name, &bytes, assignments)
}

/// Reads a fleet file from its bytes.
///
/// # Errors
/// [`Refusal`] with every problem found, in the order of the file.
pub fn read_fleet(name: &str, bytes: &[u8]) -> Result<(FleetText, Source), Refusal> {
    let (source, problems) = open_text(name, bytes)?;
    lowered(source, problems, |low, root| low.fleet(root)).whole()
}

/// The bytes of a file that is not too large.
///
/// # Errors
/// [`Refusal`]: missing, a folder, unreadable, over the limit.
pub fn bytes_of(path: &Path, name: &str) -> Result<Vec<u8>, Refusal> {
    bytes_within(path, name, crate::problem::text::MOST_BYTES)
}

/// The bytes of a file, up to one beyond the most that are read.
///
/// # Errors
/// [`Refusal`]: missing, a folder, unreadable.
pub fn bytes_within(path: &Path, name: &str, most: u64) -> Result<Vec<u8>, Refusal> {
    use std::io::{ErrorKind, Read};
    let refuse = |kind: FileProblem| {
        let source = Source {
            name: name.to_owned(),
            ..Source::default()
        };
        Refusal::new(source, Problem::whole(kind))
    };
    let told = |e: &std::io::Error| match e.kind() {
        ErrorKind::NotFound => FileProblem::Missing,
        ErrorKind::IsADirectory => FileProblem::Folder,
        _ => FileProblem::Unreadable { why: e.to_string() },
    };
    if path.is_dir() {
        return Err(refuse(FileProblem::Folder));
    }
    let file = std::fs::File::open(path).map_err(|e| refuse(told(&e)))?;
    let mut bytes = Vec::new();
    // one byte past the limit is enough to refuse it
    let limit = most + 1;
    file.take(limit)
        .read_to_end(&mut bytes)
        .map_err(|e| refuse(told(&e)))?;
    Ok(bytes)
}

macro_rules! parts {
    ($($(#[$doc:meta])* $name:ident: $raw:ident => $text:ident by $lower:ident;)*) => { $(
        $(#[$doc])*
        ///
        /// # Errors
        /// [`Refusal`] with every problem found.
        pub fn $name(name: &str, text: &str) -> Result<$text, Refusal> {
            part(name, text, |low, raw: &raw::$raw| low.$lower(raw, ""))
        }
    )* };
}
parts!(
    /// Reads the keys of a catalog's winding or alternator.
    read_charging: Charging => ChargingText by charging;
    /// Reads the keys of a catalog's battery.
    read_battery: Battery => BatteryText by battery;
    /// Reads the keys of a catalog's starter.
    read_starter: Starter => StarterText by starter;
    /// Reads the keys of a catalog's accessory.
    read_accessory: Accessory => AccessoryText by accessory;
    /// Reads the keys of a catalog's kit.
    read_kit: Kit => KitText by kit;
    /// Reads a price list.
    read_prices: Prices => PricesText by prices;
);

/// Reads one mapping as a part.
fn part<R: DeserializeOwned, T>(
    name: &str,
    text: &str,
    lower: impl FnOnce(&mut Lower<'_>, &R) -> T,
) -> Result<T, Refusal> {
    let (source, problems) = open_text(name, text.as_bytes())?;
    let lower = |low: &mut Lower<'_>, root: &Map<R>| low.map(root, "").map(|raw| lower(low, raw));
    lowered(source, problems, lower)
        .whole()
        .map(|(part, _)| part)
}

/// Bytes to text and places.
pub(crate) fn open_text(name: &str, bytes: &[u8]) -> Result<(Source, Problems), Refusal> {
    let mut source = Source {
        name: name.to_owned(),
        ..Source::default()
    };
    source.text = match open::text(bytes) {
        Ok(text) => text,
        Err((text, problems)) => {
            source.text = text;
            return Err(Refusal::new(source, problems));
        }
    };
    match scan::scan(&source.text) {
        Ok((places, problems)) => {
            source.places = places;
            Ok((source, problems))
        }
        Err(problems) => Err(Refusal::new(source, problems)),
    }
}

/// What came of a text: its value as far as it reads, and all that is wrong.
struct Outcome<T> {
    value: Option<T>,
    source: Source,
    problems: Problems,
}

impl<T> Outcome<T> {
    /// The value, where nothing is wrong.
    fn whole(self) -> Result<(T, Source), Refusal> {
        match self.value {
            Some(value) if self.problems.is_empty() => Ok((value, self.source)),
            _ => Err(Refusal::new(self.source, self.problems)),
        }
    }
}

/// Text and places to typed values. A text that only the first of the two readers accepts is refused.
fn lowered<R: DeserializeOwned, T>(
    source: Source,
    mut problems: Problems,
    lower: impl FnOnce(&mut Lower<'_>, &Map<R>) -> Option<T>,
) -> Outcome<T> {
    let mut value = None;
    if !problems.more() {
        let places = &source.places;
        let (read, refused) = second::beside(&source.text, source.places.value(), || {
            let mut low = Lower::new(places);
            let root = low.read(places.value());
            (lower(&mut low, &root), low.problems)
        });
        match refused {
            Some(refused) => problems.push(refused),
            None => {
                value = read.0;
                problems.append(read.1);
            }
        }
    }
    Outcome {
        value,
        source,
        problems,
    }
}
