//! `ampledger sheet`.

use super::args::{Common, Format, SheetArgs};
use super::check::{PAGE_SHIFTS, answer, code};
use super::input::{self, Opened};
use super::{output, wire};
use ampledger::build::Build;
use ampledger::check::answer::Check;
use ampledger::check::season::{Range, Season, season};
use ampledger::check::{SolveError, Wanted};
use ampledger::curve::{Curve, curve};
use ampledger::remedy::{Prices, Remedy, remedy};
use ampledger::view::{self, quote};
use ampledger::wire::{Options, Wires, wires};
use anyhow::Context;
use serde::Serialize;

/// The answers of a sheet, as JSON.
#[derive(Serialize)]
struct Answers<'a> {
    format: u32,
    check: &'a Check,
    with: Option<&'a Check>,
    remedy: Option<&'a Remedy>,
    wires: &'a Wires,
    curve: &'a Curve,
    season: Option<&'a Season>,
    quote: &'a [quote::Line],
}

/// Gathers check, remedies, quote, wires and charts in one document.
///
/// # Errors
/// The build cannot be read, or has no answer; the price list does not read.
pub fn run(args: &SheetArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let opened = input::build(&args.file, &args.build, &catalogs)?;
    let prices = input::prices(args.prices.as_ref())?;
    let wanted = Wanted {
        trace: true,
        shifts: PAGE_SHIFTS,
    };
    let before = answer(&opened, wanted)?;
    let kitted = args
        .with
        .as_ref()
        .map(|kit| input::with_kit(&opened, kit, &args.build, &catalogs))
        .transpose()?;
    let after = kitted
        .as_ref()
        .map(|kitted| answer(kitted, wanted))
        .transpose()?;
    let to_be = kitted.as_ref().unwrap_or(&opened);
    let shown = after.as_ref().unwrap_or(&before);
    let named = || opened.source.name.clone();
    let found = remedy(&to_be.asked(&catalogs), &prices, &mut |_, _| {});
    let mended = where_there_is_a_battery(found).with_context(named)?;
    let year =
        where_there_is_a_battery(season(&to_be.build, Range::default())).with_context(named)?;
    let gauge = wire::gauge(args.gauge);
    let chosen = wires(&to_be.build, &Options { gauge });
    let output = curve(&to_be.build, &[], &[]);
    let parts = parts(to_be, kitted.as_ref().map(|_| &opened.build), &prices);
    let answers = Answers {
        format: ampledger::check::FORMAT,
        check: &before.check,
        with: after.as_ref().map(|after| &after.check),
        remedy: mended.as_ref(),
        wires: &chosen,
        curve: &output,
        season: year.as_ref(),
        quote: &parts,
    };
    let report = || {
        let sheet = view::sheet::Sheet {
            before: &before.check,
            after: after.as_ref().map(|after| &after.check),
            trace: &shown.course(),
            remedies: mended.as_ref(),
            wires: &chosen,
            curve: &output,
            season: year.as_ref(),
            parts: &parts,
            currency: &prices.currency,
        };
        output::addressed(view::sheet(&sheet), &args.hand_over)
    };
    output::write_as(common, format(common), report, &answers)?;
    Ok(code(shown.check.verdict))
}

/// What is asked of builds with a battery alone: nothing of one without.
fn where_there_is_a_battery<T>(answer: Result<T, SolveError>) -> Result<Option<T>, SolveError> {
    match answer {
        Ok(answer) => Ok(Some(answer)),
        Err(SolveError::NoBattery) => Ok(None),
        Err(problem) => Err(problem),
    }
}

/// A page where no other format is asked for.
fn format(common: &Common) -> Format {
    match common.format {
        Format::Table => Format::Html,
        other => other,
    }
}

/// What is quoted: the accessories with a price that a kit adds, or all with a price without one.
/// A price in the build goes before the user's list, and that before the catalogs.
fn parts(to_be: &Opened, without: Option<&Build>, prices: &Prices) -> Vec<quote::Line> {
    let had =
        |name: &str| without.is_some_and(|build| build.accessories.iter().any(|a| a.name == name));
    let stated = |path: &str| {
        let mut texts = to_be.description.accessories.iter();
        texts.any(|text| text.path == path && text.price.is_some())
    };
    let added = to_be.build.accessories.iter().filter(|a| !had(&a.name));
    let lines = added.map(|a| quote::Line {
        name: a.name.clone(),
        count: a.count,
        each: match &a.part {
            Some(id) if !stated(&a.path) => prices.of(id, a.price),
            _ => a.price,
        },
    });
    lines.filter(|line| line.each.is_some()).collect()
}
