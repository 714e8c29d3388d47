//! The sheet: check, remedies, quote, wires, the winding's output and the season as one page to
//! hand over. Its first sheet of paper carries the verdict, what mends it, and the price.

use super::{curve, page, quote, remedy, season, states, wire};
use crate::chart::Chart;
use crate::check::answer::{Check, TraceRow, Verdict};
use crate::check::cautions as of_build;
use crate::check::season::Season;
use crate::curve::Curve;
use crate::remedy::Remedy;
use crate::report::{Block, Report};
use crate::wire::{Wires, cautions as of_wires};

/// What a sheet is made of.
#[derive(Clone, Copy, Debug)]
pub struct Sheet<'a> {
    /// The build as it is.
    pub before: &'a Check,
    /// The build with a kit, where one is added.
    pub after: Option<&'a Check>,
    /// History of the charge of the build as it is to be.
    pub trace: &'a [TraceRow],
    /// Ways to make it keep up; none for a build without a battery.
    pub remedies: Option<&'a Remedy>,
    /// Wires, fuses and relays of what is on the sheet.
    pub wires: &'a Wires,
    /// Output of the windings.
    pub curve: &'a Curve,
    /// The verdict over the year; none for a build without a battery.
    pub season: Option<&'a Season>,
    /// Parts with their prices.
    pub parts: &'a [quote::Line],
    /// Currency of the prices: a label.
    pub currency: &'a str,
}

/// The report of a sheet.
#[must_use]
pub fn sheet(sheet: &Sheet<'_>) -> Report {
    let shown = sheet.after.unwrap_or(sheet.before);
    let report = match sheet.after {
        Some(after) => page::opening_two(sheet.before, after),
        None => page::opening(sheet.before),
    };
    let report = mends(report, sheet, shown);
    let report = bill(report, sheet);
    let report = page::drawn(report, shown, sheet.trace, charts(sheet));
    let by_state = match sheet.after {
        Some(after) => super::compare::by_state(sheet.before, after),
        None => states::table(shown),
    };
    let report = page::figures(report.table(by_state), shown);
    let report = wire::short(report, sheet.wires);
    page::closing(report, shown, cautions(shown, sheet.wires))
}

/// What mends it, or that nothing need be mended.
fn mends(report: Report, sheet: &Sheet<'_>, shown: &Check) -> Report {
    match sheet.remedies {
        Some(remedies) => remedy::short(report, remedies),
        None if shown.verdict == Verdict::KeepsUp => report
            .heading(remedy::HEADING)
            .paragraph(remedy::NONE_NEEDED),
        None => report.heading(remedy::HEADING).paragraph(
            "Remedies are worked out for builds with a battery alone. The findings below name what \
             is outside its volts.",
        ),
    }
}

/// What is quoted with prices, and the wire, fuses and relays for it.
fn bill(report: Report, sheet: &Sheet<'_>) -> Report {
    let bought = wire::bought(&sheet.wires.buy, sheet.wires.gauge);
    if sheet.parts.iter().any(|part| part.each.is_some()) {
        return report.table(quote::with(sheet.parts, &bought, sheet.currency));
    }
    if bought.is_empty() {
        return report;
    }
    report.table(wire::to_buy(&sheet.wires.buy, sheet.wires.gauge))
}

/// Output of the windings, and the season.
fn charts(sheet: &Sheet<'_>) -> Vec<Chart> {
    let output = curve(sheet.curve).blocks.into_iter();
    let output = output.filter_map(|block| match block {
        Block::Chart(chart) => Some(chart),
        _ => None,
    });
    output.chain(sheet.season.map(season::chart)).collect()
}

/// Cautions that need not stand where another does, which says as much.
const SAID_BY: [(&str, &str); 4] = [
    (of_build::CLUTCH_PARTS, of_wires::CLUTCH),
    (of_build::FUSE_WIRES, of_wires::FIT_FUSES),
    (of_wires::MEASURE, of_build::ESTIMATE),
    (of_wires::RULES, of_build::ESTIMATE),
];

/// The cautions of both answers; what one says as well as the other stands once.
fn cautions(shown: &Check, wires: &Wires) -> Vec<String> {
    let all = || shown.cautions.iter().chain(&wires.cautions);
    let stands = |what: &str| all().any(|text| text == what);
    let needless = |text: &str| {
        let mut pairs = SAID_BY.iter();
        pairs.any(|(this, by)| *this == text && stands(by))
    };
    let mut told: Vec<String> = Vec::new();
    for caution in all().filter(|text| !needless(text)) {
        if !told.contains(caution) {
            told.push(caution.clone());
        }
    }
    told
}
