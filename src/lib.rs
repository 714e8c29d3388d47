//! ampledger plans the electrical load budget of engine-driven equipment.

pub mod battery;
pub mod catalog;
pub mod quantity;
pub mod root;
pub mod source;
