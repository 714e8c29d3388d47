//! ampledger plans the electrical load budget of engine-driven equipment.

pub mod battery;
pub mod build;
pub mod bus;
pub mod catalog;
pub mod chart;
pub mod check;
pub mod circuit;
pub mod curve;
pub mod description;
pub mod fleet;
pub mod identify;
pub mod ledger;
pub mod load;
pub mod odds;
pub mod outlook;
pub mod problem;
pub mod quantity;
pub mod report;
pub mod resolve;
pub mod root;
pub mod schema;
pub mod size;
pub mod source;
pub mod starter_build;
pub mod view;
pub mod wire;
