//! The schemas against the files that people write: all that is accepted is valid, what is refused for its shape is not.
//!
//! The validator is this file's own: the few words of JSON Schema draft-07 that the schemas use, each refusing an
//! unknown one, so that nothing is passed over.

use ampledger::quantity::parse;
use ampledger::quantity::unit::Unit;
use ampledger::quantity::{Amps, Celsius, Fraction, Hours, Ohms, Volts, VoltsPerKelvin, Watts};
use ampledger::schema;
use ampledger::starter_build::Kind;
use regex_lite::Regex;
use serde_json::{Value, json};
use std::collections::BTreeSet;
use std::path::Path;

/// What is wrong with a value, by its place; nothing where it is valid.
fn faults(schema: &Value, value: &Value, at: &str, out: &mut Vec<String>) {
    let rules = schema.as_object().expect("a schema is an object");
    for (word, rule) in rules {
        let holds = match word.as_str() {
            "$schema" | "title" | "description" | "examples" | "patternErrorMessage" => true,
            "additionalProperties" | "items" => true, // with the values below
            "type" => types(rule, value),
            "enum" => rule.as_array().expect("a list").contains(value),
            "const" => rule == value,
            "pattern" => value.as_str().is_none_or(|text| {
                Regex::new(rule.as_str().expect("a text"))
                    .expect("a pattern")
                    .is_match(text)
            }),
            "minLength" => value
                .as_str()
                .is_none_or(|t| t.len() as u64 >= rule.as_u64().expect("a number")),
            "minProperties" => size(value).is_none_or(|n| n >= rule.as_u64().expect("a number")),
            "maxProperties" => size(value).is_none_or(|n| n <= rule.as_u64().expect("a number")),
            "required" => value.as_object().is_none_or(|keys| {
                let wanted = rule.as_array().expect("a list");
                wanted
                    .iter()
                    .all(|key| keys.contains_key(key.as_str().expect("a key")))
            }),
            "anyOf" => rule
                .as_array()
                .expect("a list")
                .iter()
                .any(|one| is_valid(one, value)),
            "properties" => true, // with the keys below
            other => panic!("`{other}` is not understood here"),
        };
        if !holds {
            out.push(format!("{at}: not by `{word}`: {value}"));
        }
    }
    match value {
        Value::Object(keys) => {
            for (key, below) in keys {
                let at = format!("{at}.{key}");
                match (&schema["properties"][key], &schema["additionalProperties"]) {
                    (Value::Null, Value::Bool(false)) => out.push(format!("{at}: unknown")),
                    (Value::Null, Value::Null) => {}
                    (Value::Null, rest) => faults(rest, below, &at, out),
                    (known, _) => faults(known, below, &at, out),
                }
            }
        }
        Value::Array(entries) if schema["items"].is_object() => {
            for (i, below) in entries.iter().enumerate() {
                faults(&schema["items"], below, &format!("{at}[{i}]"), out);
            }
        }
        _ => {}
    }
}

fn is_valid(schema: &Value, value: &Value) -> bool {
    let mut out = Vec::new();
    faults(schema, value, "", &mut out);
    out.is_empty()
}

fn size(value: &Value) -> Option<u64> {
    value.as_object().map(|keys| keys.len() as u64)
}

fn types(rule: &Value, value: &Value) -> bool {
    let is = |name: &str| match name {
        "object" => value.is_object(),
        "array" => value.is_array(),
        "string" => value.is_string(),
        "number" => value.is_number(),
        "integer" => value.is_u64() || value.is_i64(),
        "boolean" => value.is_boolean(),
        other => panic!("type `{other}`"),
    };
    match rule {
        Value::Array(names) => names.iter().any(|n| is(n.as_str().expect("a type"))),
        one => is(one.as_str().expect("a type")),
    }
}

/// What is wrong with a YAML text.
fn told(schema: &Value, yaml: &str) -> Vec<String> {
    let value: Value = serde_yaml::from_str(yaml).expect("YAML");
    let mut out = Vec::new();
    faults(schema, &value, "", &mut out);
    out
}

/// The YAML files of a folder of the project.
fn files(folder: &str) -> Vec<(String, String)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join(folder);
    let paths = std::fs::read_dir(folder)
        .expect("the folder")
        .map(|e| e.expect("an entry").path());
    let yaml = paths.filter(|p| p.extension().is_some_and(|e| e == "yaml"));
    let mut files: Vec<_> = yaml
        .map(|p| {
            (
                p.display().to_string(),
                std::fs::read_to_string(&p).expect("its text"),
            )
        })
        .collect();
    files.sort();
    assert!(!files.is_empty());
    files
}

#[test]
fn every_build_that_is_accepted_is_valid() {
    let schema = schema::build();
    for (name, text) in files("examples").into_iter().chain(files("tests/reading")) {
        if name.contains("/fleet") && text.contains("\nmachines:") {
            continue; // a fleet is no build
        }
        assert_eq!(told(&schema, &text), [""; 0], "{name}");
    }
    for kind in Kind::ALL {
        assert_eq!(told(&schema, kind.text()), [""; 0], "{}", kind.name());
    }
}

#[test]
fn every_built_in_catalog_is_valid() {
    let schema = schema::catalog();
    for (name, text) in files("catalogs") {
        assert_eq!(told(&schema, &text), [""; 0], "{name}");
    }
}

/// Slips that an editor is to mark, in a file that is otherwise right.
#[test]
fn slips_are_marked() {
    let (schema, good) = (schema::build(), Kind::SeriesRegulated.text());
    let slip = |from: &str, to: &str, at: &str| {
        assert!(good.contains(from), "{from}");
        let found = told(&schema, &good.replacen(from, to, 1));
        assert!(found.iter().any(|f| f.starts_with(at)), "{to}: {found:?}");
    };
    slip(
        "resistance:",
        "resistnce:",
        ".charging[0].winding.resistnce: unknown",
    );
    slip(
        "0.15 ohm",
        "0.15",
        ".charging[0].winding.resistance: not by `type`",
    );
    slip(
        "0.15 ohm",
        "0.15 V",
        ".charging[0].winding.resistance: not by `pattern`",
    );
    slip(
        "poles: 12",
        "poles: twelve",
        ".charging[0].winding.poles: not by `pattern`",
    );
    slip(
        "full-wave  ",
        "half     ",
        ".charging[0].rectifier: not by `anyOf`",
    );
    slip(
        "kind: series",
        "kind: serial",
        ".charging[0].regulator.kind: not by `enum`",
    );
    slip(
        "draw: 0.7 A",
        "drw: 0.7 A",
        ".accessories[0]: not by `anyOf`",
    );
    slip(
        "{governed: 80 %}",
        "80",
        ".accessories[1].duty: not by `anyOf`",
    );
    slip(
        "stopped: 10 min",
        "stopped: ten minutes",
        ".shift[3]: not by `anyOf`",
    );
    slip("parked: 14 h", "parkd: 14 h", ".parkd: unknown");
    slip("engine:\n", "engin:\n", ": not by `required`");
    slip(
        "28 V at 3600 rpm",
        "28 V",
        ".charging[0].winding.open_circuit: not by `pattern`",
    );
}

/// Every property of a schema with its path.
fn properties<'a>(schema: &'a Value, path: &str, out: &mut Vec<(String, &'a Value)>) {
    for (key, below) in schema["properties"].as_object().into_iter().flatten() {
        let path = format!("{path}.{key}");
        out.push((path.clone(), below));
        properties(below, &path, out);
    }
    for below in schema["anyOf"]
        .as_array()
        .into_iter()
        .flatten()
        .chain([&schema["items"]])
    {
        if below.is_object() {
            properties(below, path, out);
        }
    }
}

/// Each key says what it means, and the examples given of it are valid.
#[test]
fn every_key_is_told_of() {
    for schema in [schema::build(), schema::catalog()] {
        let mut all = Vec::new();
        properties(&schema, "", &mut all);
        assert!(all.len() > 100, "{} keys", all.len());
        for (path, key) in all {
            let means = key["description"].as_str().unwrap_or_default();
            assert!(
                means.ends_with('.') && !means.contains('\n'),
                "{path}: {means:?}"
            );
            for example in key["examples"].as_array().into_iter().flatten() {
                assert!(is_valid(key, example), "{path}: {example}");
            }
        }
    }
}

/// The file with every key there is has every key of the schema, and no other.
#[test]
fn the_keys_are_those_that_are_read() {
    let (schema, mut all) = (schema::build(), Vec::new());
    properties(&schema, "", &mut all);
    let told: BTreeSet<&str> = all
        .iter()
        .filter_map(|(path, _)| path.rsplit('.').next())
        .collect();
    let full: Value = serde_yaml::from_str(include_str!("reading/full.yaml")).expect("YAML");
    let mut used = BTreeSet::new();
    keys(&full, &mut used);
    let unused: Vec<_> = told.iter().filter(|key| !used.contains(**key)).collect();
    assert!(
        unused.is_empty(),
        "keys of the schema that tests/reading/full.yaml has not: {unused:?}"
    );
}

fn keys(value: &Value, out: &mut BTreeSet<String>) {
    match value {
        Value::Object(entries) => {
            for (key, below) in entries {
                out.insert(key.clone());
                keys(below, out);
            }
        }
        Value::Array(entries) => entries.iter().for_each(|below| keys(below, out)),
        _ => {}
    }
}

/// The property at a path.
fn property<'a>(schema: &'a Value, path: &str) -> &'a Value {
    path.split('.').fold(schema, |at, key| match key {
        "[]" => &at["items"],
        key => &at["properties"][key],
    })
}

/// The patterns take what the reader takes, and nothing else: spellings from the unit tables, and slips.
#[test]
fn patterns_agree_with_the_reader() {
    let schema = schema::build();
    electrical_patterns_agree(&schema);
    other_patterns_agree(&schema);
    draw_patterns_agree(&schema);
}

fn agree<Q: Unit>(schema: &Value, path: &str, texts: &[&str]) {
    let rule = property(schema, path);
    assert!(rule["pattern"].is_string(), "{path}");
    for text in texts {
        let read = parse::parse::<Q>(text).is_ok();
        assert_eq!(is_valid(rule, &json!(text)), read, "{path}: {text}");
    }
}

fn electrical_patterns_agree(schema: &Value) {
    let slips = [
        "",
        "5",
        "5 parsecs",
        "x",
        ".",
        "5 V 3",
        "1e400",
        "5 V ± 3 A",
        "5,5 V",
    ];
    let volts = [
        "12.65 V",
        "5V",
        "  .5 mV ",
        "14.2 volts",
        "1e1 V",
        "14 V ± 2 %",
        "14 V+-0.2V",
        "14 V +/- 1 %",
    ];
    agree::<Volts>(
        schema,
        "accessories.[].at",
        &[&slips[..], &volts[..]].concat(),
    );
    let amps = [
        "8 mA",
        "3 uA",
        "3 \u{b5}A",
        "3 \u{3bc}A",
        "2 amps",
        "8 W",
        "8 m A",
    ];
    agree::<Amps>(schema, "accessories.[].parked", &amps);
    let ohms = ["9 mΩ", "9 m\u{2126}", "3 ohms", "3 kohm", "3 OHM"];
    agree::<Ohms>(schema, "battery.resistance", &ohms);
}

fn other_patterns_agree(schema: &Value) {
    let times = [
        "1 h 20 min",
        "1h20min",
        "90 s",
        "2 d",
        "1 h 20",
        "20",
        "1 hour 5 minutes",
        "1 h ± 10 %",
    ];
    agree::<Hours>(schema, "parked", &times);
    let airs = [
        "-10 °C",
        "\u{2212}10 C",
        "14 F",
        "14 °F",
        "14 \u{ba}C",
        "14 K",
        "5 °C ± 2 K",
        "5 °C ± 2 %",
    ];
    agree::<Celsius>(schema, "air", &airs);
    agree::<Fraction>(
        schema,
        "battery.reserve",
        &["60 %", "60%", "0.6", "60 percent"],
    );
    let drifts = [
        "-18 mV",
        "-18 mV/K",
        "-0.018 V/°C",
        "-18 mV/\u{ba}C",
        "-18 A",
    ];
    agree::<VoltsPerKelvin>(schema, "charging.[].regulator.per_degree", &drifts);
}

fn draw_patterns_agree(schema: &Value) {
    let draws = property(schema, "accessories.[].draw");
    for (text, good) in [
        ("55 W", true),
        ("0.055 kW ± 8 %", true),
        ("3 Ω", true),
        ("3 V", false),
        ("55 watt", true),
    ] {
        assert_eq!(parse::draw(text).is_ok(), good, "{text}");
        assert_eq!(is_valid(draws, &json!(text)), good, "{text}");
    }
    assert!(parse::parse::<Watts>("55 W").is_ok());
}

/// Phrases of several quantities, as the reader takes them.
#[test]
fn patterns_of_phrases_agree_with_the_reader() {
    let schema = schema::build();
    let check = |path: &str, texts: &[&str], read: &dyn Fn(&str) -> bool| {
        for text in texts {
            let rule = property(&schema, path);
            assert_eq!(is_valid(rule, &json!(text)), read(text), "{path}: {text}");
        }
    };
    let rated = [
        "16 A at 3600 rpm",
        "16 A at 3600 rpm into 14 V",
        "16 A at 3600 rpm ± 5 %",
        "16 A ± 5 % at 3600 rpm into 14 V",
        "16 A at 3600",
        "16 at 3600 rpm",
        "16 A into 14 V",
    ];
    check("charging.[].winding.rated", &rated, &|t| {
        parse::rated(t).is_ok()
    });
    let open = [
        "28 V at 3600 rpm",
        "28V at 3600rpm",
        "28 V ± 6 % at 3600 rpm",
        "28 A at 3600 rpm",
        "28 V at 3600 rpm ± 6 %",
    ];
    check("charging.[].winding.open_circuit", &open, &|t| {
        parse::at_speed::<Volts>(t).is_ok()
    });
    let between = ["10.5 V to 16 V", "10.5 to 16 V", "10.5 V - 16 V", "10.5 V"];
    check("accessories.[].works", &between, &|t| {
        parse::between(t).is_ok()
    });
    let surge = [
        "8 x for 0.2 s",
        "8 × for 200 ms",
        "8 times for 1 s",
        "8 for 0.2 s",
        "8 x",
    ];
    check("accessories.[].inrush", &surge, &|t| {
        parse::surge(t).is_ok()
    });
}
