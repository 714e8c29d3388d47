//! What the figures of the circuits without the battery show.

use super::lamps::{LIFE_SOURCE, SHORT, finding, lamp_findings_between, weight};
use super::loads::HOT_COIL;
use super::range::{Extreme, range_findings};
use super::{BurntOut, Circuit, InState, OnCircuit, is_coil};
use crate::build::{Accessory, Build, Draw};
use crate::check::answer::{Finding, Weight};
use crate::description::accessory::LoadKind;
use crate::load::filament_life;
use crate::quantity::{Amps, Fraction, Volts, format};

/// The findings on every circuit: dim and short-lived lamps, what a burnt-out lamp does to the
/// others, volts outside an accessory's range, coils that may not pull in when hot, and coils behind
/// one diode.
#[must_use]
pub fn findings(build: &Build, circuits: &[Circuit]) -> Vec<Finding> {
    let mut all = Vec::new();
    for circuit in circuits {
        for on in &circuit.accessories {
            if let Some(accessory) = build.accessories.get(on.accessory) {
                all.extend(of_accessory(build, accessory, on));
            }
        }
        let burnt = circuit.burnt_out.as_ref();
        all.extend(burnt.and_then(|b| burnt_out(build, circuit, b)));
        all.extend(one_diode(build, circuit));
    }
    all
}

fn of_accessory(build: &Build, accessory: &Accessory, on: &OnCircuit) -> Vec<Finding> {
    let dim = on.by_state(|s| s.heating.lowest);
    let bright = on.by_state(|s| s.heating.highest);
    let mut all = lamp_findings_between(build, accessory, &dim, &bright);
    let lowest = on.by_state(|s| s.between.lowest);
    let highest = on.by_state(|s| s.between.highest);
    let usual = on.states.iter().all(|s| s.between.lowest >= s.volts);
    let (all_on, few_on) = match (usual, is_coil(accessory)) {
        (true, true) => (
            "with a cold coil and everything on",
            "with a hot coil and the least on",
        ),
        (true, false) => ("with everything on", "with the least on"),
        // A coil behind one diode gets less the less is on beside it.
        (false, _) => ("at worst", "at most"),
    };
    let low = Extreme {
        volts: &lowest,
        when: all_on,
    };
    let high = Extreme {
        volts: &highest,
        when: few_on,
    };
    all.extend(range_findings(build, accessory, low, high));
    all.extend(hot_pull_in(accessory, on));
    all
}

/// A hot coil whose volts are in range but whose amps are under those that its lower limit drives
/// through a cold one: a coil pulls by its amps.
///
/// ```text
/// I_hot = V_hot / R_hot  against  V_low / R_20
/// ```
/// where R_hot the coil's resistance at [`HOT_COIL`], V_low the lower end of its working volts.
/// Source: a coil's pull follows its ampere-turns (textbook); copper by IEC 60028.
fn hot_pull_in(accessory: &Accessory, on: &OnCircuit) -> Option<Finding> {
    let Draw::Resistance(cold) = accessory.draw.value else {
        return None;
    };
    let low = accessory.works.low.filter(|_| accessory.works.stated)?;
    let pulls = f64::from(accessory.count) * (low / cold);
    let weak = on.states.iter().filter_map(|s| {
        let (amps, volts) = s.hot?;
        (volts >= low && s.volts >= low && amps < pulls).then_some((s, amps, volts))
    });
    let (at, amps, volts) = weak.min_by(|a, b| a.1.0.total_cmp(&b.1.0))?;
    let text = format!(
        "{} hot ({}) gets {} at {} but only {}; cold, its {} are {}: it may not pull in hot, unless that limit was stated for a hot coil",
        accessory.name,
        format::temperature(HOT_COIL),
        format::text(volts),
        at.state,
        format::text(amps),
        format::text(low),
        format::text(pulls)
    );
    let source = "a coil pulls by its amps (textbook); copper at 100 °C (IEC 60028)";
    Some(finding("pull-in hot", Weight::Warning, text, source))
}

/// What the remaining lamps see when one burns out.
fn burnt_out(build: &Build, circuit: &Circuit, worst: &BurntOut) -> Option<Finding> {
    let (lost, left) = (
        build.accessories.get(worst.lost)?,
        build.accessories.get(worst.left)?,
    );
    let Draw::Filament { at, .. } = left.draw.value else {
        return None;
    };
    let one = if lost.count > 1 { "one of " } else { "" };
    let left_name = if worst.left == worst.lost {
        "the rest of them"
    } else {
        left.name.as_str()
    };
    let before = filament_life(at, worst.before);
    let left_over = if worst.life >= Fraction::ONE {
        format!("still within {}", format::text(at))
    } else {
        format!(
            "{} of the life at {}{}",
            format::percent(worst.life),
            format::text(at),
            if before < Fraction::ONE {
                format!(" (before: {})", format::percent(before))
            } else {
                String::new()
            }
        )
    };
    let text = format!(
        "if {one}{} burns out at {}, {left_name} on {}: from {} to {}, {left_over}",
        lost.name,
        worst.state,
        circuit.name,
        format::text(worst.before),
        format::text(worst.after),
    );
    let weight = if worst.life < SHORT {
        weight(worst.life).min(Weight::Warning)
    } else {
        Weight::Note
    };
    Some(finding("burnt-out lamp", weight, text, LIFE_SOURCE))
}

/// A coil behind one diode: what a diode across it would do, and one whose inductance is not known.
fn one_diode(build: &Build, circuit: &Circuit) -> Vec<Finding> {
    let mut all = Vec::new();
    let gains = |s: &&InState| s.freewheel.is_some_and(|with| with > s.volts);
    let lowest = circuit.states.iter().filter(gains);
    let lowest = lowest.min_by(|a, b| a.volts.0.total_cmp(&b.volts.0));
    if let Some((state, with)) = lowest.and_then(|s| s.freewheel.map(|with| (s, with))) {
        let text = format!(
            "the coil on {} is fed by one diode and holds its own current back: {} at {}; with a diode across it {}. Such a diode delays the coil's release: only where the machine's maker allows it",
            circuit.name,
            format::text(state.volts),
            state.name,
            format::text(with)
        );
        all.push(finding(
            "coil behind one diode",
            Weight::Warning,
            text,
            "computed, both cases",
        ));
    }
    if circuit.half_wave(build) {
        let unknown = circuit
            .accessories
            .iter()
            .filter_map(|on| build.accessories.get(on.accessory));
        let unknown = unknown.filter(|a| {
            a.kind == LoadKind::Coil && is_coil(a) && a.coil.is_none_or(|h| h.0 <= 0.0)
        });
        all.extend(unknown.map(|a| {
            let text = format!(
                "{} states no inductance (`coil:`) and is taken as a plain resistance; behind one diode a coil gets less",
                a.name
            );
            finding("coil behind one diode", Weight::Note, text, "see `coil:`")
        }));
    }
    all
}

impl Circuit {
    fn half_wave(&self, build: &Build) -> bool {
        use crate::build::SourceKind;
        use crate::source::Rectifier;
        let source = build.sources.get(self.source).map(|s| &s.kind);
        matches!(source, Some(SourceKind::Winding(w)) if matches!(w.rectifier, Some(Rectifier::HalfWave { .. })))
    }

    /// What the accessories draw in a state with everything on.
    #[must_use]
    pub fn drawn(&self, state: &str) -> Amps {
        self.accessories
            .iter()
            .flat_map(|on| &on.states)
            .filter(|s| s.state == state)
            .map(|s| s.amps)
            .sum()
    }

    /// Volts by state with everything on.
    #[must_use]
    pub fn volts(&self) -> crate::check::answer::ByState<Volts> {
        let states = self.states.iter().map(|s| (s.name.clone(), s.volts));
        crate::check::answer::ByState(states.collect())
    }
}
