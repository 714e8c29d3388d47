//! `days:`, `charger:`, `may:`, `wiring:`, and kits.

use super::Lower;
use super::accessory::RETURNS;
use crate::description::raw::{self, Map};
use crate::description::{ChargerText, DaysText, KitText, MayText, WiringText, path};
use crate::quantity::bounds;

impl Lower<'_> {
    pub(super) fn days(&mut self, node: &Map<raw::Days>) -> Option<DaysText> {
        let at = "days";
        let raw = self.map(node, at)?;
        for (key, leaf, example) in [
            ("shifts", &raw.shifts, "shifts: 5"),
            ("parked", &raw.parked, "parked: 2"),
        ] {
            if leaf.is_absent() {
                self.missing(at, key, example);
            }
        }
        let shifts = self.count(
            at,
            "shifts",
            &raw.shifts,
            ("number of shifts", "1 to 366", |n| (1..=366).contains(&n)),
        );
        let parked = self.count(
            at,
            "parked",
            &raw.parked,
            ("number of days parked", "0 to 366", |n| n <= 366),
        );
        Some(DaysText {
            shifts: shifts?,
            parked: parked?,
        })
    }

    pub(super) fn charger(&mut self, node: &Map<raw::Charger>) -> Option<ChargerText> {
        let at = "charger";
        let raw = self.map(node, at)?;
        if raw.amps.is_absent() {
            self.missing(at, "amps", "amps: 6 A");
        }
        let amps = self.quantity(at, "amps", &raw.amps, &bounds::CHARGER_CURRENT);
        let holds = self.quantity(at, "holds", &raw.holds, &bounds::CHARGER_VOLTS);
        let after = self.quantity(at, "after", &raw.after, &bounds::CHARGER_TIME);
        let time = self.quantity(at, "time", &raw.time, &bounds::CHARGER_TIME);
        let price = self.quantity(at, "price", &raw.price, &bounds::PRICE);
        Some(ChargerText {
            path: at.into(),
            amps: amps?,
            holds,
            after,
            time,
            price,
        })
    }

    pub(super) fn may(&mut self, raw: &raw::May) -> MayText {
        let at = "may";
        let mut duty = Vec::new();
        for (name, leaf) in self.named(&raw.duty, "may.duty").unwrap_or_default() {
            if let Some(share) = self.quantity_at(path::key("may.duty", name), leaf, &bounds::DUTY)
            {
                duty.push((name.clone(), share));
            }
        }
        MayText {
            speeds: self.speeds(&raw.speeds, "may.speeds"),
            duty,
            lamps: self.yes_no(at, "lamps", &raw.lamps),
            winding: self.yes_no(at, "winding", &raw.winding),
            battery: self.yes_no(at, "battery", &raw.battery),
            charger: self.yes_no(at, "charger", &raw.charger),
        }
    }

    pub(super) fn wiring(&mut self, raw: &raw::Wiring) -> WiringText {
        let at = "wiring";
        WiringText {
            insulation: self.quantity(at, "insulation", &raw.insulation, &bounds::INSULATION),
            engine_space: self.yes_no(at, "engine_space", &raw.engine_space),
            bundle: self.count(
                at,
                "bundle",
                &raw.bundle,
                ("number of conductors", "1 to 200", |n| {
                    (1..=200).contains(&n)
                }),
            ),
            returns: self.word(
                at,
                "returns",
                &raw.returns,
                ("way back of the current", RETURNS),
            ),
            max_drop: self.quantity(at, "max_drop", &raw.max_drop, &bounds::MAX_DROP),
            switch: self.quantity(at, "switch", &raw.switch, &bounds::SWITCH),
        }
    }

    /// A kit of a catalog.
    pub(in crate::description) fn kit(&mut self, raw: &raw::Kit, at: &str) -> KitText {
        if raw.accessories.is_absent() {
            self.missing(
                at,
                "accessories",
                "accessories: [{part: work-light-led-27w, duty: 100 %}]",
            );
        }
        KitText {
            path: at.to_owned(),
            accessories: self.accessories(&raw.accessories, &path::key(at, "accessories")),
            price: self.quantity(at, "price", &raw.price, &bounds::PRICE),
        }
    }
}
