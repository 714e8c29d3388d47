//! Arguments of the commands beside the answers: a build to start from, editors, shells, manual, catalogs.

use ampledger::catalog;
use ampledger::starter_build;
use clap::builder::{PossibleValue, PossibleValuesParser, TypedValueParser};
use clap::{Args, ValueEnum};

/// `new`.
#[derive(Args, Debug)]
pub struct NewArgs {
    /// How the machine is charged
    #[arg(long, value_name = "KIND", default_value = "series-regulated", value_parser = starter_kind())]
    pub kind: starter_build::Kind,
}

/// The kinds of starter builds, each with what it is.
fn starter_kind() -> impl TypedValueParser<Value = starter_build::Kind> {
    let kinds = starter_build::Kind::ALL;
    let values = kinds.map(|kind| PossibleValue::new(kind.name()).help(kind.about()));
    // the words are those of the kinds, so that one is always found
    PossibleValuesParser::new(values).map(move |word| {
        let found = kinds.into_iter().find(|kind| kind.name() == word);
        found.unwrap_or(starter_build::Kind::SeriesRegulated)
    })
}

/// `schema`.
#[derive(Args, Debug)]
pub struct SchemaArgs {
    /// Which file it describes
    #[arg(value_enum, default_value_t = SchemaOf::Build, value_name = "FILE")]
    pub of: SchemaOf,
}

/// The files that have a schema.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum SchemaOf {
    /// A build file
    Build,
    /// A file in a folder of catalogs
    Catalog,
    /// A fleet file
    Fleet,
}

/// `completions`.
#[derive(Args, Debug)]
pub struct CompletionsArgs {
    /// The shell
    #[arg(value_enum, value_name = "SHELL")]
    pub shell: clap_complete::Shell,
}

/// `man`.
#[derive(Args, Debug)]
pub struct ManArgs {
    /// The command whose page it is; without one, that of the program
    #[arg(value_name = "COMMAND")]
    pub of: Option<String>,
}

/// `parts`.
#[derive(Args, Debug)]
pub struct PartsArgs {
    /// An id, to show that part in full; or words, to list the parts that have all of them
    #[arg(value_name = "ID|WORD")]
    pub words: Vec<String>,
    /// Only this kind
    #[arg(long, value_name = "KIND", value_parser = part_kind())]
    pub kind: Option<catalog::Kind>,
}

/// The kinds of parts.
fn part_kind() -> impl TypedValueParser<Value = catalog::Kind> {
    let kinds = catalog::Kind::ALL;
    PossibleValuesParser::new(kinds.map(catalog::Kind::key)).map(move |word| {
        let found = kinds.into_iter().find(|kind| kind.key() == word);
        found.unwrap_or(catalog::Kind::Accessory)
    })
}
