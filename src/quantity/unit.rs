//! The units a person may write, and what each measures: one table.

use super::{
    AmpHours, Amps, Celsius, Fraction, Henries, Hertz, Hours, Kelvins, Metres, Money, Ohms, Rpm,
    SquareMm, Volts, VoltsPerKelvin, Watts,
};
use std::fmt;

/// What a number measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Dimension {
    /// Volts.
    Voltage,
    /// Amperes.
    Current,
    /// Watts.
    Power,
    /// Ohms.
    Resistance,
    /// Henries.
    Inductance,
    /// Hertz.
    Frequency,
    /// Revolutions per minute.
    Speed,
    /// Ampere-hours.
    Charge,
    /// Hours.
    Duration,
    /// Metres.
    Length,
    /// Square millimetres.
    Section,
    /// Degrees Celsius.
    Temperature,
    /// Kelvins between two temperatures.
    Difference,
    /// Volts per kelvin.
    Drift,
    /// A share of a whole, written in per cent.
    Share,
    /// Times something, written with `x`.
    Times,
    /// A plain number without a unit.
    Factor,
    /// A whole number without a unit.
    Whole,
    /// What an accessory draws: a power, a current or a resistance.
    Draw,
}

impl Dimension {
    /// With its article, as messages name it: `a power`.
    #[must_use]
    pub const fn noun(self) -> &'static str {
        match self {
            Dimension::Voltage => "a voltage",
            Dimension::Current => "a current",
            Dimension::Power => "a power",
            Dimension::Resistance => "a resistance",
            Dimension::Inductance => "an inductance",
            Dimension::Frequency => "a frequency",
            Dimension::Speed => "a speed of rotation",
            Dimension::Charge => "a charge in ampere-hours",
            Dimension::Duration => "a duration",
            Dimension::Length => "a length",
            Dimension::Section => "a cross-section",
            Dimension::Temperature => "a temperature",
            Dimension::Difference => "a temperature difference",
            Dimension::Drift => "a voltage per degree",
            Dimension::Share => "a share in per cent",
            Dimension::Times => "a multiple",
            Dimension::Factor => "a plain number",
            Dimension::Whole => "a whole number",
            Dimension::Draw => "a power, a current or a resistance",
        }
    }

    /// How one is written.
    #[must_use]
    pub const fn example(self) -> &'static str {
        match self {
            Dimension::Voltage => "14.2 V",
            Dimension::Current => "5 A",
            Dimension::Power | Dimension::Draw => "55 W",
            Dimension::Resistance => "3.1 ohm",
            Dimension::Inductance => "0.4 mH",
            Dimension::Frequency => "50 Hz",
            Dimension::Speed => "3400 rpm",
            Dimension::Charge => "25 Ah",
            Dimension::Duration => "1 h 20 min",
            Dimension::Length => "2.5 m",
            Dimension::Section => "2.5 mm2",
            Dimension::Temperature => "-10 °C",
            Dimension::Difference => "5 K",
            Dimension::Drift => "-18 mV",
            Dimension::Share => "85 %",
            Dimension::Times => "8 x",
            Dimension::Factor => "2.4",
            Dimension::Whole => "12",
        }
    }

    /// The units that would do, the usual ones first.
    pub fn units(self) -> impl Iterator<Item = &'static str> {
        UNITS
            .iter()
            .filter(move |u| self.covers(u.dimension) && u.offered)
            .map(|u| u.word)
    }

    /// Whether a unit of the other dimension will do.
    pub(crate) fn covers(self, other: Dimension) -> bool {
        let draw = matches!(
            other,
            Dimension::Power | Dimension::Current | Dimension::Resistance
        );
        self == other || (self == Dimension::Draw && draw)
    }
}

impl fmt::Display for Dimension {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.noun())
    }
}

/// A quantity that can be read from text.
pub trait Unit: Copy {
    /// What it measures.
    const DIMENSION: Dimension;
    /// From a number of its unit.
    fn of(amount: f64) -> Self;
    /// As a number of its unit.
    fn amount(self) -> f64;
}

macro_rules! measures {
    ($($name:ident: $dimension:ident),* $(,)?) => { $(
        impl Unit for $name {
            const DIMENSION: Dimension = Dimension::$dimension;
            fn of(amount: f64) -> Self { $name(amount) }
            fn amount(self) -> f64 { self.0 }
        }
    )* };
}
measures!(
    Volts: Voltage, Amps: Current, Watts: Power, Ohms: Resistance, Henries: Inductance,
    Hertz: Frequency, Rpm: Speed, AmpHours: Charge, Hours: Duration, Metres: Length,
    SquareMm: Section, Celsius: Temperature, Kelvins: Difference, VoltsPerKelvin: Drift,
    Fraction: Share, Money: Factor,
);

/// How a written number becomes a number of the quantity's own unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Conversion {
    /// Multiply.
    Times(f64),
    /// Divide: exact for `350 mA` where a factor of 0.001 would not be.
    Per(f64),
    /// Degrees Fahrenheit to degrees Celsius.
    Fahrenheit,
    /// American wire gauge to square millimetres.
    Gauge,
}

impl Conversion {
    /// Converts a written number.
    pub(crate) fn apply(self, written: f64) -> f64 {
        match self {
            Conversion::Times(factor) => written * factor,
            Conversion::Per(parts) => written / parts,
            Conversion::Fahrenheit => (written - 32.0) * 5.0 / 9.0,
            Conversion::Gauge => gauge_section(written),
        }
    }
}

/// Cross-section of a solid conductor of American wire gauge `n`, mm².
///
/// ```text
/// d = 0.127 mm · 92^((36 − n) / 39)        A = π/4 · d²
/// ```
/// where d is the diameter, n the gauge number (1/0 is 0, 2/0 is −1, 3/0 is −2, 4/0 is −3).
/// Valid for 4/0 to 40. Source: ASTM B258 (law from memory).
fn gauge_section(n: f64) -> f64 {
    let d = 0.127 * 92f64.powf((36.0 - n) / 39.0);
    std::f64::consts::FRAC_PI_4 * d * d
}

/// One spelling of a unit.
#[derive(Clone, Copy, Debug)]
pub(crate) struct UnitWord {
    /// As written, after [`plain`].
    pub(crate) word: &'static str,
    /// What it measures.
    pub(crate) dimension: Dimension,
    /// To the quantity's own unit.
    pub(crate) conversion: Conversion,
    /// Whether messages offer this spelling.
    pub(crate) offered: bool,
}

/// A row whose spelling messages offer.
const fn unit(word: &'static str, dimension: Dimension, conversion: Conversion) -> UnitWord {
    UnitWord {
        word,
        dimension,
        conversion,
        offered: true,
    }
}

/// A row that is understood but not offered.
const fn also(word: &'static str, dimension: Dimension, conversion: Conversion) -> UnitWord {
    UnitWord {
        word,
        dimension,
        conversion,
        offered: false,
    }
}

use Conversion::{Per, Times};
use Dimension as D;

/// Every spelling. Where one word measures two things (`V` at a setpoint and per degree), the first row names it in messages.
pub(crate) const UNITS: &[UnitWord] = &[
    unit("V", D::Voltage, Times(1.0)),
    unit("mV", D::Voltage, Per(1e3)),
    also("volt", D::Voltage, Times(1.0)),
    also("volts", D::Voltage, Times(1.0)),
    unit("A", D::Current, Times(1.0)),
    unit("mA", D::Current, Per(1e3)),
    also("uA", D::Current, Per(1e6)),
    also("amp", D::Current, Times(1.0)),
    also("amps", D::Current, Times(1.0)),
    unit("W", D::Power, Times(1.0)),
    unit("kW", D::Power, Times(1e3)),
    also("mW", D::Power, Per(1e3)),
    also("watt", D::Power, Times(1.0)),
    also("watts", D::Power, Times(1.0)),
    unit("ohm", D::Resistance, Times(1.0)),
    unit("mΩ", D::Resistance, Per(1e3)),
    also("Ω", D::Resistance, Times(1.0)),
    also("ohms", D::Resistance, Times(1.0)),
    also("mohm", D::Resistance, Per(1e3)),
    also("kΩ", D::Resistance, Times(1e3)),
    also("kohm", D::Resistance, Times(1e3)),
    unit("mH", D::Inductance, Per(1e3)),
    unit("uH", D::Inductance, Per(1e6)),
    unit("H", D::Inductance, Times(1.0)),
    unit("Hz", D::Frequency, Times(1.0)),
    unit("rpm", D::Speed, Times(1.0)),
    unit("Ah", D::Charge, Times(1.0)),
    also("mAh", D::Charge, Per(1e3)),
    unit("h", D::Duration, Times(1.0)),
    unit("min", D::Duration, Per(60.0)),
    unit("s", D::Duration, Per(3600.0)),
    unit("d", D::Duration, Times(24.0)),
    also("ms", D::Duration, Per(3.6e6)),
    also("hour", D::Duration, Times(1.0)),
    also("hours", D::Duration, Times(1.0)),
    also("hr", D::Duration, Times(1.0)),
    also("hrs", D::Duration, Times(1.0)),
    also("minute", D::Duration, Per(60.0)),
    also("minutes", D::Duration, Per(60.0)),
    also("mins", D::Duration, Per(60.0)),
    also("second", D::Duration, Per(3600.0)),
    also("seconds", D::Duration, Per(3600.0)),
    also("sec", D::Duration, Per(3600.0)),
    also("day", D::Duration, Times(24.0)),
    also("days", D::Duration, Times(24.0)),
    unit("m", D::Length, Times(1.0)),
    unit("cm", D::Length, Per(100.0)),
    unit("ft", D::Length, Times(0.3048)),
    unit("in", D::Length, Times(0.0254)),
    also("mm", D::Length, Per(1e3)),
    unit("mm2", D::Section, Times(1.0)),
    UnitWord {
        word: "AWG",
        dimension: D::Section,
        conversion: Conversion::Gauge,
        offered: true,
    },
    unit("°C", D::Temperature, Times(1.0)),
    also("C", D::Temperature, Times(1.0)),
    UnitWord {
        word: "F",
        dimension: D::Temperature,
        conversion: Conversion::Fahrenheit,
        offered: true,
    },
    UnitWord {
        word: "°F",
        dimension: D::Temperature,
        conversion: Conversion::Fahrenheit,
        offered: false,
    },
    unit("K", D::Difference, Times(1.0)),
    also("°C", D::Difference, Times(1.0)),
    also("C", D::Difference, Times(1.0)),
    also("°F", D::Difference, Per(1.8)),
    also("F", D::Difference, Per(1.8)),
    unit("mV", D::Drift, Per(1e3)),
    unit("V", D::Drift, Times(1.0)),
    also("mV/K", D::Drift, Per(1e3)),
    also("mV/°C", D::Drift, Per(1e3)),
    also("mV/C", D::Drift, Per(1e3)),
    also("V/K", D::Drift, Times(1.0)),
    also("V/°C", D::Drift, Times(1.0)),
    unit("%", D::Share, Per(100.0)),
    unit("x", D::Times, Times(1.0)),
    also("times", D::Times, Times(1.0)),
];

/// The word with the code points that look alike made one: `µ` and `μ` to `u`, both ohm signs, `×` to `x`, `²` to `2`.
pub(crate) fn plain(word: &str) -> String {
    word.chars()
        .map(|c| match c {
            '\u{b5}' | '\u{3bc}' => 'u',
            '\u{2126}' => 'Ω',
            '\u{ba}' => '°',
            '×' => 'x',
            '²' => '2',
            other => other,
        })
        .collect()
}

/// The row of a unit for a dimension, if the word can measure it.
pub(crate) fn find(word: &str, dimension: Dimension) -> Option<&'static UnitWord> {
    UNITS
        .iter()
        .find(|u| u.dimension == dimension && u.word == word)
}

/// What a word measures, whatever is wanted.
pub(crate) fn measured_by(word: &str) -> Option<Dimension> {
    UNITS.iter().find(|u| u.word == word).map(|u| u.dimension)
}

/// The unit nearest to an unknown word: the same letters in another case, then one that begins so, then one letter off.
pub(crate) fn nearest(word: &str, dimension: Dimension) -> Option<&'static str> {
    let rows = || UNITS.iter().filter(|u| dimension.covers(u.dimension));
    let lower = word.to_lowercase();
    let long = |u: &&UnitWord| u.word.chars().count() > 2;
    rows()
        .find(|u| u.word != word && u.word.to_lowercase() == lower)
        .or_else(|| {
            rows()
                .filter(long)
                .find(|u| u.offered && u.word.starts_with(&lower))
        })
        .or_else(|| {
            rows()
                .filter(long)
                .find(|u| strsim::osa_distance(u.word, word) == 1)
        })
        .map(|u| u.word)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn gauge_sections_follow_the_standard() {
        // ASTM B258 law, worked with a calculator: 12 AWG is 2.0525 mm across, 10 AWG 5.2612 mm², 14 AWG 2.081 mm², 4/0 107.2 mm².
        let section = |n| Conversion::Gauge.apply(n);
        assert!((section(12.0) - 2.0525f64.powi(2) * std::f64::consts::FRAC_PI_4).abs() < 1e-3);
        assert!((section(10.0) - 5.2612).abs() < 1e-3);
        assert!((section(14.0) - 2.081).abs() < 1e-3);
        assert!((section(-3.0) - 107.2).abs() < 0.05);
    }

    #[test]
    fn each_row_is_reached_and_every_dimension_offers_a_unit() {
        for (i, row) in UNITS.iter().enumerate() {
            let first = UNITS
                .iter()
                .position(|u| u.word == row.word && u.dimension == row.dimension);
            assert_eq!(first, Some(i), "{} is in the table twice", row.word);
            assert_eq!(plain(row.word), row.word, "{} cannot be reached", row.word);
            assert!(
                row.dimension.units().next().is_some(),
                "{:?} offers no unit",
                row.dimension
            );
        }
    }
}
