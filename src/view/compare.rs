//! Before and after: two answers side by side.

use super::check::{Options, closing, verdict};
use super::states::below_zero;
use super::{accessories, charts};
use crate::check::answer::{Check, StateRow};
use crate::quantity::format::{self, Written};
use crate::quantity::{AmpHours, Amps, Volts};
use crate::report::{Block, Cell, Column, Report, Table};

/// The report of a change: both verdicts, what differs, by state, then what concerns the build
/// after the change.
#[must_use]
pub fn compare(before: &Check, after: &Check, options: &Options) -> Report {
    let mut report = Report::new(&after.build)
        .subtitle(format!(
            "Before and after, air at {}",
            format::temperature(after.air_c)
        ))
        .made_for(
            options.made_for.map(str::to_owned),
            options.date.map(str::to_owned),
        )
        .block(Block::Verdicts(vec![
            verdict(before).caption("Before"),
            verdict(after).caption("After"),
        ]))
        .table(difference(before, after))
        .table(by_state(before, after));
    if options.page {
        for chart in charts::of_check(after, options.trace) {
            report = report.chart(chart);
        }
    }
    if !after.accessories.is_empty() {
        if options.page {
            report = report.chart(charts::by_accessory(&after.accessories));
        }
        report = report.table(accessories::table(after, !options.page));
    }
    closing(report, after)
}

/// The figures that matter, before and after.
fn difference(before: &Check, after: &Check) -> Table {
    let draws = |c: &Check| Some(c.accessories.iter().map(|a| a.ah).sum::<AmpHours>());
    let rows = [
        line("Accessories take each shift", draws(before), draws(after)),
        line(
            "Balance of the first shift",
            before.balance_ah,
            after.balance_ah,
        ),
        line("Lacks each shift", before.lacks_ah, after.lacks_ah),
        line("Charge settles at", before.settles_soc, after.settles_soc),
        line("Lowest charge", before.lowest_soc, after.lowest_soc),
        line("Reserve", before.reserve_soc, after.reserve_soc),
    ];
    Table::new("What changes")
        .columns([
            Column::name(""),
            Column::figures("Before"),
            Column::figures("After"),
            Column::figures("Difference"),
        ])
        .rows(rows.into_iter().flatten())
}

/// One figure before and after; none where neither has it.
fn line<Q: Written + std::ops::Sub<Output = Q>>(
    what: &str,
    before: Option<Q>,
    after: Option<Q>,
) -> Option<Vec<Cell>> {
    if before.is_none() && after.is_none() {
        return None;
    }
    let difference = before.zip(after).map(|(b, a)| a - b);
    Some(vec![
        Cell::name(what),
        Cell::maybe(before, Cell::measured),
        Cell::maybe(after, Cell::measured),
        Cell::maybe(difference, Cell::measured_signed),
    ])
}

/// Draw, battery and bus volts by state, before and after.
fn by_state(before: &Check, after: &Check) -> Table {
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
