//! The catalogs that the program carries, as text: nothing is parsed before a part is asked for.

use super::{Certainty, Entry, Kind, Origin};
use std::collections::BTreeMap;

/// One built-in file: its name and its text.
#[derive(Debug)]
pub(super) struct File {
    pub(super) name: &'static str,
    pub(super) text: &'static str,
}

/// Declares the files of a kind.
macro_rules! files {
    ($($name:literal),*) => { &[$(File { name: $name, text: include_str!(concat!("../../catalogs/", $name)) }),*] };
}

const CHARGING: &[File] = files!["windings.yaml"];
const BATTERIES: &[File] = files!["batteries.yaml"];
const STARTERS: &[File] = files!["starters.yaml"];
const KITS: &[File] = files!["kits.yaml"];
const ACCESSORIES: &[File] = files![
    "work-lights.yaml",
    "lamps.yaml",
    "lamps-6v-24v.yaml",
    "accessories.yaml",
    "implements.yaml"
];

/// The files that hold entries of a kind.
pub(super) fn files(kind: Kind) -> &'static [File] {
    match kind {
        Kind::Charging => CHARGING,
        Kind::Battery => BATTERIES,
        Kind::Starter => STARTERS,
        Kind::Accessory => ACCESSORIES,
        Kind::Kit => KITS,
    }
}

/// What begins an entry of a built-in file; `tests/catalogs.rs` holds the files to this shape.
const MARK: &str = "\n  - id: ";

/// The entries of a kind as blocks of text: id, the lines after it, and the file.
pub(super) fn blocks(
    kind: Kind,
) -> impl Iterator<Item = (&'static str, &'static str, &'static File)> {
    files(kind).iter().flat_map(|file| {
        file.text.split(MARK).skip(1).map(move |block| {
            let (id, rest) = block.split_once('\n').unwrap_or((block, ""));
            (id.trim_end(), rest, file)
        })
    })
}

/// Where the entries of a kind stand, by id.
#[derive(Debug)]
pub(super) struct Places {
    kind: Kind,
    blocks: BTreeMap<&'static str, (&'static str, &'static File)>,
}

/// Where the entries of a kind stand.
pub(super) fn places(kind: Kind) -> Places {
    let blocks = blocks(kind).map(|(id, rest, file)| (id, (rest, file)));
    Places {
        kind,
        blocks: blocks.collect(),
    }
}

/// The entry of an id.
pub(super) fn find(places: &Places, id: &str) -> Option<Entry> {
    let (id, (rest, file)) = places.blocks.get_key_value(id)?;
    Some(entry(places.kind, id, rest, file))
}

/// One block as an entry: the four lines that tell of it apart from the keys of the build file.
pub(super) fn entry(kind: Kind, id: &str, rest: &str, file: &File) -> Entry {
    let (mut title, mut source, mut certainty) = (id, "", Certainty::Unsaid);
    let mut body = String::with_capacity(rest.len());
    for line in rest.lines() {
        let line = line.strip_prefix("    ").unwrap_or(line);
        if let Some(text) = line.strip_prefix("title: ") {
            title = text.trim();
        } else if let Some(text) = line.strip_prefix("source: ") {
            source = text.trim();
        } else if let Some(text) = line.strip_prefix("certainty: ") {
            certainty = Certainty::from_text(text.trim());
        } else {
            body.push_str(line);
            body.push('\n');
        }
    }
    Entry {
        kind,
        id: id.to_owned(),
        title: title.to_owned(),
        source: source.to_owned(),
        certainty,
        origin: Origin::Builtin(file.name),
        body,
    }
}
