//! What mends a build: combinations of changes, from the catalogs and within its limits.

mod asked;
mod entry;
pub(crate) mod swap;

pub use asked::Asked;
