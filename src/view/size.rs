//! Sizes as a report: each number alone, the guideline, the catalog windings, what matters most.

use crate::chart::Chart;
use crate::quantity::{AmpHours, Amps, Rpm, Volts, Watts, format};
use crate::report::{Cell, Column, Item, Report, Table, Tone};
use crate::size::{Answer, Bound, Guideline, Influence, Size, WindingRow};

/// Catalog parts shown for one number.
const MOST_PARTS: usize = 6;
/// Inputs shown by their influence.
const MOST_INFLUENCES: usize = 10;

/// The report of sizes.
#[must_use]
pub fn size(answer: &Size) -> Report {
    let (tone, lead, sentence) = match &answer.binds {
        None => (
            Tone::Good,
            "Keeps up",
            "each number below, alone, may go as far as its amount.".to_owned(),
        ),
        Some(binds) => (
            Tone::Bad,
            "Does not keep up",
            format!("{binds}; each amount below, alone, would mend it."),
        ),
    };
    let mut report = Report::new(&answer.build)
        .subtitle("Sizes: each number alone, all others held")
        .verdict(tone, lead, sentence);
    if answer.answers.iter().any(|a| a.amount.is_some()) {
        report = report.table(answers(&answer.answers));
    }
    report = report.list("No such edge", edgeless(&answer.answers));
    let parts = answer
        .answers
        .iter()
        .filter(|a| a.amount.is_some() && !a.parts.is_empty());
    report = report.list(
        "Catalog parts that qualify, smallest first",
        parts.map(|a| Item::new(few(&a.parts)).lead(Tone::Plain, &a.what)),
    );
    if !answer.windings.is_empty() {
        report = report.table(windings(&answer.windings));
    }
    if !answer.guideline.is_empty() {
        report = report.table(guideline(&answer.guideline));
    }
    if !answer.influence.is_empty() {
        report = report.chart(influence(&answer.influence));
    }
    report
}

/// Numbers without an edge, those of one reason together.
fn edgeless(answers: &[Answer]) -> Vec<Item> {
    let mut reasons: Vec<(&str, Vec<&str>)> = Vec::new();
    for answer in answers.iter().filter(|a| a.amount.is_none()) {
        match reasons.iter_mut().find(|(why, _)| *why == answer.binds) {
            Some((_, whats)) => whats.push(&answer.what),
            None => reasons.push((&answer.binds, vec![&answer.what])),
        }
    }
    let items = reasons.into_iter();
    items
        .map(|(why, whats)| Item::new(format!("{}: {why}", whats.join("; "))))
        .collect()
}

/// The first few ids, and how many more.
fn few(ids: &[String]) -> String {
    let shown: Vec<&str> = ids.iter().take(MOST_PARTS).map(String::as_str).collect();
    match ids.len().saturating_sub(MOST_PARTS) {
        0 => shown.join(", "),
        more => format!("{} and {more} more", shown.join(", ")),
    }
}

/// One row a number that has an edge.
fn answers(answers: &[Answer]) -> Table {
    let rows = answers.iter().filter(|a| a.amount.is_some()).map(|a| {
        let bound = match a.bound {
            Bound::Least => "least",
            Bound::Most => "most",
        };
        let amount = a.amount.map_or_else(Cell::empty, |x| figure(x, &a.unit));
        let now = a.now.map_or_else(Cell::empty, |x| figure(x, &a.unit).dim());
        vec![
            Cell::name(&a.what),
            Cell::text(bound),
            amount,
            now,
            Cell::text(&a.binds),
        ]
    });
    Table::new("What size would do")
        .columns([
            Column::name("Number"),
            Column::text("Bound"),
            Column::figures("Amount"),
            Column::figures("Now"),
            Column::text("What binds beyond"),
        ])
        .rows(rows)
        .note("Charge that a state takes out of the battery each shift, at the reserve.")
}

/// An amount in a unit that varies by row.
fn figure(x: f64, unit: &str) -> Cell {
    let text = match unit {
        "Ah" => format::text(AmpHours(x)),
        "A" => format::text(Amps(x)),
        "W" => format::text(Watts(x)),
        "rpm" => format::text(Rpm(x)),
        "min" => format::text(crate::quantity::Minutes(x)),
        _ => format::text(crate::quantity::Fraction::from_percent(x)),
    };
    Cell {
        text,
        number: Some(x),
        unit: Some(unit.to_owned()),
        ..Cell::default()
    }
}

/// Catalog windings fitted.
fn windings(rows: &[WindingRow]) -> Table {
    let idle = rows.first().map_or(Rpm::ZERO, |r| r.idle_rpm);
    let cells = rows.iter().map(|r| {
        let verdict = if r.keeps_up { "yes" } else { "no" };
        let tone = if r.keeps_up { Tone::Good } else { Tone::Bad };
        vec![
            Cell::name(&r.id),
            Cell::text(verdict).tone(tone),
            Cell::fixed(r.rated_a, 1),
            Cell::maybe(r.idle_open_v, |v| Cell::fixed(v, 1)),
            Cell::fixed(r.idle_a, 1),
            Cell::fixed(r.top_a, 1),
            Cell::maybe(r.heat_w, |w| Cell::fixed(w, 0)),
            Cell::fixed(r.carries_a, 1),
        ]
    });
    Table::new("Catalog windings in its place")
        .columns([
            Column::name("Winding"),
            Column::text("Keeps up"),
            Column::number::<Amps>("Rated"),
            Column::number::<Volts>("Open at idle"),
            Column::number::<Amps>("At idle"),
            Column::number::<Amps>("At top speed"),
            Column::number::<Watts>("Heat"),
            Column::number::<Amps>("Regulator"),
        ])
        .rows(cells)
        .note(format!(
            "Idle is {}, the slowest running speed of the shift. Amps into a rested battery; heat is the winding's copper loss at top speed; regulator: what it must carry there, a shunt regulator the shorted winding.",
            format::text(idle)
        ))
}

/// The 80 % guideline.
fn guideline(rows: &[Guideline]) -> Table {
    let cells = rows.iter().map(|g| {
        let (verdict, tone) = if g.within {
            ("within 80 %", Tone::Good)
        } else {
            ("over 80 %", Tone::Warn)
        };
        vec![
            Cell::name(&g.state),
            Cell::fixed(g.load_a, 1),
            Cell::fixed(g.supply_a, 1),
            Cell::percent(g.share),
            Cell::text(verdict).tone(tone),
            Cell::maybe(g.meets_rpm, |rpm| Cell::fixed(rpm, 0)),
        ]
    });
    Table::new("Load against supply, the 80 % guideline")
        .columns([
            Column::name("State"),
            Column::number::<Amps>("Load"),
            Column::number::<Amps>("Supply"),
            Column::percent("Share"),
            Column::text("Guideline"),
            Column::number::<Rpm>("Supply meets load at"),
        ])
        .rows(cells)
        .note("FAA AC 43.13-1B §11-35: a rule of thumb for continuous load, not the verdict. Cycling loads by their duty; bus at 14 V for each 12 V.")
}

/// The inputs that move the charge lacking most.
fn influence(rows: &[Influence]) -> Chart {
    let shown = rows.iter().take(MOST_INFLUENCES);
    let bars = shown.clone().map(|i| {
        let sign = if i.ah_per_percent.0 < 0.0 {
            "helps"
        } else {
            "harms"
        };
        (format!("{} ({sign})", i.what), i.ah_per_percent.abs())
    });
    let first = rows.first().map_or(String::new(), |i| {
        format!(
            "1 % more {} changes it most, by {}.",
            i.what,
            format::text(i.ah_per_percent.abs())
        )
    });
    Chart::bars(
        "What moves the charge lacking each shift, for 1 % more of it",
        bars,
        first,
    )
}
