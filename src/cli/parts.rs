//! `ampledger parts`.

use super::args::Common;
use super::args::support::PartsArgs;
use super::{KEEPS_UP, input, output};
use ampledger::catalog::{Catalogs, Entry, Kind, Listed};
use ampledger::report::Report;
use ampledger::view::parts as view;
use anyhow::anyhow;
use serde::Serialize;

/// The answer as JSON.
#[derive(Serialize)]
struct Parts {
    parts: Vec<Listed>,
}

/// Lists parts, or shows one in full.
///
/// # Errors
/// Catalogs that do not read; nothing of that name or with those words.
pub fn run(args: &PartsArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let words = args.words.join(" ");
    let wanted = |kind: &Kind| args.kind.is_none_or(|only| only == *kind);
    let of_that_id: Vec<Entry> = Kind::ALL
        .into_iter()
        .filter(wanted)
        .filter_map(|kind| catalogs.find(kind, &words))
        .collect();
    if !of_that_id.is_empty() {
        return in_full(&of_that_id, common);
    }
    let mut found = catalogs.search(&words);
    found.retain(|entry| wanted(&entry.kind));
    if found.is_empty() {
        return Err(nothing(&catalogs, &words, args.kind));
    }
    let parts: Vec<Listed> = found.iter().map(Entry::listed).collect::<Result<_, _>>()?;
    let title = match words.as_str() {
        "" => "Catalogs".to_owned(),
        words => format!("Catalogs: {words}"),
    };
    let answer = Parts { parts };
    output::write(common, || view::parts(&title, &answer.parts), &answer)?;
    Ok(KEEPS_UP)
}

/// The parts of one id, most often one.
fn in_full(entries: &[Entry], common: &Common) -> anyhow::Result<u8> {
    let parts: Vec<Listed> = entries
        .iter()
        .map(Entry::in_full)
        .collect::<Result<_, _>>()?;
    let answer = Parts { parts };
    let report = || {
        let mut reports = answer.parts.iter().map(view::part);
        let first = reports.next().unwrap_or_else(|| Report::new(""));
        reports.fold(first, Report::append)
    };
    output::write(common, report, &answer)?;
    Ok(KEEPS_UP)
}

/// What is said where nothing is found: the nearest id there is.
fn nothing(catalogs: &Catalogs, words: &str, kind: Option<Kind>) -> anyhow::Error {
    let mut kinds = Kind::ALL
        .into_iter()
        .filter(|k| kind.is_none_or(|only| only == *k));
    let near = kinds.find_map(|kind| catalogs.nearest(kind, words));
    let under = kind.map_or(String::new(), |kind| format!(" under `{}`", kind.key()));
    match near {
        Some(id) => anyhow!("no part `{words}`{under}: did you mean `{id}`?"),
        None => anyhow!(
            "no part has `{words}` in its id or title{under}: `ampledger parts` lists all there are"
        ),
    }
}
