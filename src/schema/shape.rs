//! What serde's nodes are in a schema: a list is an array of its entries, a mapping the object of its keys.

use crate::description::raw::node::{Keys, Names, Node, Refused, Unread};
use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use std::borrow::Cow;

/// A mapping of known keys is the object of its struct.
impl<T: JsonSchema> JsonSchema for Node<Refused, Keys<T>> {
    fn schema_name() -> Cow<'static, str> {
        T::schema_name()
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        T::json_schema(generator)
    }
}

/// A list is an array of its entries.
impl<T: JsonSchema> JsonSchema for Node<Unread<T>, Refused> {
    fn schema_name() -> Cow<'static, str> {
        format!("List of {}", T::schema_name()).into()
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        Vec::<T>::json_schema(generator)
    }
}

/// A mapping with the user's names is an object of any keys.
impl<T: JsonSchema> JsonSchema for Node<Refused, Names<T>> {
    fn schema_name() -> Cow<'static, str> {
        format!("Named {}", T::schema_name()).into()
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        json_schema!({
            "type": "object",
            "additionalProperties": generator.subschema_for::<T>(),
        })
    }
}

/// A single value of which nothing more is said.
impl JsonSchema for Node<Refused, Refused> {
    fn schema_name() -> Cow<'static, str> {
        "Value".into()
    }
    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        json_schema!({"type": ["string", "number", "boolean"]})
    }
}
