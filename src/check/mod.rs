//! One build's answer: verdict, figures by state and accessory, findings.

pub mod answer;
mod error;
mod first_shift;
mod rows;
mod ruling;

pub use error::SolveError;
pub use first_shift::{Book, FirstShift, first_shift};
pub use rows::{by_accessory, by_state};
pub use ruling::{Reserve, ReserveFrom, Ruling, reserve, rule, rule_on};
