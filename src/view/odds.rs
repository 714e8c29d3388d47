//! The odds within the tolerances as a report.

use crate::check::answer::Verdict;
use crate::odds::{Influence, Law, Odds};
use crate::quantity::{Fraction, format};
use crate::report::{Cell, Column, Report, Table, Tone};

/// Share of the variance below which a tolerance is not worth a row.
const WORTH: Fraction = Fraction(0.005);

/// The report: the share that keeps up, the charge lacking, what matters most.
#[must_use]
pub fn odds(answer: &Odds) -> Report {
    let report = Report::new(&answer.build);
    if answer.tolerances.is_empty() {
        return without_tolerances(report, answer);
    }
    let report = report
        .subtitle(format!(
            "Odds within the tolerances: {}, seed {}",
            format::count(
                u32::try_from(answer.runs).unwrap_or(u32::MAX),
                "draw",
                "draws"
            ),
            answer.seed
        ))
        .verdict(
            tone(answer.keeps_up_share),
            lead(answer.keeps_up_share),
            sentence(answer),
        )
        .facts(facts(answer));
    let report = if answer.influence.is_empty() {
        report.paragraph("No tolerance makes any difference: every draw comes to the same.")
    } else {
        report.table(influence(answer))
    };
    let report = report.paragraph(
        "Stated tolerances are drawn evenly between their limits, those of catalog parts with the limits at two \
         standard deviations; each value by itself, several alike as one batch.",
    );
    notes(answer).into_iter().fold(report, Report::paragraph)
}

fn without_tolerances(report: Report, answer: &Odds) -> Report {
    let (tone, words) = match answer.verdict {
        Verdict::KeepsUp => (Tone::Good, "Keeps up"),
        Verdict::Carries => (Tone::Warn, "Does not keep up"),
        Verdict::FallsShort => (Tone::Bad, "Falls short"),
    };
    report
        .subtitle("Odds within the tolerances")
        .verdict(
            tone,
            words,
            "Nothing in this build bears a tolerance, so that there is but this one answer.",
        )
        .paragraph(
            "Write how far a value may lie off beside it, `draw: 172 W ± 8 %`, and the share of such builds that keeps \
             up is worked out.",
        )
}

/// Good where nineteen of twenty keep up, bad where fewer than half do.
fn tone(share: Fraction) -> Tone {
    if share >= Fraction(0.95) {
        Tone::Good
    } else if share >= Fraction(0.5) {
        Tone::Warn
    } else {
        Tone::Bad
    }
}

/// The share as a count a person would say: `Keeps up in 19 of 20`.
fn lead(share: Fraction) -> String {
    let of = |count: f64| {
        let hits = (share.0 * count).round();
        (hits > 0.0 && hits < count).then_some((hits, count))
    };
    let said = match share.0 {
        s if s <= 0.0 => return "Keeps up in none".to_owned(),
        s if s >= 1.0 => return "Keeps up in every one".to_owned(),
        _ => [20.0, 100.0, 1000.0].into_iter().find_map(of),
    };
    match said {
        Some((hits, count)) => format!("Keeps up in about {hits} of {count}"),
        None if share.0 < 0.5 => "Keeps up in fewer than 1 of 1000".to_owned(),
        None => "Keeps up in more than 999 of 1000".to_owned(),
    }
}

fn sentence(answer: &Odds) -> String {
    let stated = match answer.verdict {
        Verdict::KeepsUp => "As stated it keeps up.",
        _ => "As stated it does not keep up.",
    };
    let [low, high] = answer.interval;
    format!(
        "{} of the builds within these tolerances (95 % sure: {} to {}). {stated}",
        tenths(answer.keeps_up_share),
        tenths(low),
        tenths(high)
    )
}

/// A share to tenths of a per cent: `94.6 %`.
fn tenths(share: Fraction) -> String {
    format::fixed_unit(share, 1)
}

/// The spread of the charge lacking.
fn facts(answer: &Odds) -> Vec<(&'static str, Cell)> {
    let lacks = answer.lacks_ah;
    let cell = |charge| match charge {
        Some(charge) => Cell::measured(charge),
        None => Cell::text("no charging helps"),
    };
    if answer.lacks_ah.p5.is_none() && answer.beyond_charging == 0 {
        return Vec::new(); // judged on volts
    }
    vec![
        ("5 of 100 lack each shift, at most", cell(lacks.p5)),
        ("Half of them lack each shift, at most", cell(lacks.p50)),
        ("95 of 100 lack each shift, at most", cell(lacks.p95)),
    ]
}

/// What matters most, with its tolerance.
fn influence(answer: &Odds) -> Table {
    let worth: Vec<&Influence> = answer
        .influence
        .iter()
        .filter(|i| i.share >= WORTH)
        .collect();
    let longest = worth.iter().map(|i| i.share.0).fold(1e-9, f64::max);
    let row = |i: &&Influence| {
        let drawn = answer.tolerances.iter().find(|t| t.path == i.path);
        let value = drawn.map_or_else(Cell::empty, |t| Cell::text(&t.value));
        let spread = drawn.map_or_else(Cell::empty, |t| {
            let law = match t.law {
                Law::Uniform => "",
                Law::Normal => " (2 σ)",
            };
            Cell::text(format!("± {}{law}", tolerance(t.tolerance)))
        });
        vec![
            Cell::name(&i.what),
            value,
            spread,
            Cell::percent(i.share),
            Cell::bar(Fraction(i.share.0 / longest)),
        ]
    };
    let table = Table::new("What matters most")
        .columns([
            Column::name("Value"),
            Column::text("Stated"),
            Column::text("Tolerance"),
            Column::percent("Share"),
            Column::bar(),
        ])
        .rows(worth.iter().map(row));
    let left = answer.influence.len() - worth.len();
    let about = "Share of the variance of the current to spare or lacking that a tolerance accounts for by itself.";
    match left {
        0 => table.note(about),
        n => table.note(format!(
            "{about} {} matter{} less than {}.",
            format::count(u32::try_from(n).unwrap_or(u32::MAX), "other", "others"),
            if n == 1 { "s" } else { "" },
            format::percent(WORTH)
        )),
    }
}

/// A tolerance as it was written: `8 %`, `2.5 %`.
fn tolerance(share: Fraction) -> String {
    format::text(share)
}

/// What else is to be said of the draws.
fn notes(answer: &Odds) -> Vec<String> {
    let count = |n: u64| format::count(u32::try_from(n).unwrap_or(u32::MAX), "draw", "draws");
    let mut notes = Vec::new();
    if answer.beyond_charging > 0 {
        notes.push(format!(
            "In {} no charging while the engine runs would help.",
            count(answer.beyond_charging)
        ));
    }
    if answer.contradictory > 0 {
        notes.push(format!(
            "In {} the values contradicted each other (a rating that no winding of these volts gives, say); others \
             were drawn in their place.",
            count(answer.contradictory)
        ));
    }
    if answer.unsolved > 0 {
        notes.push(format!(
            "{} came to no answer; others took their place.",
            count(answer.unsolved)
        ));
    }
    if let Some(worst) = &answer.worst {
        let lacks = match worst.lacks_ah {
            Some(lacks) if lacks.0 > 0.0 => format!("lacks {} each shift", format::text(lacks)),
            Some(_) => "has the least to spare".to_owned(),
            None => "is the furthest off".to_owned(),
        };
        notes.push(format!(
            "The worst of the draws, number {}, {lacks}; `--worst FILE` writes it as a build file.",
            worst.draw
        ));
    }
    notes
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn shares_as_a_person_says_them() {
        for (share, said) in [
            (0.946, "Keeps up in about 19 of 20"),
            (0.5, "Keeps up in about 10 of 20"),
            (0.992, "Keeps up in about 99 of 100"),
            (0.0004, "Keeps up in fewer than 1 of 1000"),
            (0.0007, "Keeps up in about 1 of 1000"),
            (0.9999, "Keeps up in more than 999 of 1000"),
            (0.0, "Keeps up in none"),
            (1.0, "Keeps up in every one"),
        ] {
            assert_eq!(lead(Fraction(share)), said);
        }
    }
}
