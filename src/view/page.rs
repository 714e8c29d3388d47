//! A page to hand over, for one who has not seen the program: the question and its answer, what
//! mends it, pictures, and only then the figures that they rest on.

use super::check::{changes, remarks, reserve, setting, spare, verdict};
use super::{accessories, assumed, charts, compare, states};
use crate::chart::Chart;
use crate::check::answer::{Check, TraceRow, Verdict};
use crate::report::{Block, Cell, Report};

/// The page of one check.
pub(super) fn of_one(answer: &Check, trace: &[TraceRow]) -> Report {
    let report = needed(opening(answer), answer);
    let report = drawn(report, answer, trace, Vec::new());
    let report = figures(report.table(states::table(answer)), answer);
    closing(report, answer, answer.cautions.clone())
}

/// The page of a change: before and after.
pub(super) fn of_two(before: &Check, after: &Check, trace: &[TraceRow]) -> Report {
    let report = needed(opening_two(before, after), after);
    let report = drawn(report, after, trace, Vec::new());
    let report = figures(report.table(compare::by_state(before, after)), after);
    closing(report, after, after.cautions.clone())
}

/// Title, question, answer, and the figures that matter most.
pub(super) fn opening(answer: &Check) -> Report {
    let mut report = titled(answer).block(Block::Verdicts(vec![verdict(answer)]));
    if let Some(text) = &answer.beyond_charging {
        report = report.paragraph(text);
    }
    report.facts(facts(answer))
}

/// The same before and after a change, side by side, with the difference.
pub(super) fn opening_two(before: &Check, after: &Check) -> Report {
    titled(after)
        .block(compare::verdicts(before, after))
        .table(compare::difference(before, after))
}

/// The build's name over the question that the page answers.
fn titled(answer: &Check) -> Report {
    let question = if answer.reserve_soc.is_some() {
        "Does its charging system keep the battery charged, shift after shift?"
    } else {
        "Do its windings keep all that hangs on them within its volts?"
    };
    Report::new(&answer.build).subtitle(format!("{question} {}.", setting(answer)))
}

/// What would make it keep up, where it does not.
pub(super) fn needed(report: Report, answer: &Check) -> Report {
    if answer.verdict == Verdict::KeepsUp {
        report
    } else {
        changes(report, answer, false)
    }
}

/// The charts of a check, and more after them.
pub(super) fn drawn(
    report: Report,
    answer: &Check,
    trace: &[TraceRow],
    more: Vec<Chart>,
) -> Report {
    let mut all = charts::of_check(answer, trace);
    if !answer.accessories.is_empty() {
        all.push(charts::by_accessory(&answer.accessories));
    }
    all.into_iter().chain(more).fold(report, Report::chart)
}

/// By circuit and by accessory.
pub(super) fn figures(report: Report, answer: &Check) -> Report {
    let mut report = report;
    if !answer.circuits.is_empty() {
        report = report.table(states::circuits(answer));
    }
    if !answer.accessories.is_empty() {
        report = report.table(accessories::table(answer, false));
    }
    report
}

/// What is to spare, what was assumed, what else the figures show, and cautions.
pub(super) fn closing(report: Report, answer: &Check, cautions: Vec<String>) -> Report {
    let mut report = spare(report, answer);
    if answer.verdict == Verdict::KeepsUp {
        report = changes(report, answer, false);
    }
    let report = remarks(report, answer);
    assumed::short(report, &answer.assumed).cautions(cautions)
}

/// The figures that matter most.
fn facts(answer: &Check) -> Vec<(&'static str, Cell)> {
    let mut facts = Vec::new();
    if let Some(lacks) = answer
        .lacks_ah
        .filter(|_| answer.verdict != Verdict::KeepsUp)
    {
        facts.push(("Lacks each shift", Cell::measured(lacks).bad()));
    }
    if let Some(settles) = answer.settles_soc {
        facts.push(("Charge settles at", Cell::percent(settles)));
    }
    if let Some(lowest) = answer.lowest_soc {
        let low = answer.reserve_soc.is_some_and(|reserve| lowest < reserve);
        let cell = Cell::percent(lowest);
        let label = match answer.settles_soc {
            Some(_) => "Lowest charge then",
            None => "Lowest, first shift",
        };
        facts.push((label, if low { cell.bad() } else { cell }));
    }
    match (answer.reserve_soc, reserve(answer)) {
        (_, Some(reserve)) => facts.push(("Reserve to keep", Cell::percent(reserve))),
        (Some(_), None) => facts.push(("Reserve to keep", Cell::text("more than full").bad())),
        (None, None) => {}
    }
    if let Some(balance) = answer.balance_ah {
        facts.push(("Balance, first shift", Cell::measured_signed(balance)));
    }
    facts
}
