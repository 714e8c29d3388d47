//! Sizes as a report: each number alone, the guideline, the catalog windings, what matters most.

use crate::chart::Chart;
use crate::quantity::{AmpHours, Amps, Fraction, Rpm, Volts, Watts, format};
use crate::report::{Cell, Column, Item, Report, Table, Tone};
use crate::size::{Answer, Bound, Guideline, Influence, Size, WindingRow};

/// Catalog parts shown for one number.
const MOST_PARTS: usize = 6;
/// Inputs shown by their influence.
const MOST_INFLUENCES: usize = 10;

/// The report of sizes; as a `page` to hand over with charts.
#[must_use]
pub fn size(answer: &Size, page: bool) -> Report {
    let (tone, lead, sentence) = verdict(answer);
    let mut report = Report::new(&answer.build)
        .subtitle(subtitle(answer))
        .verdict(tone, lead, sentence);
    if answer.answers.iter().any(|a| a.amount.is_some()) {
        report = report.table(answers(&answer.answers));
    }
    report = report.list("What does not decide it", edgeless(&answer.answers));
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
        if page {
            report = report.chart(influence_chart(&answer.influence));
        }
        report = report.table(influences(&answer.influence, !page));
    }
    report
}

fn subtitle(answer: &Size) -> String {
    let each = "Sizes: each number alone, all others held";
    match &answer.share {
        None => each.to_owned(),
        Some(share) => format!(
            "{each}; to keep up in {} of builds ({}, seed {})",
            format::percent(share.wanted),
            format::count(
                u32::try_from(share.runs).unwrap_or(u32::MAX),
                "draw",
                "draws"
            ),
            share.seed
        ),
    }
}

fn verdict(answer: &Size) -> (Tone, String, String) {
    let (tone, holds) = match &answer.binds {
        None => (Tone::Good, "Keeps up"),
        Some(_) => (Tone::Bad, "Does not keep up"),
    };
    let lead = match &answer.share {
        None => holds.to_owned(),
        Some(share) => format!("Keeps up in {}", format::percent(share.keeps_up_share)),
    };
    let sentence = match &answer.binds {
        None => "each number below, alone, may go as far as its amount.".to_owned(),
        Some(binds) => format!("{binds}; each amount below, alone, would mend it."),
    };
    (tone, lead, sentence)
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

/// The inputs that move the charge lacking most, with bars of it where no chart shows them.
fn influences(rows: &[Influence], bars: bool) -> Table {
    let rows = &rows[..rows.len().min(MOST_INFLUENCES)];
    let decimals = format::decimals(rows.iter().map(|i| i.ah_per_percent.abs()));
    let longest = rows
        .iter()
        .map(|i| i.ah_per_percent.0.abs())
        .fold(0.0, f64::max);
    let cells = rows.iter().map(|i| {
        let (word, tone) = if i.ah_per_percent < AmpHours::ZERO {
            ("lacks less", Tone::Good)
        } else {
            ("lacks more", Tone::Bad)
        };
        let mut row = vec![
            Cell::name(&i.what),
            Cell::text(word).tone(tone),
            Cell::fixed(i.ah_per_percent.abs(), decimals),
        ];
        if bars {
            row.push(Cell::bar(Fraction(
                i.ah_per_percent.0.abs() / longest.max(1e-12),
            )));
        }
        row
    });
    Table::new("What moves the charge lacking each shift")
        .columns([
            Column::name("1 % more of"),
            Column::text("Then it"),
            Column::number::<AmpHours>("By"),
        ])
        .columns(bars.then(Column::bar))
        .rows(cells)
}

/// The same as a chart.
fn influence_chart(rows: &[Influence]) -> Chart {
    let bars = rows.iter().take(MOST_INFLUENCES);
    let bars = bars.map(|i| (i.what.clone(), i.ah_per_percent.abs()));
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
