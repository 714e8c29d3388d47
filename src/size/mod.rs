//! What size would do: one number of a build at a time, others held.
//!
//! [`size`] gives the least or most of each number with which the build keeps up, proved by the full
//! verdict at it and just beyond it, and the catalog parts that qualify. [`nearest`] is the short
//! form inside every check.

mod answer;
mod apply;
mod crowd;
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
mod yardstick;

pub use answer::{Answer, Size, size};
pub use crowd::{InShare, Share};
pub use guideline::{ALLOWED, Guideline, guideline};
pub use influence::{Influence, influence};
pub use knob::{Knob, knobs};
pub(crate) use knob::{occurs, windings};
pub use lamps::{led_power, light};
pub(crate) use nearest::largest;
pub use nearest::nearest;
pub(crate) use parts::rated;
pub use reason::why_not;
pub use rebuild::WindingRow;
pub use search::Bound;

use crate::battery::Charge;
use crate::build::Build;
use crate::check::reserve;
use crate::ledger::Machine;
use crate::quantity::Fraction;

/// Whether a build keeps up, found fast: what searches ask.
#[must_use]
pub fn keeps_up(build: &Build) -> bool {
    ask(build, Machine::keeps_up)
}

/// Whether a build keeps up by the full verdict, shifts counted out where need be: what answers are
/// proved with.
#[must_use]
pub fn proves(build: &Build) -> bool {
    ask(build, |machine, start, reserve| {
        machine.outlook(start, reserve).keeps_up()
    })
}

fn ask(build: &Build, of: impl Fn(&Machine, Charge, Fraction) -> bool) -> bool {
    Machine::new(build).is_some_and(|machine| {
        let reserve = reserve(build, &machine).soc;
        of(&machine, Charge::rested(build.start), reserve)
    })
}
