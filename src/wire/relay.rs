//! Switches and relays: what a contact must be rated for, and when a relay takes over.

use super::tables::{Ground, ShareRow, certainty};
use crate::catalog::Certainty;
use crate::description::accessory::LoadKind;
use crate::quantity::{Amps, Fraction, Volts};
use serde::Deserialize;

/// Nominal volts from which the derating of 28 V systems holds: halfway between 12 and 24 V.
const HIGH_SYSTEM: Volts = Volts(18.0);

/// Derating of switches, and relays to buy.
#[derive(Clone, Debug, Default, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Relays {
    derating: Vec<DeratingRow>,
    relays: Vec<RelayRow>,
    hot_contacts: Vec<ShareRow>,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct DeratingRow {
    volts: f64,
    load: String,
    factor: f64,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct RelayRow {
    amps: f64,
    source: String,
    #[serde(deserialize_with = "certainty")]
    certainty: Certainty,
}

/// A relay to buy.
#[derive(Clone, Debug, PartialEq)]
pub struct Relay {
    /// Rating of its contacts, cool.
    pub contacts: Amps,
    /// What they carry in the heat of a machine.
    pub carries: Amps,
    /// What its rating and its derating rest on.
    pub grounds: Vec<Ground>,
}

impl Relays {
    /// The rating that a switch needs for a load, and the multiple of the load's current that it is.
    #[must_use]
    pub fn switch_needs(
        &self,
        kind: LoadKind,
        load: Amps,
        system: Volts,
    ) -> Option<(Amps, Fraction, Ground)> {
        let volts = if system >= HIGH_SYSTEM { 28.0 } else { 12.0 };
        let name = match kind {
            LoadKind::Lamp => "lamp",
            LoadKind::Motor => "motor",
            LoadKind::Heater => "heater",
            LoadKind::Coil => "inductive",
            LoadKind::Electronics => "electronics",
        };
        let row = self
            .derating
            .iter()
            .find(|row| row.volts == volts && row.load == name)?;
        let factor = Fraction(row.factor);
        Some((
            load * factor,
            factor,
            Ground::new("switch derating", &row.source, row.certainty),
        ))
    }

    /// The smallest relay whose contacts carry a load in the heat; none beyond the list.
    #[must_use]
    pub fn for_load(&self, load: Amps) -> Option<Relay> {
        let hot = self.hot_contacts.first()?;
        self.relays
            .iter()
            .find(|row| load.0 <= row.amps * hot.share)
            .map(|row| Relay {
                contacts: Amps(row.amps),
                carries: Amps(row.amps * hot.share),
                grounds: vec![
                    Ground::new("relay contacts", &row.source, row.certainty),
                    Ground::new("relay in heat", &hot.source, hot.certainty),
                ],
            })
    }

    /// What the largest relay of the list carries in the heat.
    #[must_use]
    pub fn most(&self) -> Amps {
        let share = self.hot_contacts.first().map_or(1.0, |row| row.share);
        Amps(
            self.relays
                .iter()
                .map(|row| row.amps * share)
                .fold(0.0, f64::max),
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::wire::Tables;

    /// K031 and K032: FAA AC 43.13-1B table 11-4 at 12 V and 28 V, 5 A.
    #[test]
    fn switch_derating_as_printed() {
        let relays = Tables::builtin().relays;
        let kinds = [
            LoadKind::Lamp,
            LoadKind::Coil,
            LoadKind::Heater,
            LoadKind::Motor,
        ];
        let needs = |volts: f64| {
            kinds.map(|k| relays.switch_needs(k, Amps(5.0), Volts(volts)).unwrap().0.0)
        };
        assert_eq!(needs(12.0), [25.0, 10.0, 5.0, 10.0]);
        assert_eq!(needs(6.0), [25.0, 10.0, 5.0, 10.0]);
        assert_eq!(needs(24.0), [40.0, 20.0, 10.0, 15.0]);
    }

    #[test]
    fn relays_carry_seven_tenths_in_heat() {
        let relays = Tables::builtin().relays;
        let contacts = |load: f64| relays.for_load(Amps(load)).map(|r| r.contacts.0);
        assert_eq!(contacts(14.0), Some(20.0));
        assert_eq!(contacts(14.1), Some(30.0));
        assert_eq!(contacts(49.5), None);
        assert!((relays.most().0 - 49.0).abs() < 1e-9);
    }
}
