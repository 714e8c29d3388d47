//! The sheet: check, quote, wires, remedies and the winding's output as one page to hand over.

use super::{Options, compare, curve, quote, wire};
use crate::check::answer::Check;
use crate::curve::Curve;
use crate::report::{Block, Report};
use crate::wire::Wires;

/// What a sheet is made of.
#[derive(Clone, Copy, Debug)]
pub struct Sheet<'a> {
    /// The build as it is.
    pub before: &'a Check,
    /// The build with a kit, where one is added.
    pub after: Option<&'a Check>,
    /// Wires, fuses and relays of what is on the sheet.
    pub wires: &'a Wires,
    /// Output of the windings.
    pub curve: &'a Curve,
    /// Ways to make it keep up, laid out; none where it does.
    pub remedies: Option<&'a Report>,
    /// Parts with their prices.
    pub parts: &'a [quote::Line],
    /// Currency of the prices: a label.
    pub currency: &'a str,
}

/// The report of a sheet.
#[must_use]
pub fn sheet(sheet: &Sheet<'_>, options: &Options<'_>) -> Report {
    let mut report = match sheet.after {
        Some(after) => compare(sheet.before, after, options),
        None => super::check(sheet.before, options),
    };
    let mut cautions = taken_out(&mut report);
    if let Some(remedies) = sheet.remedies {
        report = report.append(remedies.clone());
    }
    if sheet.parts.iter().any(|part| part.each.is_some()) {
        report = report.table(quote::table("Quote", sheet.parts, sheet.currency));
    }
    if !sheet.wires.wires.is_empty() || !sheet.wires.unmet.is_empty() {
        report = report.append(wire::short(sheet.wires));
        cautions.extend(sheet.wires.cautions.iter().cloned());
    }
    for block in curve(sheet.curve).blocks {
        if let Block::Chart(chart) = block {
            report = report.chart(chart);
        }
    }
    let mut told: Vec<String> = Vec::new();
    for caution in cautions {
        if !told.contains(&caution) {
            told.push(caution);
        }
    }
    report.cautions(told)
}

/// The cautions of a report, taken out of it so that they can stand last.
fn taken_out(report: &mut Report) -> Vec<String> {
    let mut cautions = Vec::new();
    report.blocks.retain(|block| match block {
        Block::Cautions(lines) => {
            cautions.extend(lines.iter().cloned());
            false
        }
        _ => true,
    });
    cautions
}
