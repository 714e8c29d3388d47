//! The lawful products of quantities: Ohm's law, power, charge, energy.

use super::{
    AmpHours, Amps, Celsius, Fraction, Hours, Kelvins, Ohms, Rpm, Volts, VoltsPerKelvin,
    VoltsPerRpm, WattHours, Watts,
};
use std::ops::{Div, Mul};

/// `A * B = C`, with `B * A`, `C / A` and `C / B`.
macro_rules! product {
    ($a:ident * $b:ident = $c:ident) => {
        impl Mul<$b> for $a {
            type Output = $c;
            fn mul(self, o: $b) -> $c {
                $c(self.0 * o.0)
            }
        }
        impl Mul<$a> for $b {
            type Output = $c;
            fn mul(self, o: $a) -> $c {
                $c(self.0 * o.0)
            }
        }
        impl Div<$a> for $c {
            type Output = $b;
            fn div(self, o: $a) -> $b {
                $b(self.0 / o.0)
            }
        }
        impl Div<$b> for $c {
            type Output = $a;
            fn div(self, o: $b) -> $a {
                $a(self.0 / o.0)
            }
        }
    };
}
product!(Amps * Ohms = Volts);
product!(Volts * Amps = Watts);
product!(Amps * Hours = AmpHours);
product!(Watts * Hours = WattHours);
product!(Volts * AmpHours = WattHours);
product!(VoltsPerRpm * Rpm = Volts);
product!(VoltsPerKelvin * Kelvins = Volts);

/// A share of a quantity is that quantity.
macro_rules! share {
    ($($name:ident),*) => { $(
        impl Mul<Fraction> for $name { type Output = $name; fn mul(self, o: Fraction) -> $name { $name(self.0 * o.0) } }
        impl Mul<$name> for Fraction { type Output = $name; fn mul(self, o: $name) -> $name { $name(self.0 * o.0) } }
    )* };
}
share!(Amps, Watts, Volts, AmpHours, Hours, WattHours, Ohms);

impl Celsius {
    /// The difference to a reference temperature.
    #[must_use]
    pub fn above(self, reference: Celsius) -> Kelvins {
        Kelvins(self.0 - reference.0)
    }
    /// This temperature, warmer by a difference.
    #[must_use]
    pub fn warmer(self, difference: Kelvins) -> Celsius {
        Celsius(self.0 + difference.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ohm_power_and_charge() {
        assert_eq!(Amps(3.0) * Ohms(4.0), Volts(12.0));
        assert_eq!(Volts(12.0) / Ohms(4.0), Amps(3.0));
        assert_eq!(Watts(48.0) / Volts(12.0), Amps(4.0));
        // K053: 30 mA for 30 days takes 21.6 Ah (arithmetic).
        let taken = Amps(0.030) * Hours(30.0 * 24.0);
        assert!((taken - AmpHours(21.6)).abs() < AmpHours(1e-9));
        assert_eq!(Amps(10.0) * Fraction(0.25), Amps(2.5));
    }
}
