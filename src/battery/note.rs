//! What was assumed or mended while a label was turned into a battery.

use crate::quantity::format::text;
use crate::quantity::{Amps, Fraction, Hours, Minutes, Ohms, Volts};
use std::fmt;

/// One thing the label left open, or stated beyond what the equations can hold.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Note {
    /// No reserve rating: the chemistry's usual Peukert exponent was taken.
    ReserveAssumed {
        /// The exponent taken.
        exponent: Fraction,
    },
    /// The reserve rating and the 20 h capacity cannot belong to one battery.
    ReserveInconsistent {
        /// Reserve time on the label.
        stated: Hours,
        /// The nearest the capacity allows, and what was taken.
        used: Hours,
    },
    /// The reserve current is too near the 20 h current to tell how capacity
    /// falls with it.
    ReserveTooSlow {
        /// Reserve current on the label.
        amps: Amps,
    },
    /// No cold-cranking rating: the chemistry's usual amperes per ampere-hour.
    CrankingAssumed {
        /// Cold-cranking amperes taken.
        amps: Amps,
    },
    /// More than 15 cranking amperes per ampere-hour: used, but doubted.
    CrankingHigh {
        /// Cranking amperes on the label.
        amps: Amps,
    },
    /// The cranking rating leaves less resistance than any battery has.
    ResistanceFloored {
        /// The least, taken, of the whole battery.
        used: Ohms,
    },
    /// Full and empty rest volts are not in order or not a lead-acid battery's:
    /// the chemistry's were taken.
    RestVoltsUnusable {
        /// Full rest volts on the label, or the chemistry's.
        full: Volts,
        /// Empty rest volts on the label, or the chemistry's.
        empty: Volts,
    },
    /// A number on the label is not positive, not finite or out of range, and the
    /// nearest usable one was taken.
    OutOfRange {
        /// Which: the name of the field in [`Label`](super::Label).
        what: &'static str,
    },
}

impl fmt::Display for Note {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Note::ReserveAssumed { exponent } => {
                write!(
                    f,
                    "no reserve capacity stated, Peukert exponent {:.2} assumed",
                    exponent.0
                )
            }
            Note::ReserveInconsistent { stated, used } => {
                let (stated, used) = (text(Minutes::from(stated)), text(Minutes::from(used)));
                write!(
                    f,
                    "`reserve_capacity` of {stated} does not go with the 20 h capacity, {used} used"
                )
            }
            Note::ReserveTooSlow { amps } => {
                let amps = text(amps);
                write!(
                    f,
                    "reserve current of {amps} is too near the 20 h current to be used"
                )
            }
            Note::CrankingAssumed { amps } => {
                write!(f, "no cold-cranking rating stated, {} assumed", text(amps))
            }
            Note::CrankingHigh { amps } => {
                let amps = text(amps);
                write!(
                    f,
                    "`cold_cranking` of {amps} is implausibly high for the capacity"
                )
            }
            Note::ResistanceFloored { used } => {
                let used = text(used);
                write!(
                    f,
                    "`cold_cranking` leaves the battery no resistance, {used} used"
                )
            }
            Note::RestVoltsUnusable { full, empty } => {
                let (full, empty) = (text(full), text(empty));
                write!(
                    f,
                    "rest volts of {full} full and {empty} empty are no lead-acid battery's, the usual used"
                )
            }
            Note::OutOfRange { what } => {
                write!(
                    f,
                    "`{what}` is out of range, the nearest usable value taken"
                )
            }
        }
    }
}
