//! What size would do: one number of a build at a time, others held.
//!
//! [`size`] gives the least or most of each number with which the build keeps up, proved by the full
//! verdict at it and just beyond it, and the catalog parts that qualify. [`nearest`] is the short
//! form inside every check.

mod answer;
mod apply;
mod guideline;
mod influence;
mod knob;
mod lamps;
mod margin;
mod nearest;
mod parts;
mod reason;
mod rebuild;
mod search;
#[cfg(test)]
mod tests;
mod value;
mod worth;

pub use answer::{Answer, Options, Size, size};
pub use guideline::{ALLOWED, Guideline, guideline};
pub use influence::{Influence, influence};
pub use knob::{Knob, knobs};
pub use lamps::led_power;
pub use nearest::nearest;
pub use reason::why_not;
pub use rebuild::WindingRow;
pub use search::Bound;

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
    machine.keeps_up(Charge::rested(build.start), reserve)
}
