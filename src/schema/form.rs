//! How the values of keys are written, as schemas: quantities with their units, phrases, words, names.

use super::pattern;
use crate::description::words;
use crate::quantity::unit::{Dimension, Unit};
use crate::quantity::{Amps, Fraction, Hours, Money, Rpm, Volts};
use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use std::borrow::Cow;
use std::marker::PhantomData;

/// Declares a form: what it is called in the schema, and the schema.
macro_rules! form {
    ($(#[$doc:meta])* $name:ident $(<$q:ident: $bound:ident>)?: $called:expr, |$generator:ident| $schema:expr) => {
        $(#[$doc])*
        pub(crate) struct $name $(<$q>(PhantomData<$q>))?;
        impl $(<$q: $bound>)? JsonSchema for $name $(<$q>)? {
            fn schema_name() -> Cow<'static, str> {
                $called.into()
            }
            fn json_schema($generator: &mut SchemaGenerator) -> Schema {
                $schema
            }
        }
    };
}

/// A text of a pattern; what an editor says where it does not match, and an example.
fn text(pattern: &str, says: &str, example: &str) -> Schema {
    json_schema!({
        "type": "string",
        "pattern": pattern,
        "patternErrorMessage": format!("{says}: write it like `{example}`"),
        "examples": [example],
    })
}

/// One of a few words.
fn word<T>(words: &[(&str, T)]) -> Schema {
    let words: Vec<&str> = words.iter().map(|(word, _)| *word).collect();
    json_schema!({"enum": words})
}

form!(
    /// A quantity with its unit and, where one is written, its tolerance.
    Quantity<Q: Unit>: Q::DIMENSION.noun(),
    |_generator| text(&pattern::quantity(Q::DIMENSION), Q::DIMENSION.noun(), Q::DIMENSION.example())
);
form!(
    /// What an accessory draws: a power, a current or a resistance.
    Draw: "Draw",
    |_generator| text(&pattern::quantity(Dimension::Draw), Dimension::Draw.noun(), "55 W")
);
form!(
    /// A quantity at a speed.
    AtSpeed<Q: Unit>: format!("{} at a speed", Q::DIMENSION.noun()),
    |_generator| {
        let (says, example) = match Q::DIMENSION {
            Dimension::Current => ("amps at a speed", "16 A at 3600 rpm"),
            _ => ("volts at a speed", "28 V at 3600 rpm"),
        };
        text(&pattern::whole(&at_speed(Q::DIMENSION, "")), says, example)
    }
);
form!(
    /// A rating: amps at a speed, into volts.
    Rated: "Rated",
    |_generator| {
        let into = format!(r"(\s*into\s*{})?", pattern::bare(Volts::DIMENSION));
        text(&pattern::whole(&at_speed(Amps::DIMENSION, &into)), "amps at a speed", "16 A at 3600 rpm")
    }
);
form!(
    /// Two voltages, the lower first.
    Between: "Between",
    |_generator| {
        let volts = pattern::bare(Volts::DIMENSION);
        text(&pattern::whole(&format!(r"{volts}\s*to\s*{volts}")), "two voltages", "10.5 V to 16 V")
    }
);
form!(
    /// A multiple and a time.
    Surge: "Surge",
    |_generator| {
        let (times, time) = (pattern::bare(Dimension::Times), pattern::bare(Hours::DIMENSION));
        text(&pattern::whole(&format!(r"{times}\s*for\s*{time}")), "a multiple and a time", "8 x for 0.2 s")
    }
);

/// A quantity at a speed, more after it, and a tolerance in one of two places.
fn at_speed(dimension: Dimension, more: &str) -> String {
    let (first, speed) = (pattern::bare(dimension), pattern::bare(Rpm::DIMENSION));
    let tolerance = pattern::tolerance(dimension);
    format!(r"{first}{tolerance}\s*at\s*{speed}{more}{tolerance}")
}

form!(
    /// A plain number.
    Number: "Number",
    |_generator| json_schema!({"type": ["number", "string"], "pattern": pattern::quantity(Dimension::Factor)})
);
form!(
    /// A price.
    Price: "Price",
    |_generator| json_schema!({"type": ["number", "string"], "pattern": pattern::quantity(Money::DIMENSION)})
);
form!(
    /// A whole number.
    Count: "Count",
    |_generator| json_schema!({"type": ["integer", "string"], "pattern": r"^\s*\+?[0-9]+\s*$"})
);
form!(
    /// A name of the user's choice, or one that stands elsewhere.
    Name: "Name",
    |_generator| json_schema!({"type": "string", "minLength": 1})
);
form!(
    /// A name, or a list of names.
    Names: "Names",
    |generator| {
        let name = generator.subschema_for::<Name>();
        json_schema!({"anyOf": [name, {"type": "array", "items": name}]})
    }
);
form!(
    /// One share, or a share by state.
    Duty: "Duty",
    |generator| {
        let share = generator.subschema_for::<Quantity<Fraction>>();
        json_schema!({
            "anyOf": [share, {"type": "object", "additionalProperties": share}],
            "examples": ["60 %", {"idle": "20 %", "governed": "85 %"}],
        })
    }
);
form!(
    /// One step of a shift.
    StepForm: "Step",
    |generator| {
        let time = generator.subschema_for::<Quantity<Hours>>();
        json_schema!({
            "anyOf": [
                {"const": "crank", "description": "A start, for as long as the starter takes."},
                {
                    "type": "object",
                    "description": "A state and its time: a speed's name, `stopped`, or `crank`.",
                    "additionalProperties": time,
                    "minProperties": 1,
                    "maxProperties": 1,
                },
            ],
            "examples": ["crank", {"governed": "1 h 35 min"}, {"stopped": "20 min"}],
        })
    }
);
form!(
    /// A rectifier's kind, or a mapping with its drop.
    RectifierForm: "RectifierForm",
    |generator| {
        let kind = generator.subschema_for::<RectifierKind>();
        let mapping = generator.subschema_for::<crate::description::raw::Rectifier>();
        json_schema!({"anyOf": [kind, mapping], "examples": ["full-wave", {"kind": "full-wave", "drop": "0.9 V"}]})
    }
);
form!(
    /// `yes` or `no`.
    YesNo: "YesNo",
    |_generator| json_schema!({"enum": [true, false, "yes", "no"]})
);

/// Declares the forms of words that a reader's table lists.
macro_rules! words {
    ($($(#[$doc:meta])* $name:ident: $words:ident;)*) => { $(
        form!($(#[$doc])* $name: stringify!($name), |_generator| word(words::$words));
    )* };
}
words!(
    /// `magnets:`.
    Magnets: MAGNETS;
    /// `rectifier:`.
    RectifierKind: RECTIFIERS;
    /// `regulator.kind:`.
    RegulatorKind: REGULATORS;
    /// `battery.type:`.
    Chemistry: CHEMISTRIES;
    /// `law:`.
    Law: LAWS;
    /// `kind:` of an accessory.
    LoadKind: KINDS;
    /// `returns:`.
    Returns: RETURNS;
);
