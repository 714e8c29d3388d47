//! Where every key and value of a file stands.

use super::path::{self, Step};
use std::ops::Range;

/// The tree of a file: what stands where. An alias leads to the place of its anchor.
#[derive(Clone, Debug, Default)]
pub struct Places {
    pub(super) places: Vec<Place>,
}

/// One value of a file.
#[derive(Clone, Debug)]
pub(super) struct Place {
    /// Bytes of the value; of a collection in block style, from its first entry to the end of its last.
    pub(super) span: Range<usize>,
    /// What it is.
    pub(super) content: Content,
    /// Whether an alias repeats it elsewhere.
    pub(super) repeated: bool,
}

/// What a value is.
#[derive(Clone, Debug)]
pub(super) enum Content {
    /// A single value.
    Scalar {
        /// As the file means it.
        text: String,
        /// Neither quoted nor a block of lines.
        plain: bool,
    },
    /// A list.
    List {
        /// Written in brackets.
        flow: bool,
        /// Its entries.
        entries: Vec<Child>,
    },
    /// A mapping.
    Mapping {
        /// Written in braces.
        flow: bool,
        /// Its entries; of a key given twice, the first.
        entries: Vec<(Key, Child)>,
    },
}

/// A key and where it stands.
#[derive(Clone, Debug)]
pub(super) struct Key {
    pub(super) text: String,
    pub(super) span: Range<usize>,
}

/// A value below another, perhaps through an alias.
#[derive(Clone, Debug)]
pub(super) struct Child {
    /// Index of its place.
    pub(super) place: usize,
    /// Where the alias stands, if it is one.
    pub(super) alias: Option<Range<usize>>,
}

/// A value found by its path.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Found {
    /// Bytes of its key; of a list's entry none.
    pub key: Option<Range<usize>>,
    /// Bytes of its value.
    pub value: Range<usize>,
    pub(super) place: usize,
    /// Where the alias stands through which it was reached last, and whether another value shares its text.
    pub(super) alias: Option<Range<usize>>,
    pub(super) shared: bool,
}

impl Places {
    /// The place of the whole file.
    fn root(&self) -> Option<Found> {
        let place = self.places.len().checked_sub(1)?;
        let value = self.places[place].span.clone();
        Some(Found {
            key: None,
            value,
            place,
            alias: None,
            shared: false,
        })
    }

    /// The value at a path.
    #[must_use]
    pub fn find(&self, path: &str) -> Option<Found> {
        let (found, rest) = self.walk(&path::steps(path).ok()?)?;
        (rest == 0).then_some(found)
    }

    /// The value at a path, or the nearest above it.
    #[must_use]
    pub fn nearest(&self, path: &str) -> Option<Found> {
        let steps = path::steps(path).unwrap_or_default();
        self.walk(&steps).map(|(found, _)| found)
    }

    /// Follows steps as far as they lead: what was reached, and how many steps were left.
    pub(super) fn walk(&self, steps: &[Step]) -> Option<(Found, usize)> {
        let mut at = self.root()?;
        for (done, step) in steps.iter().enumerate() {
            match self.below(&at, step) {
                Some(next) => at = next,
                None => return Some((at, steps.len() - done)),
            }
        }
        Some((at, 0))
    }

    /// The number of the entry that a step names in a list.
    pub(super) fn index_of(&self, list: &Found, step: &Step) -> Option<usize> {
        match (&self.places.get(list.place)?.content, step) {
            (Content::List { entries, .. }, Step::Named(name)) => {
                let named = |child: &Child| self.names(child.place).any(|n| n == name);
                entries.iter().position(named)
            }
            _ => None,
        }
    }

    /// One step down.
    fn below(&self, from: &Found, step: &Step) -> Option<Found> {
        let (key, child) = match (&self.places.get(from.place)?.content, step) {
            (Content::Mapping { entries, .. }, Step::Key(wanted)) => {
                let (key, child) = entries.iter().find(|(key, _)| key.text == *wanted)?;
                (Some(key.span.clone()), child)
            }
            (Content::List { entries, .. }, Step::Index(index)) => (None, entries.get(*index)?),
            (Content::List { entries, .. }, Step::Named(_)) => {
                (None, entries.get(self.index_of(from, step)?)?)
            }
            _ => return None,
        };
        let place = self.places.get(child.place)?;
        Some(Found {
            key,
            value: place.span.clone(),
            place: child.place,
            alias: child.alias.clone(),
            shared: from.shared || from.alias.is_some() || self.places.get(from.place)?.repeated,
        })
    }

    /// What an entry of a list is called.
    pub(super) fn names(&self, place: usize) -> impl Iterator<Item = &str> {
        ["name", "part", "id"].into_iter().filter_map(move |key| {
            let Content::Mapping { entries, .. } = &self.places.get(place)?.content else {
                return None;
            };
            let (_, child) = entries.iter().find(|(k, _)| k.text == key)?;
            match &self.places.get(child.place)?.content {
                Content::Scalar { text, .. } => Some(text.as_str()),
                _ => None,
            }
        })
    }

    /// Keys of the mapping, or none.
    pub(super) fn keys(&self, place: usize) -> impl Iterator<Item = &str> {
        let entries = match self.places.get(place).map(|p| &p.content) {
            Some(Content::Mapping { entries, .. }) => entries.as_slice(),
            _ => &[],
        };
        entries.iter().map(|(key, _)| key.text.as_str())
    }

    /// The single value's text at a found place, and whether it is written plainly.
    pub(crate) fn scalar(&self, found: &Found) -> Option<(&str, bool)> {
        match &self.places.get(found.place)?.content {
            Content::Scalar { text, plain } => Some((text, *plain)),
            _ => None,
        }
    }

    /// Whether the found value is a list or mapping in block style.
    pub(crate) fn is_block(&self, found: &Found) -> bool {
        matches!(
            self.places.get(found.place).map(|p| &p.content),
            Some(Content::List { flow: false, .. } | Content::Mapping { flow: false, .. })
        )
    }
}
