//! The files that a call reads and writes: none may be both, and none written twice.

use super::args::{Command, Common};
use super::output;
use std::path::{Path, PathBuf};
use std::slice::from_ref;

/// Holds the files to be written against those on the disk, those read, and each other, before anything is worked out.
///
/// # Errors
/// One may not be written, is read in the same call, or is named twice.
pub fn ready(command: &Command, common: &Common) -> anyhow::Result<()> {
    let beside = match command {
        Command::Check(check) => check.trace.as_deref(),
        Command::Curve(curve) => curve.svg.as_deref(),
        Command::Odds(odds) => odds.worst.as_deref(),
        _ => None,
    };
    let read: Vec<PathBuf> = read(command).into_iter().filter_map(same_for_all).collect();
    let mut written: Vec<PathBuf> = Vec::new();
    for path in common.output.as_deref().into_iter().chain(beside) {
        output::ready(path, common.force)?;
        let shown = path.display();
        let Some(target) = same_for_all(path) else {
            continue;
        };
        if read.contains(&target) {
            anyhow::bail!("`{shown}` is read in this call: write elsewhere");
        }
        if written.contains(&target) {
            anyhow::bail!("`{shown}` is to be written twice: name two files");
        }
        written.push(target);
    }
    Ok(())
}

/// The files that a command is told to read; a kit may be one, or an id of the catalogs.
fn read(command: &Command) -> Vec<&Path> {
    let (files, kits, prices): (&[String], &[String], Option<&PathBuf>) = match command {
        Command::Check(args) => (&args.builds, args.with.as_slice(), None),
        Command::Curve(args) => (from_ref(&args.file), &[], None),
        Command::Size(args) => (from_ref(&args.of.file), args.of.with.as_slice(), None),
        Command::Remedy(args) => (
            from_ref(&args.of.file),
            args.of.with.as_slice(),
            args.prices.as_ref(),
        ),
        Command::Wire(args) => (from_ref(&args.file), &[], None),
        Command::Sheet(args) => (
            from_ref(&args.file),
            args.with.as_slice(),
            args.prices.as_ref(),
        ),
        Command::Identify(args) => (from_ref(&args.file), &[], None),
        Command::Fleet(args) => (from_ref(&args.fleet), &args.kit, args.prices.as_ref()),
        Command::Odds(args) => (from_ref(&args.of.file), args.of.with.as_slice(), None),
        Command::Parts(_)
        | Command::New(_)
        | Command::Schema(_)
        | Command::Completions(_)
        | Command::Man(_) => (&[], &[], None),
    };
    let named = files.iter().chain(kits).map(Path::new);
    named.chain(prices.map(PathBuf::as_path)).collect()
}

/// A path by which a file is known however it is named; none for what is no file on a disk.
fn same_for_all(path: &Path) -> Option<PathBuf> {
    if let Ok(found) = path.canonicalize() {
        return found.is_file().then_some(found);
    }
    let folder = path
        .parent()
        .filter(|folder| !folder.as_os_str().is_empty());
    let folder = folder.unwrap_or(Path::new(".")).canonicalize().ok()?;
    Some(folder.join(path.file_name()?))
}
