//! The charge ledger: ampere-hours in and out of the battery through the shift, step by step in
//! the order written, cranks included, then through the parked hours.

mod group;
pub mod machine;
mod run;
mod step;

pub use machine::{Leg, Machine, Wired, connect};
pub use run::Passed;
pub use step::Stride;
