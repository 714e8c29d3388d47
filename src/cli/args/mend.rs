//! Arguments of `size` and `remedy`.

use super::{BuildArgs, HandOver};
use clap::Args;
use std::path::PathBuf;

/// A build, with a kit where one is named.
#[derive(Args, Debug)]
pub struct Kitted {
    /// Build file; `-` is standard input
    #[arg(value_name = "BUILD")]
    pub file: String,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
    /// A kit to add first, by its id or file
    #[arg(long, value_name = "KIT")]
    pub with: Option<String>,
}

/// `size`.
#[derive(Args, Debug)]
pub struct SizeArgs {
    /// The build.
    #[command(flatten)]
    pub of: Kitted,
    /// Ask for what keeps up in this share of the builds within the tolerances, `95 %`
    #[arg(long, value_name = "SHARE")]
    pub odds: Option<String>,
    /// How many builds are drawn for --odds
    #[arg(long, value_name = "COUNT", requires = "odds", default_value_t = 256, value_parser = clap::value_parser!(u64).range(20..=100_000))]
    pub runs: u64,
    /// Which sequence of draws --odds takes: the same seed gives the same answer
    #[arg(long, value_name = "NUMBER", requires = "odds", default_value_t = 1)]
    pub seed: u64,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}

/// `remedy`.
#[derive(Args, Debug)]
pub struct RemedyArgs {
    /// The build.
    #[command(flatten)]
    pub of: Kitted,
    /// Your own prices by part id, before those of the catalogs
    #[arg(long, value_name = "FILE.yaml")]
    pub prices: Option<PathBuf>,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}
