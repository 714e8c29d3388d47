//! `ampledger identify`.

use super::args::{Common, IdentifyArgs};
use super::{KEEPS_UP, input, output};
use ampledger::description::read_charging;
use ampledger::identify::{ReadError, Readings, identify, read_csv, readings_of};
use ampledger::view;
use anyhow::Context;

/// Finds a winding's constants from a bench table.
///
/// # Errors
/// The table cannot be read, or does not fit a winding.
pub fn run(args: &IdentifyArgs, common: &Common) -> anyhow::Result<u8> {
    let readings = readings(&args.file)?;
    let answer = identify(&readings).with_context(|| args.file.clone())?;
    output::write(common, || view::identify(&answer), &answer)?;
    Ok(KEEPS_UP)
}

fn readings(file: &str) -> anyhow::Result<Readings> {
    let (name, text) = input::text(file)?;
    if file.to_ascii_lowercase().ends_with(".csv") {
        return match read_csv(&name, &text) {
            // it names the file itself
            Err(ReadError::Keys(refusal)) => Err(refusal.into()),
            read => read.with_context(|| name.clone()),
        };
    }
    let charging = read_charging(&name, &text)?;
    readings_of(&charging).with_context(|| name.clone())
}
