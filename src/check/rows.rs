//! The first shift by state and by accessory.

use super::answer::{AccessoryRow, ByState, StateRow};
use super::first_shift::{FirstShift, Mean};
use crate::build::{Accessory, Build, SourceKind, State};
use crate::ledger::Machine;
use crate::load::LoadSum;
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Volts, Watts};
use crate::source;

/// One state's share of the shift.
#[derive(Clone, Copy, Debug)]
struct InState {
    state: State,
    wired: usize,
    time: Hours,
    mean: Mean,
    worst: (Amps, Volts),
}

/// One row a state, in the order in which the states first occur; parking left out.
#[must_use]
pub fn by_state(build: &Build, machine: &Machine, shift: &FirstShift) -> Vec<StateRow> {
    states(machine, shift)
        .iter()
        .map(|s| state_row(build, machine, s))
        .collect()
}

fn states(machine: &Machine, shift: &FirstShift) -> Vec<InState> {
    let mut all: Vec<InState> = Vec::new();
    for leg in shift.legs.iter().filter(|leg| leg.state != State::Parked) {
        let bus = &machine.connected[leg.wired].bus;
        let worst = [leg.before, leg.after]
            .map(|charge| bus.worst(&machine.climate, charge, machine.cells))
            .map(|point| (point.battery.total, point.bus));
        let worst = if worst[1].0 < worst[0].0 {
            worst[1]
        } else {
            worst[0]
        };
        let index = all
            .iter()
            .position(|s| s.state == leg.state)
            .unwrap_or_else(|| {
                all.push(InState {
                    state: leg.state,
                    wired: leg.wired,
                    time: Hours::ZERO,
                    mean: Mean::default(),
                    worst,
                });
                all.len() - 1
            });
        let state = &mut all[index];
        state.time += leg.time;
        state.mean.add_weighted(&leg.mean, leg.time);
        if worst.0 < state.worst.0 {
            state.worst = worst;
        }
    }
    for state in &mut all {
        state.mean = state.mean.over(state.time);
    }
    all
}

fn state_row(build: &Build, machine: &Machine, s: &InState) -> StateRow {
    // A hair below: a mean that rounds above a setpoint must not read as a regulator let go.
    let bus = s.mean.bus - Volts(1e-9);
    StateRow {
        state: build.state_name(s.state).to_owned(),
        rpm: build.rpm(s.state),
        minutes: s.time.into(),
        available_a: machine.connected[s.wired].bus.supply.available(bus),
        source_a: s.mean.loads + s.mean.battery,
        loads_a: s.mean.loads,
        battery_a: s.mean.battery,
        bus_v: s.mean.bus,
        worst_battery_a: s.worst.0,
        worst_bus_v: s.worst.1,
        ah: s.mean.battery * s.time,
        winding_w: winding_heat(build, s.state, bus),
    }
}

/// Copper loss of the windings on the battery bus when they give all they can at some bus volts,
/// or, where a shunt regulator shorts them, when they are shorted, whichever is more.
fn winding_heat(build: &Build, state: State, bus: Volts) -> Watts {
    let rpm = build.rpm(state);
    let mut heat = Watts::ZERO;
    for source in build
        .sources
        .iter()
        .filter(|s| s.circuit.is_none() && !s.braking)
    {
        let SourceKind::Winding(winding) = &source.kind else {
            continue;
        };
        let Some(rectifier) = &winding.rectifier else {
            continue;
        };
        let shorts = source
            .regulator
            .as_ref()
            .is_some_and(|r| r.kind == crate::description::charging::RegulatorKind::Shunt);
        let rms = source::rectified(&winding.constants, rectifier, rpm, bus).winding_rms;
        let shorted = if shorts {
            source::short_circuit(&winding.constants, rpm)
        } else {
            Amps::ZERO
        };
        heat += source::copper_loss(&winding.constants, rms.max(shorted));
    }
    heat
}

/// One row an accessory on the battery bus, largest Ah first.
#[must_use]
pub fn by_accessory(build: &Build, machine: &Machine, shift: &FirstShift) -> Vec<AccessoryRow> {
    let states = states(machine, shift);
    let rows: Vec<AccessoryRow> = build
        .accessories
        .iter()
        .filter(|a| a.circuit.is_none())
        .map(|accessory| accessory_row(build, machine, &states, accessory))
        .collect();
    rows
}

fn accessory_row(
    build: &Build,
    machine: &Machine,
    states: &[InState],
    accessory: &Accessory,
) -> AccessoryRow {
    let sum = LoadSum::of(accessory.draw.value, accessory.count);
    let mut row = AccessoryRow {
        name: accessory.name.clone(),
        count: accessory.count,
        circuit: "battery".to_owned(),
        ah: AmpHours::ZERO,
        share: Fraction::ZERO,
        missed_ah: AmpHours::ZERO,
        amps: ByState(Vec::new()),
        volts: ByState(Vec::new()),
        duty: ByState(Vec::new()),
    };
    for s in states {
        let duty = accessory.duty.share(s.state);
        if duty <= Fraction::ZERO {
            continue;
        }
        let connected = &machine.connected[s.wired].bus;
        // With it on, the rest of its time's mean load is heavier by what it adds beside its mean.
        let volts = (s.mean.bus + s.mean.give_way * (duty.rest() * sum.current_at(s.mean.bus)))
            .clamp(Volts::ZERO, s.mean.bus.max(Volts::ZERO));
        let class = connected.cuts.class(accessory.works.low);
        let asked = sum.current_at(connected.cuts.asked_at(class, volts));
        let missed = connected.cuts.taken(class, volts).rest();
        let name = build.state_name(s.state).to_owned();
        row.ah += asked * duty * s.time;
        row.missed_ah += asked * missed * duty * s.time;
        row.amps.0.push((name.clone(), asked));
        row.volts.0.push((name.clone(), volts));
        row.duty.0.push((name, duty));
    }
    row
}
