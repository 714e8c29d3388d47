//! Where the values with a tolerance stand in a description: the engine, the shift, the battery.

use super::toleranced::{Place, Walk};
use super::{walk_accessory, walk_charging};
use crate::build::Build;
use crate::catalog::{Catalogs, Parted, Read};
use crate::description::{
    AccessoryText, BatteryText, ChargerText, ChargingText, Description, StarterText, Written, path,
};
use crate::quantity::bounds;
use std::sync::Arc;

/// The catalog parts under an entry, nearest first.
pub(super) struct Below<T>(Vec<Arc<Read<T>>>);

impl<T: Parted> Below<T> {
    fn of(catalogs: &Catalogs, own: &T) -> Below<T> {
        let mut parts: Vec<Arc<Read<T>>> = Vec::new();
        let mut wanted = own.part().map(|p| p.value.clone());
        while let Some(Ok(read)) = wanted.take().and_then(|id| catalogs.part::<T>(&id)) {
            // A circle was refused when the build was resolved.
            if parts.iter().any(|p| p.entry.id == read.entry.id) {
                break;
            }
            wanted = read.text.part().map(|p| p.value.clone());
            parts.push(read);
        }
        Below(parts)
    }

    /// The uppermost part that has a key.
    pub(super) fn first<'s, V: 's>(&'s self, key: impl Fn(&'s T) -> Option<V>) -> Option<V> {
        self.0.iter().find_map(|part| key(&part.text))
    }
}

/// The parts under every entry of a description, and what its nominal build is called and assumes.
pub(super) struct Ground<'a> {
    /// The build as stated.
    pub(super) nominal: &'a Build,
    pub(super) charging: Vec<Below<ChargingText>>,
    pub(super) accessories: Vec<Below<AccessoryText>>,
    battery: Option<Below<BatteryText>>,
    starter: Option<Below<StarterText>>,
}

impl<'a> Ground<'a> {
    pub(super) fn new(
        description: &Description,
        catalogs: &Catalogs,
        nominal: &'a Build,
    ) -> Ground<'a> {
        let charging = description.charging.iter();
        let accessories = description.accessories.iter();
        let battery = description.battery.as_ref();
        let starter = description.engine.starter.as_ref();
        Ground {
            nominal,
            charging: charging.map(|c| Below::of(catalogs, c)).collect(),
            accessories: accessories.map(|a| Below::of(catalogs, a)).collect(),
            battery: battery.map(|b| Below::of(catalogs, b)),
            starter: starter.map(|s| Below::of(catalogs, s)),
        }
    }

    /// Walks every value with a tolerance, in the order of the file's sections.
    pub(super) fn walk(&self, description: &mut Description, walk: &mut Walk) {
        let air = place("", "air", "air temperature");
        walk.value(air, &mut description.air, None, &bounds::AIR);
        for (name, rpm) in &mut description.engine.speeds {
            let at = place("engine.speeds", name, "speed").of(name);
            walk.stated(at, rpm, &bounds::SPEED);
        }
        if let (Some(own), Some(below)) = (&mut description.engine.starter, &self.starter) {
            starter(walk, own, below);
        }
        for (index, own) in description.charging.iter_mut().enumerate() {
            walk_charging::charging(walk, own, self, index);
        }
        if let (Some(own), Some(below)) = (&mut description.battery, &self.battery) {
            battery(walk, own, below);
        }
        for (index, own) in description.accessories.iter_mut().enumerate() {
            walk_accessory::accessory(walk, own, self, index);
        }
        self.times(description, walk);
        if let Some(own) = &mut description.charger {
            charger(walk, own);
        }
    }

    /// The times of the shift's steps, and the time parked.
    fn times(&self, description: &mut Description, walk: &mut Walk) {
        for (index, step) in description.shift.iter_mut().enumerate() {
            if let Some(time) = &mut step.time {
                let of = format!("{}, step {}", step.state.value, index + 1);
                let at = place(&step.path, &step.state.value, "time").of(&of);
                walk.stated(at, time, &bounds::STEP_TIME);
            }
        }
        let parked = place("", "parked", "time parked");
        walk.value(parked, &mut description.parked, None, &bounds::PARKED_TIME);
    }
}

/// A value of which there is but one.
pub(super) fn place<'a>(at: &'a str, key: &'a str, what: &'a str) -> Place<'a> {
    Place {
        at,
        key,
        what,
        of: "",
    }
}

impl<'a> Place<'a> {
    /// One of several.
    pub(super) fn of(self, of: &'a str) -> Place<'a> {
        Place { of, ..self }
    }
}

fn starter(walk: &mut Walk, own: &mut StarterText, below: &Below<StarterText>) {
    let at = "engine.starter";
    let part = below.first(|s| s.draw.as_ref());
    let draw = place(at, "draw", "starter's draw");
    walk.value(draw, &mut own.draw, part, &bounds::STARTER_DRAW);
    let part = below.first(|s| s.time.as_ref());
    let time = place(at, "time", "time of a start");
    walk.value(time, &mut own.time, part, &bounds::START_TIME);
    let part = below.first(|s| s.rest.as_ref());
    let rest = place(at, "rest", "rest between starts");
    walk.value(rest, &mut own.rest, part, &bounds::START_REST);
    let part = below.first(|s| s.cable.as_ref());
    let cable = place(at, "cable", "starter cable's resistance");
    walk.value(cable, &mut own.cable, part, &bounds::CABLE);
    let part = below.first(|s| s.least_volts.as_ref());
    let least = place(at, "least_volts", "starter's least volts");
    walk.value(least, &mut own.least_volts, part, &bounds::STARTER_VOLTS);
}

fn battery(walk: &mut Walk, own: &mut BatteryText, below: &Below<BatteryText>) {
    let at = "battery";
    size(walk, own, below);
    let part = below.first(|b| b.cold_cranking.as_ref());
    let cranking = place(at, "cold_cranking", "cold cranking amps");
    walk.value(
        cranking,
        &mut own.cold_cranking,
        part,
        &bounds::COLD_CRANKING,
    );
    let part = below.first(|b| b.resistance.as_ref());
    let ohms = place(at, "resistance", "battery's resistance");
    walk.value(ohms, &mut own.resistance, part, &bounds::BATTERY_RESISTANCE);
    let part = below.first(|b| b.rest_full.as_ref());
    let full = place("battery.rest_volts", "full", "rested volts when full");
    walk.value(full, &mut own.rest_full, part, &bounds::REST_VOLTS);
    let part = below.first(|b| b.rest_empty.as_ref());
    let empty = place("battery.rest_volts", "empty", "rested volts when empty");
    walk.value(empty, &mut own.rest_empty, part, &bounds::REST_VOLTS);
    let part = below.first(|b| b.reserve.as_ref());
    let reserve = place(at, "reserve", "reserve");
    walk.value(reserve, &mut own.reserve, part, &bounds::RESERVE);
    let part = below.first(|b| b.gassing.as_ref());
    let gassing = place(at, "gassing", "battery's gassing");
    let typed = super::amount::typed_factor;
    walk.value_typed(
        gassing,
        &mut own.gassing,
        part,
        &bounds::CHARGE_FACTOR,
        typed,
    );
    let part = below.first(|b| b.health.as_ref());
    let health = place(at, "health", "battery's health");
    walk.value(health, &mut own.health, part, &bounds::HEALTH);
}

/// Ampere-hours and reserve minutes. Either written beside `part:` displaces the other of the part, so
/// that where one of a part's is drawn both are written.
fn size(walk: &mut Walk, own: &mut BatteryText, below: &Below<BatteryText>) {
    let of_part = own.capacity.is_none() && own.reserve_capacity.is_none();
    let (capacity, minutes) = if of_part {
        (
            below.first(|b| b.capacity.as_ref()),
            below.first(|b| b.reserve_capacity.as_ref()),
        )
    } else {
        (None, None)
    };
    let hours = place("battery", "capacity", "battery capacity");
    walk.value(hours, &mut own.capacity, capacity, &bounds::CAPACITY);
    let reserve = place("battery", "reserve_capacity", "reserve minutes");
    let most = &bounds::RESERVE_CAPACITY;
    walk.value(reserve, &mut own.reserve_capacity, minutes, most);
    if of_part && walk.draws() && (own.capacity.is_some() || own.reserve_capacity.is_some()) {
        keep(walk, hours, &mut own.capacity, capacity);
        keep(walk, reserve, &mut own.reserve_capacity, minutes);
    }
}

/// Writes a part's value beside `part:` as it is.
fn keep<T: super::amount::Amount>(
    walk: &mut Walk,
    place: Place,
    own: &mut Option<Written<T>>,
    part: Option<&Written<T>>,
) {
    if let (None, Some(part)) = (own.as_ref(), part) {
        let path = path::key(place.at, place.key);
        walk.put(|| format!("{path}={}", part.value.typed()));
        *own = Some(Written::exact(part.value, path));
    }
}

fn charger(walk: &mut Walk, own: &mut ChargerText) {
    let at = "charger";
    let amps = place(at, "amps", "charger's current");
    walk.stated(amps, &mut own.amps, &bounds::CHARGER_CURRENT);
    let holds = place(at, "holds", "charger's volts");
    walk.value(holds, &mut own.holds, None, &bounds::CHARGER_VOLTS);
    let after = place(at, "after", "time before the charger");
    walk.value(after, &mut own.after, None, &bounds::CHARGER_TIME);
    let time = place(at, "time", "time on the charger");
    walk.value(time, &mut own.time, None, &bounds::CHARGER_TIME);
}
