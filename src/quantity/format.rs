//! Quantities as text: the only place where a number becomes words for a reader.
//!
//! Four ways, by purpose:
//! - [`text`]: in a sentence, three or four significant digits with the unit: `14.2 V`;
//! - [`fixed`]: in a column, the number alone with the column's decimals: `14.2`;
//! - [`precise`]: to be read back, as `--set` takes it: `0.4 mH`;
//! - [`duration`], [`percent`], [`temperature`], [`money`]: in the manner of their kind.
//!
//! A negative number is written with a true minus sign (U+2212), except by
//! [`precise`]; a number that rounds to nothing carries no sign; a number that
//! is not finite is an em dash.
//!
//! ```
//! use ampledger::quantity::{format, Amps, Hours, Volts};
//! assert_eq!(format::text(Volts(14.4)), "14.4 V");
//! assert_eq!(format::fixed(Amps(-0.04), 1), "0.0");
//! assert_eq!(format::signed(Amps(-3.25), 1), "\u{2212}3.2");
//! assert_eq!(format::duration(Hours(1.58333)), "1 h 35 min");
//! ```

use super::{
    AmpHours, Amps, Celsius, Days, Fraction, Grams, Henries, Hertz, Hours, Kelvins, Litres, Metres,
    Minutes, Money, Ohms, Rpm, SquareMm, Volts, VoltsPerKelvin, VoltsPerRpm, WattHours, Watts,
};

/// What stands for a number that is not finite.
pub const NO_NUMBER: &str = "\u{2014}";
/// The minus sign of every text but [`precise`].
pub const MINUS: char = '\u{2212}';

/// A quantity that can be written: its unit as shown, as typed, and the number in it.
pub trait Written: Copy {
    /// Unit symbol beside the number for a reader: `Ω`.
    const UNIT: &'static str;
    /// Unit as it is typed in a build file: `ohm`.
    const TYPED: &'static str;
    /// Significant digits in a sentence.
    const DIGITS: i32;
    /// The number in that unit.
    fn number(self) -> f64;
    /// The quantity of a number in that unit.
    fn of(number: f64) -> Self;
}

/// Declares how a quantity is written: unit shown, unit typed, how many of that unit make one of the type's own, digits.
macro_rules! written {
    ($($name:ident $unit:literal $typed:literal $scale:literal $digits:literal;)*) => { $(
        impl Written for $name {
            const UNIT: &'static str = $unit;
            const TYPED: &'static str = $typed;
            const DIGITS: i32 = $digits;
            fn number(self) -> f64 { self.0 * $scale }
            fn of(number: f64) -> Self { $name(number / $scale) }
        }
    )* };
}
written! {
    Volts "V" "V" 1.0 3;
    Amps "A" "A" 1.0 3;
    Watts "W" "W" 1.0 3;
    Ohms "Ω" "ohm" 1.0 3;
    Henries "mH" "mH" 1e3 3;
    Hertz "Hz" "Hz" 1.0 3;
    Rpm "rpm" "rpm" 1.0 4;
    AmpHours "Ah" "Ah" 1.0 3;
    WattHours "Wh" "Wh" 1.0 3;
    Hours "h" "h" 1.0 3;
    Minutes "min" "min" 1.0 3;
    Days "days" "d" 1.0 2;
    Metres "m" "m" 1.0 3;
    SquareMm "mm²" "mm2" 1.0 3;
    Celsius "°C" "°C" 1.0 3;
    Kelvins "K" "K" 1.0 3;
    Fraction "%" "%" 100.0 3;
    VoltsPerRpm "V per 1000 rpm" "V per 1000 rpm" 1e3 4;
    VoltsPerKelvin "mV/K" "mV" 1e3 3;
    Money "" "" 1.0 3;
    Grams "g" "g" 1.0 3;
    Litres "L" "L" 1.0 3;
}

/// A number with a fixed count of decimals, true minus, no negative zero.
fn plain(number: f64, decimals: usize) -> String {
    if !number.is_finite() {
        return NO_NUMBER.to_owned();
    }
    let text = format!("{:.decimals$}", number.abs());
    let nothing = text.bytes().all(|b| b == b'0' || b == b'.');
    if number < 0.0 && !nothing {
        format!("{MINUS}{text}")
    } else {
        text
    }
}

/// Decimals that show `digits` significant digits of a number, at most six.
fn decimals_of(number: f64, digits: i32) -> usize {
    if number == 0.0 || !number.is_finite() {
        return 0;
    }
    // The exponent after rounding, so that 9.996 counts as 10.0.
    let scientific = format!(
        "{:.*e}",
        usize::try_from(digits - 1).unwrap_or(0),
        number.abs()
    );
    let exponent = scientific
        .split('e')
        .nth(1)
        .and_then(|e| e.parse::<i32>().ok())
        .unwrap_or(0);
    usize::try_from((digits - 1 - exponent).clamp(0, 6)).unwrap_or(0)
}

/// Significant digits without the zeros that end a decimal fraction: `30`, `9.9`, `0.35`.
fn significant(number: f64, digits: i32) -> String {
    trimmed(plain(number, decimals_of(number, digits)))
}

/// Without the zeros that end a decimal fraction.
fn trimmed(text: String) -> String {
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

/// A number and its unit, or the number alone where the unit is empty.
fn join(number: String, unit: &str) -> String {
    if unit.is_empty() {
        number
    } else {
        format!("{number} {unit}")
    }
}

/// In a sentence: three significant digits (four for rpm, hundredths for volts), zeros at the end
/// dropped, with the unit. Below a tenth of an ampere, volt or ohm in thousandths: `8 mA`.
///
/// ```
/// use ampledger::quantity::{format::text, Amps, AmpHours, Ohms, Volts};
/// assert_eq!(text(AmpHours(30.0)), "30 Ah");
/// assert_eq!(text(Volts(12.649)), "12.65 V");
/// assert_eq!(text(Amps(0.008)), "8 mA");
/// assert_eq!(text(Ohms(3.1)), "3.1 Ω");
/// ```
#[must_use]
pub fn text<Q: Written>(quantity: Q) -> String {
    let number = quantity.number();
    if matches!(Q::UNIT, "A" | "V" | "Ω") && number.abs() < 0.0995 && number.abs() >= 5e-6 {
        return format!("{} m{}", significant(number * 1e3, 3), Q::UNIT);
    }
    // A volt is read to hundredths.
    if Q::UNIT == "V" && number.abs() >= 1.0 {
        return join(trimmed(plain(number, 2)), Q::UNIT);
    }
    join(significant(number, Q::DIGITS), Q::UNIT)
}

/// In a sentence with its sign, the plus sign included: `+3.2 A`.
#[must_use]
pub fn text_signed<Q: Written>(quantity: Q) -> String {
    plus(quantity.number(), text(quantity))
}

/// In a column that names its unit: the number alone, a fixed count of decimals.
#[must_use]
pub fn fixed<Q: Written>(quantity: Q, decimals: usize) -> String {
    plain(quantity.number(), decimals)
}

/// As [`fixed`], with a plus sign on what is above zero: `+3.2`, `−3.2`, `0.0`.
#[must_use]
pub fn signed<Q: Written>(quantity: Q, decimals: usize) -> String {
    plus(quantity.number(), fixed(quantity, decimals))
}

/// A fixed count of decimals with the unit: `14.20 V`.
#[must_use]
pub fn fixed_unit<Q: Written>(quantity: Q, decimals: usize) -> String {
    join(fixed(quantity, decimals), Q::UNIT)
}

/// Puts a plus sign before a text whose number is above zero and does not read as nothing.
fn plus(number: f64, text: String) -> String {
    let shows = text.bytes().any(|b| (b'1'..=b'9').contains(&b));
    if number > 0.0 && number.is_finite() && shows {
        format!("+{text}")
    } else {
        text
    }
}

/// Decimals for a column: the largest value shows three digits, none shows more than two decimals.
///
/// ```
/// use ampledger::quantity::{format::decimals, Amps};
/// assert_eq!(decimals([Amps(9.9), Amps(31.0)]), 1);
/// assert_eq!(decimals([Amps(140.0)]), 0);
/// ```
#[must_use]
pub fn decimals<Q: Written>(column: impl IntoIterator<Item = Q>) -> usize {
    let largest = column
        .into_iter()
        .map(|q| q.number().abs())
        .filter(|n| n.is_finite())
        .fold(0.0, f64::max);
    if largest >= 99.95 {
        0
    } else if largest >= 9.995 {
        1
    } else {
        2
    }
}

/// To be read back: the fewest digits that give the same number again (where the unit is not the
/// type's own, at worst one unit in the last binary place beside it), and the unit as typed.
/// Plain ASCII minus. A number that is not finite gives its Rust text (`NaN`, `inf`).
///
/// ```
/// use ampledger::quantity::{format::precise, Celsius, Fraction, Henries, Ohms};
/// assert_eq!(precise(Henries(0.0004)), "0.4 mH");
/// assert_eq!(precise(Fraction(0.85)), "85 %");
/// assert_eq!(precise(Celsius(-10.0)), "-10 °C");
/// assert_eq!(precise(Ohms(0.1 + 0.2)), "0.30000000000000004 ohm");
/// ```
#[must_use]
pub fn precise<Q: Written + PartialEq>(quantity: Q) -> String {
    let number = quantity.number();
    let shortest = (0..17)
        .filter_map(|digits| format!("{number:.digits$e}").parse::<f64>().ok())
        .find(|candidate| Q::of(*candidate) == quantity)
        .unwrap_or(number);
    join(format!("{shortest}"), Q::TYPED)
}

/// As [`precise`] for a duration: whole minutes as `1 h 35 min`, others in hours.
#[must_use]
pub fn precise_duration(time: Hours) -> String {
    let minutes = time.minutes();
    if minutes.is_finite() && minutes >= 0.0 && minutes == minutes.round() && minutes < 1e6 {
        duration(time)
    } else {
        precise(time)
    }
}

/// A duration: `2.5 s` below a minute, then `12 min`, `1 h 35 min`, `15 h`.
///
/// ```
/// use ampledger::quantity::{format::duration, Hours};
/// assert_eq!(duration(Hours::from_seconds(2.5)), "2.5 s");
/// assert_eq!(duration(Hours(0.99999)), "1 h");
/// assert_eq!(duration(Hours(336.0)), "336 h");
/// ```
#[must_use]
pub fn duration(time: Hours) -> String {
    if !time.is_finite() {
        return NO_NUMBER.to_owned();
    }
    let seconds = time.seconds().abs();
    let sign = if time.0 < 0.0 && seconds >= 0.05 {
        MINUS.to_string()
    } else {
        String::new()
    };
    if seconds < 0.05 {
        return "0 min".to_owned();
    }
    if seconds < 59.5 {
        return format!("{sign}{} s", significant(seconds, 2));
    }
    let minutes = (seconds / 60.0).round();
    let (hours, rest) = ((minutes / 60.0).floor(), minutes % 60.0);
    match (hours > 0.0, rest > 0.0) {
        (false, _) => format!("{sign}{rest} min"),
        (true, false) => format!("{sign}{hours} h"),
        (true, true) => format!("{sign}{hours} h {rest} min"),
    }
}

/// A share in whole per cent: `85 %`; below one per cent one digit, `0.4 %`.
#[must_use]
pub fn percent(share: Fraction) -> String {
    let number = share.percent();
    if number.abs() < 0.95 {
        return format!("{} %", significant(number, 1));
    }
    format!("{} %", plain(number, 0))
}

/// A temperature: whole degrees, or one decimal where it has one: `2 °C`, `−17.8 °C`.
#[must_use]
pub fn temperature(value: Celsius) -> String {
    let tenths = plain(value.0, 1);
    format!("{} °C", tenths.strip_suffix(".0").unwrap_or(&tenths))
}

/// Money with its currency label: whole amounts without decimals, others with two: `120 EUR`.
/// The label is whatever the price list calls it; an empty one leaves the number alone.
#[must_use]
pub fn money(amount: Money, currency: &str) -> String {
    let cents = plain(amount.0, 2);
    join(
        cents.strip_suffix(".00").unwrap_or(&cents).to_owned(),
        currency,
    )
}

/// A count with its noun: `1 shift`, `3 shifts`.
#[must_use]
pub fn count(number: u32, singular: &str, plural: &str) -> String {
    format!("{number} {}", if number == 1 { singular } else { plural })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_number_that_rounds_to_nothing_has_no_sign() {
        assert_eq!(fixed(Amps(-0.04), 1), "0.0");
        assert_eq!(signed(Amps(0.04), 1), "0.0");
        assert_eq!(signed(Amps(-0.0), 1), "0.0");
        assert_eq!(text(Amps(-0.0)), "0 A");
        assert_eq!(signed(Amps(0.05), 1), "+0.1");
    }

    #[test]
    fn sentences_show_three_digits_and_volts_four() {
        for (written, wanted) in [
            (text(Amps(9.94)), "9.94 A"),
            (text(Amps(99.96)), "100 A"),
            (text(Amps(9.996)), "10 A"),
            (text(Volts(14.4)), "14.4 V"),
            (text(Volts(12.654_9)), "12.65 V"),
            (text(Rpm(3400.0)), "3400 rpm"),
            (text(AmpHours(-2.551)), "−2.55 Ah"),
            (text(Amps(0.0301)), "30.1 mA"),
            (text(Henries(0.000_412)), "0.412 mH"),
            (text(Volts(0.85)), "0.85 V"),
            (text(Volts(1.364)), "1.36 V"),
            (text(Volts(9.996)), "10 V"),
            (text_signed(AmpHours(1.25)), "+1.25 Ah"),
        ] {
            assert_eq!(written, wanted);
        }
    }

    #[test]
    fn not_a_number_is_a_dash() {
        assert_eq!(fixed(Amps(f64::NAN), 1), NO_NUMBER);
        assert_eq!(text(Amps(f64::INFINITY)), "— A");
        assert_eq!(duration(Hours(f64::NAN)), NO_NUMBER);
        assert_eq!(decimals([Amps(f64::NAN), Amps(12.0)]), 1);
    }

    #[test]
    fn durations_carry_over() {
        for (seconds, wanted) in [
            (0.0, "0 min"),
            (2.5, "2.5 s"),
            (59.6, "1 min"),
            (720.0, "12 min"),
            (3599.0, "1 h"),
            (5700.0, "1 h 35 min"),
            (54000.0, "15 h"),
            (-720.0, "−12 min"),
        ] {
            assert_eq!(
                duration(Hours::from_seconds(seconds)),
                wanted,
                "{seconds} s"
            );
        }
    }

    #[test]
    fn kinds_in_their_manner() {
        assert_eq!(percent(Fraction(0.85)), "85 %");
        assert_eq!(percent(Fraction(0.004_2)), "0.4 %");
        assert_eq!(percent(Fraction(0.009_6)), "1 %");
        assert_eq!(temperature(Celsius(2.0)), "2 °C");
        assert_eq!(temperature(Celsius(-17.78)), "−17.8 °C");
        assert_eq!(money(Money(120.0), "EUR"), "120 EUR");
        assert_eq!(money(Money(119.5), ""), "119.50");
        assert_eq!(count(1, "shift", "shifts"), "1 shift");
    }

    #[test]
    fn precise_reads_back_to_the_same_number() {
        let mut x = 1.0e-4_f64;
        while x < 1e4 {
            for share in [Fraction(x), Fraction(x / 3.0)] {
                let written = precise(share);
                let number: f64 = written.trim_end_matches(" %").parse().expect("a number");
                assert!(
                    (Fraction::of(number) / share - 1.0).abs() < 4.5e-16,
                    "{written}"
                );
            }
            let written = precise(Henries(-x));
            let number: f64 = written.trim_end_matches(" mH").parse().expect("a number");
            assert!(
                (Henries::of(number) / Henries(-x) - 1.0).abs() < 4.5e-16,
                "{written}"
            );
            x *= 1.618_033;
        }
        assert_eq!(precise_duration(Hours(1.5)), "1 h 30 min");
        assert_eq!(precise_duration(Hours(0.3)), "18 min");
        assert_eq!(precise_duration(Hours(0.001)), "0.001 h");
    }
}
