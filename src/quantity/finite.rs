//! Whether every number of a value is one: neither infinite nor not-a-number.
//!
//! Walks a value as a serializer does, and stops at the first number that is none. So no field of an answer, and none of
//! a build, is left out, whatever is added to it later.

use serde::Serialize;
use serde::ser;
use std::fmt;

/// Whether every number of a value is finite.
#[must_use]
pub fn all_finite(value: &impl Serialize) -> bool {
    value.serialize(Walk).is_ok()
}

/// A number that is none, or a value that cannot be walked.
#[derive(Debug)]
struct NotFinite;

impl fmt::Display for NotFinite {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a number is infinite or none at all")
    }
}

impl std::error::Error for NotFinite {}

impl ser::Error for NotFinite {
    fn custom<T: fmt::Display>(_: T) -> NotFinite {
        NotFinite
    }
}

/// The walk: writes nothing.
#[derive(Clone, Copy)]
struct Walk;

/// What a walk comes to.
type Walked = Result<(), NotFinite>;

/// Scalars that cannot be infinite.
macro_rules! passes {
    ($($method:ident($kind:ty))*) => { $(fn $method(self, _: $kind) -> Walked { Ok(()) })* };
}

/// Sequences and mappings: each part is walked.
macro_rules! parts {
    ($($kind:ident: $method:ident($($name:ty)?);)*) => { $(
        impl ser::$kind for Walk {
            type Ok = ();
            type Error = NotFinite;
            fn $method<T: Serialize + ?Sized>(&mut self, $(_: $name,)? value: &T) -> Walked {
                value.serialize(*self)
            }
            fn end(self) -> Walked { Ok(()) }
        }
    )* };
}

parts! {
    SerializeSeq: serialize_element();
    SerializeTuple: serialize_element();
    SerializeTupleStruct: serialize_field();
    SerializeTupleVariant: serialize_field();
    SerializeStruct: serialize_field(&'static str);
    SerializeStructVariant: serialize_field(&'static str);
}

impl ser::SerializeMap for Walk {
    type Ok = ();
    type Error = NotFinite;
    fn serialize_key<T: Serialize + ?Sized>(&mut self, _: &T) -> Walked {
        Ok(())
    }
    fn serialize_value<T: Serialize + ?Sized>(&mut self, value: &T) -> Walked {
        value.serialize(*self)
    }
    fn end(self) -> Walked {
        Ok(())
    }
}

/// How a sequence or mapping is begun.
type Begun = Result<Walk, NotFinite>;

impl ser::Serializer for Walk {
    type Ok = ();
    type Error = NotFinite;
    type SerializeSeq = Walk;
    type SerializeTuple = Walk;
    type SerializeTupleStruct = Walk;
    type SerializeTupleVariant = Walk;
    type SerializeMap = Walk;
    type SerializeStruct = Walk;
    type SerializeStructVariant = Walk;

    passes! {
        serialize_bool(bool) serialize_char(char) serialize_str(&str) serialize_bytes(&[u8])
        serialize_i8(i8) serialize_i16(i16) serialize_i32(i32) serialize_i64(i64)
        serialize_u8(u8) serialize_u16(u16) serialize_u32(u32) serialize_u64(u64)
        serialize_unit_struct(&'static str)
    }

    fn serialize_f32(self, x: f32) -> Walked {
        self.serialize_f64(f64::from(x))
    }
    fn serialize_f64(self, x: f64) -> Walked {
        x.is_finite().then_some(()).ok_or(NotFinite)
    }
    fn serialize_none(self) -> Walked {
        Ok(())
    }
    fn serialize_unit(self) -> Walked {
        Ok(())
    }
    fn serialize_some<T: Serialize + ?Sized>(self, value: &T) -> Walked {
        value.serialize(self)
    }
    fn serialize_unit_variant(self, _: &'static str, _: u32, _: &'static str) -> Walked {
        Ok(())
    }
    fn serialize_newtype_struct<T: Serialize + ?Sized>(self, _: &'static str, v: &T) -> Walked {
        v.serialize(self)
    }
    fn serialize_newtype_variant<T: Serialize + ?Sized>(
        self,
        _: &'static str,
        _: u32,
        _: &'static str,
        value: &T,
    ) -> Walked {
        value.serialize(self)
    }
    fn serialize_seq(self, _: Option<usize>) -> Begun {
        Ok(self)
    }
    fn serialize_tuple(self, _: usize) -> Begun {
        Ok(self)
    }
    fn serialize_tuple_struct(self, _: &'static str, _: usize) -> Begun {
        Ok(self)
    }
    fn serialize_tuple_variant(self, _: &'static str, _: u32, _: &'static str, _: usize) -> Begun {
        Ok(self)
    }
    fn serialize_map(self, _: Option<usize>) -> Begun {
        Ok(self)
    }
    fn serialize_struct(self, _: &'static str, _: usize) -> Begun {
        Ok(self)
    }
    fn serialize_struct_variant(self, _: &'static str, _: u32, _: &'static str, _: usize) -> Begun {
        Ok(self)
    }
    fn collect_str<T: fmt::Display + ?Sized>(self, _: &T) -> Walked {
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Amps, Volts};
    use std::collections::BTreeMap;

    /// Every shape that serde knows, sound; then the same with one number in it that is none.
    #[test]
    fn a_number_that_is_none_is_found_wherever_it_stands() {
        #[derive(Serialize)]
        enum Shape {
            Alone(Amps),
            Two(f64, f64),
            Named { volts: Volts },
            Empty,
        }
        #[derive(Serialize)]
        struct All {
            list: Vec<Shape>,
            pair: (f32, u8),
            map: BTreeMap<&'static str, Option<f64>>,
            text: &'static str,
        }
        let with = |at: usize, x: f64| {
            let mut numbers = [1.0; 7];
            if let Some(number) = numbers.get_mut(at) {
                *number = x;
            }
            let [a, b, c, d, e, f, g] = numbers;
            All {
                list: vec![
                    Shape::Alone(Amps(a)),
                    Shape::Two(b, c),
                    Shape::Named { volts: Volts(d) },
                    Shape::Empty,
                ],
                pair: (e as f32, 3),
                map: BTreeMap::from([("f", Some(f)), ("g", Some(g)), ("none", None)]),
                text: ".nan",
            }
        };
        assert!(all_finite(&with(7, 0.0)));
        for at in 0..7 {
            for none in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
                assert!(!all_finite(&with(at, none)), "{at} {none}");
            }
        }
        assert!(all_finite(&f64::MAX) && !all_finite(&Some(f64::NAN)));
    }
}
