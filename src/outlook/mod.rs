//! What becomes of the charge, shift after shift: where it settles, when it breaks the reserve,
//! how much charge is lacking and how much is to spare.

mod enough;
mod lacking;
mod peak;
mod repeat;
mod settle;
mod touching;

#[cfg(test)]
mod tests;

pub use lacking::{Lacking, Spread};
pub use settle::Outlook;
pub use touching::Turn;
