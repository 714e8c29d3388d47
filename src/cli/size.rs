//! `ampledger size`.

use super::args::Common;
use super::args::mend::SizeArgs;
use super::progress::Progress;
use super::{DOES_NOT, KEEPS_UP, input, output};
use ampledger::remedy::Asked;
use ampledger::size::{self, Options};
use ampledger::view;
use anyhow::Context;

/// Solves each number of the build alone; the exit code is that of the build as it is.
///
/// # Errors
/// The build has no answer.
pub fn run(args: &SizeArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let mut opened = input::build(&args.file, &args.build, &catalogs)?;
    let own = opened.description.accessories.len();
    if let Some(kit) = &args.with {
        opened = input::with_kit(&opened, kit, &args.build, &catalogs)?;
    }
    let asked = Asked {
        own,
        ..Asked::new(&opened.description, &opened.build, &catalogs)
    };
    let progress = Progress::new(1, "sizes");
    let answer = size::size(&asked, &Options::default(), &mut |done, all| {
        progress.reached(done, all);
    })
    .with_context(|| opened.source.name.clone())?;
    drop(progress);
    let report = || output::addressed(view::size(&answer), &args.hand_over);
    output::write(common, report, &answer)?;
    Ok(if answer.keeps_up { KEEPS_UP } else { DOES_NOT })
}
