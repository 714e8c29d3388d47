//! The charge over the shifts that follow the first.

use super::answer::TraceRow;
use super::first_shift::trace_row;
use crate::battery::Charge;
use crate::build::Build;
use crate::ledger::Machine;
use crate::quantity::Hours;

/// Rows of the shifts after the first, each with the parking after it, up to a number of shifts in
/// all; they begin where the first shift's parking ended. One row a step of the integration.
#[must_use]
pub fn history(
    build: &Build,
    machine: &Machine,
    from: Charge,
    clock: Hours,
    shifts: u32,
) -> Vec<TraceRow> {
    let (mut charge, mut clock) = (from, clock);
    let mut rows = Vec::new();
    for shift in 1..shifts {
        let legs = machine
            .cycle
            .iter()
            .filter(|leg| leg.shift == shift % machine.shifts);
        for leg in legs {
            let (count, time) = Machine::steps_of(leg, leg.step);
            for _ in 0..count {
                rows.push(trace_row(
                    build,
                    machine,
                    (leg.state, leg.wired),
                    clock,
                    charge,
                ));
                charge = machine.stride(leg, charge, time).after;
                clock += time;
            }
        }
    }
    rows
}
