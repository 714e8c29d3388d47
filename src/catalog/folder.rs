//! A user's folder of catalogs.

use super::{CatalogError, Certainty, Entry, Kind, Origin};
use serde_yaml::{Mapping, Value};
use std::fs;
use std::path::{Path, PathBuf};

/// The largest catalog file that is read, bytes.
const MOST_BYTES: u64 = 1 << 20;

/// Every entry of every catalog in a folder, by file name, then as written.
pub(super) fn read(folder: &Path) -> Result<Vec<Entry>, CatalogError> {
    let mut all: Vec<Entry> = Vec::new();
    for path in files(folder)? {
        let text = text_of(&path)?;
        for entry in entries(&path, &text)? {
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
        Origin::File(path) => path.clone(),
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

/// The text of one file.
fn text_of(path: &Path) -> Result<String, CatalogError> {
    let unreadable = |error: std::io::Error| CatalogError::Unreadable {
        path: path.to_path_buf(),
        why: error.to_string(),
    };
    if fs::metadata(path).map_err(unreadable)?.len() > MOST_BYTES {
        return Err(CatalogError::TooLarge {
            path: path.to_path_buf(),
        });
    }
    fs::read_to_string(path).map_err(unreadable)
}

/// The entries of one file.
fn entries(path: &Path, text: &str) -> Result<Vec<Entry>, CatalogError> {
    let wrong = |why: String| CatalogError::NotACatalog {
        path: path.to_path_buf(),
        why,
    };
    let top: Value = serde_yaml::from_str(text).map_err(|e| wrong(e.to_string()))?;
    let Value::Mapping(top) = top else {
        return Err(wrong("not a mapping of lists of parts".to_owned()));
    };
    let mut found = Vec::new();
    for (key, list) in top {
        let key = key.as_str().unwrap_or_default().to_owned();
        let Some(kind) = Kind::ALL.into_iter().find(|k| k.key() == key) else {
            return Err(CatalogError::UnknownKind {
                path: path.to_path_buf(),
                key,
            });
        };
        let Value::Sequence(list) = list else {
            return Err(wrong(format!("`{key}` is not a list")));
        };
        for (index, item) in list.into_iter().enumerate() {
            let Value::Mapping(keys) = item else {
                return Err(wrong(format!("`{key}[{index}]` is not a mapping")));
            };
            found.push(entry(path, kind, index, keys)?);
        }
    }
    Ok(found)
}

/// One entry: its own four keys apart from those of the build file.
fn entry(path: &Path, kind: Kind, index: usize, mut keys: Mapping) -> Result<Entry, CatalogError> {
    let mut take = |key: &str| match keys.remove(key) {
        Some(Value::String(text)) => Some(text),
        Some(Value::Number(number)) => Some(number.to_string()),
        _ => None,
    };
    let id = take("id").ok_or_else(|| CatalogError::NoId {
        path: path.to_path_buf(),
        kind,
        index,
    })?;
    let title = take("title").unwrap_or_else(|| id.clone());
    let source = take("source").unwrap_or_default();
    let certainty = Certainty::from_text(&take("certainty").unwrap_or_default());
    let body = serde_yaml::to_string(&keys).map_err(|e| CatalogError::NotACatalog {
        path: path.to_path_buf(),
        why: e.to_string(),
    })?;
    Ok(Entry {
        kind,
        id,
        title,
        source,
        certainty,
        origin: Origin::File(path.to_path_buf()),
        body,
    })
}
