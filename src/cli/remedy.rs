//! `ampledger remedy`.

use super::args::Common;
use super::args::mend::RemedyArgs;
use super::progress::Progress;
use super::{DOES_NOT, KEEPS_UP, input, output};
use ampledger::remedy::remedy;
use ampledger::view;
use anyhow::Context;

/// Looks for combinations of changes with which the build keeps up; the exit code is that of the
/// build as it is.
///
/// # Errors
/// The build has no answer; the price list does not read.
pub fn run(args: &RemedyArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let opened = input::kitted(&args.of, &catalogs)?;
    let prices = input::prices(args.prices.as_ref())?;
    let asked = opened.asked(&catalogs);
    let progress = Progress::new(1, "combinations");
    let answer = remedy(&asked, &prices, &mut |done, all| {
        progress.reached(done, all);
    })
    .with_context(|| opened.source.name.clone())?;
    drop(progress);
    let report = || output::addressed(view::remedy(&answer), &args.hand_over);
    output::write(common, report, &answer)?;
    Ok(if answer.keeps_up { KEEPS_UP } else { DOES_NOT })
}
