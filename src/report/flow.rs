//! Running text: a number and its unit are not parted at a line's end.

/// The space that does not break.
pub(super) const TIE: char = '\u{a0}';

/// Units that stay on the line of their number.
const UNITS: [&str; 20] = [
    "%", "A", "mA", "Ah", "V", "mV", "W", "Wh", "Ω", "h", "min", "s", "rpm", "°C", "K", "m", "mm",
    "mm²", "points", "AWG",
];

/// The text with a space that does not break between a number and its unit.
pub(crate) fn flowing(text: &str) -> String {
    let mut flowing = String::with_capacity(text.len());
    let mut words = text.split(' ').peekable();
    while let Some(word) = words.next() {
        flowing.push_str(word);
        if let Some(next) = words.peek() {
            let unit = next.trim_end_matches([',', ';', '.', ':', ')', ']']);
            let number = word.ends_with(|c: char| c.is_ascii_digit());
            flowing.push(if number && UNITS.contains(&unit) {
                TIE
            } else {
                ' '
            });
        }
    }
    flowing
}

#[cfg(test)]
mod tests {
    use super::flowing;

    #[test]
    fn numbers_keep_their_units() {
        assert_eq!(
            flowing("under 90 %; lacks 17.2 Ah a shift"),
            "under 90\u{a0}%; lacks 17.2\u{a0}Ah a shift"
        );
        assert_eq!(flowing("3 shifts, 4 °C."), "3 shifts, 4\u{a0}°C.");
    }
}
