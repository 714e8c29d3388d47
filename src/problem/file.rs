//! Files that cannot be read at all.

use std::fmt;

/// A file that cannot be read.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum FileProblem {
    /// No such file.
    Missing,
    /// A folder stands there.
    Folder,
    /// The system refuses.
    Unreadable {
        /// What the system says.
        why: String,
    },
}

impl fmt::Display for FileProblem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            FileProblem::Missing => f.write_str("no such file"),
            FileProblem::Folder => f.write_str("this is a folder, a file is needed"),
            FileProblem::Unreadable { why } => write!(f, "the file cannot be read: {why}"),
        }
    }
}

impl FileProblem {
    /// What would do.
    pub(super) fn help(&self) -> Option<&'static str> {
        match self {
            FileProblem::Missing => {
                Some("check the name; `ampledger new` writes a build file to start from")
            }
            FileProblem::Folder => Some("name a build file in it"),
            FileProblem::Unreadable { .. } => None,
        }
    }
}
