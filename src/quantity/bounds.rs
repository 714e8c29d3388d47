//! What each written value may be: one table, which also words the messages.

use super::unit::{self, Unit};
use super::{
    AmpHours, Amps, Celsius, Fraction, Henries, Hours, Metres, Money, Ohms, Rpm, Volts,
    VoltsPerKelvin, Watts,
};
use std::fmt;
use std::marker::PhantomData;

/// A limit, in a unit a person would state it in.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limit {
    /// Number of the unit.
    pub amount: f64,
    /// The unit; empty for a plain number.
    pub unit: &'static str,
}

impl Limit {
    /// The limit in the quantity's own unit.
    fn value<T: Unit>(self) -> f64 {
        match unit::find(self.unit, T::DIMENSION) {
            None => self.amount,
            Some(row) => row.conversion.apply(self.amount),
        }
    }
}

impl fmt::Display for Limit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.unit {
            "" => write!(f, "{}", self.amount),
            unit => write!(f, "{} {unit}", self.amount),
        }
    }
}

/// What a role of a quantity may be.
#[derive(Clone, Copy, Debug)]
pub struct Bounds<T> {
    /// What messages call it.
    pub name: &'static str,
    /// The least.
    pub least: Limit,
    /// The most.
    pub most: Limit,
    quantity: PhantomData<T>,
}

/// A value outside its bounds.
#[derive(Clone, Debug, PartialEq)]
pub struct OutOfBounds {
    /// What messages call the value.
    pub name: &'static str,
    /// The limit that it breaks.
    pub limit: Limit,
    /// How it breaks it.
    pub side: Side,
}

/// How a value breaks a limit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// Below zero where nothing negative makes sense.
    Negative,
    /// Zero where something must be.
    Zero,
    /// Below the least.
    Below,
    /// Above the most.
    Above,
}

impl<T: Unit> Bounds<T> {
    /// Holds a value against the limits.
    ///
    /// # Errors
    /// [`OutOfBounds`] with the limit broken.
    pub fn check(&self, value: T) -> Result<(), OutOfBounds> {
        let (x, least, most) = (
            value.amount(),
            self.least.value::<T>(),
            self.most.value::<T>(),
        );
        let (side, limit) = match x {
            _ if x > most => (Side::Above, self.most),
            _ if x >= least => return Ok(()),
            _ if least >= 0.0 && x == 0.0 => (Side::Zero, self.least),
            _ if least >= 0.0 && x < 0.0 => (Side::Negative, self.least),
            _ => (Side::Below, self.least),
        };
        Err(OutOfBounds {
            name: self.name,
            limit,
            side,
        })
    }
}

impl<T: Unit> Bounds<T> {
    /// The value, or the limit that it lies beyond.
    #[must_use]
    pub fn held(&self, value: T) -> T {
        T::of(
            value
                .amount()
                .clamp(self.least.value::<T>(), self.most.value::<T>()),
        )
    }
}

impl fmt::Display for OutOfBounds {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let OutOfBounds { name, limit, side } = self;
        match side {
            Side::Negative => write!(f, "{name} may not be negative"),
            Side::Zero => write!(f, "{name} may not be zero"),
            Side::Below => write!(f, "{name} is below the limit of {limit}"),
            Side::Above => write!(f, "{name} is above the limit of {limit}"),
        }
    }
}

impl OutOfBounds {
    /// What to write beside the mark on the line.
    #[must_use]
    pub fn label(&self) -> String {
        let limit = &self.limit;
        match self.side {
            Side::Zero | Side::Negative | Side::Below => format!("must be {limit} or more"),
            Side::Above => format!("must be {limit} or less"),
        }
    }
}

/// One row a role: constant, quantity, name, least, most.
macro_rules! bounds {
    ($($role:ident: $quantity:ident $name:literal, from $least:literal $lu:literal to $most:literal $mu:literal;)*) => {
        $(
            #[doc = concat!("Bounds of the ", $name, ".")]
            pub const $role: Bounds<$quantity> = Bounds {
                name: $name,
                least: Limit { amount: $least, unit: $lu },
                most: Limit { amount: $most, unit: $mu },
                quantity: PhantomData,
            };
        )*

        #[cfg(test)]
        mod tests {
            use super::*;

            /// Each row's limits are in a unit of its quantity, lie in order, and admit what they include.
            #[test]
            fn every_row_is_sound() { $(
                let row = $role;
                let (least, most) = (row.least.value::<$quantity>(), row.most.value::<$quantity>());
                for limit in [row.least, row.most] {
                    let plain = limit.unit.is_empty();
                    assert!(plain || unit::find(limit.unit, $quantity::DIMENSION).is_some(), "{}: {limit}", row.name);
                }
                assert!(least < most, "{}", row.name);
                assert_eq!(row.check($quantity::of(least)), Ok(()), "{}", row.name);
                assert_eq!(row.check($quantity::of(most)), Ok(()), "{}", row.name);
                assert!(row.check($quantity::of(most + 1e-6 * most.abs() + 1e-9)).is_err(), "{}", row.name);
                assert!(row.check($quantity::of(least - 1e-6 * least.abs() - 1e-12)).is_err(), "{}", row.name);
            )* }

            #[test]
            fn sides_are_told_apart() {
                let side = |x| DUTY.check(Fraction(x)).map_err(|e| (e.side, e.to_string(), e.label()));
                assert_eq!(side(1.0), Ok(()));
                assert_eq!(side(1.4), Err((Side::Above, "duty is above the limit of 100 %".into(), "must be 100 % or less".into())));
                assert_eq!(side(-0.1), Err((Side::Negative, "duty may not be negative".into(), "must be 0 % or more".into())));
                let zero = SPEED.check(Rpm(0.0)).map_err(|e| (e.side, e.to_string(), e.label()));
                assert_eq!(zero, Err((Side::Zero, "engine speed may not be zero".into(), "must be 1 rpm or more".into())));
                let low = CHARGE_FACTOR.check(Fraction(0.5)).map_err(|e| (e.side, e.label()));
                assert_eq!(low, Err((Side::Below, "must be 1 or more".into())));
            }
        }
    };
}

// Limits are common practice without a source: wide enough for any small engine, narrow enough to catch a slipped unit.
// None is so near to nothing that a figure divided by it runs beyond all numbers.
bounds! {
    AIR: Celsius "air temperature", from -50.0 "°C" to 60.0 "°C";
    PARKED_TIME: Hours "time parked", from 0.0 "h" to 8760.0 "h";
    SPEED: Rpm "engine speed", from 1.0 "rpm" to 12000.0 "rpm";
    TURNING: Rpm "speed", from 1.0 "rpm" to 30000.0 "rpm";
    STARTER_DRAW: Amps "starter draw", from 0.1 "A" to 2000.0 "A";
    START_TIME: Hours "time of a start", from 0.01 "s" to 120.0 "s";
    START_REST: Hours "rest between starts", from 0.0 "s" to 3600.0 "s";
    CABLE: Ohms "cable resistance", from 0.0 "ohm" to 1.0 "ohm";
    STARTER_VOLTS: Volts "starter volts", from 0.1 "V" to 60.0 "V";
    RATED_CURRENT: Amps "rated current", from 0.001 "A" to 500.0 "A";
    RATED_VOLTS: Volts "volts of the rating", from 0.1 "V" to 100.0 "V";
    OPEN_CIRCUIT: Volts "open-circuit voltage", from 0.01 "V" to 500.0 "V";
    WINDING_RESISTANCE: Ohms "winding resistance", from 0.01 "mohm" to 100.0 "ohm";
    INDUCTANCE: Henries "inductance", from 0.0 "H" to 1.0 "H";
    READING_VOLTS: Volts "bus volts of a reading", from 0.0 "V" to 500.0 "V";
    READING_CURRENT: Amps "current of a reading", from 0.0 "A" to 500.0 "A";
    WORKING: Celsius "temperature at work", from -50.0 "°C" to 220.0 "°C";
    SCALE: Fraction "scale", from 0.001 "" to 1.0e3 "";
    DROP: Volts "forward drop", from 0.0 "V" to 5.0 "V";
    HOLDS: Volts "regulator setpoint", from 0.1 "V" to 100.0 "V";
    PER_DEGREE: VoltsPerKelvin "change of the setpoint per degree", from -500.0 "mV" to 500.0 "mV";
    RATIO: Fraction "pulley ratio", from 0.01 "" to 20.0 "";
    CURVE_CURRENT: Amps "alternator current", from 0.0 "A" to 500.0 "A";
    CURVE_VOLTS: Volts "volts of the curve", from 0.1 "V" to 100.0 "V";
    CAPACITY: AmpHours "battery capacity", from 0.01 "Ah" to 5000.0 "Ah";
    RESERVE_CAPACITY: Hours "reserve capacity", from 0.01 "min" to 6000.0 "min";
    COLD_CRANKING: Amps "cold cranking current", from 0.1 "A" to 10000.0 "A";
    BATTERY_RESISTANCE: Ohms "battery resistance", from 0.01 "mohm" to 10.0 "ohm";
    REST_VOLTS: Volts "rested battery volts", from 0.1 "V" to 100.0 "V";
    RESERVE: Fraction "reserve", from 0.0 "%" to 100.0 "%";
    CHARGE_FACTOR: Fraction "gassing", from 1.0 "" to 5.0 "";
    HEALTH: Fraction "health", from 1.0 "%" to 100.0 "%";
    CHARGER_CURRENT: Amps "charger current", from 0.001 "A" to 1000.0 "A";
    CHARGER_VOLTS: Volts "charger volts", from 0.1 "V" to 100.0 "V";
    CHARGER_TIME: Hours "charger time", from 0.0 "h" to 8760.0 "h";
    PRICE: Money "price", from 0.0 "" to 1.0e9 "";
    STEP_TIME: Hours "time of a step", from 0.0 "s" to 336.0 "h";
    DRAW_CURRENT: Amps "draw", from 0.0 "A" to 2000.0 "A";
    DRAW_RESISTANCE: Ohms "draw", from 1.0 "mohm" to 1.0e6 "ohm";
    DRAW_POWER: Watts "draw", from 0.0 "W" to 50000.0 "W";
    STATED_AT: Volts "volts of the draw", from 0.1 "V" to 100.0 "V";
    DUTY: Fraction "duty", from 0.0 "%" to 100.0 "%";
    WORKS: Volts "working volts", from 0.0 "V" to 1000.0 "V";
    INRUSH_TIME: Hours "time of the inrush", from 0.0 "s" to 60.0 "s";
    INRUSH: Fraction "inrush", from 1.0 "" to 100.0 "";
    PARKED_DRAW: Amps "draw while parked", from 0.0 "A" to 100.0 "A";
    COIL: Henries "coil inductance", from 0.0 "H" to 100.0 "H";
    RUN: Metres "length of wire", from 0.0 "m" to 200.0 "m";
    MAX_DROP: Fraction "voltage drop allowed", from 0.01 "%" to 50.0 "%";
    INSULATION: Celsius "temperature class of the insulation", from 40.0 "°C" to 250.0 "°C";
    LUMENS: Fraction "light", from 0.0 "" to 1.0e6 "";
    START: Fraction "charge", from 0.0 "%" to 100.0 "%";
    OF_BUILDS: Fraction "share of builds", from 1.0 "%" to 100.0 "%";
    SWITCH: Amps "switch rating", from 0.001 "A" to 1000.0 "A";
}
