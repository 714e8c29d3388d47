//! Entries of the catalogs in short and in full, for people to choose from.

use super::{Entry, Kind};
use crate::description::{
    AccessoryText, BatteryText, ChargingText, DrawText, StarterText, read_accessory, read_battery,
    read_charging, read_kit, read_starter,
};
use crate::problem::Refusal;
use crate::quantity::{Money, format};
use serde::Serialize;
use serde_yaml::Value;

/// An entry in short: what it is, the figures to choose it by, where they come from.
#[derive(Clone, Debug, Serialize)]
pub struct Listed {
    /// The list it stands in: `charging`, `batteries`, `starters`, `accessories`, `kits`.
    pub kind: &'static str,
    /// The id that `part:` and `--with` take.
    pub id: String,
    /// What it is.
    pub title: String,
    /// The figures to choose it by, in words.
    pub figures: String,
    /// Its price, where it has one.
    pub price: Option<Money>,
    /// Where its figures come from.
    pub source: String,
    /// How far they can be trusted.
    pub certainty: String,
    /// The file it stands in.
    pub file: String,
    /// All of its keys, where it is shown in full.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub keys: Vec<KeyRow>,
}

/// A key of an entry and its value, as written.
#[derive(Clone, Debug, Serialize, PartialEq, Eq)]
pub struct KeyRow {
    /// Path of the key within the entry: `winding.poles`.
    pub key: String,
    /// Its value.
    pub value: String,
}

impl Entry {
    /// The entry in short.
    ///
    /// # Errors
    /// [`Refusal`]: its keys do not read.
    pub fn listed(&self) -> Result<Listed, Refusal> {
        let name = format!("{} `{}`", self.origin, self.id);
        let (figures, price) = match self.kind {
            Kind::Charging => charging(&read_charging(&name, &self.body)?),
            Kind::Battery => battery(&read_battery(&name, &self.body)?),
            Kind::Starter => starter(&read_starter(&name, &self.body)?),
            Kind::Accessory => accessory(&read_accessory(&name, &self.body)?),
            Kind::Kit => {
                let kit = read_kit(&name, &self.body)?;
                let number = u32::try_from(kit.accessories.len()).unwrap_or(u32::MAX);
                let figures = format::count(number, "accessory", "accessories");
                (figures, kit.price.map(|p| p.value))
            }
        };
        Ok(Listed {
            kind: self.kind.key(),
            id: self.id.clone(),
            title: self.title.clone(),
            figures,
            price,
            source: self.source.clone(),
            certainty: self.certainty.to_string(),
            file: self.origin.to_string(),
            keys: Vec::new(),
        })
    }

    /// The entry with all of its keys.
    ///
    /// # Errors
    /// [`Refusal`]: its keys do not read.
    pub fn in_full(&self) -> Result<Listed, Refusal> {
        let mut keys = Vec::new();
        // what reads as an entry is YAML
        if let Ok(body) = serde_yaml::from_str::<Value>(&self.body) {
            flatten(&body, "", &mut keys);
        }
        Ok(Listed {
            keys,
            ..self.listed()?
        })
    }
}

/// Figures that are there, in a row.
fn row(figures: impl IntoIterator<Item = Option<String>>) -> String {
    let there: Vec<String> = figures.into_iter().flatten().collect();
    there.join(", ")
}

fn charging(text: &ChargingText) -> (String, Option<Money>) {
    let winding = text
        .winding
        .as_ref()
        .and_then(|w| w.rated.as_ref())
        .map(|r| {
            let rated = &r.value;
            format!(
                "{} at {}",
                format::text(rated.amps),
                format::text(rated.rpm)
            )
        });
    let open = text
        .winding
        .as_ref()
        .and_then(|w| w.open_circuit.as_ref())
        .map(|o| {
            let (volts, rpm) = o.value;
            format!("{} open at {}", format::text(volts), format::text(rpm))
        });
    let most = text
        .alternator
        .as_ref()
        .and_then(|a| a.curve.last())
        .map(|row| {
            let (amps, rpm) = row.value;
            format!("{} at {}", format::text(amps), format::text(rpm))
        });
    let price = text.price.as_ref().map(|p| p.value);
    (row([winding.or(open), most]), price)
}

fn battery(text: &BatteryText) -> (String, Option<Money>) {
    let capacity = text.capacity.as_ref().map(|c| format::text(c.value));
    let reserve = text
        .reserve_capacity
        .as_ref()
        .map(|r| format!("{} at 25 A", format::duration(r.value)));
    let cranks = text
        .cold_cranking
        .as_ref()
        .map(|c| format!("{} cold cranking", format::text(c.value)));
    let price = text.price.as_ref().map(|p| p.value);
    (row([capacity.or(reserve), cranks]), price)
}

fn starter(text: &StarterText) -> (String, Option<Money>) {
    let draw = text.draw.as_ref().map(|d| format::text(d.value));
    let time = text.time.as_ref().map(|t| format::duration(t.value));
    (row([draw, time]), None)
}

fn accessory(text: &AccessoryText) -> (String, Option<Money>) {
    let draw = text.draw.as_ref().map(|d| match d.value {
        DrawText::Current(amps) => format::text(amps),
        DrawText::Resistance(ohms) => format::text(ohms),
        DrawText::Power(watts) => format::text(watts),
    });
    let at = text
        .at
        .as_ref()
        .map(|v| format!("at {}", format::text(v.value)));
    let draw = match (draw, at) {
        (Some(draw), Some(at)) => Some(format!("{draw} {at}")),
        (draw, _) => draw,
    };
    let parked = text
        .parked
        .as_ref()
        .map(|p| format!("{} parked", format::text(p.value)));
    let price = text.price.as_ref().map(|p| p.value);
    (row([draw, parked]), price)
}

/// Every single value below a value, with its path.
fn flatten(value: &Value, path: &str, out: &mut Vec<KeyRow>) {
    use crate::description::path;
    match value {
        Value::Mapping(keys) => {
            for (key, below) in keys {
                flatten(below, &path::key(path, &single(key)), out);
            }
        }
        Value::Sequence(entries) => {
            for (index, below) in entries.iter().enumerate() {
                flatten(below, &path::index(path, index), out);
            }
        }
        other => out.push(KeyRow {
            key: path.to_owned(),
            value: single(other),
        }),
    }
}

/// A single value as written.
fn single(value: &Value) -> String {
    match value {
        Value::String(text) => text.clone(),
        Value::Number(number) => number.to_string(),
        Value::Bool(answer) => answer.to_string(),
        _ => String::new(),
    }
}
