//! The values of a file for serde, from the tree of its places.
//!
//! A value reaches serde as its text; what it means is for the key that wants it to say. So it stands in one tree with
//! its place, and an alias is its anchor's value once more.

use super::places::{Child, Content, Places};
use serde::de::value::{BorrowedStrDeserializer, Error, MapDeserializer, SeqDeserializer};
use serde::de::{Deserializer, IntoDeserializer, Visitor};

/// A value of a tree.
#[derive(Clone, Copy)]
pub(super) struct Value<'de> {
    places: &'de Places,
    pub(super) content: Option<&'de Content>,
}

/// The values of a list.
#[derive(Clone)]
pub(super) struct Values<'de> {
    list: Value<'de>,
    entries: std::slice::Iter<'de, Child>,
}

impl<'de> Iterator for Values<'de> {
    type Item = Value<'de>;

    fn next(&mut self) -> Option<Value<'de>> {
        self.entries.next().map(|child| self.list.below(child))
    }
    fn size_hint(&self) -> (usize, Option<usize>) {
        self.entries.size_hint()
    }
}

impl Places {
    /// The values of the list at a path.
    pub(super) fn values(&self, path: &str) -> Values<'_> {
        let place = self.find(path).and_then(|at| self.places.get(at.place));
        let content = place.map(|place| &place.content);
        let list = Value {
            places: self,
            content,
        };
        list.entries()
    }

    /// The whole file.
    pub(super) fn value(&self) -> Value<'_> {
        Value {
            places: self,
            content: self.places.last().map(|place| &place.content),
        }
    }
}

impl<'de> Value<'de> {
    /// A value below it.
    fn below(self, child: &Child) -> Value<'de> {
        let content = self.places.places.get(child.place).map(|p| &p.content);
        Value { content, ..self }
    }

    /// The values of a list; of another value none.
    pub(super) fn entries(self) -> Values<'de> {
        let entries = match self.content {
            Some(Content::List { entries, .. }) => entries.as_slice(),
            _ => &[],
        };
        Values {
            list: self,
            entries: entries.iter(),
        }
    }

    /// The keys and values of a mapping; of another value none.
    pub(super) fn pairs(self) -> impl Iterator<Item = (&'de str, Value<'de>)> {
        let entries = match self.content {
            Some(Content::Mapping { entries, .. }) => entries.as_slice(),
            _ => &[],
        };
        let entries = entries.iter();
        entries.map(move |(key, child)| (key.text.as_str(), self.below(child)))
    }
}

/// What YAML takes for nothing, where it is written plainly.
fn is_null(text: &str) -> bool {
    matches!(text, "" | "~" | "null" | "Null" | "NULL")
}

impl<'de> Deserializer<'de> for Value<'de> {
    type Error = Error;

    fn deserialize_any<V: Visitor<'de>>(self, visitor: V) -> Result<V::Value, Error> {
        match self.content {
            Some(Content::Scalar { text, plain: true }) if is_null(text) => visitor.visit_unit(),
            Some(Content::Scalar { text, .. }) => visitor.visit_borrowed_str(text),
            Some(Content::List { .. }) => visitor.visit_seq(SeqDeserializer::new(self.entries())),
            Some(Content::Mapping { .. }) => {
                let pairs = self.pairs();
                let pairs = pairs.map(|(key, value)| (BorrowedStrDeserializer::new(key), value));
                visitor.visit_map(MapDeserializer::new(pairs))
            }
            None => visitor.visit_unit(),
        }
    }
    fn deserialize_ignored_any<V: Visitor<'de>>(self, visitor: V) -> Result<V::Value, Error> {
        visitor.visit_unit()
    }
    serde::forward_to_deserialize_any! {
        bool i8 i16 i32 i64 i128 u8 u16 u32 u64 u128 f32 f64 char str string bytes byte_buf option unit
        unit_struct newtype_struct seq tuple tuple_struct map struct enum identifier
    }
}

impl<'de> IntoDeserializer<'de> for Value<'de> {
    type Deserializer = Self;

    fn into_deserializer(self) -> Self {
        self
    }
}
