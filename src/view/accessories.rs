//! The table by accessory.

use crate::check::answer::{AccessoryRow, Check};
use crate::quantity::{AmpHours, Amps, Fraction, format};
use crate::report::{Cell, Column, Table};

/// By accessory: amps when on in each state in which anything is on, duty, Ah of a shift, share,
/// with bars of the share where no chart shows it.
#[must_use]
pub fn table(answer: &Check, bars: bool) -> Table {
    let states = states(answer);
    let circuits = answer.accessories.iter().any(|a| a.circuit != "battery");
    let mut table = Table::new("By accessory").column(Column::name("Accessory"));
    if circuits {
        table = table.column(Column::text("Circuit"));
    }
    table = table
        .columns(states.iter().map(|state| Column::number::<Amps>(*state)))
        .columns([
            Column::percent("Duty"),
            Column::number::<AmpHours>("Charge"),
            Column::percent("Share"),
        ])
        .columns(bars.then(Column::bar));
    let digits = Digits {
        amps: format::decimals(answer.accessories.iter().flat_map(on).map(|(_, amps)| amps)),
        charge: format::decimals(answer.accessories.iter().map(|a| a.ah)),
    };
    let longest = answer
        .accessories
        .iter()
        .map(|a| a.share.0)
        .fold(0.0, f64::max);
    table = table.rows(
        answer
            .accessories
            .iter()
            .map(|a| row(a, &states, circuits, digits, longest)),
    );
    if answer.accessories.len() > 1 {
        let before = 2 + states.len() + usize::from(circuits);
        let sum: AmpHours = answer.accessories.iter().map(|a| a.ah).sum();
        let mut cells = vec![Cell::name("All")];
        cells.resize(before, Cell::empty());
        cells.push(Cell::fixed(sum, digits.charge));
        table = table.total(cells);
    }
    table.note("Amps when on, all of a kind together; charge over the first shift.")
}

#[derive(Clone, Copy)]
struct Digits {
    amps: usize,
    charge: usize,
}

/// Name with its count.
#[must_use]
pub fn name(accessory: &AccessoryRow) -> String {
    if accessory.count > 1 {
        format!("{} × {}", accessory.count, accessory.name)
    } else {
        accessory.name.clone()
    }
}

/// States in which any accessory is on, in the order of the states.
fn states(answer: &Check) -> Vec<&str> {
    let used = |state: &str| answer.accessories.iter().any(|a| is_on(a, state));
    answer
        .states
        .iter()
        .map(|s| s.state.as_str())
        .filter(|state| used(state))
        .collect()
}

fn is_on(accessory: &AccessoryRow, state: &str) -> bool {
    accessory.duty.get(state).is_some_and(|duty| duty.0 > 0.0)
}

/// Amps in the states in which it is on.
fn on(accessory: &AccessoryRow) -> impl Iterator<Item = (&str, Amps)> {
    let amps = accessory
        .amps
        .0
        .iter()
        .map(|(state, amps)| (state.as_str(), *amps));
    amps.filter(|(state, _)| is_on(accessory, state))
}

fn row(
    a: &AccessoryRow,
    states: &[&str],
    circuits: bool,
    digits: Digits,
    longest: f64,
) -> Vec<Cell> {
    let mut cells = vec![Cell::name(name(a))];
    if circuits {
        cells.push(Cell::text(&a.circuit).dim());
    }
    cells.extend(states.iter().map(|state| {
        Cell::maybe(a.amps.get(state).filter(|_| is_on(a, state)), |amps| {
            Cell::fixed(amps, digits.amps)
        })
    }));
    let length = if longest > 0.0 {
        a.share.0 / longest
    } else {
        0.0
    };
    cells.extend([
        duty(a),
        Cell::fixed(a.ah, digits.charge),
        Cell::percent(a.share),
        Cell::bar(Fraction(length)),
    ]);
    cells
}

/// Duty where it is on: one figure, or from the least to the most.
fn duty(accessory: &AccessoryRow) -> Cell {
    let duties = accessory
        .duty
        .0
        .iter()
        .map(|(_, duty)| *duty)
        .filter(|duty| duty.0 > 0.0);
    let least = duties.clone().fold(None, |least: Option<Fraction>, d| {
        Some(least.map_or(d, |l| l.min(d)))
    });
    let most = duties.fold(Fraction::ZERO, Fraction::max);
    match least {
        None => Cell::empty(),
        Some(least) if least == most => Cell::percent(most),
        Some(least) => {
            let from = format::percent(least);
            Cell::text(format!(
                "{}–{}",
                from.trim_end_matches(" %"),
                format::percent(most)
            ))
        }
    }
}
