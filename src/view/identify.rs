//! A winding's constants from a bench table: figures, how well they are known, every row.

use crate::identify::Identified;
use crate::quantity::format::Written;
use crate::quantity::{Amps, Rpm, Volts, VoltsPerRpm, format};
use crate::report::{Cell, Column, Item, Report, Table};

/// The report of an identification.
#[must_use]
pub fn identify(answer: &Identified) -> Report {
    Report::new("Winding from bench readings")
        .subtitle(format!(
            "Fits the readings to {} rms",
            format::text(answer.residual_a_rms)
        ))
        .table(constants(answer))
        .table(rows(answer))
        .list(
            "Notes",
            answer.notes.iter().map(|note| Item::new(note.to_string())),
        )
        .heading("To paste into a build")
        .lines(answer.winding.lines().map(str::to_owned))
}

fn constants(answer: &Identified) -> Table {
    let volts = |k: VoltsPerRpm| k * Rpm(1000.0);
    let emf = answer.open_circuit_spread;
    let (r, l) = (answer.resistance_spread, answer.inductance_spread);
    Table::new("Constants, between two leads at 20 °C")
        .columns([
            Column::name("Constant"),
            Column::text("Value"),
            Column::text("95 % sure between"),
        ])
        .rows([
            row(
                "open-circuit volts at 1000 rpm",
                volts(answer.open_circuit_v_per_rpm),
                (volts(emf.low_95), emf.high_95.map(volts)),
            ),
            row("resistance", answer.resistance_ohm, (r.low_95, r.high_95)),
            row("inductance", answer.inductance_h, (l.low_95, l.high_95)),
        ])
}

fn row<Q: Written>(name: &str, value: Q, (low, high): (Q, Option<Q>)) -> [Cell; 3] {
    let low = format::text(low);
    let high = high.map_or("anything".to_owned(), format::text);
    [
        Cell::name(name),
        Cell::text(format::text(value)),
        Cell::text(format!("{low} and {high}")),
    ]
}

fn rows(answer: &Identified) -> Table {
    let rows = answer.rows.iter().map(|row| {
        [
            Cell::fixed(row.rpm, 0),
            Cell::fixed(row.bus_v, 2),
            Cell::fixed(row.measured_a, 2),
            Cell::fixed(row.fitted_a, 2),
            Cell::signed(row.measured_a - row.fitted_a, 2),
            Cell::text(if row.used {
                ""
            } else {
                "held by the regulator, not used"
            })
            .dim(),
        ]
    });
    Table::new("Readings")
        .columns([
            Column::number::<Rpm>("Speed"),
            Column::number::<Volts>("Bus"),
            Column::number::<Amps>("Read"),
            Column::number::<Amps>("Fitted"),
            Column::number::<Amps>("Differs"),
            Column::text("Note"),
        ])
        .rows(rows)
}
