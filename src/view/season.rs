//! The season: a row a temperature, and its chart.

use super::charts::{self, SeasonPoint};
use crate::chart::Chart;
use crate::check::answer::Verdict;
use crate::check::season::{Season, SeasonRow};
use crate::quantity::{AmpHours, Celsius, Volts, format};
use crate::report::{Cell, Column, Report, Table, Tone};

/// The report of a season.
#[must_use]
pub fn season(answer: &Season) -> Report {
    let fails: Vec<&SeasonRow> = answer
        .rows
        .iter()
        .filter(|row| row.verdict != Verdict::KeepsUp)
        .collect();
    let range = answer.rows.first().zip(answer.rows.last());
    let range = range.map_or(String::new(), |(first, last)| {
        format!(
            "Air from {} to {}",
            format::temperature(first.air_c),
            format::temperature(last.air_c)
        )
    });
    let (tone, lead, sentence) = match fails.as_slice() {
        [] => (Tone::Good, "Keeps up", "at every temperature.".to_owned()),
        _ if fails.len() == answer.rows.len() => {
            (Tone::Bad, "Falls short", "at every temperature.".to_owned())
        }
        _ => (
            Tone::Warn,
            "Not all year",
            format!("it does not keep up at {}.", stretches(answer)),
        ),
    };
    Report::new(&answer.build)
        .subtitle(range)
        .verdict(tone, lead, sentence)
        .chart(chart(answer))
        .table(table(answer))
}

/// Settled charge and reserve against air temperature.
#[must_use]
pub fn chart(answer: &Season) -> Chart {
    charts::season(&answer.rows.iter().map(point).collect::<Vec<_>>())
}

fn point(row: &SeasonRow) -> SeasonPoint {
    SeasonPoint {
        air: row.air_c,
        settles: row.settles_soc,
        reserve: row.reserve_soc,
        keeps_up: row.verdict == Verdict::KeepsUp,
    }
}

/// `−20 °C to −5 °C, and 40 °C`: where it does not keep up.
fn stretches(answer: &Season) -> String {
    let mut runs: Vec<(Celsius, Celsius)> = Vec::new();
    let mut open = false;
    for row in &answer.rows {
        let fails = row.verdict != Verdict::KeepsUp;
        match (fails, open, runs.last_mut()) {
            (true, true, Some(run)) => run.1 = row.air_c,
            (true, _, _) => runs.push((row.air_c, row.air_c)),
            _ => {}
        }
        open = fails;
    }
    let words: Vec<String> = runs
        .iter()
        .map(|(from, to)| {
            if from == to {
                format::temperature(*from)
            } else {
                format!(
                    "{} to {}",
                    format::temperature(*from),
                    format::temperature(*to)
                )
            }
        })
        .collect();
    words.join(" and ")
}

fn table(answer: &Season) -> Table {
    let rows = answer.rows.iter().map(|row| {
        let keeps = row.verdict == Verdict::KeepsUp;
        let verdict = match (row.verdict, row.shifts_carried) {
            (Verdict::KeepsUp, _) => Cell::text("keeps up").good(),
            (Verdict::Carries, Some(n)) => {
                Cell::text(format!("carries {}", format::count(n, "shift", "shifts"))).warn()
            }
            _ => Cell::text("falls short").bad(),
        };
        [
            Cell::fixed(row.air_c, 0),
            verdict,
            if keeps {
                Cell::empty()
            } else {
                row.lacks_ah
                    .map_or(Cell::text("beyond charging"), |ah| Cell::fixed(ah, 1))
            },
            row.settles_soc.map_or(Cell::empty(), Cell::percent),
            Cell::percent(row.reserve_soc),
            row.crank_margin_v
                .map_or(Cell::empty(), |v| Cell::signed(v, 2)),
            Cell::fixed(row.freezes_c, 0),
        ]
    });
    Table::new("By air temperature")
        .columns([
            Column::number::<Celsius>("Air"),
            Column::text("Verdict"),
            Column::number::<AmpHours>("Lacks"),
            Column::percent("Settles"),
            Column::percent("Reserve"),
            Column::number::<Volts>("Crank"),
            Column::number::<Celsius>("Freezes"),
        ])
        .rows(rows)
        .note("Lacks: Ah each shift. Crank: volts at the starter over what it needs. Freezes: the acid, at the lowest charge.")
}
