//! Whether a key has stood in a mapping before.

use super::super::places::{Child, Key};
use std::collections::HashMap;
use std::hash::{BuildHasher, RandomState};
use std::ops::Range;

/// Entries that are looked through one by one.
const FEW: usize = 16;

/// The keys of a mapping, by their hashes once there are many.
#[derive(Default)]
pub(super) struct Seen {
    hasher: Option<RandomState>,
    /// The first entry of each hash.
    by_hash: HashMap<u64, usize>,
    known: usize,
}

impl Seen {
    /// Where a key stood first in a mapping with these entries.
    pub(super) fn first(&mut self, text: &str, entries: &[(Key, Child)]) -> Option<Range<usize>> {
        let same = |(key, _): &&(Key, Child)| key.text == text;
        let place = |(key, _): &(Key, Child)| key.span.clone();
        if entries.len() <= FEW {
            return entries.iter().find(same).map(place);
        }
        let hasher = self.hasher.get_or_insert_default();
        for (index, (key, _)) in entries.iter().enumerate().skip(self.known) {
            let hash = hasher.hash_one(key.text.as_str());
            self.by_hash.entry(hash).or_insert(index);
        }
        self.known = entries.len();
        let alike = *self.by_hash.get(&hasher.hash_one(text))?;
        // Two keys of one hash are all but impossible; one that is not the first of its hash is looked for.
        let mut from = entries.get(alike..)?.iter();
        from.find(same).map(place)
    }
}
