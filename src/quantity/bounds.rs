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
    /// Whether the limit itself is allowed.
    pub included: bool,
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
        let low = x < least || (x <= least && !self.least.included);
        let high = x > most || (x >= most && !self.most.included);
        let side = match (low, high) {
            (false, false) => return Ok(()),
            (true, _) if least == 0.0 && x == 0.0 => Side::Zero,
            (true, _) if least >= 0.0 && x < 0.0 => Side::Negative,
            (true, _) => Side::Below,
            (false, true) => Side::Above,
        };
        let limit = if low { self.least } else { self.most };
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
            Side::Below if limit.included => write!(f, "{name} is below the limit of {limit}"),
            Side::Below => write!(f, "{name} must be above {limit}"),
            Side::Above if limit.included => write!(f, "{name} is above the limit of {limit}"),
            Side::Above => write!(f, "{name} must be below {limit}"),
        }
    }
}

impl OutOfBounds {
    /// What to write beside the mark on the line.
    #[must_use]
    pub fn label(&self) -> String {
        let limit = &self.limit;
        match self.side {
            Side::Zero | Side::Negative if !limit.included => "must be more than 0".into(),
            Side::Zero | Side::Negative => format!("must be {limit} or more"),
            Side::Below if limit.included => format!("must be {limit} or more"),
            Side::Below => format!("must be more than {limit}"),
            Side::Above if limit.included => format!("must be {limit} or less"),
            Side::Above => format!("must be less than {limit}"),
        }
    }
}

macro_rules! limit {
    (from $amount:literal $unit:literal) => {
        Limit {
            amount: $amount,
            unit: $unit,
            included: true,
        }
    };
    (above $amount:literal $unit:literal) => {
        Limit {
            amount: $amount,
            unit: $unit,
            included: false,
        }
    };
}

/// One row a role: constant, quantity, name, least (`from` it or `above` it), most.
macro_rules! bounds {
    ($($role:ident: $quantity:ident $name:literal, $low:ident $least:literal $lu:literal to $most:literal $mu:literal;)*) => {
        $(
            #[doc = concat!("Bounds of the ", $name, ".")]
            pub const $role: Bounds<$quantity> = Bounds {
                name: $name,
                least: limit!($low $least $lu),
                most: limit!(from $most $mu),
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
                assert_eq!(row.check($quantity::of(least)).is_ok(), row.least.included, "{}", row.name);
                assert_eq!(row.check($quantity::of(most)), Ok(()), "{}", row.name);
                assert!(row.check($quantity::of(most + 1e-6 * most.abs() + 1e-9)).is_err(), "{}", row.name);
                assert!(row.check($quantity::of(least - 1e-6 * least.abs() - 1e-9)).is_err(), "{}", row.name);
            )* }

            #[test]
            fn sides_are_told_apart() {
                let side = |x| DUTY.check(Fraction(x)).map_err(|e| (e.side, e.to_string(), e.label()));
                assert_eq!(side(1.0), Ok(()));
                assert_eq!(side(1.4), Err((Side::Above, "duty is above the limit of 100 %".into(), "must be 100 % or less".into())));
                assert_eq!(side(-0.1), Err((Side::Negative, "duty may not be negative".into(), "must be 0 % or more".into())));
                let zero = SPEED.check(Rpm(0.0)).map_err(|e| (e.side, e.to_string(), e.label()));
                assert_eq!(zero, Err((Side::Zero, "engine speed may not be zero".into(), "must be more than 0".into())));
                let low = CHARGE_FACTOR.check(Fraction(0.5)).map_err(|e| (e.side, e.label()));
                assert_eq!(low, Err((Side::Below, "must be 1 or more".into())));
            }
        }
    };
}

// Limits are common practice without a source: wide enough for any small engine, narrow enough to catch a slipped unit.
bounds! {
    AIR: Celsius "air temperature", from -50.0 "°C" to 60.0 "°C";
    PARKED_TIME: Hours "time parked", from 0.0 "h" to 8760.0 "h";
    SPEED: Rpm "engine speed", above 0.0 "rpm" to 12000.0 "rpm";
    TURNING: Rpm "speed", above 0.0 "rpm" to 30000.0 "rpm";
    STARTER_DRAW: Amps "starter draw", above 0.0 "A" to 2000.0 "A";
    START_TIME: Hours "time of a start", above 0.0 "s" to 120.0 "s";
    START_REST: Hours "rest between starts", from 0.0 "s" to 3600.0 "s";
    CABLE: Ohms "cable resistance", from 0.0 "ohm" to 1.0 "ohm";
    STARTER_VOLTS: Volts "starter volts", above 0.0 "V" to 60.0 "V";
    RATED_CURRENT: Amps "rated current", above 0.0 "A" to 500.0 "A";
    RATED_VOLTS: Volts "volts of the rating", above 0.0 "V" to 100.0 "V";
    OPEN_CIRCUIT: Volts "open-circuit voltage", above 0.0 "V" to 500.0 "V";
    WINDING_RESISTANCE: Ohms "winding resistance", above 0.0 "ohm" to 100.0 "ohm";
    INDUCTANCE: Henries "inductance", from 0.0 "H" to 1.0 "H";
    READING_VOLTS: Volts "bus volts of a reading", from 0.0 "V" to 500.0 "V";
    READING_CURRENT: Amps "current of a reading", from 0.0 "A" to 500.0 "A";
    WORKING: Celsius "temperature at work", from -50.0 "°C" to 220.0 "°C";
    SCALE: Fraction "scale", above 0.0 "" to 1.0e3 "";
    DROP: Volts "forward drop", from 0.0 "V" to 5.0 "V";
    HOLDS: Volts "regulator setpoint", above 0.0 "V" to 100.0 "V";
    PER_DEGREE: VoltsPerKelvin "change of the setpoint per degree", from -500.0 "mV" to 500.0 "mV";
    RATIO: Fraction "pulley ratio", above 0.0 "" to 20.0 "";
    CURVE_CURRENT: Amps "alternator current", from 0.0 "A" to 500.0 "A";
    CURVE_VOLTS: Volts "volts of the curve", above 0.0 "V" to 100.0 "V";
    CAPACITY: AmpHours "battery capacity", above 0.0 "Ah" to 5000.0 "Ah";
    RESERVE_CAPACITY: Hours "reserve capacity", above 0.0 "min" to 6000.0 "min";
    COLD_CRANKING: Amps "cold cranking current", above 0.0 "A" to 10000.0 "A";
    BATTERY_RESISTANCE: Ohms "battery resistance", above 0.0 "ohm" to 10.0 "ohm";
    REST_VOLTS: Volts "rested battery volts", above 0.0 "V" to 100.0 "V";
    RESERVE: Fraction "reserve", from 0.0 "%" to 100.0 "%";
    CHARGE_FACTOR: Fraction "gassing", from 1.0 "" to 5.0 "";
    HEALTH: Fraction "health", above 0.0 "%" to 100.0 "%";
    CHARGER_CURRENT: Amps "charger current", above 0.0 "A" to 1000.0 "A";
    CHARGER_VOLTS: Volts "charger volts", above 0.0 "V" to 100.0 "V";
    CHARGER_TIME: Hours "charger time", from 0.0 "h" to 8760.0 "h";
    PRICE: Money "price", from 0.0 "" to 1.0e9 "";
    STEP_TIME: Hours "time of a step", from 0.0 "s" to 336.0 "h";
    DRAW_CURRENT: Amps "draw", from 0.0 "A" to 2000.0 "A";
    DRAW_RESISTANCE: Ohms "draw", above 0.0 "ohm" to 1.0e6 "ohm";
    DRAW_POWER: Watts "draw", from 0.0 "W" to 50000.0 "W";
    STATED_AT: Volts "volts of the draw", above 0.0 "V" to 100.0 "V";
    DUTY: Fraction "duty", from 0.0 "%" to 100.0 "%";
    WORKS: Volts "working volts", from 0.0 "V" to 1000.0 "V";
    INRUSH_TIME: Hours "time of the inrush", from 0.0 "s" to 60.0 "s";
    INRUSH: Fraction "inrush", from 1.0 "" to 100.0 "";
    PARKED_DRAW: Amps "draw while parked", from 0.0 "A" to 100.0 "A";
    COIL: Henries "coil inductance", from 0.0 "H" to 100.0 "H";
    RUN: Metres "length of wire", from 0.0 "m" to 200.0 "m";
    MAX_DROP: Fraction "voltage drop allowed", above 0.0 "%" to 50.0 "%";
    INSULATION: Celsius "temperature class of the insulation", from 40.0 "°C" to 250.0 "°C";
    LUMENS: Fraction "light", from 0.0 "" to 1.0e6 "";
    SWITCH: Amps "switch rating", above 0.0 "A" to 1000.0 "A";
}
