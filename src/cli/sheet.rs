//! `ampledger sheet`.

use super::args::{Common, Format, SheetArgs};
use super::check::{PAGE_SHIFTS, answer, code};
use super::{input, output, wire};
use ampledger::build::Build;
use ampledger::check::Wanted;
use ampledger::check::answer::Check;
use ampledger::curve::{Curve, curve};
use ampledger::view::{self, quote};
use ampledger::wire::{Options, Wires, wires};
use serde::Serialize;

/// The answers of a sheet, as JSON.
#[derive(Serialize)]
struct Answers<'a> {
    format: u32,
    check: &'a Check,
    with: Option<&'a Check>,
    wires: &'a Wires,
    curve: &'a Curve,
}

/// Gathers check, quote, wires and charts in one document.
///
/// # Errors
/// The build cannot be read, or has no answer.
pub fn run(args: &SheetArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let opened = input::build(&args.file, &args.build, &catalogs)?;
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
    let build = kitted
        .as_ref()
        .map_or(&opened.build, |kitted| &kitted.build);
    let shown = after.as_ref().unwrap_or(&before);
    let chosen = wires(
        build,
        &Options {
            gauge: wire::gauge(args.gauge),
        },
    );
    let output = curve(build, &[], &[]);
    let answers = Answers {
        format: ampledger::check::FORMAT,
        check: &before.check,
        with: after.as_ref().map(|after| &after.check),
        wires: &chosen,
        curve: &output,
    };
    let parts = parts(build, kitted.as_ref().map(|_| &opened.build));
    let report = || {
        let options = view::Options {
            page: true,
            trace: &shown.trace,
            made_for: args.made_for.as_deref(),
            date: args.date.as_deref(),
        };
        let sheet = view::sheet::Sheet {
            before: &before.check,
            after: after.as_ref().map(|after| &after.check),
            wires: &chosen,
            curve: &output,
            remedies: None,
            parts: &parts,
            currency: &build.currency,
        };
        view::sheet(&sheet, &options)
    };
    output::write_as(common, format(common), report, &answers)?;
    Ok(code(shown.check.verdict))
}

/// A page where no other format is asked for.
fn format(common: &Common) -> Format {
    match common.format {
        Format::Table => Format::Html,
        other => other,
    }
}

/// What is quoted: the accessories with a price that a kit adds, or all with a price without one.
fn parts(build: &Build, without: Option<&Build>) -> Vec<quote::Line> {
    let had =
        |name: &str| without.is_some_and(|build| build.accessories.iter().any(|a| a.name == name));
    build
        .accessories
        .iter()
        .filter(|a| a.price.is_some() && !had(&a.name))
        .map(|a| quote::Line {
            name: a.name.clone(),
            count: a.count,
            each: a.price,
        })
        .collect()
}
