//! What size would do: one number of a build at a time, others held.

mod apply;
mod knob;
mod lamps;
mod margin;
mod nearest;
#[cfg(test)]
mod tests;
mod value;
mod worth;

pub use knob::{Knob, knobs};
pub use lamps::led_power;
pub use nearest::nearest;

use crate::battery::Charge;
use crate::build::Build;
use crate::check::reserve;
use crate::ledger::Machine;

/// Whether a build keeps up: the full verdict without its figures.
#[must_use]
pub fn keeps_up(build: &Build) -> bool {
    let Some(machine) = Machine::new(build) else {
        return false;
    };
    let reserve = reserve(build, &machine).soc;
    machine
        .outlook(Charge::rested(build.start), reserve)
        .keeps_up()
}
