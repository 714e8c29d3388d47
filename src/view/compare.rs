//! Before and after: two answers side by side.

use super::check::{Options, closing, reserve, verdict};
use super::states::below_zero;
use super::{accessories, page};
use crate::check::answer::{Check, StateRow};
use crate::quantity::{AmpHours, Amps, Fraction, Volts, format};
use crate::report::{Block, Cell, Column, Report, Table};

/// The report of a change: both verdicts, what differs, by state, then what concerns the build
/// after the change.
#[must_use]
pub fn compare(before: &Check, after: &Check, options: &Options) -> Report {
    if options.page {
        return page::of_two(before, after, options.trace);
    }
    let mut report = Report::new(&after.build)
        .subtitle(format!(
            "Before and after, air at {}",
            format::temperature(after.air_c)
        ))
        .block(verdicts(before, after))
        .table(difference(before, after))
        .table(by_state(before, after));
    if !after.accessories.is_empty() {
        report = report.table(accessories::table(after, true));
    }
    closing(report, after)
}

/// Both verdicts.
pub(super) fn verdicts(before: &Check, after: &Check) -> Block {
    Block::Verdicts(vec![
        verdict(before).caption("Before"),
        verdict(after).caption("After"),
    ])
}

/// The figures that matter, before and after.
pub(super) fn difference(before: &Check, after: &Check) -> Table {
    let draws = |c: &Check| Some(c.accessories.iter().map(|a| a.ah).sum::<AmpHours>());
    let charge = |what, was: Option<AmpHours>, is: Option<AmpHours>| {
        line(what, was, is, Cell::measured, Cell::measured_signed)
    };
    let share = |what, was: Option<Fraction>, is: Option<Fraction>| {
        line(what, was, is, Cell::percent, points)
    };
    let rows = [
        charge("Accessories take each shift", draws(before), draws(after)),
        charge(
            "Balance of the first shift",
            before.balance_ah,
            after.balance_ah,
        ),
        charge("Lacks each shift", before.lacks_ah, after.lacks_ah),
        share("Charge settles at", before.settles_soc, after.settles_soc),
        share("Lowest charge", before.lowest_soc, after.lowest_soc),
        share("Reserve", reserve(before), reserve(after)),
    ];
    Table::new("What changes")
        .columns([
            Column::name("Figure"),
            Column::figures("Before"),
            Column::figures("After"),
            Column::figures("Difference"),
        ])
        .rows(rows.into_iter().flatten())
}

/// A difference of shares, in points of a hundred: `+20 points`.
fn points(difference: Fraction) -> Cell {
    let text = format!("{} points", format::signed(difference, 0));
    Cell {
        text,
        ..Cell::percent(difference)
    }
}

/// One figure before and after; none where neither has it.
fn line<Q: Copy + std::ops::Sub<Output = Q>>(
    what: &str,
    before: Option<Q>,
    after: Option<Q>,
    cell: impl Fn(Q) -> Cell,
    difference: impl Fn(Q) -> Cell,
) -> Option<Vec<Cell>> {
    if before.is_none() && after.is_none() {
        return None;
    }
    Some(vec![
        Cell::name(what),
        Cell::maybe(before, &cell),
        Cell::maybe(after, &cell),
        Cell::maybe(before.zip(after), |(b, a)| difference(a - b)),
    ])
}

/// Draw, battery and bus volts by state, before and after.
pub(super) fn by_state(before: &Check, after: &Check) -> Table {
    let mut names: Vec<&str> = before.states.iter().map(|s| s.state.as_str()).collect();
    for state in &after.states {
        if !names.contains(&state.state.as_str()) {
            names.push(&state.state);
        }
    }
    let rows = names.into_iter().map(|name| {
        let find = |c: &'_ Check| c.states.iter().find(|s| s.state == name).cloned();
        let (was, is) = (find(before), find(after));
        let pair = |cell: &dyn Fn(&StateRow) -> Cell| {
            [&was, &is].map(|s| s.as_ref().map_or_else(Cell::empty, cell))
        };
        let battery = |s: &StateRow| below_zero(Cell::signed(s.battery_a, 1), s.battery_a.0);
        [Cell::name(name)]
            .into_iter()
            .chain(pair(&|s| Cell::fixed(s.loads_a, 1)))
            .chain(pair(&battery))
            .chain(pair(&|s| Cell::fixed(s.bus_v, 1)))
            .collect::<Vec<_>>()
    });
    Table::new("By state, before and after")
        .columns([
            Column::name("State"),
            Column::number::<Amps>("Draw before"),
            Column::number::<Amps>("Draw after"),
            Column::number::<Amps>("Battery before"),
            Column::number::<Amps>("Battery after"),
            Column::number::<Volts>("Bus before"),
            Column::number::<Volts>("Bus after"),
        ])
        .rows(rows)
}
