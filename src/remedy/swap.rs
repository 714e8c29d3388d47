//! One entry of a build changed for a catalog part: in the description, and as `--set` takes it.

use super::entry;
use crate::description::path;
use crate::description::{AccessoryText, BatteryText, ChargingText, Description, Written};
use crate::quantity::format::precise;

/// A changed description and the assignment that makes the same of the file.
#[derive(Clone, Debug)]
pub(crate) struct Swapped {
    /// The description changed.
    pub(crate) description: Description,
    /// `PATH=VALUE`.
    pub(crate) set: String,
}

fn written(value: &str, path: &str) -> Option<Written<String>> {
    Some(Written::exact(value.to_owned(), path::key(path, "part")))
}

/// A catalog winding or alternator in place of an entry of `charging`.
pub(crate) fn charging(description: &Description, index: usize, id: &str) -> Option<Swapped> {
    let mut description = description.clone();
    let place = description.charging.get_mut(index)?;
    let path = place.path.clone();
    *place = ChargingText {
        part: written(id, &path),
        path: path.clone(),
        ..ChargingText::default()
    };
    let set = format!("{path}={{part: {}}}", entry::word(id));
    Some(Swapped { description, set })
}

/// A catalog battery in place of the battery. A reserve that the user stated stays.
pub(crate) fn battery(description: &Description, id: &str) -> Option<Swapped> {
    let mut description = description.clone();
    let old = description.battery.take()?;
    let kept = old.reserve.as_ref().map_or(String::new(), |reserve| {
        format!(", reserve: {}", precise(reserve.value))
    });
    let set = format!("{}={{part: {}{kept}}}", old.path, entry::word(id));
    description.battery = Some(BatteryText {
        part: written(id, &old.path),
        path: old.path,
        reserve: old.reserve,
        ..BatteryText::default()
    });
    Some(Swapped { description, set })
}

/// A catalog accessory in place of one; when it is on and how it is wired stay.
pub(crate) fn accessory(description: &Description, index: usize, id: &str) -> Option<Swapped> {
    let mut description = description.clone();
    let place = description.accessories.get_mut(index)?;
    let old = std::mem::take(place);
    let path = old.path.clone();
    *place = AccessoryText {
        part: written(id, &path),
        path: old.path,
        name: old.name,
        count: old.count,
        duty: old.duty,
        circuit: old.circuit,
        together: old.together,
        apart: old.apart,
        run: old.run,
        feed: old.feed,
        max_drop: old.max_drop,
        returns: old.returns,
        insulation: old.insulation,
        ..AccessoryText::default()
    };
    let set = format!("{path}={}", entry::accessory(place));
    Some(Swapped { description, set })
}
