//! JSON Schema of the files a user writes, so that an editor can complete their keys, show what each means and mark
//! what will not do.
//!
//! The schemas follow from the structs that serde reads; what is said of a key stands there beside it. They are hints
//! (JSON Schema draft-07, which editors understand best): ampledger itself checks more, and says it better.
//!
//! ```
//! let schema = ampledger::schema::build();
//! let poles = &schema["properties"]["charging"]["items"]["properties"]["winding"]["properties"]["poles"];
//! assert_eq!(poles["description"], "Magnet poles of the flywheel: even, 2 to 200.");
//! ```

pub(crate) mod form;
mod pattern;
mod shape;

use crate::catalog::Kind;
use crate::description::raw;
use schemars::JsonSchema;
use schemars::generate::SchemaSettings;
use serde_json::{Map, Value, json};

/// The schema of a build file.
#[must_use]
pub fn build() -> Value {
    whole::<raw::File>("Build file of ampledger")
}

/// The schema of a fleet file.
#[must_use]
pub fn fleet() -> Value {
    whole::<raw::Fleet>("Fleet file of ampledger")
}

/// The schema of a file of a catalog: the entries of a build file, each with its id, title, source and certainty.
#[must_use]
pub fn catalog() -> Value {
    let mut properties = Map::new();
    for kind in Kind::ALL {
        let mut entry = match kind {
            Kind::Charging => of::<raw::Charging>(),
            Kind::Battery => of::<raw::Battery>(),
            Kind::Starter => of::<raw::Starter>(),
            Kind::Accessory => of::<raw::Accessory>(),
            Kind::Kit => of::<raw::Kit>(),
        };
        let Some(keys) = entry.get_mut("properties").and_then(Value::as_object_mut) else {
            continue;
        };
        let own: Map<String, Value> = OWN
            .iter()
            .map(|(key, means)| {
                (
                    (*key).to_owned(),
                    json!({"type": "string", "description": means}),
                )
            })
            .collect();
        keys.extend(own);
        entry.remove("anyOf");
        entry.insert("required".to_owned(), json!(["id"]));
        let list = json!({"type": "array", "items": entry, "description": about(kind)});
        properties.insert(kind.key().to_owned(), list);
    }
    json!({
        "$schema": DRAFT,
        "title": "Catalog of ampledger",
        "type": "object",
        "properties": properties,
        "additionalProperties": false,
    })
}

/// The draft of JSON Schema that is written.
const DRAFT: &str = "http://json-schema.org/draft-07/schema#";

/// The keys that an entry of a catalog has beside those of the build file.
const OWN: [(&str, &str); 4] = [
    (
        "id",
        "The name by which `part:` and `--with` find it, once among its kind.",
    ),
    ("title", "What it is, in words."),
    ("source", "Where its figures come from."),
    (
        "certainty",
        "How far they can be trusted: `standard`, `memory` (of a standard), `common practice` or `invented`.",
    ),
];

/// What a list of a catalog holds.
fn about(kind: Kind) -> &'static str {
    match kind {
        Kind::Charging => "Windings and alternators.",
        Kind::Battery => "Batteries.",
        Kind::Starter => "Starters.",
        Kind::Accessory => "Accessories.",
        Kind::Kit => "Kits: accessories added together.",
    }
}

/// A whole schema: its draft and its title before the rest.
fn whole<T: JsonSchema>(title: &str) -> Value {
    let mut schema = Map::new();
    schema.insert("$schema".to_owned(), json!(DRAFT));
    let mut rest = of::<T>();
    rest.insert("title".to_owned(), json!(title));
    schema.extend(rest);
    Value::Object(schema)
}

/// The schema of a struct of keys, everything in its place.
fn of<T: JsonSchema>() -> Map<String, Value> {
    let settings = SchemaSettings::draft07().with(|s| {
        s.meta_schema = None;
        s.inline_subschemas = true;
    });
    let schema = settings.into_generator().into_root_schema_for::<T>();
    let mut keys = schema.as_object().cloned().unwrap_or_default();
    keys.values_mut().for_each(one_line);
    keys
}

/// Descriptions without the line ends of the source they stand in.
fn one_line(value: &mut Value) {
    match value {
        Value::Object(keys) => {
            if let Some(Value::String(text)) = keys.get_mut("description") {
                *text = text.replace('\n', " ");
            }
            keys.values_mut().for_each(one_line);
        }
        Value::Array(entries) => entries.iter_mut().for_each(one_line),
        _ => {}
    }
}
