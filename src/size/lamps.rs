//! Filament lamps changed for LED of equal light.

use super::margin::Margin;
use super::nearest::{capital, largest};
use super::worth::Worth;
use crate::build::{Accessory, Build, Draw};
use crate::check::answer::Change;
use crate::quantity::format::text;
use crate::quantity::{AmpHours, Fraction, Volts, Watts};

/// Lumens a watt of an LED lamp. Common practice, no source: 80 to 110 at the lamp; the safe end.
const LED_LUMENS_A_WATT: f64 = 80.0;
/// Lumens a watt of a filament lamp that states no lumens: a halogen headlamp's. UN Regulation 37,
/// category H7: 1500 lm at 58 W; common practice for others.
const FILAMENT_LUMENS_A_WATT: f64 = 25.0;

/// Share of what is lacking below which a change is not tried.
const NOT_NEARLY: f64 = 0.7;

/// Power of an LED lamp as bright as a filament lamp; none for anything else.
///
/// ```text
/// P = Φ / 80 lm/W,   Φ as stated, or 25 lm/W times the filament's power
/// ```
/// where Φ luminous flux of one lamp. Valid for: lamps at their stated volts. Source: common
/// practice, the ends of the bands that ask for more power.
#[must_use]
pub fn led_power(accessory: &Accessory) -> Option<Watts> {
    let Draw::Filament { power, .. } = accessory.draw.value else {
        return None;
    };
    let watts = (10.0 * light(accessory)?.0 / LED_LUMENS_A_WATT).ceil() / 10.0;
    (watts < power.0).then_some(Watts(watts))
}

/// Lumens of one filament lamp, as a pure number: as stated, or 25 for each watt; none for anything
/// else.
#[must_use]
pub fn light(accessory: &Accessory) -> Option<Fraction> {
    let Draw::Filament { power, .. } = accessory.draw.value else {
        return None;
    };
    let usual = Fraction(FILAMENT_LUMENS_A_WATT * power.0);
    Some(accessory.lumens.unwrap_or(usual))
}

/// The build with some lamps changed.
fn with_led(build: &Build, lamps: &[usize]) -> Build {
    let mut changed = build.clone();
    let low = Volts(1.75 * f64::from(build.cells()));
    for index in lamps {
        if let Some(accessory) = changed.accessory_mut(*index)
            && let Some(power) = led_power(accessory)
        {
            accessory.draw.value = Draw::Power(power);
            if !accessory.works.stated {
                accessory.works.low = Some(low);
            }
        }
    }
    changed
}

/// Filament lamps as LED: the one that takes most, where that is enough; else all of them.
pub(super) fn led(
    build: &Build,
    worth: &Worth<'_>,
    wanted: AmpHours,
    margin: &mut Margin<'_>,
) -> Option<Change> {
    let lamps: Vec<usize> = largest(build)
        .into_iter()
        .map(|(index, _)| index)
        .filter(|i| build.accessory(*i).and_then(led_power).is_some())
        .collect();
    let mut holds = |lamps: &[usize]| {
        worth.of_led(lamps).0 > NOT_NEARLY * wanted.0 && margin.of(&with_led(build, lamps)) >= 0.0
    };
    let enough: &[usize] = match lamps.as_slice() {
        [] => return None,
        [first, ..] if holds(&[*first]) => lamps.get(..1)?,
        [_, _, ..] if holds(&lamps) => &lamps,
        _ => return None,
    };
    let changed = with_led(build, enough);
    if !margin.decides && !super::keeps_up(&changed) {
        return None;
    }
    let words = match enough {
        [one] => {
            let accessory = build.accessories.get(*one)?;
            let power = led_power(accessory)?;
            let count = if accessory.count > 1 {
                format!("{} x ", accessory.count)
            } else {
                String::new()
            };
            format!(
                "{} as LED of equal light, {count}{}",
                accessory.name,
                text(power)
            )
        }
        all => format!("all {} filament lamps as LED of equal light", all.len()),
    };
    Some(Change {
        text: capital(&words),
        set: None,
        settles_soc: None,
    })
}
