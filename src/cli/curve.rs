//! `ampledger curve`.

use super::args::{Common, CurveArgs};
use super::{KEEPS_UP, input, output};
use ampledger::chart::Chart;
use ampledger::curve;
use ampledger::quantity::bounds::{self, Bounds};
use ampledger::quantity::unit::Unit;
use ampledger::quantity::{Rpm, Volts};
use ampledger::report::{Block, Report, html};
use ampledger::view;
use anyhow::bail;

/// Shows the output of every winding and alternator of a build.
///
/// # Errors
/// The build cannot be read; a list that holds no speeds or volts.
pub fn run(args: &CurveArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let opened = input::build(&args.file, &args.build, &catalogs)?;
    let build = &opened.build;
    let mut rpms = list("--rpm", &args.rpm, Rpm, &bounds::TURNING)?;
    let mut volts = list("--volts", &args.volts, Volts, &bounds::CURVE_VOLTS)?;
    if volts.is_empty() {
        volts = curve::default_volts(build);
    }
    if rpms.is_empty() {
        rpms = curve::default_rpms(build, &volts);
    }
    let answer = curve::curve(build, &rpms, &volts);
    if let Some(path) = &args.svg {
        let report = view::curve(&answer);
        let Some(chart) = first_chart(&report) else {
            bail!("--svg: there is nothing to draw");
        };
        output::whole(path, html::picture(chart).as_bytes(), common.force)?;
    }
    output::write(common, || view::curve(&answer), &answer)?;
    Ok(KEEPS_UP)
}

fn first_chart(report: &Report) -> Option<&Chart> {
    report.blocks.iter().find_map(|block| match block {
        Block::Chart(chart) => Some(chart),
        _ => None,
    })
}

/// Numbers with or without their unit.
fn list<Q: Unit>(
    name: &str,
    texts: &[String],
    bare: impl Fn(f64) -> Q,
    may_be: &Bounds<Q>,
) -> anyhow::Result<Vec<Q>> {
    let one = |text: &String| -> anyhow::Result<Q> {
        match text.trim().parse::<f64>() {
            Ok(number) if number.is_finite() => input::within(name, text, bare(number), may_be),
            _ => input::value(name, text, may_be),
        }
    };
    texts
        .iter()
        .filter(|text| !text.trim().is_empty())
        .map(one)
        .collect()
}
