//! What arrives at each accessory: the wire's resistance back in the solve.

use super::answer::{Arrives, PullIn};
use super::demand::{Demand, Member};
use super::size::Settled;
use super::volts::Seen;
use crate::build::{Accessory, Build, Draw};
use crate::circuit::HOT_COIL;
use crate::description::accessory::LoadKind;
use crate::load::{coil_at, filament_light};
use crate::quantity::{Amps, Ohms, Volts};

/// Rounds in which volts and currents settle.
const ROUNDS: usize = 80;

/// What arrives at every accessory of a wire, in the state in which it sees least.
pub(super) fn arrives(build: &Build, demand: &Demand, settled: &Settled) -> Vec<Arrives> {
    demand
        .members
        .iter()
        .filter_map(|member| {
            let accessory = build.accessories.get(member.index)?;
            let at = |seen: &Seen| (*seen, volts(demand, seen, settled.resistance, None));
            let (seen, volts) = member
                .seen
                .iter()
                .map(at)
                .min_by(|a, b| a.1.0.total_cmp(&b.1.0))?;
            Some(row(
                build,
                demand,
                settled,
                (member, accessory),
                (&seen, volts),
            ))
        })
        .collect()
}

fn row(
    build: &Build,
    demand: &Demand,
    settled: &Settled,
    (member, accessory): (&Member, &Accessory),
    (seen, volts): (&Seen, Volts),
) -> Arrives {
    let works = accessory.works;
    let light = |v: Volts| match accessory.draw.value {
        Draw::Filament { at, .. } => Some(filament_light(at, v)),
        _ => None,
    };
    Arrives {
        accessory: accessory.name.clone(),
        state: build.state_name(seen.state).to_owned(),
        bus_v: seen.low,
        volts,
        amps: member.at(volts),
        works_low_v: works.low,
        works: works.low.is_none_or(|low| volts >= low),
        light: light(volts),
        light_at_bus: light(seen.low),
        pull_in: pull_in(demand, settled, (member, accessory), seen),
    }
}

/// The volts at the end of a wire: bus volts less its resistance times what is on; one member's
/// current may be given by a resistance of its own.
///
/// ```text
/// V = Vbus − R Σ I(V)
/// ```
/// Valid for: R Σ I well under Vbus. Source: Ohm's law. Found by repetition.
fn volts(demand: &Demand, seen: &Seen, wire: Ohms, own: Option<(usize, Ohms)>) -> Volts {
    let on = |m: &Member| m.seen.iter().any(|s| s.state == seen.state);
    let current = |m: &Member, v: Volts| match own {
        Some((index, ohms)) if index == m.index => v / ohms,
        _ => m.at(v),
    };
    let mut at = seen.low;
    for _ in 0..ROUNDS {
        let amps = demand.together(|m| on(m).then(|| current(m, at)));
        let next = (seen.low - wire * amps).max(Volts::ZERO);
        let change = (next - at).abs();
        at = next;
        if change.0 < 1e-12 {
            break;
        }
    }
    at
}

/// A hot coil's pull-in: its current hot against that which it has cold at its lower working limit.
fn pull_in(
    demand: &Demand,
    settled: &Settled,
    (member, accessory): (&Member, &Accessory),
    seen: &Seen,
) -> Option<PullIn> {
    let Draw::Resistance(cold) = accessory.draw.value else {
        return None;
    };
    let low = accessory
        .works
        .low
        .filter(|_| accessory.kind == LoadKind::Coil)?;
    let together = |one: Ohms| one / f64::from(member.count.max(1));
    let hot = together(coil_at(cold, HOT_COIL));
    let volts = volts(demand, seen, settled.resistance, Some((member.index, hot)));
    let amps: Amps = volts / hot;
    let needs: Amps = low / together(cold);
    Some(PullIn {
        coil_c: HOT_COIL,
        volts,
        amps,
        needs_a: needs,
        pulls_in: amps >= needs,
    })
}
