//! The build with its wires' resistance in the accessories' draws, and what that does to the charge.

use super::answer::{Effect, Wires};
use crate::battery::Charge;
use crate::build::{Build, Draw, State};
use crate::check::{FirstShift, first_shift};
use crate::ledger::Machine;
use crate::load::LoadSum;
use crate::quantity::{AmpHours, Ohms, Volts, Watts};

/// Volts a cell at which a draw with its wire is made equal to a draw without: 14.0 V for 12 V.
/// Common practice for a charging system at work, no source.
const WORKING_CELL: f64 = 14.0 / 6.0;
/// Rounds in which volts and current settle.
const ROUNDS: usize = 80;

/// The resistance of wire that each accessory sees, all of a kind together; none for an accessory
/// without a wire. On a feed it is that resistance which, at the accessory's own current, loses the
/// volts that the feed loses at the worst steady current.
#[must_use]
pub fn series_resistance(build: &Build, wires: &Wires) -> Vec<Option<Ohms>> {
    build
        .accessories
        .iter()
        .map(|accessory| {
            let wire = wires
                .wires
                .iter()
                .find(|w| w.accessories.contains(&accessory.name))?;
            let own = wire
                .switches
                .iter()
                .find(|s| s.accessory == accessory.name)?
                .amps;
            let share = if own.0 > 0.0 {
                (wire.amps / own).max(1.0)
            } else {
                1.0
            };
            Some(wire.resistance_ohm * share)
        })
        .collect()
}

/// The build with every sized wire's resistance in its accessory's draw: a resistance is lengthened
/// by it, a filament and a constant power are replaced by one that takes from the bus, at 14.0 V for
/// 12 V, what they take through the wire there. A constant current is unchanged.
#[must_use]
pub fn in_series(build: &Build, wires: &Wires) -> Build {
    let at = Volts(WORKING_CELL * f64::from(build.cells()));
    let mut with = build.clone();
    for (index, ohms) in series_resistance(build, wires).into_iter().enumerate() {
        if let (Some(accessory), Some(ohms)) = (with.accessory_mut(index), ohms) {
            let each = ohms * f64::from(accessory.count.max(1));
            accessory.draw.value = behind(accessory.draw.value, each, at);
        }
    }
    with
}

/// One draw behind a resistance, seen from the bus.
fn behind(draw: Draw, wire: Ohms, at: Volts) -> Draw {
    match draw {
        Draw::Current(amps) => Draw::Current(amps),
        Draw::Resistance(ohms) => Draw::Resistance(ohms + wire),
        Draw::Power(_) => Draw::Power(taken(draw, wire, at)),
        Draw::Filament { .. } => Draw::Filament {
            power: taken(draw, wire, at),
            at,
        },
    }
}

/// Power that a draw takes from the bus through a resistance: V I, where I = f(V − R I).
fn taken(draw: Draw, wire: Ohms, at: Volts) -> Watts {
    let sum = LoadSum::of(draw, 1);
    let mut amps = sum.current_at(at);
    for _ in 0..ROUNDS {
        amps = sum.current_at((at - wire * amps).max(0.5 * at));
    }
    at * amps
}

/// What the wires do to the charge of the first shift; none without a battery or without wires.
pub(super) fn effect(build: &Build, wires: &Wires) -> Option<Effect> {
    if wires.wires.is_empty() {
        return None;
    }
    let of = |build: &Build| -> Option<FirstShift> {
        let machine = Machine::new(build)?;
        Some(first_shift(
            build,
            &machine,
            Charge::rested(build.start),
            false,
        ))
    };
    let (without, with) = (of(build)?, of(&in_series(build, wires))?);
    Some(Effect {
        loads_ah: loads(&without),
        loads_with_wires_ah: loads(&with),
        balance_ah: without.balance,
        balance_with_wires_ah: with.balance,
    })
}

/// What the accessories draw in a shift, parking left out.
fn loads(shift: &FirstShift) -> AmpHours {
    shift
        .legs
        .iter()
        .filter(|leg| leg.state != State::Parked)
        .map(|leg| leg.mean.loads * leg.time)
        .sum()
}
