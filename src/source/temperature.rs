//! What temperature does to a winding: copper's resistance rises, the magnets weaken.

use super::winding::{Winding, WindingError};
use crate::quantity::{Celsius, Fraction, Kelvins, Ohms};
use serde::{Deserialize, Serialize};

/// Temperature at which windings are measured between their leads.
pub const MEASURED_AT: Celsius = Celsius(20.0);

/// Temperature coefficient of copper's resistance at 20 °C, per kelvin. Source: IEC 60028.
pub const COPPER_PER_KELVIN: f64 = 0.003_93;

/// What the flywheel's magnets are made of.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Magnets {
    /// Ferrite: flux −0.2 % per kelvin. Source: published data of magnet materials.
    #[default]
    Ferrite,
    /// Neodymium: flux −0.11 % per kelvin (−0.09 to −0.12). Source: published data of magnet materials.
    RareEarth,
}

impl Magnets {
    /// Change of flux, and so of EMF, per kelvin.
    #[must_use]
    pub fn per_kelvin(self) -> Fraction {
        match self {
            Magnets::Ferrite => Fraction(-0.002),
            Magnets::RareEarth => Fraction(-0.0011),
        }
    }

    /// Flux at a temperature as a share of that at 20 °C: 1 + c (T − 20), where c is [`per_kelvin`](Self::per_kelvin).
    /// Valid from −40 to 150 °C; held at nothing where the line would go under.
    #[must_use]
    pub fn flux(self, at: Celsius) -> Fraction {
        Fraction(1.0 + self.per_kelvin().0 * at.above(MEASURED_AT).0).max(Fraction::ZERO)
    }
}

/// Resistance of copper at a temperature.
///
/// Equation: R = R20 (1 + 0.00393 (T − 20)), where R20 ohms at 20 °C, T °C. Valid from −100 to 250 °C; held at nothing
/// where the line would go under. Source: IEC 60028.
#[must_use]
pub fn copper_at(at_20: Ohms, temperature: Celsius) -> Ohms {
    at_20 * copper_factor(temperature)
}

/// Resistance of copper at a temperature as a share of that at 20 °C.
#[must_use]
pub fn copper_factor(temperature: Celsius) -> Fraction {
    Fraction(1.0 + COPPER_PER_KELVIN * temperature.above(MEASURED_AT).0).max(Fraction::ZERO)
}

/// At what temperature a winding works, and which magnets turn about it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Working {
    /// The winding's temperature at work; 20 °C corrects nothing. 80 to 120 °C is common practice, no source.
    pub winding: Celsius,
    /// The magnets, which are at 20 °C and half the winding's rise (common practice, no source).
    pub magnets: Magnets,
}

impl Default for Working {
    /// 100 °C, ferrite.
    fn default() -> Working {
        Working {
            winding: Celsius(100.0),
            magnets: Magnets::Ferrite,
        }
    }
}

impl Working {
    /// Nothing corrected.
    pub const AS_MEASURED: Working = Working {
        winding: MEASURED_AT,
        magnets: Magnets::Ferrite,
    };

    /// Temperature of the magnets: 20 °C and half the winding's rise.
    #[must_use]
    pub fn magnet_temperature(&self) -> Celsius {
        MEASURED_AT.warmer(Kelvins(0.5 * self.winding.above(MEASURED_AT).0))
    }

    /// EMF at work as a share of that at 20 °C.
    #[must_use]
    pub fn emf_factor(&self) -> Fraction {
        self.magnets.flux(self.magnet_temperature())
    }

    /// Resistance at work as a share of that at 20 °C.
    #[must_use]
    pub fn resistance_factor(&self) -> Fraction {
        copper_factor(self.winding)
    }

    /// The winding at work, from its constants at 20 °C. Inductance does not change.
    ///
    /// # Errors
    /// [`WindingError`] at a temperature so far out that nothing of the EMF is left.
    pub fn heat(&self, at_20: &Winding) -> Result<Winding, WindingError> {
        Winding::new(
            at_20.open_circuit() * self.emf_factor().0,
            at_20.resistance() * self.resistance_factor(),
            at_20.inductance(),
            at_20.poles(),
            at_20.phases(),
        )
    }

    /// The winding at 20 °C, from its constants at work: the reverse of [`heat`](Self::heat).
    ///
    /// # Errors
    /// [`WindingError`] at a temperature so far out that nothing of EMF or resistance is left.
    pub fn cool(&self, at_work: &Winding) -> Result<Winding, WindingError> {
        Winding::new(
            at_work.open_circuit() / self.emf_factor().0,
            at_work.resistance() / self.resistance_factor().0,
            at_work.inductance(),
            at_work.poles(),
            at_work.phases(),
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Amps, Henries, Volts, VoltsPerRpm};
    use crate::source::Phases;

    #[test]
    fn magnets_60_kelvin_warmer() {
        // K086: ferrite 0.88; K087: neodymium 0.934, both at 60 K above 20 °C (published data of magnet materials).
        assert!((Magnets::Ferrite.flux(Celsius(80.0)).0 - 0.88).abs() < 1e-12);
        assert!((Magnets::RareEarth.flux(Celsius(80.0)).0 - 0.934).abs() < 1e-12);
        assert_eq!(Magnets::Ferrite.flux(Celsius(9000.0)), Fraction::ZERO);
    }

    #[test]
    fn hot_clutch_coil() {
        // K088: 3.0 ohm at 20 °C is 3.9432 ohm at 100 °C and takes 3.0432 A from 12 V (IEC 60028).
        let hot = copper_at(Ohms(3.0), Celsius(100.0));
        assert!((hot - Ohms(3.9432)).abs() < Ohms(5e-4));
        assert!((Volts(12.0) / hot - Amps(3.0432)).abs() < Amps(5e-4));
    }

    #[test]
    fn a_winding_at_100_degrees() {
        let k = VoltsPerRpm(28.0 / 3600.0);
        let cold = Winding::new(k, Ohms(0.14), Henries(4e-4), 12, Phases::One).unwrap();
        let hot = Working::default().heat(&cold).unwrap();
        // Copper 1.3144 times; magnets at 60 °C: 1 − 0.002 · 40 = 0.92 (arithmetic).
        assert!((hot.resistance().0 - 0.14 * 1.3144).abs() < 1e-12);
        assert!((hot.open_circuit().0 - k.0 * 0.92).abs() < 1e-15);
        let again = Working::default().cool(&hot).unwrap();
        assert!((again.open_circuit().0 - k.0).abs() < 1e-15);
        assert_eq!(Working::AS_MEASURED.heat(&cold), Ok(cold));
        let burnt = Working {
            winding: Celsius(2000.0),
            magnets: Magnets::Ferrite,
        };
        assert!(burnt.heat(&cold).is_err());
    }
}
