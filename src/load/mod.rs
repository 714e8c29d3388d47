//! What accessories draw: the laws, and the sums of those that are on together.

mod cases;
pub mod coincidence;
mod tally;

pub use coincidence::Coincidences;

use crate::build::Draw;
use crate::quantity::{Amps, Fraction, Ohms, Volts, Watts};

/// Exponent of a filament's current against volts.
///
/// Source: 0.55, encyclopaedia citing an electrical handbook; a lighting handbook's 0.541
/// (gas-filled) and 0.580 (vacuum) lie either side (from memory). Valid 0.8 to 1.1 of design volts.
pub const FILAMENT_EXPONENT: f64 = 0.55;

/// A sum of draws, kept by law, so that its current at any volts is one line.
///
/// ```text
/// I(V) = ΣI + V Σ(1/R) + ΣP / V + V^0.55 Σ(P / at^1.55)
/// ```
/// where I constant currents (A), R resistances (Ω), P constant powers (W), and for filaments
/// P the watts at their stated volts `at`. Valid for V > 0. Source: Ohm's law; filaments as
/// [`FILAMENT_EXPONENT`].
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct LoadSum {
    /// Constant currents, A.
    amps: f64,
    /// Conductances, A/V.
    siemens: f64,
    /// Constant powers, W.
    watts: f64,
    /// Filaments, A/V^0.55.
    filament: f64,
}

/// Volts with the two powers the laws need, worked out once for many sums.
#[derive(Clone, Copy, Debug)]
pub struct At {
    volts: f64,
    inverse: f64,
    filament: f64,
}

impl At {
    /// At these volts, above zero. `filaments` tells whether any filament will be asked for.
    #[must_use]
    pub fn new(volts: Volts, filaments: bool) -> At {
        let v = volts.0.max(1e-9);
        At {
            volts: v,
            inverse: 1.0 / v,
            filament: if filaments { filament_volts(v) } else { 0.0 },
        }
    }
}

/// V^0.55. Never inlined: it would be worked out for buses without filaments too.
#[inline(never)]
fn filament_volts(volts: f64) -> f64 {
    volts.powf(FILAMENT_EXPONENT)
}

impl LoadSum {
    /// Nothing on.
    pub const NONE: LoadSum = LoadSum {
        amps: 0.0,
        siemens: 0.0,
        watts: 0.0,
        filament: 0.0,
    };

    /// One accessory's draw, `count` of them.
    #[must_use]
    pub fn of(draw: Draw, count: u32) -> LoadSum {
        let n = f64::from(count);
        match draw {
            Draw::Current(amps) => LoadSum {
                amps: n * amps.0,
                ..LoadSum::NONE
            },
            Draw::Resistance(ohms) => LoadSum {
                siemens: n / ohms.0,
                ..LoadSum::NONE
            },
            Draw::Power(watts) => LoadSum {
                watts: n * watts.0,
                ..LoadSum::NONE
            },
            Draw::Filament { power, at } => LoadSum {
                filament: n * power.0 / at.0.powf(1.0 + FILAMENT_EXPONENT),
                ..LoadSum::NONE
            },
        }
    }

    /// A constant current: a starter, or a spare current to be found.
    #[must_use]
    pub fn current_of(amps: Amps) -> LoadSum {
        LoadSum {
            amps: amps.0,
            ..LoadSum::NONE
        }
    }

    /// Its current at some volts.
    #[must_use]
    pub fn current(&self, at: At) -> Amps {
        Amps(
            self.amps
                + self.siemens * at.volts
                + self.watts * at.inverse
                + self.filament * at.filament,
        )
    }

    /// Its current at some volts, worked out on its own.
    #[must_use]
    pub fn current_at(&self, volts: Volts) -> Amps {
        self.current(At::new(volts, self.has_filaments()))
    }

    /// How its current changes with volts, A/V: below zero where constant powers rule.
    #[must_use]
    pub fn slope(&self, at: At) -> f64 {
        self.siemens - self.watts * at.inverse * at.inverse
            + FILAMENT_EXPONENT * self.filament * at.filament * at.inverse
    }

    /// Whether any filament is in it.
    #[must_use]
    pub fn has_filaments(&self) -> bool {
        self.filament != 0.0
    }

    /// Whether any constant power is in it.
    #[must_use]
    pub fn has_constant_powers(&self) -> bool {
        self.watts != 0.0
    }

    /// Whether nothing is in it.
    #[must_use]
    pub fn is_none(&self) -> bool {
        *self == LoadSum::NONE
    }

    /// A share of it: several alike at a share of their time, or a weighted mean.
    #[must_use]
    pub fn share(&self, share: Fraction) -> LoadSum {
        let k = share.0;
        LoadSum {
            amps: k * self.amps,
            siemens: k * self.siemens,
            watts: k * self.watts,
            filament: k * self.filament,
        }
    }
}

impl std::ops::Add for LoadSum {
    type Output = LoadSum;
    fn add(self, o: LoadSum) -> LoadSum {
        LoadSum {
            amps: self.amps + o.amps,
            siemens: self.siemens + o.siemens,
            watts: self.watts + o.watts,
            filament: self.filament + o.filament,
        }
    }
}

impl std::ops::Sub for LoadSum {
    type Output = LoadSum;
    fn sub(self, o: LoadSum) -> LoadSum {
        self + o.share(Fraction(-1.0))
    }
}

impl std::ops::AddAssign for LoadSum {
    fn add_assign(&mut self, o: LoadSum) {
        *self = *self + o;
    }
}

impl std::iter::Sum for LoadSum {
    fn sum<I: Iterator<Item = LoadSum>>(sums: I) -> LoadSum {
        sums.fold(LoadSum::NONE, |a, b| a + b)
    }
}

/// Current of one draw at some volts.
#[must_use]
pub fn current(draw: Draw, volts: Volts) -> Amps {
    LoadSum::of(draw, 1).current_at(volts)
}

/// Power a filament takes at some volts: P (V / at)^1.55.
///
/// Source: current exponent plus one. See [`FILAMENT_EXPONENT`].
#[must_use]
pub fn filament_power(power: Watts, at: Volts, volts: Volts) -> Watts {
    Watts(power.0 * (volts / at).powf(1.0 + FILAMENT_EXPONENT))
}

/// Life of a filament against its life at its stated volts: (V / at)^-13.
///
/// Valid 0.8 to 1.1 of the stated volts; the exponent is given as −12 to −16. Source: general
/// encyclopaedia; −13.1 gas-filled and −13.5 vacuum in a lighting handbook (from memory).
#[must_use]
pub fn filament_life(at: Volts, volts: Volts) -> Fraction {
    Fraction((volts / at).powf(-13.0))
}

/// Light of a filament against its light at its stated volts: (V / at)^3.4.
///
/// Valid 0.8 to 1.1 of the stated volts; halogen lamps follow 3.0. Source: encyclopaedia 3.4–3.5;
/// lighting handbook 3.38 (from memory).
#[must_use]
pub fn filament_light(at: Volts, volts: Volts) -> Fraction {
    Fraction((volts / at).powf(3.4))
}

/// Copper coil's resistance at a temperature, from that at 20 °C: R (1 + 0.00393 (T − 20)).
///
/// Source: IEC 60028 coefficient.
#[must_use]
pub fn coil_at(cold: Ohms, temperature: crate::quantity::Celsius) -> Ohms {
    Ohms(cold.0 * (1.0 + 0.00393 * (temperature.0 - 20.0)))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::Celsius;

    fn near(a: f64, b: f64, tolerance: f64) {
        assert!((a - b).abs() <= tolerance, "{a} for {b}");
    }

    /// K089–K092, K102, K103 and K088: filament, LED, relay and clutch laws
    /// (encyclopaedia and textbook laws, derived).
    #[test]
    fn laws_of_draw() {
        let bulb = |w, at| Draw::Filament {
            power: Watts(w),
            at: Volts(at),
        };
        near(current(bulb(55.0, 12.0), Volts(13.2)).0, 4.8300, 0.0005);
        near(
            filament_power(Watts(21.0), Volts(12.0), Volts(13.5)).0,
            25.206,
            0.005,
        );
        near(filament_light(Volts(1.0), Volts(1.1)).0, 1.3827, 1e-4);
        near(filament_life(Volts(1.0), Volts(1.05)).0, 0.5303, 1e-4);
        near(
            current(Draw::Power(Watts(48.0)), Volts(14.0)).0,
            3.4286,
            0.0005,
        );
        near(
            current(Draw::Power(Watts(48.0)), Volts(12.0)).0,
            4.0000,
            0.0005,
        );
        near(
            current(Draw::Resistance(Ohms(90.0)), Volts(14.0)).0,
            0.1556,
            0.0005,
        );
        let hot = coil_at(Ohms(3.0), Celsius(100.0));
        near(hot.0, 3.9432, 0.0005);
        near((Volts(12.0) / hot).0, 3.0432, 0.0005);
    }

    /// K094: clutch at 80 °C, 54 W of 12 V filament, 18 W LED, 0.7 A and 0.02 A on a 14.0 V bus
    /// draw 10.8103 A (laws above; invented machine).
    #[test]
    fn a_sum_is_the_sum_of_its_parts() {
        let clutch = Draw::Resistance(coil_at(Ohms(2.9), Celsius(80.0)));
        let draws = [
            clutch,
            Draw::Filament {
                power: Watts(54.0),
                at: Volts(12.0),
            },
            Draw::Power(Watts(18.0)),
            Draw::Current(Amps(0.7)),
            Draw::Current(Amps(0.02)),
        ];
        let sum: LoadSum = draws.iter().map(|d| LoadSum::of(*d, 1)).sum();
        near(sum.current_at(Volts(14.0)).0, 10.8103, 0.001);
        let each: f64 = draws.iter().map(|d| current(*d, Volts(13.1)).0).sum();
        near(sum.current_at(Volts(13.1)).0, each, 1e-12);
        let slope = (sum.current_at(Volts(13.101)).0 - sum.current_at(Volts(13.099)).0) / 0.002;
        near(sum.slope(At::new(Volts(13.1), true)), slope, 1e-6);
    }
}
