//! The surge at switch-on, as a fuse sees it.

use crate::quantity::{Amps, Fraction, Hours};

/// Time constants in a surge's stated time: after it a twentieth of the excess is left.
const TIME_CONSTANTS: f64 = 3.0;

/// A surge on a wire: a steady current and an excess that dies away.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Surge {
    /// Steady current of the wire, what surges included.
    pub steady: Amps,
    /// Excess at its first instant.
    pub excess: Amps,
    /// Its stated time.
    pub time: Hours,
}

impl Surge {
    /// Of an accessory that draws `own` steadily and `times` that at first, on a wire that carries `steady` in all.
    #[must_use]
    pub fn new(steady: Amps, own: Amps, times: Fraction, time: Hours) -> Surge {
        Surge {
            steady,
            excess: own * (times.0 - 1.0).max(0.0),
            time,
        }
    }

    /// Its peak.
    #[must_use]
    pub fn peak(&self) -> Amps {
        self.steady + self.excess
    }

    /// How long its peak would have to last to heat a fuse as much as it does.
    ///
    /// ```text
    /// I(t) = I + E e^(−3 t / T)
    /// te = ∫₀ᵀ I(t)² dt / (I + E)² = [ I² T + 2 I E (T/3)(1 − e⁻³) + E² (T/6)(1 − e⁻⁶) ] / (I + E)²
    /// ```
    /// where I steady current, E excess at first, T stated time. Valid for: surges that die away
    /// (a filament warming, a motor running up, a capacitor filling), shorter than the fuse takes to
    /// lose heat. Source: joule integral, textbook; that T is three time constants is own choice.
    #[must_use]
    pub fn lasts(&self) -> Hours {
        let (i, e, t) = (self.steady.0, self.excess.0, self.time.0);
        let peak = i + e;
        if peak <= 0.0 {
            return Hours::ZERO;
        }
        let once = t / TIME_CONSTANTS * (1.0 - (-TIME_CONSTANTS).exp());
        let twice = t / (2.0 * TIME_CONSTANTS) * (1.0 - (-2.0 * TIME_CONSTANTS).exp());
        Hours((i * i * t + 2.0 * i * e * once + e * e * twice) / (peak * peak))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// K104: 55 W at 12 V takes 4.583 A; twelve times that is 55.0 A (10 to 18 times
    /// cold in general texts). Its heat against the integral taken in fine steps.
    #[test]
    fn a_lamp_surges() {
        let surge = Surge::new(
            Amps(55.0 / 12.0),
            Amps(55.0 / 12.0),
            Fraction(12.0),
            Hours::from_seconds(0.05),
        );
        assert!((surge.peak().0 - 55.0).abs() < 1e-9);
        let steps = 100_000;
        let heat: f64 = (0..steps)
            .map(|k| {
                let t = 0.05 * (f64::from(k) + 0.5) / f64::from(steps);
                let amps = 55.0 / 12.0 * (1.0 + 11.0 * (-3.0 * t / 0.05).exp());
                amps * amps * 0.05 / f64::from(steps)
            })
            .sum();
        let lasts = surge.lasts().seconds();
        assert!((lasts * 55.0 * 55.0 / heat - 1.0).abs() < 1e-8, "{lasts}");
    }

    #[test]
    fn no_excess_lasts_its_time() {
        let surge = Surge::new(Amps(4.0), Amps(4.0), Fraction(1.0), Hours(0.5));
        assert_eq!((surge.peak(), surge.lasts()), (Amps(4.0), Hours(0.5)));
        assert_eq!(
            Surge::new(Amps(0.0), Amps(0.0), Fraction(3.0), Hours(1.0)).lasts(),
            Hours::ZERO
        );
    }
}
