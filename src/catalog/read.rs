//! Entries read as parts of a build, each once however often it is asked for.

use super::{Entry, Kind, builtin};
use crate::description::{AccessoryText, BatteryText, ChargingText, StarterText, Written};
use crate::problem::Refusal;
use std::collections::BTreeMap;
use std::sync::{Arc, Mutex, OnceLock, PoisonError};

/// An entry and its own keys, read.
#[derive(Clone, Debug)]
pub struct Read<T> {
    /// The entry.
    pub entry: Entry,
    /// Its own keys.
    pub text: T,
}

/// An entry read, or why it does not read; shared, as many builds may ask for it.
pub type Shared<T> = Result<Arc<Read<T>>, (Entry, Arc<Refusal>)>;

/// An entry of a build file that may name a catalog part.
pub trait Parted: Sized + sealed::Kept {
    /// The kind of its parts.
    const KIND: Kind;
    /// The part it names.
    fn part(&self) -> Option<&Written<String>>;
    /// Reads the keys of a catalog entry; `name` is what messages call it.
    ///
    /// # Errors
    /// [`Refusal`] with every problem found.
    fn read(name: &str, body: &str) -> Result<Self, Refusal>;
}

/// Entries read so far.
#[derive(Debug)]
pub struct Cache<T>(Mutex<BTreeMap<String, Shared<T>>>);

impl<T> Default for Cache<T> {
    fn default() -> Cache<T> {
        Cache(Mutex::default())
    }
}

impl<T> Cache<T> {
    fn found(&self, id: &str) -> Option<Shared<T>> {
        let kept = self.0.lock().unwrap_or_else(PoisonError::into_inner);
        kept.get(id).cloned()
    }

    fn keep(&self, id: &str, read: Shared<T>) {
        let mut kept = self.0.lock().unwrap_or_else(PoisonError::into_inner);
        kept.insert(id.to_owned(), read);
    }
}

/// What is found and read once: where the built-in entries stand, and those that were asked for.
#[derive(Debug, Default)]
pub struct Store {
    places: [OnceLock<builtin::Places>; Kind::ALL.len()],
    charging: Cache<ChargingText>,
    batteries: Cache<BatteryText>,
    starters: Cache<StarterText>,
    accessories: Cache<AccessoryText>,
}

impl Store {
    /// Where the built-in entries of a kind stand.
    pub(super) fn places(&self, kind: Kind) -> Option<&builtin::Places> {
        let number = Kind::ALL.iter().position(|k| *k == kind)?;
        Some(
            self.places
                .get(number)?
                .get_or_init(|| builtin::places(kind)),
        )
    }

    /// The entry of an id as a part, read at most once.
    pub(super) fn part<T: Parted>(
        &self,
        id: &str,
        find: impl FnOnce() -> Option<Entry>,
    ) -> Option<Shared<T>> {
        let cache = T::cache(self);
        if let Some(found) = cache.found(id) {
            return Some(found);
        }
        let entry = find()?;
        let read = match T::read(id, &entry.body) {
            Ok(text) => Ok(Arc::new(Read { entry, text })),
            Err(refusal) => Err((entry, Arc::new(refusal))),
        };
        cache.keep(id, read.clone());
        Some(read)
    }
}

mod sealed {
    /// Where the entries read are kept.
    pub trait Kept: Sized {
        /// The cache of this kind.
        fn cache(store: &super::Store) -> &super::Cache<Self>;
    }
}

/// Declares the entries that may name a part.
macro_rules! parted {
    ($($text:ident, $kind:ident, $read:ident, $cache:ident;)*) => { $(
        impl sealed::Kept for $text {
            fn cache(store: &Store) -> &Cache<Self> {
                &store.$cache
            }
        }
        impl Parted for $text {
            const KIND: Kind = Kind::$kind;
            fn part(&self) -> Option<&Written<String>> {
                self.part.as_ref()
            }
            fn read(name: &str, body: &str) -> Result<Self, Refusal> {
                crate::description::$read(name, body)
            }
        }
    )* };
}
parted! {
    ChargingText, Charging, read_charging, charging;
    BatteryText, Battery, read_battery, batteries;
    StarterText, Starter, read_starter, starters;
    AccessoryText, Accessory, read_accessory, accessories;
}
