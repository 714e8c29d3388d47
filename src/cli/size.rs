//! `ampledger size`.

use super::args::mend::SizeArgs;
use super::args::{Common, Format};
use super::progress::Progress;
use super::{DOES_NOT, KEEPS_UP, input, output};
use ampledger::quantity::bounds;
use ampledger::size::{self, Share};
use ampledger::view;
use anyhow::Context;

/// Solves each number of the build alone; the exit code is that of the build as it is.
///
/// # Errors
/// The build has no answer.
pub fn run(args: &SizeArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let opened = input::kitted(&args.of, &catalogs)?;
    let asked = opened.asked(&catalogs);
    let share = share(args)?;
    let progress = Progress::new(1, "sizes");
    let answer = size::size(&asked, share, &mut |done, all| {
        progress.reached(done, all);
    })
    .with_context(|| opened.source.name.clone())?;
    drop(progress);
    let page = common.format == Format::Html;
    let report = || output::addressed(view::size(&answer, page), &args.hand_over);
    output::write(common, report, &answer)?;
    Ok(if answer.keeps_up { KEEPS_UP } else { DOES_NOT })
}

/// The share of builds that is to keep up, where one is asked.
fn share(args: &SizeArgs) -> anyhow::Result<Option<Share>> {
    let Some(text) = &args.odds else {
        return Ok(None);
    };
    let of_builds = input::value("--odds", text, &bounds::OF_BUILDS)?;
    Ok(Some(Share {
        of_builds,
        runs: args.runs,
        seed: args.seed,
    }))
}
