//! Filament lamps at volts other than their own: dim below, short-lived above.

use crate::build::{Accessory, Build, Draw, State};
use crate::check::answer::{ByState, Finding, Weight};
use crate::load::{filament_life, filament_light};
use crate::quantity::{Fraction, Volts, format};

/// Light below which a lamp is called dim. Own choice.
pub(super) const DIM: Fraction = Fraction(0.5);
/// Life below which a lamp is called short-lived: 5.5 % over its volts. Own choice.
pub(super) const SHORT: Fraction = Fraction(0.5);
/// Life below which it burns out in hours: 19 % over its volts. Own choice.
const BURNS_OUT: Fraction = Fraction(0.1);
/// Share of the stated volts below which the law of light is a rough guide only. Common practice.
const ROUGH_BELOW: f64 = 0.8;
/// What the limit of life rests on.
pub(super) const LIFE_SOURCE: &str =
    "life as volts to the power −13 (encyclopaedia: −12 to −16), under half flagged: own choice";
const LIGHT_SOURCE: &str =
    "light as volts to the power 3.4 (encyclopaedia), under half called dim: own choice";

/// How much a lamp's life matters.
pub(super) fn weight(life: Fraction) -> Weight {
    if life < BURNS_OUT {
        Weight::Fault
    } else if life < SHORT {
        Weight::Warning
    } else {
        Weight::Note
    }
}

/// Findings on a filament lamp from the rms volts at it in each state: `dim lamp` where it gives less
/// than half its light, `short-lived lamp` where it lives less than half its life. Nothing for an
/// accessory of another law; states in which it is never on, and cranking, are passed over.
#[must_use]
pub fn lamp_findings(build: &Build, accessory: &Accessory, volts: &ByState<Volts>) -> Vec<Finding> {
    lamp_findings_between(build, accessory, volts, volts)
}

/// As [`lamp_findings`]: dim by the lowest volts, short-lived by the highest.
pub(super) fn lamp_findings_between(
    build: &Build,
    accessory: &Accessory,
    lowest: &ByState<Volts>,
    highest: &ByState<Volts>,
) -> Vec<Finding> {
    let Draw::Filament { at, .. } = accessory.draw.value else {
        return Vec::new();
    };
    let lit = |name: &str| lights(build, accessory, name);
    let seen = |volts: &ByState<Volts>, law: fn(Volts, Volts) -> Fraction, limit: Fraction| {
        let states = volts.0.iter().filter(|(name, _)| lit(name));
        let figures = states.map(|(name, v)| (name.clone(), *v, law(at, *v)));
        let mut under: Vec<_> = figures.filter(|(_, _, x)| *x < limit).collect();
        under.sort_by(|a, b| a.2.0.total_cmp(&b.2.0));
        under
    };
    let dim = seen(lowest, filament_light, DIM);
    let short = seen(highest, filament_life, SHORT);
    let mut all = Vec::new();
    if let Some((_, worst, _)) = dim.first() {
        let rough = if worst.0 < ROUGH_BELOW * at.0 {
            " (a rough guide so far below)"
        } else {
            ""
        };
        let text = format!("{}: {}{rough}", accessory.name, words(&dim, "light", at));
        all.push(finding("dim lamp", Weight::Warning, text, LIGHT_SOURCE));
    }
    if let Some((_, _, life)) = short.first() {
        let text = format!("{}: {}", accessory.name, words(&short, "life", at));
        all.push(finding(
            "short-lived lamp",
            weight(*life),
            text,
            LIFE_SOURCE,
        ));
    }
    all
}

/// Whether a lamp is lit in a state of a name, the short time of a start aside.
fn lights(build: &Build, accessory: &Accessory, name: &str) -> bool {
    let speeds = 0..build.speeds.len();
    let mut states = speeds.map(State::Running).chain([State::Stopped]);
    states.any(|s| build.state_name(s) == name && accessory.duty.share(s) > Fraction::ZERO)
}

/// `8.94 V at idle, 30 % of its light at 12.8 V`, worst state first.
fn words(states: &[(String, Volts, Fraction)], what: &str, at: Volts) -> String {
    let each: Vec<String> = states
        .iter()
        .map(|(name, volts, share)| {
            format!(
                "{} at {name} give {} of its {what}",
                format::text(*volts),
                format::percent(*share)
            )
        })
        .collect();
    format!("{} at {}", each.join(", "), format::text(at))
}

/// A finding.
pub(super) fn finding(what: &str, weight: Weight, text: String, source: &str) -> Finding {
    Finding {
        what: what.to_owned(),
        weight,
        text,
        source: source.to_owned(),
    }
}
