//! The second reader: a text is taken as read only where `serde_yaml`, a parser of its own, finds the same values in it.

use super::places::Content;
use super::slip;
use super::values::Value;
use crate::problem::Problem;
use serde::de::{DeserializeSeed, Deserializer, Error, IgnoredAny, MapAccess, SeqAccess, Visitor};
use std::fmt;
use std::thread::{Builder, ScopedJoinHandle};

/// From this many bytes on the second reader has a thread of its own.
const LARGE: usize = 1 << 16;

/// What comes of the first reader's values, and what the second refuses of the same text.
pub(super) fn beside<T>(
    text: &str,
    values: Value<'_>,
    of_values: impl FnOnce() -> T,
) -> (T, Option<Problem>) {
    let again = || read_again(text, values);
    std::thread::scope(|scope| {
        let spawned = (text.len() >= LARGE).then(|| Builder::new().spawn_scoped(scope, again));
        let value = of_values();
        let refused = match spawned.and_then(Result::ok).map(ScopedJoinHandle::join) {
            Some(Ok(refused)) => refused,
            Some(Err(panic)) => std::panic::resume_unwind(panic),
            None => again(),
        };
        (value, refused)
    })
}

/// What the second reader refuses of a text, or reads otherwise than the first.
fn read_again(text: &str, values: Value<'_>) -> Option<Problem> {
    let read = values.deserialize(serde_yaml::Deserializer::from_str(text));
    let e = read.err()?;
    // no YAML at all to the second reader says more than another meaning
    let plain = serde_yaml::from_str::<IgnoredAny>(text).err();
    Some(refused(text, plain.as_ref().unwrap_or(&e)))
}

/// What only the second reader refuses: bad indentation within quotes and brackets, for the most part.
pub(crate) fn refused(text: &str, e: &serde_yaml::Error) -> Problem {
    let at = e.location().map_or(0, |l| l.index().min(text.len()));
    let at = (0..=at)
        .rev()
        .find(|i| text.is_char_boundary(*i))
        .unwrap_or(0);
    let end = text[at..].chars().next().map_or(at, |c| at + c.len_utf8());
    let what = e.to_string();
    slip::told(
        text,
        at..end,
        what.split(" at line ").next().unwrap_or(&what),
    )
}

/// Holds what a parser reads against the value that the first reader found there.
impl<'de> DeserializeSeed<'de> for Value<'_> {
    type Value = ();

    fn deserialize<D: Deserializer<'de>>(self, second: D) -> Result<(), D::Error> {
        match self.content {
            Some(Content::List { .. }) => second.deserialize_seq(self),
            Some(Content::Mapping { .. }) => second.deserialize_map(self),
            _ => second.deserialize_str(self),
        }
    }
}

impl<'de> Visitor<'de> for Value<'_> {
    type Value = ();

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self.content {
            Some(Content::List { .. }) => "a list",
            Some(Content::Mapping { .. }) => "a mapping",
            _ => "a single value",
        })
    }
    fn visit_str<E: Error>(self, text: &str) -> Result<(), E> {
        match self.content {
            Some(Content::Scalar { text: first, .. }) if first == text => Ok(()),
            _ => Err(otherwise()),
        }
    }
    fn visit_seq<A: SeqAccess<'de>>(self, mut list: A) -> Result<(), A::Error> {
        for value in self.entries() {
            list.next_element_seed(value)?.ok_or_else(otherwise)?;
        }
        match list.next_element::<IgnoredAny>()? {
            None => Ok(()),
            Some(_) => Err(otherwise()),
        }
    }
    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<(), A::Error> {
        let mut pairs = self.pairs().peekable();
        while let Some(key) = map.next_key::<String>()? {
            if let Some((_, value)) = pairs.next_if(|(first, _)| *first == key) {
                map.next_value_seed(value)?;
            } else if self.pairs().any(|(first, _)| first == key) {
                // given twice: the first reader tells of it
                map.next_value::<IgnoredAny>()?;
            } else {
                return Err(otherwise());
            }
        }
        match pairs.next() {
            None => Ok(()),
            Some(_) => Err(otherwise()),
        }
    }
}

/// Two readings of one text.
fn otherwise<E: Error>() -> E {
    E::custom("this can be read in two ways")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::description::scan::scan;

    /// What is said of a text whose first reading was that of another.
    fn against(first: &str, text: &str) -> Option<String> {
        let (places, _) = scan(first).expect("a text that reads");
        read_again(text, places.value()).map(|problem| problem.kind.to_string())
    }

    #[test]
    fn a_text_that_two_readers_read_alike_passes() {
        for text in [
            "a: &x [1, 'two', \"three\\n\", ~, null, 'null', '']\nb: *x\nc: {d: *x, e: }\n",
            "a: |\n  two\n  lines\nb: >-\n  one\n  line\nc: plain over\n  two lines\n1: one\ntrue: yes\n",
            "a: 1\nb: 2\na: 3\n",
            "- 0x1F\n- 1_000\n- .nan\n- 010\n- 1e400\n- '#'\n",
        ] {
            assert_eq!(against(text, text), None, "{text}");
        }
    }

    #[test]
    fn a_text_that_two_readers_read_otherwise_is_refused() {
        for (first, text) in [
            ("a: 1", "a: 2"),
            ("a: 1", "b: 1"),
            ("a: 1", "a: 1\nb: 2"),
            ("a: 1\nb: 2", "a: 1"),
            ("[1]", "[1, 2]"),
            ("[1, 2]", "[1]"),
        ] {
            let said = against(first, text).unwrap_or_default();
            assert!(
                said.ends_with("this can be read in two ways"),
                "{first} / {text}: {said}"
            );
        }
        for (first, text) in [
            ("[1]", "a: 1"),
            ("a: 1", "[1]"),
            ("a", "a: 1"),
            ("a: 1", "a"),
        ] {
            assert!(against(first, text).is_some(), "{first} / {text}");
        }
    }

    #[test]
    fn a_large_text_is_read_twice_as_well() {
        let bad = "build: {mo\n  wer: 1}\n";
        let large = format!("{bad}{}", "# remark\n".repeat(LARGE / 9 + 1));
        for text in [bad, &large] {
            let (places, _) = scan(text).expect("the first reader reads it");
            let (value, refused) = beside(text, places.value(), || 1);
            let said = refused.expect("the second does not").kind.to_string();
            assert!(said.starts_with("not valid YAML"), "{said}");
            assert_eq!(value, 1);
        }
    }
}
