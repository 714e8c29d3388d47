//! One build's answer as a report.

use super::{accessories, charts, states};
use crate::check::answer::{Check, Finding, TraceRow, Verdict, Weight};
use crate::quantity::{Fraction, format};
use crate::report::{self, Cell, Column, Item, Report, Table, Tone};

/// What a report of a check takes beside the answer.
#[derive(Clone, Copy, Debug, Default)]
pub struct Options<'a> {
    /// As a page to hand over: the figures that matter most set out, and charts. A terminal's
    /// report has them in its sentence and tables.
    pub page: bool,
    /// History of the charge, for the charts.
    pub trace: &'a [TraceRow],
    /// For whom, as the user gives it.
    pub made_for: Option<&'a str>,
    /// Date, as the user gives it.
    pub date: Option<&'a str>,
}

/// The report of a check: the answer, by state, by accessory, changes, assumed, findings, cautions.
#[must_use]
pub fn check(answer: &Check, options: &Options) -> Report {
    let mut report = Report::new(&answer.build)
        .subtitle(subtitle(answer))
        .made_for(
            options.made_for.map(str::to_owned),
            options.date.map(str::to_owned),
        )
        .block(report::Block::Verdicts(vec![verdict(answer)]));
    if let Some(text) = &answer.beyond_charging {
        report = report.paragraph(text);
    }
    if options.page {
        report = report.facts(facts(answer));
        for chart in charts::of_check(answer, options.trace) {
            report = report.chart(chart);
        }
    }
    report = report.table(states::table(answer));
    if !answer.circuits.is_empty() {
        report = report.table(states::circuits(answer));
    }
    if !answer.accessories.is_empty() {
        if options.page {
            report = report.chart(charts::by_accessory(&answer.accessories));
        }
        report = report.table(accessories::table(answer, !options.page));
    }
    closing(report, answer)
}

/// Air and volts, in one line.
fn subtitle(answer: &Check) -> String {
    let shift: f64 = answer.states.iter().map(|s| s.minutes.0).sum();
    let shift = crate::quantity::Hours::from_minutes(shift);
    format!(
        "Electrical load budget: {} system, air at {}, shift of {}",
        format::text(answer.system_v),
        format::temperature(answer.air_c),
        format::duration(shift)
    )
}

/// The verdict's words and tone.
#[must_use]
pub fn words(answer: &Check) -> (Tone, String) {
    match answer.verdict {
        Verdict::KeepsUp => (Tone::Good, "Keeps up".to_owned()),
        Verdict::FallsShort => (Tone::Bad, "Falls short".to_owned()),
        Verdict::Carries => {
            let shifts = answer
                .shifts_carried
                .map(|n| format::count(n, "shift", "shifts"));
            (
                Tone::Warn,
                format!(
                    "Carries {}",
                    shifts.unwrap_or_else(|| "some shifts".to_owned())
                ),
            )
        }
    }
}

/// The verdict with its sentence. Where the sentence begins with the verdict's own words, they
/// stand in front once.
#[must_use]
pub fn verdict(answer: &Check) -> report::Verdict {
    let (tone, lead) = words(answer);
    let begins = answer
        .sentence
        .get(..lead.len())
        .is_some_and(|start| start.eq_ignore_ascii_case(&lead));
    let sentence = if begins {
        &answer.sentence[lead.len()..]
    } else {
        &answer.sentence
    };
    report::Verdict::new(
        tone,
        lead,
        sentence.trim_start_matches([':', ',', ';', '.', ' ']),
    )
}

/// The reserve, where a battery can hold it: one that does not crank even when full has a reserve
/// above the whole.
#[must_use]
pub fn reserve(answer: &Check) -> Option<Fraction> {
    answer
        .reserve_soc
        .filter(|reserve| *reserve <= Fraction::ONE)
}

/// The figures that matter most.
fn facts(answer: &Check) -> Vec<(&'static str, Cell)> {
    let mut facts = Vec::new();
    let short = answer.verdict != Verdict::KeepsUp;
    if let Some(lacks) = answer.lacks_ah.filter(|_| short) {
        facts.push(("Lacks each shift", Cell::measured(lacks).bad()));
    }
    let spare = answer.spare_a.as_ref().filter(|_| !short);
    if let Some((_, least)) = spare.and_then(|s| s.0.iter().min_by(|a, b| a.1.0.total_cmp(&b.1.0)))
    {
        facts.push(("Spare at every speed", Cell::measured(*least)));
    }
    if let Some(settles) = answer.settles_soc {
        facts.push(("Charge settles at", Cell::percent(settles)));
    }
    if let Some(lowest) = answer.lowest_soc {
        let low = answer.reserve_soc.is_some_and(|reserve| lowest < reserve);
        let cell = Cell::percent(lowest);
        facts.push(("Lowest charge", if low { cell.bad() } else { cell }));
    }
    match (answer.reserve_soc, reserve(answer)) {
        (_, Some(reserve)) => facts.push(("Reserve", Cell::percent(reserve))),
        (Some(_), None) => facts.push(("Reserve", Cell::text("more than full").bad())),
        (None, None) => {}
    }
    if let Some(balance) = answer.balance_ah {
        facts.push(("Balance, first shift", Cell::measured_signed(balance)));
    }
    facts
}

/// What the spare amps mean.
const SPARE: &str = "What more could be drawn at that speed alone, shift after shift; no more than its sources can give there.";

/// Changes, assumed values, findings, notes and cautions.
pub(super) fn closing(report: Report, answer: &Check) -> Report {
    let mut report = report;
    if let Some(spare) = answer.spare_a.as_ref().filter(|s| !s.0.is_empty()) {
        report = report
            .heading("To spare")
            .facts(
                spare
                    .0
                    .iter()
                    .map(|(state, amps)| (format!("at {state}"), Cell::measured(*amps))),
            )
            .paragraph(SPARE);
    }
    let heading = match answer.verdict {
        Verdict::KeepsUp => "What could still be added",
        Verdict::Carries | Verdict::FallsShort => "What would make it keep up",
    };
    report = report.list(
        heading,
        answer.changes.iter().map(|change| {
            let item = Item::new(&change.text);
            match &change.set {
                Some(set) => item.code(format!("--set '{set}'")),
                None => item,
            }
        }),
    );
    if !answer.assumed.is_empty() {
        let rows = answer.assumed.iter().map(|assumed| {
            [
                Cell::name(&assumed.what),
                Cell::text(&assumed.value),
                Cell::text(&assumed.origin).dim(),
            ]
        });
        report = report.table(
            Table::new("Assumed")
                .columns([
                    Column::name("What"),
                    Column::text("Value"),
                    Column::text("Ground"),
                ])
                .rows(rows),
        );
    }
    let mut findings: Vec<&Finding> = answer.findings.iter().collect();
    findings.sort_by_key(|finding| std::cmp::Reverse(finding.weight));
    report
        .list("Findings", findings.into_iter().map(finding))
        .list("Notes", answer.notes.iter().map(Item::new))
        .cautions(answer.cautions.iter().cloned())
}

/// A finding: its weight and name in words, its text, what its limit rests on.
fn finding(finding: &Finding) -> Item {
    let (tone, weight) = match finding.weight {
        Weight::Note => (Tone::Plain, "Note"),
        Weight::Warning => (Tone::Warn, "Warning"),
        Weight::Fault => (Tone::Bad, "Fault"),
    };
    let item = Item::new(&finding.text).lead(tone, format!("{weight}, {}", finding.what));
    if finding.source.is_empty() {
        item
    } else {
        item.source(&finding.source)
    }
}
