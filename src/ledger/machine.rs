//! A build made ready to be run through its shifts: what is connected in each state, and the
//! legs of one cycle of work and parking.

use super::group::cyclers;
use crate::battery::{Battery, Charge, Climate};
use crate::build::{Accessory, Build, Charger, Draw, State};
use crate::bus::{Connected, Cuts, Flow, Supply};
use crate::load::{Coincidences, LoadSum};
use crate::quantity::{Amps, Fraction, Hours, Volts};

/// Volts a cell at which cases of cycling loads are put in order: a rested battery's.
const REFERENCE_CELL_VOLTS: f64 = 2.1;
/// Hours of a day.
const DAY: Hours = Hours(24.0);

/// A build ready to run. It has a battery.
#[derive(Clone, Debug)]
pub struct Machine {
    /// The battery.
    pub battery: Battery,
    /// The battery at the build's air temperature.
    pub climate: Climate,
    /// Cells in series.
    pub cells: u32,
    /// What is connected, one entry a kind of leg.
    pub connected: Vec<Wired>,
    /// One cycle: shifts and the parking after each, days parked at the end.
    pub cycle: Vec<Leg>,
    /// Shifts in one cycle.
    pub shifts: u32,
    /// Time in one cycle that the engine runs.
    pub running: Hours,
}

/// What is connected in one state, and whether the engine runs in it.
#[derive(Clone, Debug)]
pub struct Wired {
    /// The state.
    pub state: State,
    /// Sources, loads, limits.
    pub bus: Connected,
    /// Whether the engine runs.
    pub runs: bool,
    /// Whether the shop charger is on.
    pub charging: bool,
}

/// One stretch of a cycle in which nothing switches.
#[derive(Clone, Copy, Debug)]
pub struct Leg {
    /// Its state.
    pub state: State,
    /// Index into [`Machine::connected`].
    pub wired: usize,
    /// How long.
    pub time: Hours,
    /// Longest step of the integration.
    pub step: Hours,
    /// Which shift of the cycle it belongs to, from 0.
    pub shift: u32,
}

/// Longest step with anything but a rest going on (charge error under 0.05 % of full, measured
/// against 3 s steps).
const STEP: Hours = Hours::from_minutes(10.0);
/// Longest step at rest, where only small constant currents flow.
const REST_STEP: Hours = Hours(8.0);

impl Machine {
    /// Makes a build ready; none without a battery.
    #[must_use]
    pub fn new(build: &Build) -> Option<Machine> {
        let spec = build.battery.as_ref()?;
        let battery = Battery::from_label(&spec.label);
        let climate = battery.climate(build.air.value);
        let mut machine = Machine {
            climate,
            cells: build.cells(),
            battery,
            connected: Vec::new(),
            cycle: Vec::new(),
            shifts: build.days.map_or(1, |d| d.shifts),
            running: Hours::ZERO,
        };
        for shift in 0..machine.shifts {
            for step in &build.shift {
                machine.add_leg(build, step.state, step.time.value, shift, false);
            }
            machine.add_parking(build, build.parked.value, shift);
        }
        for _ in 0..build.days.map_or(0, |d| d.parked) {
            machine.add_leg(build, State::Parked, DAY, machine.shifts - 1, false);
        }
        machine.running = machine
            .cycle
            .iter()
            .filter(|leg| machine.connected[leg.wired].runs)
            .map(|leg| leg.time)
            .sum();
        Some(machine)
    }

    /// The mean flow with something connected and the battery in a state of charge.
    #[must_use]
    pub fn flow(&self, wired: usize, charge: Charge) -> Flow {
        self.connected[wired]
            .bus
            .flow(&self.climate, charge, self.cells)
    }

    /// Running time of one shift on average.
    #[must_use]
    pub fn running_a_shift(&self) -> Hours {
        self.running / f64::from(self.shifts)
    }

    /// Parking, with the shop charger on for its part of it.
    fn add_parking(&mut self, build: &Build, parked: Hours, shift: u32) {
        let (before, on) = build
            .charger
            .as_ref()
            .map_or((parked, Hours::ZERO), |charger| {
                let before = charger.after.value.min(parked);
                (before, charger.time.value.min(parked - before))
            });
        self.add_leg(build, State::Parked, before, shift, false);
        self.add_leg(build, State::Parked, on, shift, true);
        self.add_leg(build, State::Parked, parked - before - on, shift, false);
    }

    fn add_leg(&mut self, build: &Build, state: State, time: Hours, shift: u32, charging: bool) {
        if time <= Hours::ZERO {
            return;
        }
        let found = self
            .connected
            .iter()
            .position(|w| w.state == state && w.charging == charging);
        let wired = found.unwrap_or_else(|| {
            let charger = if charging {
                build.charger.as_ref()
            } else {
                None
            };
            let runs = matches!(state, State::Running(_));
            self.connected.push(Wired {
                state,
                bus: connect(build, state, charger),
                runs,
                charging,
            });
            self.connected.len() - 1
        });
        let rests = state == State::Parked && !charging;
        self.cycle.push(Leg {
            state,
            wired,
            time,
            step: if rests { REST_STEP } else { STEP },
            shift,
        });
    }

    /// Whether any constant power draws from the bus while the engine runs.
    #[must_use]
    pub fn has_constant_powers(&self) -> bool {
        self.connected
            .iter()
            .any(|w| w.runs && w.bus.loads.heaviest_total().has_constant_powers())
    }

    /// Whether an accessory may drop out in a cycle all at one charge, cranking apart, which takes seconds.
    #[must_use]
    pub fn may_drop_out(&self, soc: Fraction) -> bool {
        let mut charge = Charge::rested(soc);
        let mut legs = self.cycle.iter().filter(|leg| leg.state != State::Crank);
        legs.any(|leg| {
            let target = self.flow(leg.wired, charge).depletion;
            charge.depletion = self
                .climate
                .depletion_after(charge.depletion, target, leg.time);
            let bus = &self.connected[leg.wired].bus;
            bus.may_drop_out(&self.climate, charge, self.cells)
        })
    }

    /// Adds a constant current on the bus in every running state, or takes one.
    pub fn set_extra(&mut self, extra: Amps) {
        for wired in self.connected.iter_mut().filter(|w| w.runs) {
            wired.bus.supply.set_extra(extra);
        }
    }

    /// The same in one running state only.
    pub fn set_extra_in(&mut self, state: State, extra: Amps) {
        for wired in self
            .connected
            .iter_mut()
            .filter(|w| w.runs && w.state == state)
        {
            wired.bus.supply.set_extra(extra);
        }
    }
}

/// What is connected to the battery bus in a state.
#[must_use]
pub fn connect(build: &Build, state: State, charger: Option<&Charger>) -> Connected {
    let cells = build.cells();
    let supply = match (state, charger) {
        (State::Running(speed), _) => build.speeds.get(speed).map_or_else(
            || Supply::none(cells),
            |s| Supply::at(&build.sources, s.rpm.value, build.air.value, cells),
        ),
        (_, Some(charger)) => Supply::charger(charger.amps.value, charger.holds.value),
        _ => Supply::none(cells),
    };
    let reference = Volts(REFERENCE_CELL_VOLTS * f64::from(cells));
    let all = build.accessories.iter().map(|a| &**a);
    let on_bus: Vec<(usize, &Accessory)> = all
        .enumerate()
        .filter(|(_, a)| a.circuit.is_none())
        .collect();
    if state == State::Parked {
        let parasitic: LoadSum = on_bus
            .iter()
            .map(|(_, a)| LoadSum::of(Draw::Current(a.parked), a.count))
            .sum();
        return Connected {
            supply,
            loads: Coincidences::new(&[parasitic], &[], reference),
            cuts: Cuts::default(),
        };
    }
    let active: Vec<(usize, &Accessory)> = on_bus
        .into_iter()
        .filter(|(_, a)| a.duty.share(state) > Fraction::ZERO)
        .collect();
    let cuts = Cuts::new(active.iter().filter_map(|(_, a)| a.works.low), cells);
    let (mut steady, cycling) = cyclers(&active, state, &cuts);
    if let (State::Crank, Some(starter)) = (state, &build.starter) {
        steady[0] += LoadSum::current_of(starter.asks().draw_at(build.air.value));
    }
    Connected {
        supply,
        loads: Coincidences::new(&steady, &cycling, reference),
        cuts,
    }
}
