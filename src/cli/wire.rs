//! `ampledger wire`.

use super::args::{Common, Format, GaugeArg, WireArgs};
use super::{DOES_NOT, KEEPS_UP, input, output};
use ampledger::view;
use ampledger::wire::{Gauge, Options, wires};

/// Chooses wire, fuse and relay for what has a `run:`; exit code 1 where no standard pair does.
///
/// # Errors
/// The build cannot be read.
pub fn run(args: &WireArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let opened = input::build(&args.file, &args.build, &catalogs)?;
    let answer = wires(
        &opened.build,
        &Options {
            gauge: gauge(args.gauge),
        },
    );
    let laid_out = || match common.format {
        Format::Html => view::wire::page(&answer),
        _ => view::wire(&answer),
    };
    let report = || output::addressed(laid_out(), &args.hand_over);
    output::write(common, report, &answer)?;
    Ok(if answer.unmet.is_empty() {
        KEEPS_UP
    } else {
        DOES_NOT
    })
}

/// The gauge asked for.
pub fn gauge(asked: GaugeArg) -> Gauge {
    match asked {
        GaugeArg::Metric => Gauge::Metric,
        GaugeArg::Awg => Gauge::Awg,
    }
}
