//! A user's folder of catalogs.

use super::{CatalogError, Entry, Origin, file};
use crate::description::bytes_of;
use std::fs;
use std::path::{Path, PathBuf};

/// Every entry of every catalog in a folder, by file name, then as written.
pub(super) fn read(folder: &Path) -> Result<Vec<Entry>, CatalogError> {
    let mut all: Vec<Entry> = Vec::new();
    for path in files(folder)? {
        let bytes = bytes_of(&path, &path.display().to_string())?;
        for entry in file::entries(&path, &bytes)? {
            if let Some(first) = all
                .iter()
                .find(|e| e.kind == entry.kind && e.id == entry.id)
            {
                return Err(CatalogError::Duplicate {
                    id: entry.id.clone(),
                    first: file_of(first),
                    second: path,
                });
            }
            all.push(entry);
        }
    }
    Ok(all)
}

/// The file of an entry read from a folder.
fn file_of(entry: &Entry) -> PathBuf {
    match &entry.origin {
        Origin::File(path, _) => path.clone(),
        Origin::Builtin(name) => PathBuf::from(name),
    }
}

/// The catalogs directly in a folder, sorted by name, none of them a link that leaves it.
fn files(folder: &Path) -> Result<Vec<PathBuf>, CatalogError> {
    let unreadable = |path: &Path, error: std::io::Error| CatalogError::Unreadable {
        path: path.to_path_buf(),
        why: error.to_string(),
    };
    let home = folder.canonicalize().map_err(|e| unreadable(folder, e))?;
    let mut found = Vec::new();
    for item in fs::read_dir(folder).map_err(|e| unreadable(folder, e))? {
        let path = item.map_err(|e| unreadable(folder, e))?.path();
        let is_yaml = path.extension().is_some_and(|x| x == "yaml" || x == "yml");
        if !is_yaml {
            continue;
        }
        let real = path.canonicalize().map_err(|e| unreadable(&path, e))?;
        if !real.starts_with(&home) {
            return Err(CatalogError::LeavesFolder { path });
        }
        if real.is_file() {
            found.push(path);
        }
    }
    found.sort();
    Ok(found)
}
