//! What fails first, and on which day, when a build that does not keep up is worked all the same.

use super::sentence::ordinal;
use crate::battery::Charge;
use crate::build::{Build, State};
use crate::ledger::Machine;
use crate::quantity::{AmpHours, Fraction, Volts};

/// Shifts that are followed: a month.
const MOST_SHIFTS: u32 = 30;
/// Change of charge over a cycle under which nothing further will fail.
const STILL: Fraction = Fraction(1e-6);

/// The first of each kind of failure, from a charge on.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Course {
    /// The reserve is broken: in which shift, from 1, and in which state.
    pub reserve: Option<(u32, State)>,
    /// The engine will not crank: in which shift, and at which crank of it, from 1.
    pub crank: Option<(u32, u32)>,
    /// An accessory drops out: in which shift, in which state, and its name.
    pub drop_out: Option<(u32, State, String)>,
}

/// Follows a build from a charge until the engine will not crank, or for a month of shifts.
#[must_use]
pub fn course(build: &Build, machine: &Machine, start: Charge, reserve: Fraction) -> Course {
    let mut course = Course::default();
    let mut charge = start;
    let mut shift = 0;
    while shift < MOST_SHIFTS {
        let before = charge.soc;
        let mut cranks = 0;
        let mut last = None;
        for leg in &machine.cycle {
            let now = shift + leg.shift + 1;
            if last != Some(leg.shift) {
                (last, cranks) = (Some(leg.shift), 0);
                if !has_cranks(build) && !turns(build, machine, charge, 1) {
                    course.crank = Some((now, 1));
                    return course;
                }
            }
            if leg.state == State::Crank {
                cranks += 1;
                if !turns(build, machine, charge, 1) {
                    course.crank = Some((now, cranks));
                    return course;
                }
            }
            let (count, time) = Machine::steps_of(leg, leg.step);
            for _ in 0..count {
                let stride = machine.stride(leg, charge, time);
                charge = stride.after;
                if course.reserve.is_none() && charge.soc < reserve {
                    course.reserve = Some((now, leg.state));
                }
                if course.drop_out.is_none() && leg.state != State::Crank {
                    let bus = stride.first.bus.min(stride.second.bus);
                    course.drop_out =
                        dropped(build, leg.state, bus).map(|name| (now, leg.state, name));
                }
            }
        }
        shift += machine.shifts;
        if (charge.soc - before).abs() < STILL {
            break;
        }
    }
    course
}

fn has_cranks(build: &Build) -> bool {
    build.shift.iter().any(|step| step.state == State::Crank)
}

/// Whether the engine turns for one start from a charge; without a starter it is taken to.
fn turns(build: &Build, machine: &Machine, charge: Charge, attempts: u32) -> bool {
    build.starter.as_ref().is_none_or(|starter| {
        let asked = crate::battery::Starter {
            attempts,
            ..starter.asks()
        };
        let cranked = machine.battery.crank(charge, &asked, build.air.value);
        cranked.starter >= asked.least_for(machine.cells)
    })
}

/// An accessory on in a state whose lower limit is above the bus.
fn dropped(build: &Build, state: State, bus: Volts) -> Option<String> {
    build
        .accessories
        .iter()
        .filter(|a| a.circuit.is_none() && a.duty.share(state) > Fraction::ZERO)
        .find(|a| a.works.low.is_some_and(|low| bus < low))
        .map(|a| a.name.clone())
}

impl Course {
    /// The failures that a user meets, worst first, as a clause; none where nothing stops him.
    #[must_use]
    pub fn clause(&self, build: &Build) -> Option<String> {
        if let Some((shift, crank)) = self.crank {
            let day = ordinal(shift);
            return Some(match crank {
                1 => format!("the engine will not crank on the {day} morning"),
                later => format!(
                    "the engine will not crank at its {} start of the {day} shift",
                    ordinal(later)
                ),
            });
        }
        self.drop_out.as_ref().map(|(shift, state, name)| {
            format!(
                "{name} drops out while {} in the {} shift",
                in_state(build, *state),
                ordinal(*shift)
            )
        })
    }

    /// Where the reserve is broken, as a clause.
    #[must_use]
    pub fn reserve_clause(&self, build: &Build) -> Option<String> {
        self.reserve.map(|(shift, state)| {
            format!(
                "the reserve is first broken while {} in the {} shift",
                in_state(build, state),
                ordinal(shift)
            )
        })
    }
}

/// `at idle`, `cranking`, `stopped`, `parked`: what the machine does, after "while".
fn in_state(build: &Build, state: State) -> String {
    match state {
        State::Running(_) => format!("at {}", build.state_name(state)),
        State::Crank => "cranking".to_owned(),
        State::Stopped | State::Parked => build.state_name(state).to_owned(),
    }
}

/// Charge drawn at a constant rate from a machine that stands with its key on until it breaks the
/// reserve and until its volts end; for a shift in which the engine never runs.
#[derive(Clone, Copy, Debug, PartialEq, serde::Serialize)]
pub struct Rundown {
    /// Hours until the reserve is broken.
    pub hours_to_reserve: Option<crate::quantity::Hours>,
    /// Hours until the bus is at 1.75 V a cell.
    pub hours_to_empty: Option<crate::quantity::Hours>,
    /// Taken from the battery until then.
    pub taken_ah: AmpHours,
}

/// Hours that a rundown is followed at most.
const LONGEST_RUNDOWN: f64 = 24.0 * 60.0;

/// The rundown of a machine whose engine never runs: its longest key-on leg, on and on.
#[must_use]
pub fn rundown(machine: &Machine, start: Charge, reserve: Fraction) -> Option<Rundown> {
    if machine
        .cycle
        .iter()
        .any(|leg| machine.connected[leg.wired].runs)
    {
        return None;
    }
    let on = machine
        .cycle
        .iter()
        .filter(|leg| leg.state == State::Stopped);
    let leg = *on.max_by(|a, b| a.time.0.total_cmp(&b.time.0))?;
    let end = machine.battery.end_of_discharge();
    let step = crate::quantity::Hours(1.0 / 60.0);
    let mut found = Rundown {
        hours_to_reserve: None,
        hours_to_empty: None,
        taken_ah: AmpHours::ZERO,
    };
    let (mut charge, mut clock) = (start, crate::quantity::Hours::ZERO);
    while clock.0 < LONGEST_RUNDOWN {
        let stride = machine.stride(&leg, charge, step);
        let share =
            |from: f64, to: f64, at: f64| step * ((at - from) / (to - from)).clamp(0.0, 1.0);
        if found.hours_to_reserve.is_none() && stride.after.soc < reserve {
            found.hours_to_reserve =
                Some(clock + share(charge.soc.0, stride.after.soc.0, reserve.0));
        }
        if stride.first.battery >= crate::quantity::Amps::ZERO {
            break;
        }
        let drawn = -0.5 * (stride.first.battery + stride.second.battery);
        if stride.second.bus < end {
            let last = share(stride.first.bus.0, stride.second.bus.0, end.0);
            found.hours_to_empty = Some(clock + last);
            found.taken_ah += drawn * last;
            break;
        }
        found.taken_ah += drawn * step;
        charge = stride.after;
        clock += step;
    }
    Some(found)
}
