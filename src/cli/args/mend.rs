//! Arguments of `size` and `remedy`.

use super::BuildArgs;
use clap::Args;

/// `size`.
#[derive(Args, Debug)]
pub struct SizeArgs {
    /// Build file; `-` is standard input
    #[arg(value_name = "BUILD")]
    pub file: String,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
}
