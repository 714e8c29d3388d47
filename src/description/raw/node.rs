//! A value of any shape, read by serde without losing what stands there.
//!
//! Serde stops at the first surprise. Here nothing surprises: a wrong shape is kept as such,
//! an unknown key is set aside, and both are told later together with all else that is wrong.

use serde::de::value::StrDeserializer;
use serde::de::{
    Deserialize, DeserializeSeed, Deserializer, IgnoredAny, IntoDeserializer, MapAccess, SeqAccess,
    Visitor,
};
use std::fmt;
use std::marker::PhantomData;

/// A value as found: `L` is what a list would be, `M` what a mapping would be.
#[derive(Clone, Debug, Default)]
pub(crate) enum Node<L, M> {
    /// The key is not there.
    #[default]
    Absent,
    /// Nothing, `~` or `null`.
    Null,
    /// A single value, as the file means it.
    Text(String),
    /// A list.
    List(L),
    /// A mapping.
    Mapping(M),
}

/// A single value.
pub(crate) type Leaf = Node<Refused, Refused>;
/// A mapping with known keys.
pub(crate) type Map<T> = Node<Refused, Keys<T>>;
/// A list.
pub(crate) type List<T> = Node<Unread<T>, Refused>;
/// A mapping with keys of the user's choice.
pub(crate) type Named<T> = Node<Refused, Names<T>>;

impl<L, M> Node<L, M> {
    /// Whether the key is not there, or has nothing behind it.
    pub(crate) fn is_absent(&self) -> bool {
        matches!(self, Node::Absent | Node::Null)
    }
}

/// A collection where none belongs.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Refused;

/// A list whose entries are read one by one when they are wanted: there can be many.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Unread<T>(PhantomData<T>);

/// A mapping with known keys, and what stood beside them.
#[derive(Clone, Debug)]
pub(crate) struct Keys<T> {
    /// The known keys.
    pub(crate) body: Box<T>,
    /// Keys that are not known.
    pub(crate) unknown: Vec<String>,
    /// The keys that are.
    pub(crate) known: &'static [&'static str],
}

/// Keys of the user's choice, in the order written.
#[derive(Clone, Debug)]
pub(crate) struct Names<T>(pub(crate) Vec<(String, T)>);

/// What can stand for a list.
pub(crate) trait FromSeq<'de>: Sized {
    fn from_seq<A: SeqAccess<'de>>(list: A) -> Result<Self, A::Error>;
}

/// What can stand for a mapping.
pub(crate) trait FromMap<'de>: Sized {
    fn from_map<A: MapAccess<'de>>(map: A) -> Result<Self, A::Error>;
}

impl<'de> FromSeq<'de> for Refused {
    fn from_seq<A: SeqAccess<'de>>(_: A) -> Result<Self, A::Error> {
        Ok(Refused)
    }
}

impl<'de> FromMap<'de> for Refused {
    fn from_map<A: MapAccess<'de>>(_: A) -> Result<Self, A::Error> {
        Ok(Refused)
    }
}

impl<'de, T> FromSeq<'de> for Unread<T> {
    fn from_seq<A: SeqAccess<'de>>(_: A) -> Result<Self, A::Error> {
        Ok(Unread(PhantomData))
    }
}

impl<'de, T: Deserialize<'de>> FromMap<'de> for Names<T> {
    fn from_map<A: MapAccess<'de>>(mut map: A) -> Result<Self, A::Error> {
        let mut out: Vec<(String, T)> = Vec::new();
        while let Some(entry) = map.next_entry()? {
            out.push(entry);
        }
        Ok(Names(out))
    }
}

impl<'de, T: Deserialize<'de>> FromMap<'de> for Keys<T> {
    fn from_map<A: MapAccess<'de>>(map: A) -> Result<Self, A::Error> {
        let mut aside = Aside::default();
        let body = T::deserialize(Sieve {
            map,
            aside: &mut aside,
        })?;
        Ok(Keys {
            body: Box::new(body),
            unknown: aside.unknown,
            known: aside.known,
        })
    }
}

impl<'de, L: FromSeq<'de>, M: FromMap<'de>> Deserialize<'de> for Node<L, M> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_any(AnyShape(PhantomData))
    }
}

/// Visits whatever stands there.
struct AnyShape<L, M>(PhantomData<(L, M)>);

impl<'de, L: FromSeq<'de>, M: FromMap<'de>> Visitor<'de> for AnyShape<L, M> {
    type Value = Node<L, M>;

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a value, a list or a mapping")
    }
    fn visit_str<E>(self, text: &str) -> Result<Self::Value, E> {
        Ok(Node::Text(text.to_owned()))
    }
    fn visit_unit<E>(self) -> Result<Self::Value, E> {
        Ok(Node::Null)
    }
    fn visit_seq<A: SeqAccess<'de>>(self, list: A) -> Result<Self::Value, A::Error> {
        L::from_seq(list).map(Node::List)
    }
    fn visit_map<A: MapAccess<'de>>(self, map: A) -> Result<Self::Value, A::Error> {
        M::from_map(map).map(Node::Mapping)
    }
}

/// What the sieve held back.
#[derive(Default)]
struct Aside {
    unknown: Vec<String>,
    known: &'static [&'static str],
}

/// Gives a struct's own keys to it and sets the others aside.
struct Sieve<'a, A> {
    map: A,
    aside: &'a mut Aside,
}

impl<'de, A: MapAccess<'de>> Deserializer<'de> for Sieve<'_, A> {
    type Error = A::Error;

    fn deserialize_struct<V: Visitor<'de>>(
        self,
        _name: &'static str,
        fields: &'static [&'static str],
        visitor: V,
    ) -> Result<V::Value, A::Error> {
        self.aside.known = fields;
        visitor.visit_map(Sieved {
            map: self.map,
            aside: self.aside,
        })
    }
    fn deserialize_any<V: Visitor<'de>>(self, visitor: V) -> Result<V::Value, A::Error> {
        visitor.visit_map(self.map)
    }
    serde::forward_to_deserialize_any! {
        bool i8 i16 i32 i64 i128 u8 u16 u32 u64 u128 f32 f64 char str string bytes byte_buf option unit
        unit_struct newtype_struct seq tuple tuple_struct map enum identifier ignored_any
    }
}

struct Sieved<'a, A> {
    map: A,
    aside: &'a mut Aside,
}

impl<'de, A: MapAccess<'de>> MapAccess<'de> for Sieved<'_, A> {
    type Error = A::Error;

    fn next_key_seed<K: DeserializeSeed<'de>>(
        &mut self,
        seed: K,
    ) -> Result<Option<K::Value>, A::Error> {
        while let Some(key) = self.map.next_key::<&'de str>()? {
            if self.aside.known.contains(&key) {
                let key: StrDeserializer<'_, A::Error> = key.into_deserializer();
                return seed.deserialize(key).map(Some);
            }
            self.aside.unknown.push(key.to_owned());
            self.map.next_value::<IgnoredAny>()?;
        }
        Ok(None)
    }
    fn next_value_seed<V: DeserializeSeed<'de>>(&mut self, seed: V) -> Result<V::Value, A::Error> {
        self.map.next_value_seed(seed)
    }
}
