//! The first shift in full: both sides of the ledger, every leg, and a trace.

use super::answer::{StepRow, TraceRow};
use crate::battery::Charge;
use crate::build::{Build, State};
use crate::ledger::{Leg, Machine, Stride};
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Ohms, Volts};

/// Longest time between two rows of a trace.
const TRACE_STEP: Hours = Hours::from_minutes(10.0);

/// All that the first shift shows.
#[derive(Clone, Debug)]
pub struct FirstShift {
    /// Its legs in order, the parking after it included.
    pub legs: Vec<Passage>,
    /// Net Ah into the battery at its terminals, parking left out.
    pub balance: AmpHours,
    /// Lowest charge, parking included.
    pub lowest: Fraction,
    /// Both sides of the ledger, parking included.
    pub book: Book,
    /// A row at each state change and at least every ten minutes, where one was asked for.
    pub trace: Vec<TraceRow>,
}

/// One leg as it passed.
#[derive(Clone, Debug)]
pub struct Passage {
    /// Its state.
    pub state: State,
    /// Index into the machine's connections.
    pub wired: usize,
    /// When it begins.
    pub begins: Hours,
    /// How long it lasts.
    pub time: Hours,
    /// Charge at its beginning.
    pub before: Charge,
    /// Charge at its end.
    pub after: Charge,
    /// Means over its time.
    pub mean: Mean,
}

impl Passage {
    /// Its first step, nothing summed yet.
    fn begun(leg: &Leg, clock: Hours, stride: &Stride) -> Passage {
        Passage {
            state: leg.state,
            wired: leg.wired,
            begins: clock,
            time: leg.time,
            before: stride.before,
            after: stride.after,
            mean: Mean::default(),
        }
    }
}

/// Means over a time.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Mean {
    /// What the accessories draw.
    pub loads: Amps,
    /// Into the battery.
    pub battery: Amps,
    /// Bus volts.
    pub bus: Volts,
    /// Change of bus volts for one ampere more drawn.
    pub give_way: Ohms,
}

/// Both sides of the ledger: what went through the battery's terminals, and what became of it.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Book {
    /// In at the terminals.
    pub charged: AmpHours,
    /// Out at the terminals.
    pub discharged: AmpHours,
    /// Change of the charge held.
    pub stored: AmpHours,
    /// Gassed, self-discharge counted.
    pub gassed: AmpHours,
    /// Beyond full, or, below zero, beyond empty.
    pub spilled: AmpHours,
}

impl Book {
    fn enter(&mut self, stride: &Stride, capacity: AmpHours) {
        let net = 0.5 * (stride.first.battery + stride.second.battery) * stride.time;
        self.charged += net.max(AmpHours::ZERO);
        self.discharged += (-net).max(AmpHours::ZERO);
        self.gassed += 0.5 * (stride.first.gas + stride.second.gas) * stride.time;
        self.stored += (stride.after.soc - stride.before.soc).0 * capacity;
        self.spilled += stride.spilled;
    }

    /// What the two sides differ by: rounding, if the ledger is right.
    #[must_use]
    pub fn imbalance(&self) -> AmpHours {
        self.charged - self.discharged - self.stored - self.gassed - self.spilled
    }
}

impl Mean {
    fn add(&mut self, stride: &Stride) {
        let half = 0.5 * stride.time.0;
        for flow in [&stride.first, &stride.second] {
            self.loads += half * flow.loads;
            self.battery += half * flow.battery;
            self.bus += half * flow.bus;
            self.give_way += half * flow.give_way;
        }
    }

    /// Adds means over a time; divide by the whole time at the end with [`Mean::over`].
    pub(super) fn add_weighted(&mut self, other: &Mean, time: Hours) {
        self.loads += time.0 * other.loads;
        self.battery += time.0 * other.battery;
        self.bus += time.0 * other.bus;
        self.give_way += time.0 * other.give_way;
    }

    /// The sums over a time turned into means.
    pub(super) fn over(&self, time: Hours) -> Mean {
        let w = 1.0 / time.0;
        Mean {
            loads: w * self.loads,
            battery: w * self.battery,
            bus: w * self.bus,
            give_way: w * self.give_way,
        }
    }
}

/// Runs the first shift from a charge. `traced` asks for the trace.
#[must_use]
pub fn first_shift(build: &Build, machine: &Machine, start: Charge, traced: bool) -> FirstShift {
    let mut legs: Vec<(usize, Passage)> = Vec::new();
    let mut trace = Vec::new();
    let mut book = Book::default();
    let mut lowest = start.soc;
    let end = machine.walk(
        start,
        traced.then_some(TRACE_STEP),
        |index, clock, stride| {
            let leg = &machine.cycle[index];
            if legs.last().is_none_or(|(last, _)| *last != index) {
                legs.push((index, Passage::begun(leg, clock, stride)));
            }
            if let Some((_, passage)) = legs.last_mut() {
                passage.after = stride.after;
                passage.mean.add(stride);
            }
            book.enter(stride, machine.battery.cmax());
            lowest = lowest.min(stride.after.soc);
            if traced {
                trace.push(trace_row(
                    build,
                    machine,
                    (leg.state, leg.wired),
                    clock,
                    stride.before,
                ));
            }
        },
    );
    let legs: Vec<Passage> = legs
        .into_iter()
        .map(|(_, leg)| Passage {
            mean: leg.mean.over(leg.time),
            ..leg
        })
        .collect();
    if let (true, Some(leg)) = (traced, legs.last()) {
        trace.push(trace_row(
            build,
            machine,
            (leg.state, leg.wired),
            leg.begins + leg.time,
            end,
        ));
    }
    let working = legs.iter().filter(|leg| leg.state != State::Parked);
    let balance = working.map(|leg| leg.mean.battery * leg.time).sum();
    FirstShift {
        legs,
        balance,
        lowest,
        book,
        trace,
    }
}

impl FirstShift {
    /// Its legs as the answer lists them.
    #[must_use]
    pub fn steps(&self, build: &Build, machine: &Machine) -> Vec<StepRow> {
        self.legs
            .iter()
            .map(|leg| StepRow {
                state: build.state_name(leg.state).to_owned(),
                starts_min: leg.begins.into(),
                minutes: leg.time.into(),
                soc_start: leg.before.soc,
                soc_end: leg.after.soc,
                bus_v_end: machine.flow(leg.wired, leg.after).bus,
            })
            .collect()
    }
}

/// The row of a trace at a charge.
pub(super) fn trace_row(
    build: &Build,
    machine: &Machine,
    (state, wired): (State, usize),
    clock: Hours,
    charge: Charge,
) -> TraceRow {
    let flow = machine.flow(wired, charge);
    TraceRow {
        minutes: clock.into(),
        state: build.state_name(state).to_owned(),
        rpm: build.rpm(state),
        bus_v: flow.bus,
        source_a: flow.loads + flow.battery,
        loads_a: flow.loads,
        battery_a: flow.battery,
        soc: charge.soc,
    }
}
