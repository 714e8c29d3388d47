//! The volts an accessory sees before its wire: the lowest and the highest, in each state it is on.

use crate::battery::Charge;
use crate::build::{Accessory, Build, State};
use crate::check::reserve;
use crate::circuit::{Circuit, CircuitError, circuits, is_coil};
use crate::ledger::{Machine, connect};
use crate::quantity::{Fraction, Volts};

/// Planning volts a cell for what draws more as the volts fall: 12.0 V for 12 V. Common practice, no source.
pub const PLANNING_CELL: Volts = Volts(2.0);

/// Volts before the wire of one accessory in one state in which it is on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Seen {
    /// The state.
    pub state: State,
    /// With everything on that may be on at once, the battery at its lowest.
    pub low: Volts,
    /// With nothing else on, the battery full; never under a setpoint that feeds it.
    pub high: Volts,
}

/// The supply of a build, made ready to be asked for volts.
pub(super) struct Supplies<'a> {
    build: &'a Build,
    machine: Option<Machine>,
    lowest: Charge,
    circuits: Result<Vec<Circuit>, CircuitError>,
}

impl<'a> Supplies<'a> {
    /// Of a build.
    pub(super) fn new(build: &'a Build) -> Supplies<'a> {
        let machine = Machine::new(build);
        let lowest = machine
            .as_ref()
            .map_or(Charge::rested(Fraction::ONE), |m| lowest(build, m));
        Supplies {
            build,
            machine,
            lowest,
            circuits: circuits(build),
        }
    }

    /// What an accessory sees in each state in which it is on, in the order of the speeds, then
    /// stopped; while cranking only if it is on in no other.
    ///
    /// # Errors
    /// Why it sees nothing.
    pub(super) fn seen(&self, index: usize) -> Result<Vec<Seen>, String> {
        let Some(accessory) = self.build.accessories.get(index) else {
            return Err("it is not in the build".to_owned());
        };
        match &self.machine {
            Some(machine) if accessory.circuit.is_none() => Ok(self.on_battery(machine, accessory)),
            _ => self.on_circuit(index, accessory),
        }
    }

    /// On a winding's own circuit: rms volts where they heat a filament or a resistance, mean volts
    /// of a coil.
    fn on_circuit(&self, index: usize, accessory: &Accessory) -> Result<Vec<Seen>, String> {
        let circuits = self.circuits.as_ref().map_err(ToString::to_string)?;
        let hung = circuits.iter().flat_map(|c| &c.accessories);
        let coil = is_coil(accessory);
        Ok(hung
            .filter(|hung| hung.accessory == index)
            .flat_map(|hung| &hung.states)
            .filter_map(|at| {
                let speed = self.build.speeds.iter().position(|s| s.name == at.state)?;
                let between = if coil { at.between } else { at.heating };
                Some(Seen {
                    state: State::Running(speed),
                    low: between.lowest,
                    high: between.highest,
                })
            })
            .collect())
    }

    fn on_battery(&self, machine: &Machine, accessory: &Accessory) -> Vec<Seen> {
        let alone = alone(self.build, accessory);
        let cells = self.build.cells();
        let at = |build: &Build, state, charge| {
            connect(build, state, None)
                .worst(&machine.climate, charge, cells)
                .bus
        };
        let seen = states_of(self.build, accessory).into_iter().map(|state| {
            let full = at(&alone, state, Charge::rested(Fraction::ONE));
            Seen {
                state,
                low: at(self.build, state, self.lowest),
                high: full.max(self.setpoint(state)),
            }
        });
        seen.collect()
    }

    /// The highest setpoint on the battery bus while the engine runs.
    fn setpoint(&self, state: State) -> Volts {
        if !matches!(state, State::Running(_)) {
            return Volts::ZERO;
        }
        self.build
            .sources
            .iter()
            .filter(|s| s.circuit.is_none() && !s.braking)
            .filter_map(|s| s.regulator.as_ref())
            .map(|r| r.setpoint(self.build.air.value))
            .fold(Volts::ZERO, Volts::max)
    }
}

/// The states in which an accessory is on.
pub(super) fn states_of(build: &Build, accessory: &Accessory) -> Vec<State> {
    let running = (0..build.speeds.len()).map(State::Running);
    let on = |state: &State| accessory.duty.share(*state) > Fraction::ZERO;
    let states: Vec<State> = running.chain([State::Stopped]).filter(on).collect();
    if states.is_empty() && on(&State::Crank) {
        vec![State::Crank]
    } else {
        states
    }
}

/// The build with nothing on but one accessory.
fn alone(build: &Build, accessory: &Accessory) -> Build {
    let mut only = accessory.clone();
    only.together.clear();
    only.apart.clear();
    Build {
        accessories: vec![only.into()],
        ..build.clone()
    }
}

/// The lowest charge of the first shift, or the reserve where that is lower.
fn lowest(build: &Build, machine: &Machine) -> Charge {
    let mut lowest = Charge::rested(build.start);
    machine.walk(lowest, None, |_, _, stride| {
        if stride.after.soc < lowest.soc {
            lowest = stride.after;
        }
    });
    let reserve = reserve(build, machine).soc;
    if reserve < lowest.soc {
        lowest = Charge::rested(reserve);
    }
    lowest
}
