//! The files that a call reads and writes: none may be both, and none written twice.

use super::args::{Command, Common};
use super::output;
use std::path::{Path, PathBuf};

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

/// The files that a command is told to read.
fn read(command: &Command) -> Vec<&Path> {
    let (files, others): (Vec<&String>, [Option<&Path>; 2]) = match command {
        Command::Check(args) => (
            args.builds.iter().collect(),
            [args.with.as_deref().map(Path::new), None],
        ),
        Command::Curve(args) => (vec![&args.file], [None; 2]),
        Command::Size(args) => (
            vec![&args.of.file],
            [args.of.with.as_deref().map(Path::new), None],
        ),
        Command::Remedy(args) => (
            vec![&args.of.file],
            [
                args.of.with.as_deref().map(Path::new),
                args.prices.as_deref(),
            ],
        ),
        Command::Wire(args) => (vec![&args.file], [None; 2]),
        Command::Sheet(args) => (
            vec![&args.file],
            [args.with.as_deref().map(Path::new), args.prices.as_deref()],
        ),
        Command::Identify(args) => (vec![&args.file], [None; 2]),
        Command::Fleet(args) => (
            args.kit.iter().chain([&args.fleet]).collect(),
            [args.prices.as_deref(), None],
        ),
        Command::Odds(args) => (
            vec![&args.of.file],
            [args.of.with.as_deref().map(Path::new), None],
        ),
        Command::Parts(_)
        | Command::New(_)
        | Command::Schema(_)
        | Command::Completions(_)
        | Command::Man(_) => (Vec::new(), [None; 2]),
    };
    let files = files.into_iter().map(Path::new);
    files.chain(others.into_iter().flatten()).collect()
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
