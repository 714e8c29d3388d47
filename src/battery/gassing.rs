//! What overcharge does: the gassing current splits water into hydrogen and
//! oxygen.

use super::{Battery, Chemistry};
use crate::quantity::{AmpHours, Fraction, Grams, Litres};

/// Charge of one mole of electrons, coulombs. Source: SI (exact to ten digits).
const FARADAY: f64 = 96_485.332_12;
/// Mass of one mole of water, grams. Source: standard atomic weights.
const WATER_MOLE: f64 = 18.015;
/// Volume of one mole of an ideal gas at 25 °C and 101.325 kPa, litres.
const GAS_MOLE: f64 = 24.465;

/// Share of hydrogen in air from which the mixture burns.
/// Source: 4 % is the figure commonly used; OSHA prints 4.1 %.
pub const HYDROGEN_BURNS: Fraction = Fraction(0.04);

impl Chemistry {
    /// Share of the gas that leaves the battery; the rest recombines to water.
    /// Flooded 1; valve-regulated 0.05: common practice, no single source (0.01
    /// to 0.1; more once the valve opens).
    #[must_use]
    pub fn vented(self) -> Fraction {
        match self {
            Chemistry::Flooded => Fraction::ONE,
            Chemistry::Agm | Chemistry::Gel => Fraction(0.05),
        }
    }
}

impl Battery {
    /// Water lost by a charge spent on gassing.
    ///
    /// ```text
    /// m = N · Q · 3600 / (2 F) · M_w · vented
    /// ```
    /// where Q charge of the gassing current (Ah, the same through all N cells),
    /// F 96485 C/mol, M_w 18.015 g/mol; two electrons split one molecule.
    /// Valid for: charging; at rest part of the same current is self-discharge
    /// that splits no water, so this is an upper bound.
    /// Source: Faraday's law (0.3361 g per Ah and cell).
    #[must_use]
    pub fn water_lost(&self, gassed: AmpHours) -> Grams {
        Grams(self.moles(gassed) * WATER_MOLE)
    }

    /// Hydrogen set free by a charge spent on gassing, at 25 °C and 101.325 kPa.
    ///
    /// ```text
    /// V = N · Q · 3600 / (2 F) · 24.465 · vented
    /// ```
    /// where the symbols are those of [`water_lost`](Battery::water_lost) and
    /// 24.465 L/mol the molar volume.
    /// Valid for: charging; an upper bound as above.
    /// Source: Faraday's law and the ideal gas (2.74 L per Ah of six cells).
    #[must_use]
    pub fn hydrogen_freed(&self, gassed: AmpHours) -> Litres {
        Litres(self.moles(gassed) * GAS_MOLE)
    }

    /// Still air that the hydrogen of a charge spent on gassing makes explosive:
    /// its volume over [`HYDROGEN_BURNS`].
    #[must_use]
    pub fn explosive_air(&self, gassed: AmpHours) -> Litres {
        self.hydrogen_freed(gassed) / HYDROGEN_BURNS.0
    }

    /// Moles of water split whose gas leaves the battery.
    fn moles(&self, gassed: AmpHours) -> f64 {
        let electrons = gassed.0.max(0.0) * 3600.0 / FARADAY;
        f64::from(self.cells()) * electrons / 2.0 * self.chemistry().vented().0
    }
}
