//! What can be wrong with a user's folder of catalogs.

use super::Kind;
use std::fmt;
use std::path::PathBuf;

/// Why a folder of catalogs was refused.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum CatalogError {
    /// The folder or a file in it cannot be read.
    Unreadable {
        /// Which.
        path: PathBuf,
        /// What the system says.
        why: String,
    },
    /// A link in the folder leads outside of it.
    LeavesFolder {
        /// The link.
        path: PathBuf,
    },
    /// More than a mebibyte.
    TooLarge {
        /// The file.
        path: PathBuf,
    },
    /// Not YAML, or not a mapping of lists of mappings.
    NotACatalog {
        /// The file.
        path: PathBuf,
        /// What is wrong, with its place where there is one.
        why: String,
    },
    /// A top key that is no kind of entry.
    UnknownKind {
        /// The file.
        path: PathBuf,
        /// The key.
        key: String,
    },
    /// An entry without an id.
    NoId {
        /// The file.
        path: PathBuf,
        /// The kind of the entry.
        kind: Kind,
        /// Its place in the list, from 0.
        index: usize,
    },
    /// Two entries of one kind with one id.
    Duplicate {
        /// The id.
        id: String,
        /// File of the first.
        first: PathBuf,
        /// File of the second.
        second: PathBuf,
    },
}

impl fmt::Display for CatalogError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            CatalogError::Unreadable { path, why } => {
                write!(f, "catalog `{}` cannot be read: {why}", path.display())
            }
            CatalogError::LeavesFolder { path } => {
                write!(
                    f,
                    "catalog `{}` is a link that leaves its folder",
                    path.display()
                )
            }
            CatalogError::TooLarge { path } => {
                write!(f, "catalog `{}` is over 1 MiB", path.display())
            }
            CatalogError::NotACatalog { path, why } => {
                write!(f, "catalog `{}`: {why}", path.display())
            }
            CatalogError::UnknownKind { path, key } => write!(
                f,
                "catalog `{}`: unknown key `{key}`, expected {}",
                path.display(),
                Kind::ALL.map(|k| format!("`{}`", k.key())).join(", ")
            ),
            CatalogError::NoId { path, kind, index } => {
                write!(
                    f,
                    "catalog `{}`: `{}[{index}]` has no `id`",
                    path.display(),
                    kind.key()
                )
            }
            CatalogError::Duplicate { id, first, second } if first == second => {
                write!(f, "catalog `{}`: id `{id}` is used twice", first.display())
            }
            CatalogError::Duplicate { id, first, second } => {
                write!(
                    f,
                    "id `{id}` is in both `{}` and `{}`",
                    first.display(),
                    second.display()
                )
            }
        }
    }
}

impl std::error::Error for CatalogError {}
