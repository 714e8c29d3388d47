//! The answer in one sentence.

use super::answer::Verdict;
use super::ruling::{ReserveFrom, Ruling};
use crate::quantity::format::{count, percent, text};
use crate::quantity::{Amps, Fraction};

/// The verdict in one sentence. `spare` is what may still be drawn at every running speed.
#[must_use]
pub fn sentence(
    ruling: &Ruling,
    spare: Option<Amps>,
    lowest: Fraction,
    fails: Option<&str>,
) -> String {
    if let Some(never) = never_starts(ruling) {
        return never;
    }
    let fails = fails.map_or(String::new(), |clause| format!("; {clause}"));
    let reserve = format!("the reserve of {}", percent(ruling.reserve.soc));
    match (ruling.verdict, ruling.settles) {
        (Verdict::KeepsUp, Some((charge, least))) => {
            let spare = spare.filter(|_| fails.is_empty()).map_or(fails, |amps| {
                format!("; {} to spare while the engine runs", text(amps))
            });
            let (begins, least) = (percent(charge.soc), percent(least));
            format!(
                "Keeps up: each shift begins at {begins} of charge and never goes under {least}, with {reserve} kept{spare}."
            )
        }
        (Verdict::Carries, _) => {
            let carried = ruling.shifts_carried.unwrap_or_default();
            let shifts = count(carried, "shift", "shifts");
            format!(
                "Carries {shifts}: the {} breaks {reserve}; {}{fails}.",
                ordinal(carried + 1),
                lacking(ruling)
            )
        }
        _ => format!(
            "Falls short: the first shift takes the charge to {}, under {reserve}; {}{fails}.",
            percent(lowest),
            lacking(ruling)
        ),
    }
}

fn never_starts(ruling: &Ruling) -> Option<String> {
    match ruling.reserve.from {
        ReserveFrom::NeverCranks { starter, least } => Some(format!(
            "Falls short: even a full battery does not crank the engine at this temperature: {} at the starter, {} needed.",
            text(starter),
            text(least)
        )),
        ReserveFrom::NeverThawed => Some(
            "Falls short: at this temperature even a full battery is too near freezing.".to_owned(),
        ),
        _ => None,
    }
}

fn lacking(ruling: &Ruling) -> String {
    match (ruling.lacks, ruling.lacks_current) {
        (Some(charge), Some(current)) => {
            format!(
                "it lacks {} a shift ({} while the engine runs)",
                text(charge),
                text(current)
            )
        }
        _ => "no charging while the engine runs can help".to_owned(),
    }
}

/// `1st`, `2nd`, `3rd`, `4th`, `11th`.
#[must_use]
pub fn ordinal(number: u32) -> String {
    let ending = match (number % 10, number % 100) {
        (1, tens) if tens != 11 => "st",
        (2, tens) if tens != 12 => "nd",
        (3, tens) if tens != 13 => "rd",
        _ => "th",
    };
    format!("{number}{ending}")
}

#[cfg(test)]
mod tests {
    use super::ordinal;

    #[test]
    fn ordinals() {
        let all: Vec<String> = [1, 2, 3, 4, 11, 12, 13, 21, 102, 111]
            .iter()
            .map(|n| ordinal(*n))
            .collect();
        assert_eq!(
            all,
            [
                "1st", "2nd", "3rd", "4th", "11th", "12th", "13th", "21st", "102nd", "111th"
            ]
        );
    }
}
