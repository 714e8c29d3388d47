//! Typed quantities: a volt cannot be added to an ampere.
//!
//! Each type is a number in one fixed unit, named in its doc. Only the lawful
//! products are defined ([`ops`]); text is read by [`parse`] and written by
//! [`mod@format`]. A bare `f64` crosses no module boundary: conversion happens on
//! one visible line, by `.0`, inside the module that computes.
//!
//! ```
//! use ampledger::quantity::{Amps, Ohms, Volts, Watts};
//! let lamp: Amps = Volts(12.0) / Ohms(3.0);
//! let heat: Watts = Volts(12.0) * lamp;
//! assert_eq!(heat, Watts(48.0));
//! ```
//!
//! ```compile_fail
//! use ampledger::quantity::{Amps, Volts};
//! let nonsense = Volts(12.0) + Amps(3.0);
//! ```

pub mod bounds;
mod finite;
pub mod format;
pub mod ops;
pub mod parse;
pub mod unit;

pub use finite::all_finite;

use serde::Serialize;

/// Declares a quantity: a number in one unit, with the arithmetic that keeps the unit.
macro_rules! quantity {
    ($(#[$doc:meta])* $name:ident) => {
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, Default, PartialEq, PartialOrd, Serialize)]
        #[serde(transparent)]
        pub struct $name(pub f64);

        impl $name {
            /// Nothing of it.
            pub const ZERO: $name = $name(0.0);
            /// The greater of two.
            #[must_use]
            pub fn max(self, other: $name) -> $name { $name(self.0.max(other.0)) }
            /// The lesser of two.
            #[must_use]
            pub fn min(self, other: $name) -> $name { $name(self.0.min(other.0)) }
            /// Held between two limits, `low` not above `high`.
            #[must_use]
            pub fn clamp(self, low: $name, high: $name) -> $name { $name(self.0.clamp(low.0, high.0)) }
            /// Its size without its sign.
            #[must_use]
            pub fn abs(self) -> $name { $name(self.0.abs()) }
            /// Neither infinite nor not-a-number.
            #[must_use]
            pub fn is_finite(self) -> bool { self.0.is_finite() }
        }
        impl std::ops::Add for $name { type Output = $name; fn add(self, o: $name) -> $name { $name(self.0 + o.0) } }
        impl std::ops::Sub for $name { type Output = $name; fn sub(self, o: $name) -> $name { $name(self.0 - o.0) } }
        impl std::ops::Neg for $name { type Output = $name; fn neg(self) -> $name { $name(-self.0) } }
        impl std::ops::Mul<f64> for $name { type Output = $name; fn mul(self, o: f64) -> $name { $name(self.0 * o) } }
        impl std::ops::Mul<$name> for f64 { type Output = $name; fn mul(self, o: $name) -> $name { $name(self * o.0) } }
        impl std::ops::Div<f64> for $name { type Output = $name; fn div(self, o: f64) -> $name { $name(self.0 / o) } }
        impl std::ops::Div for $name { type Output = f64; fn div(self, o: $name) -> f64 { self.0 / o.0 } }
        impl std::ops::AddAssign for $name { fn add_assign(&mut self, o: $name) { self.0 += o.0; } }
        impl std::ops::SubAssign for $name { fn sub_assign(&mut self, o: $name) { self.0 -= o.0; } }
        impl std::iter::Sum for $name { fn sum<I: Iterator<Item = $name>>(i: I) -> $name { $name(i.map(|x| x.0).sum()) } }
    };
}

quantity!(
    /// Electric potential, volts.
    Volts
);
quantity!(
    /// Electric current, amperes. Battery current is positive when it charges.
    Amps
);
quantity!(
    /// Power, watts.
    Watts
);
quantity!(
    /// Resistance or reactance, ohms.
    Ohms
);
quantity!(
    /// Inductance, henries.
    Henries
);
quantity!(
    /// Frequency, hertz.
    Hertz
);
quantity!(
    /// Shaft speed, revolutions per minute.
    Rpm
);
quantity!(
    /// Electric charge, ampere-hours.
    AmpHours
);
quantity!(
    /// Energy, watt-hours.
    WattHours
);
quantity!(
    /// A duration, hours.
    Hours
);
quantity!(
    /// A duration as the answers give it, minutes.
    Minutes
);
quantity!(
    /// A duration as storage is counted, days.
    Days
);
quantity!(
    /// A length, metres.
    Metres
);
quantity!(
    /// A conductor's cross-section, square millimetres.
    SquareMm
);
quantity!(
    /// A temperature, degrees Celsius.
    Celsius
);
quantity!(
    /// A temperature difference, kelvins.
    Kelvins
);
quantity!(
    /// A share of a whole, 1 = 100 %: duty, state of charge, tolerance, efficiency.
    Fraction
);
quantity!(
    /// Open-circuit rms volts per revolution per minute.
    VoltsPerRpm
);
quantity!(
    /// Change of a setpoint with temperature, volts per kelvin.
    VoltsPerKelvin
);
quantity!(
    /// A price in whatever currency the price list is in; the currency is a label beside it.
    Money
);
quantity!(
    /// A mass, grams.
    Grams
);
quantity!(
    /// A volume of gas, litres.
    Litres
);

impl Hours {
    /// From minutes.
    #[must_use]
    pub const fn from_minutes(minutes: f64) -> Hours {
        Hours(minutes / 60.0)
    }
    /// From seconds.
    #[must_use]
    pub const fn from_seconds(seconds: f64) -> Hours {
        Hours(seconds / 3600.0)
    }
    /// In minutes.
    #[must_use]
    pub const fn minutes(self) -> f64 {
        self.0 * 60.0
    }
    /// In seconds.
    #[must_use]
    pub const fn seconds(self) -> f64 {
        self.0 * 3600.0
    }
}

impl Fraction {
    /// The whole: 100 %.
    pub const ONE: Fraction = Fraction(1.0);
    /// From per cent.
    #[must_use]
    pub const fn from_percent(percent: f64) -> Fraction {
        Fraction(percent / 100.0)
    }
    /// In per cent.
    #[must_use]
    pub const fn percent(self) -> f64 {
        self.0 * 100.0
    }
    /// What is left of the whole.
    #[must_use]
    pub fn rest(self) -> Fraction {
        Fraction(1.0 - self.0)
    }
}

/// How far a quantity may lie from its stated value, either way.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Tolerance {
    /// Share of the stated value: 0.08 for ± 8 %. A tolerance given in units is turned into this.
    pub relative: Fraction,
}

impl From<Hours> for Days {
    fn from(time: Hours) -> Days {
        Days(time.0 / 24.0)
    }
}

impl From<Hours> for Minutes {
    fn from(time: Hours) -> Minutes {
        Minutes(time.minutes())
    }
}
