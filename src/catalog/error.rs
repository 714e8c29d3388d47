//! What can be wrong with a user's folder of catalogs.

use crate::problem::Refusal;
use std::fmt;
use std::path::PathBuf;

/// Why a folder of catalogs was refused.
#[derive(Clone, Debug)]
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
    /// A file that is no catalog: every problem, at its place; boxed, as it carries the text it is shown on.
    Refused(Box<Refusal>),
    /// Two entries of one kind with one id, in two files.
    Duplicate {
        /// The id.
        id: String,
        /// File of the first.
        first: PathBuf,
        /// File of the second.
        second: PathBuf,
    },
}

impl From<Refusal> for CatalogError {
    fn from(refusal: Refusal) -> CatalogError {
        CatalogError::Refused(Box::new(refusal))
    }
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
            CatalogError::Refused(refusal) => refusal.fmt(f),
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
