//! From answers to reports: what is said, in which order, with which columns.
//!
//! A view reads an answer and lays it out as a [`crate::report::Report`]; the
//! renderers write that. Wording and choice of figures are here, the solving is
//! before and the layout after.

pub mod accessories;
pub mod assumed;
pub mod charts;
pub mod check;
pub mod compare;
pub mod curve;
pub mod fleet;
pub mod identify;
pub mod odds;
mod page;
pub mod parts;
pub mod quote;
pub mod remedy;
pub mod season;
pub mod sheet;
pub mod size;
pub mod states;
pub mod why;
pub mod wire;

pub use check::{Options, check};
pub use compare::compare;
pub use curve::curve;
pub use fleet::fleet;
pub use identify::identify;
pub use odds::odds;
pub use remedy::remedy;
pub use season::season;
pub use sheet::sheet;
pub use size::size;
pub use why::why;
pub use wire::wire;
