//! Tables by state of the machine.

use crate::check::answer::{Check, StateRow};
use crate::quantity::{AmpHours, Amps, Minutes, Rpm, Volts, format};
use crate::report::{Cell, Column, Table, Tone};

/// By state: speed, time, amps, volts, charge; the shift's sums. Without a battery its columns are
/// left out.
#[must_use]
pub fn table(answer: &Check) -> Table {
    let battery = answer.reserve_soc.is_some() || answer.settles_soc.is_some();
    let amps = decimals(answer);
    let mut table = Table::new("By state").columns([
        Column::name("State"),
        Column::number::<Rpm>("Speed"),
        Column::duration("Time"),
        Column::number::<Amps>("Can give"),
        Column::number::<Amps>("Draw"),
    ]);
    if battery {
        table = table.columns([
            Column::number::<Amps>("Battery"),
            Column::number::<Amps>("At worst"),
        ]);
    }
    table = table.column(Column::number::<Volts>("Bus"));
    if battery {
        table = table.column(Column::number::<AmpHours>("Charge"));
    }
    let charge = format::decimals(answer.states.iter().map(|s| s.ah)).max(1);
    table = table.rows(
        answer
            .states
            .iter()
            .map(|state| row(state, battery, amps, charge)),
    );
    if battery && answer.states.len() > 1 {
        let minutes = Minutes(answer.states.iter().map(|s| s.minutes.0).sum());
        let sum: AmpHours = answer.states.iter().map(|s| s.ah).sum();
        let mut cells = vec![Cell::name("Shift"), Cell::empty(), Cell::duration(minutes)];
        cells.resize(8, Cell::empty());
        cells.push(below_zero(Cell::signed(sum, charge), sum.0));
        table = table.total(cells);
    }
    if battery { table.note(note()) } else { table }
}

/// What the columns mean.
fn note() -> &'static str {
    "Means over the first shift. Battery: into it, or out of it where below zero. At worst: with all \
     that may be on at once."
}

fn row(state: &StateRow, battery: bool, amps: usize, charge: usize) -> Vec<Cell> {
    let rpm = if state.rpm.0 > 0.0 {
        Cell::fixed(state.rpm, 0)
    } else {
        Cell::text("off").dim()
    };
    let mut cells = vec![
        Cell::name(&state.state),
        rpm,
        Cell::duration(state.minutes),
        Cell::fixed(state.available_a, amps),
        Cell::fixed(state.loads_a, amps),
    ];
    if battery {
        cells.push(below_zero(
            Cell::signed(state.battery_a, amps),
            state.battery_a.0,
        ));
        cells.push(below_zero(
            Cell::signed(state.worst_battery_a, amps),
            state.worst_battery_a.0,
        ));
    }
    cells.push(Cell::fixed(state.bus_v, 1));
    if battery {
        cells.push(below_zero(Cell::signed(state.ah, charge), state.ah.0));
    }
    cells
}

/// Marks what comes out of the battery; its minus sign says so too.
pub(super) fn below_zero(cell: Cell, number: f64) -> Cell {
    let shows = cell.text.starts_with(format::MINUS);
    if number < 0.0 && shows {
        cell.tone(Tone::Bad)
    } else {
        cell
    }
}

/// Decimals of amps: as the running states need, which cranking would hide.
fn decimals(answer: &Check) -> usize {
    let running = answer
        .states
        .iter()
        .filter(|s| s.rpm.0 > 0.0 || s.state == "stopped");
    format::decimals(running.map(|s| s.available_a.max(s.loads_a))).clamp(0, 1)
}

/// Volts of circuits without the battery, by state.
#[must_use]
pub fn circuits(answer: &Check) -> Table {
    let mut states: Vec<&String> = Vec::new();
    for (state, _) in answer.circuits.iter().flat_map(|c| &c.volts.0) {
        if !states.contains(&state) {
            states.push(state);
        }
    }
    let rows = answer.circuits.iter().map(|circuit| {
        let kind = if circuit.alternating {
            "alternating, rms"
        } else {
            "rectified, mean"
        };
        let volts = states
            .iter()
            .map(|state| Cell::maybe(circuit.volts.get(state), |v| Cell::fixed(v, 1)));
        [Cell::name(&circuit.name), Cell::text(kind)]
            .into_iter()
            .chain(volts)
            .collect::<Vec<_>>()
    });
    Table::new("Circuits without the battery")
        .columns([Column::name("Circuit"), Column::text("Volts")])
        .columns(
            states
                .iter()
                .map(|state| Column::number::<Volts>(state.as_str())),
        )
        .rows(rows)
}
