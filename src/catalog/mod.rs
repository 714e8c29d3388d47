//! Catalogs of parts: windings, batteries, starters, accessories and kits.
//!
//! A catalog is a YAML file with one top key per kind (`charging:`, `batteries:`, `starters:`, `accessories:`,
//! `kits:`) over a list of entries. An entry has the keys of the build file's own entry, and beside them `id`,
//! `title`, `source` and `certainty`. The program carries a set of them; a folder of the user's is searched first,
//! so that an entry of the same id there takes the built-in one's place.
//!
//! ```
//! use ampledger::catalog::{Catalogs, Kind};
//! let catalogs = Catalogs::builtin();
//! let light = catalogs.find(Kind::Accessory, "work-light-led-27w").unwrap();
//! assert_eq!(light.title, "LED work light, 27 W");
//! assert_eq!(catalogs.nearest(Kind::Accessory, "work-light-led-27").as_deref(), Some("work-light-led-27w"));
//! ```

mod builtin;
mod error;
mod file;
mod folder;
mod list;
mod read;

pub use error::CatalogError;
pub use list::{KeyRow, Listed};
pub use read::{Parted, Read, Shared};

use crate::problem::Refusal;
use std::fmt;
use std::path::{Path, PathBuf};
use std::sync::Arc;

use read::Store;

/// What an entry describes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Kind {
    /// A winding or an alternator.
    Charging,
    /// A battery.
    Battery,
    /// A starter.
    Starter,
    /// An accessory.
    Accessory,
    /// Accessories added together.
    Kit,
}

impl Kind {
    /// Every kind, in the order in which they are listed.
    pub const ALL: [Kind; 5] = [
        Kind::Charging,
        Kind::Battery,
        Kind::Starter,
        Kind::Accessory,
        Kind::Kit,
    ];

    /// The top key of a catalog file over entries of this kind.
    #[must_use]
    pub const fn key(self) -> &'static str {
        match self {
            Kind::Charging => "charging",
            Kind::Battery => "batteries",
            Kind::Starter => "starters",
            Kind::Accessory => "accessories",
            Kind::Kit => "kits",
        }
    }
}

/// How far the figures of an entry can be trusted.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Certainty {
    /// Printed in a standard that was read.
    Standard,
    /// Common practice, without a source.
    CommonPractice,
    /// Made up for the example.
    Invented,
    /// Of a standard, from memory.
    Memory,
    /// The entry does not say.
    Unsaid,
}

impl Certainty {
    /// As an entry writes it; [`Certainty::Unsaid`] for any other text.
    #[must_use]
    pub fn from_text(text: &str) -> Certainty {
        match text {
            "standard" => Certainty::Standard,
            "common practice" => Certainty::CommonPractice,
            "invented" => Certainty::Invented,
            "memory" => Certainty::Memory,
            _ => Certainty::Unsaid,
        }
    }
}

impl fmt::Display for Certainty {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Certainty::Standard => "standard",
            Certainty::CommonPractice => "common practice",
            Certainty::Invented => "invented",
            Certainty::Memory => "from memory",
            Certainty::Unsaid => "certainty not said",
        })
    }
}

/// Which file an entry stands in.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Origin {
    /// A file that the program carries, by its name.
    Builtin(&'static str),
    /// A file in the user's folder, and the line on which the entry stands.
    File(PathBuf, usize),
}

impl fmt::Display for Origin {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Origin::Builtin(name) => write!(f, "built-in {name}"),
            Origin::File(path, line) => write!(f, "{}:{line}", path.display()),
        }
    }
}

/// One entry of a catalog, its own keys still as text.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Entry {
    /// What it describes.
    pub kind: Kind,
    /// Its id, by which `part:` and `--with` name it.
    pub id: String,
    /// What it is, in words.
    pub title: String,
    /// Where its figures come from.
    pub source: String,
    /// How far they can be trusted.
    pub certainty: Certainty,
    /// The file it stands in.
    pub origin: Origin,
    /// The keys of the build file's own entry, as YAML.
    pub body: String,
}

impl Entry {
    /// The origin of a figure taken from it, in words: `winding-16a, common practice`.
    #[must_use]
    pub fn words(&self) -> String {
        format!("{}, {}", self.id, self.certainty)
    }
}

/// The catalogs at hand.
#[derive(Clone, Debug, Default)]
pub struct Catalogs {
    /// Entries of the user's folder.
    own: Vec<Entry>,
    /// What was found and read so far; a clone shares it.
    store: Arc<Store>,
}

impl Catalogs {
    /// Those the program carries.
    #[must_use]
    pub fn builtin() -> Catalogs {
        Catalogs::default()
    }

    /// Those of a folder, then those the program carries. Every `*.yaml` and `*.yml` directly in the folder is read.
    ///
    /// # Errors
    /// A folder or file that cannot be read or is no catalog, an entry without an id, an id used twice for a kind,
    /// a link that leaves the folder.
    pub fn with_folder(folder: &Path) -> Result<Catalogs, CatalogError> {
        Ok(Catalogs {
            own: folder::read(folder)?,
            store: Arc::default(),
        })
    }

    /// Those of one file, then those the program carries. `name` is what messages call the file.
    ///
    /// # Errors
    /// [`Refusal`] with every problem found.
    pub fn with_file(name: &str, bytes: &[u8]) -> Result<Catalogs, Refusal> {
        Ok(Catalogs {
            own: file::entries(Path::new(name), bytes)?,
            store: Arc::default(),
        })
    }

    /// The user's entries alone, in the order of their files.
    #[must_use]
    pub fn own(&self) -> &[Entry] {
        &self.own
    }

    /// The entry of an id.
    #[must_use]
    pub fn find(&self, kind: Kind, id: &str) -> Option<Entry> {
        self.own
            .iter()
            .find(|e| e.kind == kind && e.id == id)
            .cloned()
            .or_else(|| {
                self.store
                    .places(kind)
                    .and_then(|places| builtin::find(places, id))
            })
    }

    /// The entry of an id as a part of a build. However often it is asked for, it is read once.
    #[must_use]
    pub fn part<T: Parted>(&self, id: &str) -> Option<Shared<T>> {
        self.store.part(id, || self.find(T::KIND, id))
    }

    /// Every entry of a kind: the user's, then the built-in ones whose place none of those takes.
    #[must_use]
    pub fn entries(&self, kind: Kind) -> Vec<Entry> {
        let mut all: Vec<Entry> = self
            .own
            .iter()
            .filter(|e| e.kind == kind)
            .cloned()
            .collect();
        for (id, rest, file) in builtin::blocks(kind) {
            if !self.own.iter().any(|e| e.kind == kind && e.id == id) {
                all.push(builtin::entry(kind, id, rest, file));
            }
        }
        all
    }

    /// The id that comes nearest to one that is in no catalog; none where nothing is near.
    #[must_use]
    pub fn nearest(&self, kind: Kind, id: &str) -> Option<String> {
        let own = self
            .own
            .iter()
            .filter(|e| e.kind == kind)
            .map(|e| e.id.as_str());
        let builtin = builtin::blocks(kind).map(|(id, _, _)| id);
        let mut best: Option<(f64, &str)> = None;
        for candidate in own.chain(builtin) {
            let score = strsim::jaro_winkler(id, candidate);
            if score > 0.78 && best.is_none_or(|(top, _)| score > top) {
                best = Some((score, candidate));
            }
        }
        best.map(|(_, id)| id.to_owned())
    }

    /// The entries of every kind whose id or title holds all of the words, whatever their case.
    #[must_use]
    pub fn search(&self, words: &str) -> Vec<Entry> {
        let words: Vec<String> = words.split_whitespace().map(str::to_lowercase).collect();
        let holds = |e: &Entry| {
            let text = format!("{} {} {}", e.id, e.title, e.kind.key()).to_lowercase();
            words.iter().all(|w| text.contains(w.as_str()))
        };
        Kind::ALL
            .into_iter()
            .flat_map(|kind| self.entries(kind))
            .filter(holds)
            .collect()
    }
}
