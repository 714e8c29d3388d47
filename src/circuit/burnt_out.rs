//! What the remaining lamps see when one burns out.

use super::loads::{Coils, Loads};
use super::point::Feed;
use crate::build::{Build, Draw};
use crate::load::filament_life;
use crate::quantity::{Fraction, Volts};

/// The worst that one burnt-out lamp does to another.
#[derive(Clone, Debug)]
pub struct BurntOut {
    /// The state.
    pub state: String,
    /// Index of the accessory of which one burns out.
    pub lost: usize,
    /// Index of the accessory that suffers most: the shortest life left.
    pub left: usize,
    /// Rms volts at it before.
    pub before: Volts,
    /// Rms volts at it after.
    pub after: Volts,
    /// Its life after, against its life at its stated volts.
    pub life: Fraction,
}

/// The worst over every lamp that may burn out, with everything on. Nothing where fewer than two
/// lamps are on; a circuit whose volts cannot be found without the lamp is passed over.
pub(super) fn worst(
    build: &Build,
    feed: &Feed,
    state: &str,
    everything: &[usize],
) -> Option<BurntOut> {
    let loads = Loads::of(build, everything, Coils::Cold);
    let before = feed.solve(&loads).ok()?.heating;
    let lamp = |k: usize| match build.accessories.get(k).map(|a| a.draw.value) {
        Some(Draw::Filament { at, .. }) => Some(at),
        _ => None,
    };
    let mut found: Option<BurntOut> = None;
    for lost in loads.0.iter().map(|l| l.accessory) {
        if lamp(lost).is_none() {
            continue;
        }
        let remaining = loads.without_one(lost);
        let Ok(point) = feed.solve(&remaining) else {
            continue;
        };
        for left in remaining.0.iter().map(|l| l.accessory) {
            let Some(at) = lamp(left) else { continue };
            let life = filament_life(at, point.heating);
            if found.as_ref().is_none_or(|f| life < f.life) {
                found = Some(BurntOut {
                    state: state.to_owned(),
                    lost,
                    left,
                    before,
                    after: point.heating,
                    life,
                });
            }
        }
    }
    found
}
