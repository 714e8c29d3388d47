//! Arguments of `size` and `remedy`.

use super::{BuildArgs, HandOver};
use clap::Args;
use std::path::PathBuf;

/// `size`.
#[derive(Args, Debug)]
pub struct SizeArgs {
    /// Build file; `-` is standard input
    #[arg(value_name = "BUILD")]
    pub file: String,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
    /// A kit to add first, by its id or file
    #[arg(long, value_name = "KIT")]
    pub with: Option<String>,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}

/// `remedy`.
#[derive(Args, Debug)]
pub struct RemedyArgs {
    /// Build file; `-` is standard input
    #[arg(value_name = "BUILD")]
    pub file: String,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
    /// A kit to add first, by its id or file
    #[arg(long, value_name = "KIT")]
    pub with: Option<String>,
    /// Your own prices by part id, before those of the catalogs
    #[arg(long, value_name = "FILE.yaml")]
    pub prices: Option<PathBuf>,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}
