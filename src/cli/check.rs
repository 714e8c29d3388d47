//! `ampledger check`.

use super::args::{CheckArgs, Common, Format};
use super::input::{self, Opened};
use super::{DOES_NOT, KEEPS_UP, output};
use ampledger::check::answer::{Check, TraceRow, Verdict};
use ampledger::check::{Checked, Wanted, check, season};
use ampledger::quantity::bounds;
use ampledger::report::Report;
use ampledger::view;
use anyhow::{Context, bail};
use serde::Serialize;

/// A kit's before and after, as JSON.
#[derive(Serialize)]
struct Compared<'a> {
    before: &'a Check,
    after: &'a Check,
}

/// Checks the builds named; the worst verdict is the exit code.
///
/// # Errors
/// A build has no answer.
pub fn run(args: &CheckArgs, common: &Common) -> anyhow::Result<u8> {
    let files = input::files(&args.builds)?;
    let [file] = files.as_slice() else {
        return several(&files, args, common);
    };
    let catalogs = input::catalogs(common)?;
    let opened = input::build(file, &args.build, &catalogs)?;
    if let Some(state) = &args.why {
        return super::why::run(&opened, state, common);
    }
    if let Some(range) = &args.season {
        return over_season(&opened, range, args, common);
    }
    let wanted = Wanted {
        trace: args.trace.is_some() || common.format == Format::Html,
        shifts: days(common),
    };
    let before = answer(&opened, wanted)?;
    let addressed = |report| output::addressed(report, &args.hand_over);
    let (last, verdict) = match &args.with {
        None => {
            let verdict = before.check.verdict;
            let report = || {
                addressed(view::check(
                    &before.check,
                    &options(common, &before.course()),
                ))
            };
            output::write(common, report, &before.check)?;
            (before, verdict)
        }
        Some(kit) => {
            let after = answer(
                &input::with_kit(&opened, kit, &args.build, &catalogs)?,
                wanted,
            )?;
            let both = Compared {
                before: &before.check,
                after: &after.check,
            };
            let report = || {
                let course = after.course();
                addressed(view::compare(
                    &before.check,
                    &after.check,
                    &options(common, &course),
                ))
            };
            output::write(common, report, &both)?;
            let verdict = after.check.verdict;
            (after, verdict)
        }
    };
    if let Some(path) = &args.trace {
        write_trace(path, &last, common.force)?;
    }
    Ok(code(verdict))
}

/// What the report of a check takes beside the answer.
fn options<'a>(common: &Common, trace: &'a [TraceRow]) -> view::Options<'a> {
    view::Options {
        page: common.format == Format::Html,
        trace,
    }
}

/// Shifts whose charge a page draws.
pub const PAGE_SHIFTS: u32 = 7;

fn days(common: &Common) -> u32 {
    if common.format == Format::Html {
        PAGE_SHIFTS
    } else {
        1
    }
}

/// The exit code of a verdict.
pub fn code(verdict: Verdict) -> u8 {
    if verdict == Verdict::KeepsUp {
        KEEPS_UP
    } else {
        DOES_NOT
    }
}

pub fn answer(opened: &Opened, wanted: Wanted) -> anyhow::Result<Checked> {
    check(&opened.build, wanted).with_context(|| opened.source.name.clone())
}

/// The verdicts over a range of air temperatures.
fn over_season(
    opened: &Opened,
    range: &str,
    args: &CheckArgs,
    common: &Common,
) -> anyhow::Result<u8> {
    let ends: Vec<&str> = range.split(" to ").collect();
    let [from, to] = ends.as_slice() else {
        bail!("--season `{range}`: write it like `-20 °C to 40 °C`");
    };
    let (from, to) = (
        input::value("--season", from, &bounds::AIR)?,
        input::value("--season", to, &bounds::AIR)?,
    );
    if from > to {
        bail!("--season `{range}`: the colder temperature comes first");
    }
    let answer = season::season(
        &opened.build,
        season::Range {
            from,
            to,
            ..season::Range::default()
        },
    )
    .with_context(|| opened.source.name.clone())?;
    let report = || output::addressed(view::season(&answer), &args.hand_over);
    output::write(common, report, &answer)?;
    Ok(answer
        .rows
        .iter()
        .map(|row| code(row.verdict))
        .max()
        .unwrap_or(KEEPS_UP))
}

/// Several builds: each answer after the other; JSON as a list.
fn several(files: &[String], args: &CheckArgs, common: &Common) -> anyhow::Result<u8> {
    if args.trace.is_some() || args.why.is_some() || args.with.is_some() {
        bail!("--trace, --why and --with take one build at a time");
    }
    let catalogs = input::catalogs(common)?;
    let wanted = Wanted {
        trace: common.format == Format::Html,
        shifts: days(common),
    };
    let one = |file: &String| answer(&input::build(file, &args.build, &catalogs)?, wanted);
    let (mut all, mut wrong) = (Vec::new(), Vec::new());
    for file in files {
        match one(file) {
            Ok(checked) => all.push(checked),
            Err(problem) => wrong.push(problem),
        }
    }
    // one file's problems hide no other's
    if !wrong.is_empty() {
        return Err(super::Several(wrong).into());
    }
    let checks: Vec<&Check> = all.iter().map(|one| &one.check).collect();
    let report = || {
        let mut whole = output::addressed(Report::new("Load budgets"), &args.hand_over);
        for one in &all {
            whole = whole.append(view::check(&one.check, &options(common, &one.course())));
        }
        whole
    };
    output::write(common, report, &checks)?;
    Ok(checks
        .iter()
        .map(|c| code(c.verdict))
        .max()
        .unwrap_or(KEEPS_UP))
}

fn write_trace(path: &std::path::Path, checked: &Checked, force: bool) -> anyhow::Result<()> {
    let mut writer = csv::Writer::from_writer(Vec::new());
    for row in &checked.trace {
        writer
            .serialize(row)
            .context("the trace cannot be written as CSV")?;
    }
    let bytes = writer
        .into_inner()
        .context("the trace cannot be written as CSV")?;
    output::whole(path, &bytes, force)
}
