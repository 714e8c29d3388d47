//! Changes of degree, no further than they need be: a speed raised, a duty cut.

use super::Asked;
use super::change::{Change, What};
use super::search::changed;
use crate::quantity::format::{percent, text};
use crate::quantity::{Fraction, Rpm};
use crate::size::{keeps_up, proves};

/// Steps of a speed, rpm.
const RPM: f64 = 10.0;
/// Steps of a duty, per cent.
const PERCENT: f64 = 1.0;

/// The changes with each of degree made as small as it may be, one after the other. As they are where
/// that cannot be proved.
pub(super) fn tightened(asked: &Asked<'_>, changes: Vec<Change>) -> Vec<Change> {
    let mut tight = changes.clone();
    for place in 0..tight.len() {
        let Some(degrees) = tight.get(place).and_then(|c| degrees(asked, c)) else {
            continue;
        };
        let mut holds = |degree: &Change| {
            let mut all = tight.clone();
            if let Some(change) = all.get_mut(place) {
                *change = degree.clone();
            }
            changed(asked, &all).is_some_and(|build| keeps_up(&build))
        };
        if let Some(least) = least(&degrees, &mut holds)
            && let Some(change) = tight.get_mut(place)
        {
            *change = least;
        }
    }
    if changed(asked, &tight).is_some_and(|build| proves(&build)) {
        tight
    } else {
        changes
    }
}

/// The first of a row, each more of the change than the one before, that holds.
fn least(degrees: &[Change], holds: &mut dyn FnMut(&Change) -> bool) -> Option<Change> {
    let (mut low, mut high) = (0, degrees.len());
    while low < high {
        let middle = low + (high - low) / 2;
        if holds(degrees.get(middle)?) {
            high = middle;
        } else {
            low = middle + 1;
        }
    }
    degrees.get(high).cloned()
}

/// A change of degree in its steps, the least first; none of a change that is made or not.
fn degrees(asked: &Asked<'_>, change: &Change) -> Option<Vec<Change>> {
    match change.what {
        What::Speed { index, to } => {
            let speed = asked.build.speeds.get(index)?;
            let now = speed.rpm.value;
            let first = (now.0 / RPM).floor() as i64 + 1;
            let last = (to.0 / RPM).ceil() as i64;
            let steps = (first..=last).map(|k| Rpm((RPM * k as f64).min(to.0)));
            let words = |rpm| format!("{} at {} instead of {}", speed.name, text(rpm), text(now));
            let make = |rpm| Change {
                words: words(rpm),
                what: What::Speed { index, to: rpm },
                much: (rpm.0 / now.0).ln().abs(),
                ..change.clone()
            };
            Some(steps.map(make).collect())
        }
        What::Duty { index, to } => {
            let accessory = asked.build.accessories.get(index)?;
            let most = accessory.duty.most();
            let first = (most.percent() / PERCENT).ceil() as i64 - 1;
            let last = (to.percent() / PERCENT).floor() as i64;
            let steps = (last..=first).rev();
            let make = |k: i64| {
                let share = Fraction::from_percent(PERCENT * k as f64).max(to);
                Change {
                    words: format!(
                        "{} on {} of the time at most instead of {}",
                        accessory.name,
                        percent(share),
                        percent(most)
                    ),
                    what: What::Duty { index, to: share },
                    much: (share.0.max(1e-3) / most.0).ln().abs(),
                    ..change.clone()
                }
            };
            Some(steps.map(make).collect())
        }
        _ => None,
    }
}
