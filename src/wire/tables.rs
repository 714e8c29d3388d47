//! The wiring tables the program carries: conductors, ampacity, fuses, switches and relays.
//!
//! Every row of `catalogs/wiring/` names its source and how far it can be trusted.

use super::ampacity::Ampacity;
use super::conductor::Conductors;
use super::fuse::Fuses;
use super::relay::Relays;
use crate::catalog::Certainty;
use serde::de::DeserializeOwned;
use serde::{Deserialize, Deserializer};

/// All tables.
#[derive(Clone, Debug, Default)]
pub struct Tables {
    /// Copper conductors by cross-section and by gauge.
    pub conductors: Conductors,
    /// What a wire may carry, and what lowers it.
    pub ampacity: Ampacity,
    /// Fuses: ratings and operating times.
    pub fuses: Fuses,
    /// Switch derating, and relays.
    pub relays: Relays,
}

impl Tables {
    /// The tables the program carries.
    #[must_use]
    pub fn builtin() -> Tables {
        Tables {
            conductors: read(CONDUCTORS),
            ampacity: read(AMPACITY),
            fuses: read(FUSES),
            relays: read(RELAYS),
        }
    }
}

const CONDUCTORS: &str = include_str!("../../catalogs/wiring/conductors.yaml");
const AMPACITY: &str = include_str!("../../catalogs/wiring/ampacity.yaml");
const FUSES: &str = include_str!("../../catalogs/wiring/fuses.yaml");
const RELAYS: &str = include_str!("../../catalogs/wiring/relays.yaml");

/// A table from its text. That the carried texts are whole is held by a test; an empty table would
/// leave every wire unsized and say so.
fn read<T: DeserializeOwned + Default>(text: &str) -> T {
    serde_yaml::from_str(text).unwrap_or_default()
}

/// Certainty as a row writes it.
pub(super) fn certainty<'de, D: Deserializer<'de>>(row: D) -> Result<Certainty, D::Error> {
    let text = String::deserialize(row)?;
    match Certainty::from_text(&text) {
        Certainty::Unsaid => Err(serde::de::Error::custom(format!(
            "no certainty is called `{text}`"
        ))),
        certainty => Ok(certainty),
    }
}

/// A row that is a share of something.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct ShareRow {
    /// The share.
    pub(super) share: f64,
    /// Where it is from.
    pub(super) source: String,
    /// How far it can be trusted.
    #[serde(deserialize_with = "certainty")]
    pub(super) certainty: Certainty,
}

/// What a figure rests on.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Ground {
    /// What it is a figure of: `ampacity`, `fuse ratings`.
    pub what: &'static str,
    /// Where it is from.
    pub source: String,
    /// How far it can be trusted.
    pub certainty: Certainty,
}

impl Ground {
    /// The ground of a row.
    pub(super) fn new(what: &'static str, source: &str, certainty: Certainty) -> Ground {
        Ground {
            what,
            source: source.to_owned(),
            certainty,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn whole<T: DeserializeOwned>(text: &str) {
        if let Err(error) = serde_yaml::from_str::<T>(text) {
            panic!("{error}");
        }
    }

    #[test]
    fn the_carried_tables_are_whole() {
        whole::<Conductors>(CONDUCTORS);
        whole::<Ampacity>(AMPACITY);
        whole::<Fuses>(FUSES);
        whole::<Relays>(RELAYS);
    }
}
