//! The arguments, as clap reads them. Nothing below this file knows clap.

mod examples;
pub mod mend;
pub mod support;

use clap::{Args, Parser, Subcommand, ValueEnum};
use mend::{RemedyArgs, SizeArgs};
use std::io::IsTerminal;
use std::path::PathBuf;
use support::{CompletionsArgs, ManArgs, NewArgs, PartsArgs, SchemaArgs};

/// Plans the electrical load budget of engine-driven equipment.
#[derive(Debug, Parser)]
#[command(name = "ampledger", version, about, propagate_version = true, after_help = examples::PROGRAM)]
pub struct Arguments {
    /// What every command takes.
    #[command(flatten)]
    pub common: Common,
    /// The command.
    #[command(subcommand)]
    pub command: Command,
}

/// What every command takes.
#[derive(Args, Debug)]
#[command(next_help_heading = "Output and catalogs")]
pub struct Common {
    /// How the answer is written
    #[arg(long, global = true, value_enum, default_value_t = Format::Table, value_name = "FORMAT")]
    pub format: Format,
    /// Write the answer to a file, whole or not at all
    #[arg(short, long, global = true, value_name = "FILE")]
    pub output: Option<PathBuf>,
    /// Replace an existing output file
    #[arg(long, global = true)]
    pub force: bool,
    /// When to use colour; NO_COLOR is heeded too
    #[arg(long, global = true, value_enum, default_value_t = Colour::Auto, value_name = "WHEN")]
    pub color: Colour,
    /// Columns of a table (default: the terminal's, 80 in a pipe)
    #[arg(long, global = true, value_name = "COLUMNS", value_parser = clap::value_parser!(u16).range(40..=400))]
    pub width: Option<u16>,
    /// Rules and bars in plain ASCII
    #[arg(long, global = true)]
    pub ascii: bool,
    /// A folder of your own catalogs, searched before the built-in ones
    #[arg(long, global = true, value_name = "DIR")]
    pub catalogs: Option<PathBuf>,
}

impl Common {
    /// Whether a stream gets colour.
    pub fn colours(&self, stream: &impl IsTerminal) -> bool {
        match self.color {
            Colour::Always => true,
            Colour::Never => false,
            Colour::Auto => {
                stream.is_terminal() && std::env::var_os("NO_COLOR").is_none_or(|v| v.is_empty())
            }
        }
    }
}

/// Output formats.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Format {
    /// Tables for a terminal
    Table,
    /// JSON, full precision, units named in the keys
    Json,
    /// CSV, units in the headers
    Csv,
    /// Markdown
    Markdown,
    /// One self-contained page
    Html,
}

/// When to use colour.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Colour {
    /// On a terminal
    Auto,
    /// Always
    Always,
    /// Never
    Never,
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Does the charging system keep up? The verdict, with its working
    #[command(after_help = examples::CHECK)]
    Check(CheckArgs),
    /// Winding output against rpm: amps, heat, cut-in and break-even speeds
    #[command(after_help = examples::CURVE)]
    Curve(CurveArgs),
    /// What size would do: least winding, battery, speed; most duty, time, load; each alone
    #[command(after_help = examples::SIZE)]
    Size(SizeArgs),
    /// What mends it: combinations of changes that make it keep up, cheapest first
    #[command(after_help = examples::REMEDY)]
    Remedy(RemedyArgs),
    /// Wire, fuse and relay for each accessory with a `run:`
    #[command(after_help = examples::WIRE)]
    Wire(WireArgs),
    /// All of it as one page to hand over (HTML unless another format is asked for)
    #[command(after_help = examples::SHEET)]
    Sheet(SheetArgs),
    /// Winding constants from bench readings (YAML, or CSV by its ending)
    #[command(after_help = examples::IDENTIFY)]
    Identify(IdentifyArgs),
    /// Which machine of a fleet takes which kit, and what must change on the others?
    #[command(after_help = examples::FLEET)]
    Fleet(FleetArgs),
    /// How often do builds within the tolerances keep up, and which tolerance matters most?
    #[command(after_help = examples::ODDS)]
    Odds(OddsArgs),
    /// What the catalogs hold: a list, a search, or one part in full
    #[command(after_help = examples::PARTS)]
    Parts(PartsArgs),
    /// A commented build file to start from
    #[command(after_help = examples::NEW)]
    New(NewArgs),
    /// JSON Schema of the files, for editors
    #[command(after_help = examples::SCHEMA)]
    Schema(SchemaArgs),
    /// Completions for a shell
    #[command(after_help = examples::COMPLETIONS)]
    Completions(CompletionsArgs),
    /// The manual as a page for `man`
    #[command(after_help = examples::MAN)]
    Man(ManArgs),
}

/// Which build, and what is changed in it.
#[derive(Args, Debug)]
pub struct BuildArgs {
    /// Change a value: PATH=VALUE, paths as error messages print them; may be repeated
    #[arg(long, value_name = "PATH=VALUE")]
    pub set: Vec<String>,
    /// Air temperature, `-5 °C`
    #[arg(long, value_name = "TEMPERATURE", allow_hyphen_values = true)]
    pub air: Option<String>,
    /// Charge at the beginning of the first shift, `80 %`
    #[arg(long, value_name = "CHARGE", allow_hyphen_values = true)]
    pub start: Option<String>,
}

/// Whom an answer goes to.
#[derive(Args, Debug)]
pub struct HandOver {
    /// For whom it is made, written on it
    #[arg(long = "for", value_name = "NAME")]
    pub made_for: Option<String>,
    /// Date to write on it, as you write it
    #[arg(long, value_name = "DATE")]
    pub date: Option<String>,
}

/// `check`.
#[derive(Args, Debug)]
pub struct CheckArgs {
    /// Build files; `-` is standard input, and a pattern such as `*.yaml` names those that it matches
    #[arg(required = true, value_name = "BUILD")]
    pub builds: Vec<String>,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
    /// A kit to add, by its id or file: answers before and after
    #[arg(long, value_name = "KIT")]
    pub with: Option<String>,
    /// Write the course of the first shift to a CSV file
    #[arg(long, value_name = "FILE.csv")]
    pub trace: Option<PathBuf>,
    /// Show the working of one state
    #[arg(long, value_name = "STATE")]
    pub why: Option<String>,
    /// Verdicts over a range of air temperatures (default -20 °C to 40 °C)
    #[arg(long, value_name = "FROM to TO", num_args = 0..=1, require_equals = true, default_missing_value = "-20 °C to 40 °C")]
    pub season: Option<String>,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}

/// `fleet`.
#[derive(Args, Debug)]
pub struct FleetArgs {
    /// Fleet file: YAML, or CSV with the header `machine,build,count,kit`; `-` is standard input
    #[arg(value_name = "FLEET")]
    pub fleet: String,
    /// A kit to try on every machine that has none, by its id or file; `none` is the machine as it is; may be repeated
    #[arg(long, value_name = "KIT")]
    pub kit: Vec<String>,
    /// Verdicts only: look for no remedy
    #[arg(long)]
    pub no_remedy: bool,
    /// Your own prices by part id, before those of the catalogs
    #[arg(long, value_name = "FILE.yaml", conflicts_with = "no_remedy")]
    pub prices: Option<PathBuf>,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}

/// `odds`.
#[derive(Args, Debug)]
pub struct OddsArgs {
    /// The build.
    #[command(flatten)]
    pub of: mend::Kitted,
    /// How many builds are drawn
    #[arg(long, value_name = "COUNT", default_value_t = 4096, value_parser = clap::value_parser!(u64).range(1..=1_000_000))]
    pub runs: u64,
    /// Which sequence of draws: the same seed gives the same answer
    #[arg(long, value_name = "NUMBER", default_value_t = 1)]
    pub seed: u64,
    /// Write the worst draw as a build file; without a kit, which stands in no build file
    #[arg(long, value_name = "FILE.yaml", conflicts_with = "with")]
    pub worst: Option<PathBuf>,
}

/// `curve`.
#[derive(Args, Debug)]
pub struct CurveArgs {
    /// Build file; `-` is standard input
    #[arg(value_name = "BUILD")]
    pub file: String,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
    /// Engine speeds, `1800,2400,3600`
    #[arg(long, value_name = "LIST", value_delimiter = ',')]
    pub rpm: Vec<String>,
    /// Bus volts, `12.6,14.4`
    #[arg(long, value_name = "LIST", value_delimiter = ',')]
    pub volts: Vec<String>,
    /// Write the chart as an SVG picture
    #[arg(long, value_name = "FILE.svg")]
    pub svg: Option<PathBuf>,
}

/// `wire`.
#[derive(Args, Debug)]
pub struct WireArgs {
    /// Build file; `-` is standard input
    #[arg(value_name = "BUILD")]
    pub file: String,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
    /// Sizes in which the wire is bought
    #[arg(long, value_enum, default_value_t = GaugeArg::Metric, value_name = "GAUGE")]
    pub gauge: GaugeArg,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}

/// Wire sizes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum GaugeArg {
    /// Square millimetres
    Metric,
    /// American wire gauge
    Awg,
}

/// `identify`.
#[derive(Args, Debug)]
pub struct IdentifyArgs {
    /// Readings: YAML as a `charging` entry, or CSV; `-` is YAML on standard input
    #[arg(value_name = "READINGS")]
    pub file: String,
}

/// `sheet`.
#[derive(Args, Debug)]
pub struct SheetArgs {
    /// Build file; `-` is standard input
    #[arg(value_name = "BUILD")]
    pub file: String,
    /// Changes to the build.
    #[command(flatten)]
    pub build: BuildArgs,
    /// A kit to add, by its id or file: both verdicts side by side
    #[arg(long, value_name = "KIT")]
    pub with: Option<String>,
    /// Your own prices by part id, before those of the catalogs
    #[arg(long, value_name = "FILE.yaml")]
    pub prices: Option<PathBuf>,
    /// Sizes in which the wire is bought
    #[arg(long, value_enum, default_value_t = GaugeArg::Metric, value_name = "GAUGE")]
    pub gauge: GaugeArg,
    /// Whom the answer goes to.
    #[command(flatten)]
    pub hand_over: HandOver,
}
