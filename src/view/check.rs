//! One build's answer as a report.

use super::{accessories, assumed, page, states};
use crate::check::answer::{Change, Check, Finding, TraceRow, Verdict, Weight};
use crate::quantity::{Fraction, format};
use crate::report::{self, Cell, Item, Report, Tone};

/// What a report of a check takes beside the answer.
#[derive(Clone, Copy, Debug, Default)]
pub struct Options<'a> {
    /// As a page to hand over: the figures that matter most set out, what mends it before all else,
    /// and charts. A terminal's report has them in its sentence and tables.
    pub page: bool,
    /// History of the charge, for the charts.
    pub trace: &'a [TraceRow],
}

/// The report of a check: the answer, by state, by accessory, changes, assumed, findings, cautions.
#[must_use]
pub fn check(answer: &Check, options: &Options) -> Report {
    if options.page {
        return page::of_one(answer, options.trace);
    }
    let mut report = Report::new(&answer.build)
        .subtitle(format!("Electrical load budget: {}", setting(answer)))
        .block(report::Block::Verdicts(vec![verdict(answer)]));
    if let Some(text) = &answer.beyond_charging {
        report = report.paragraph(text);
    }
    report = report.table(states::table(answer));
    if !answer.circuits.is_empty() {
        report = report.table(states::circuits(answer));
    }
    if !answer.accessories.is_empty() {
        report = report.table(accessories::table(answer, true));
    }
    closing(report, answer)
}

/// Volts, air and shift, in one line.
pub(super) fn setting(answer: &Check) -> String {
    let shift: f64 = answer.states.iter().map(|s| s.minutes.0).sum();
    let shift = crate::quantity::Hours::from_minutes(shift);
    format!(
        "{} system, air at {}, shift of {}",
        format::text(answer.system_v),
        format::temperature(answer.air_c),
        format::duration(shift)
    )
}

/// The verdict's words and tone; where nothing was judged, plainly that.
#[must_use]
pub fn words(answer: &Check) -> (Tone, String) {
    match answer.verdict {
        _ if !answer.judged => (Tone::Plain, "Not judged".to_owned()),
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

/// What the spare amps mean.
const SPARE: &str = "What more could be drawn at that speed alone, shift after shift; no more than its sources can give there.";

/// What is to spare, changes, assumed values, findings, notes and cautions.
pub(super) fn closing(report: Report, answer: &Check) -> Report {
    let report = changes(spare(report, answer), answer, true);
    let report = assumed::table(report, &answer.assumed);
    remarks(report, answer).cautions(answer.cautions.iter().cloned())
}

/// What may still be drawn at each speed; nothing where it does not keep up.
pub(super) fn spare(report: Report, answer: &Check) -> Report {
    let Some(spare) = answer.spare_a.as_ref().filter(|s| !s.0.is_empty()) else {
        return report;
    };
    let amps = spare.0.iter();
    let facts = amps.map(|(state, amps)| (format!("at {state}"), Cell::measured(*amps)));
    report.heading("To spare").facts(facts).paragraph(SPARE)
}

/// The nearest changes, with their settings for whoever sits at the program.
pub(super) fn changes(report: Report, answer: &Check, settings: bool) -> Report {
    let heading = match answer.verdict {
        Verdict::KeepsUp => "What could still be added",
        Verdict::Carries | Verdict::FallsShort => "What would make it keep up",
    };
    let item = |change: &Change| {
        let item = Item::new(&change.text);
        match change.set.as_ref().filter(|_| settings) {
            Some(set) => item.code(format!("--set '{set}'")),
            None => item,
        }
    };
    report.list(heading, answer.changes.iter().map(item))
}

/// Findings, the gravest first, and notes.
pub(super) fn remarks(report: Report, answer: &Check) -> Report {
    let mut findings: Vec<&Finding> = answer.findings.iter().collect();
    findings.sort_by_key(|finding| std::cmp::Reverse(finding.weight));
    report
        .list("Findings", findings.into_iter().map(finding))
        .list("Notes", answer.notes.iter().map(Item::new))
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
