//! `ampledger odds`.

use super::args::{Common, OddsArgs};
use super::input::{self, Opened};
use super::progress::Progress;
use super::{check, output};
use ampledger::description::{Assignment, read_set};
use ampledger::odds::{Odds, OddsError, Wanted, odds};
use ampledger::problem::Refusal;
use ampledger::quantity::format::{self, precise};
use ampledger::quantity::{Celsius, Fraction, bounds};
use ampledger::view;
use anyhow::{Context, anyhow, bail};
use std::path::Path;

/// The odds of a build within its tolerances; exit code by the build as stated.
///
/// # Errors
/// The build has no answer; a file cannot be written.
pub fn run(args: &OddsArgs, common: &Common) -> anyhow::Result<u8> {
    let catalogs = input::catalogs(common)?;
    let opened = input::kitted(&args.of, &catalogs)?;
    let air = match &args.of.build.air {
        Some(text) => Some(input::value("--air", text, &bounds::AIR)?),
        None => None,
    };
    let start = match &args.of.build.start {
        Some(text) => input::value("--start", text, &bounds::START)?,
        None => Fraction::ONE,
    };
    let wanted = Wanted {
        runs: args.runs,
        seed: args.seed,
        start,
    };
    let progress = Progress::new(args.runs, "Drawing builds");
    let answer = odds(&opened.description, &catalogs, wanted, &|| progress.step(1))
        .map_err(|problem| failed(problem, &opened))?;
    progress.done();
    if let Some(path) = &args.worst {
        write_worst(path, &opened, air, &answer, common.force)?;
    }
    output::write(common, || view::odds(&answer), &answer)?;
    Ok(check::code(answer.verdict))
}

fn failed(problem: OddsError, opened: &Opened) -> anyhow::Error {
    match problem {
        OddsError::Refused(problems) => Refusal::new(opened.source.clone(), problems).into(),
        other => anyhow!(other).context(opened.source.name.clone()),
    }
}

/// The worst draw as a build file: its values put into the text, all else kept as the user wrote it.
fn write_worst(
    path: &Path,
    opened: &Opened,
    air: Option<Celsius>,
    answer: &Odds,
    force: bool,
) -> anyhow::Result<()> {
    let Some(worst) = &answer.worst else {
        bail!("--worst: nothing in this build bears a tolerance, so that there is no worst draw");
    };
    let air = air.map(|air| format!("air={}", precise(air)));
    let set: Vec<Assignment> = air
        .iter()
        .chain(&worst.set)
        .map(|text| Assignment::parse(text).map_err(|problem| anyhow!("{problem}")))
        .collect::<anyhow::Result<_>>()?;
    let source = &opened.source;
    let (_, drawn) = read_set(&source.name, source.text.as_bytes(), &set)
        .context("--worst: the drawn values cannot be put into the file")?;
    let lacks = match worst.lacks_ah {
        Some(lacks) if lacks.0 > 0.0 => format!("lacks {} each shift", format::text(lacks)),
        Some(_) => "keeps up with the least to spare".to_owned(),
        None => "cannot be kept up by charging".to_owned(),
    };
    let text = format!(
        "# Draw {} of {}, seed {}, within the tolerances of {}:\n# the worst, it {lacks}.\n{}",
        worst.draw, answer.runs, answer.seed, source.name, drawn.text
    );
    output::whole(path, text.as_bytes(), force)
}
