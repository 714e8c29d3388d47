//! `ampledger completions`.

use super::args::support::CompletionsArgs;
use super::args::{Arguments, Common};
use super::{KEEPS_UP, output};
use clap::CommandFactory;

/// Writes the completions of a shell.
///
/// # Errors
/// The file exists, or cannot be written.
pub fn run(args: &CompletionsArgs, common: &Common) -> anyhow::Result<u8> {
    let mut bytes = Vec::new();
    let mut command = Arguments::command();
    clap_complete::generate(args.shell, &mut command, "ampledger", &mut bytes);
    output::put(common, &String::from_utf8_lossy(&bytes))?;
    Ok(KEEPS_UP)
}
