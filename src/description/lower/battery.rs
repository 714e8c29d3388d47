//! `battery:`.

use super::Lower;
use crate::battery::Chemistry;
use crate::description::{BatteryText, Written, path, raw};
use crate::problem::{Problem, SenseProblem};
use crate::quantity::{Volts, bounds};

/// `type:`.
pub(crate) const CHEMISTRIES: &[(&str, Chemistry)] = &[
    ("flooded", Chemistry::Flooded),
    ("agm", Chemistry::Agm),
    ("gel", Chemistry::Gel),
];

impl Lower<'_> {
    /// A battery, of the machine or of a catalog.
    pub(in crate::description) fn battery(&mut self, raw: &raw::Battery, at: &str) -> BatteryText {
        let nothing = [&raw.part, &raw.capacity, &raw.reserve_capacity]
            .iter()
            .all(|n| n.is_absent());
        if nothing {
            let keys = &["capacity", "reserve_capacity", "part"];
            self.problem(Problem::value(
                at,
                SenseProblem::NoneOf {
                    keys,
                    example: "capacity: 30 Ah",
                },
            ));
        }
        let (rest_full, rest_empty) = self.rest_volts(raw, at);
        BatteryText {
            path: at.to_owned(),
            part: self.name(at, "part", &raw.part),
            capacity: self.quantity(at, "capacity", &raw.capacity, &bounds::CAPACITY),
            reserve_capacity: self.quantity(
                at,
                "reserve_capacity",
                &raw.reserve_capacity,
                &bounds::RESERVE_CAPACITY,
            ),
            cold_cranking: self.quantity(
                at,
                "cold_cranking",
                &raw.cold_cranking,
                &bounds::COLD_CRANKING,
            ),
            chemistry: self.word(at, "type", &raw.chemistry, ("battery type", CHEMISTRIES)),
            resistance: self.quantity(
                at,
                "resistance",
                &raw.resistance,
                &bounds::BATTERY_RESISTANCE,
            ),
            rest_full,
            rest_empty,
            reserve: self.quantity(at, "reserve", &raw.reserve, &bounds::RESERVE),
            cells: self.count(
                at,
                "cells",
                &raw.cells,
                ("number of cells", "1 to 60", |n| (1..=60).contains(&n)),
            ),
            gassing: self.factor(at, "gassing", &raw.gassing, &bounds::CHARGE_FACTOR),
            health: self.quantity(at, "health", &raw.health, &bounds::HEALTH),
            price: self.quantity(at, "price", &raw.price, &bounds::PRICE),
        }
    }

    /// `rest_volts: {full: 12.65 V, empty: 11.89 V}`, in that order.
    fn rest_volts(
        &mut self,
        raw: &raw::Battery,
        at: &str,
    ) -> (Option<Written<Volts>>, Option<Written<Volts>>) {
        let at = path::key(at, "rest_volts");
        let Some(volts) = self.map(&raw.rest_volts, &at) else {
            return (None, None);
        };
        let full = self.quantity(&at, "full", &volts.full, &bounds::REST_VOLTS);
        let empty = self.quantity(&at, "empty", &volts.empty, &bounds::REST_VOLTS);
        if let (Some(full), Some(empty)) = (&full, &empty)
            && empty.value >= full.value
        {
            let (low, high) = ("the volts when empty", "the volts when full");
            let reversed = SenseProblem::Reversed { low, high };
            self.problem(Problem::value(empty.path.as_str(), reversed));
        }
        (full, empty)
    }
}
