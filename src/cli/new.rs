//! `ampledger new`.

use super::args::Common;
use super::args::support::NewArgs;
use super::{KEEPS_UP, output};

/// Writes a starter build.
///
/// # Errors
/// The file exists, or cannot be written.
pub fn run(args: &NewArgs, common: &Common) -> anyhow::Result<u8> {
    output::put(common, args.kind.text())?;
    Ok(KEEPS_UP)
}
