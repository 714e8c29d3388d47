//! `ampledger schema`.

use super::args::Common;
use super::args::support::{SchemaArgs, SchemaOf};
use super::{KEEPS_UP, output};
use ampledger::schema;

/// Writes a schema.
///
/// # Errors
/// The file exists, or cannot be written.
pub fn run(args: &SchemaArgs, common: &Common) -> anyhow::Result<u8> {
    let schema = match args.of {
        SchemaOf::Build => schema::build(),
        SchemaOf::Catalog => schema::catalog(),
        SchemaOf::Fleet => schema::fleet(),
    };
    output::put(common, &output::json(&schema)?)?;
    Ok(KEEPS_UP)
}
