//! Build files named by a path or by a pattern.

use super::plan::Entry;
use std::path::{Path, PathBuf};

/// The folder that a file stands in.
pub(super) fn folder(path: &Path) -> PathBuf {
    path.parent().map(Path::to_path_buf).unwrap_or_default()
}

/// A file's name without its ending.
pub(super) fn stem(path: &Path) -> String {
    path.file_stem()
        .map_or_else(String::new, |stem| stem.to_string_lossy().into_owned())
}

/// A row for each file that a row's `build` names: one, or as many as its pattern finds, in the order of their
/// names. A pattern that finds nothing leaves the row with its fault.
pub(super) fn found(row: Entry, folder: &Path) -> Vec<Entry> {
    let pattern = row.build.contains(['*', '?', '[']) && !folder.join(&*row.build).exists();
    if !pattern {
        let machine = if row.machine.is_empty() {
            stem(Path::new(&*row.build)).into()
        } else {
            row.machine.clone()
        };
        return vec![Entry { machine, ..row }];
    }
    let fault = |why: String| Entry {
        machine: if row.machine.is_empty() {
            row.build.clone()
        } else {
            row.machine.clone()
        },
        fault: Some(why.into()),
        ..row.clone()
    };
    // The folder's own name is taken as it is; only what the user wrote is a pattern.
    let literal = glob::Pattern::escape(&folder.to_string_lossy());
    let whole = Path::new(&literal).join(&*row.build);
    let paths = match glob::glob(&whole.to_string_lossy()) {
        Ok(paths) => paths,
        Err(error) => {
            return vec![fault(format!(
                "`{}` is no pattern: {}",
                row.build, error.msg
            ))];
        }
    };
    let mut rows = Vec::new();
    for path in paths.filter_map(Result::ok).filter(|path| path.is_file()) {
        let shown = path.strip_prefix(folder).unwrap_or(&path);
        let name = stem(&path);
        rows.push(Entry {
            machine: if row.machine.is_empty() {
                name.into()
            } else {
                format!("{}, {name}", row.machine).into()
            },
            build: shown.to_string_lossy().into(),
            ..row.clone()
        });
    }
    if rows.is_empty() {
        rows.push(fault(format!("no file is found by `{}`", row.build)));
    }
    rows
}
