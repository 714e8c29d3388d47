//! A report: what an answer says, laid out once and rendered many ways.
//!
//! A view turns an answer into a [`Report`]; a renderer turns the report into
//! text, Markdown, CSV or a page. The same cell (text, number, unit, tone) goes
//! to each of them, and none computes, so they cannot disagree.
//!
//! ```
//! use ampledger::quantity::{Amps, Minutes, Rpm};
//! use ampledger::report::{text, Cell, Column, Report, Table, Tone};
//!
//! let table = Table::new("By state")
//!     .column(Column::name("State"))
//!     .column(Column::number::<Rpm>("Speed"))
//!     .column(Column::duration("Time"))
//!     .column(Column::number::<Amps>("Draw"))
//!     .row([
//!         Cell::name("idle"),
//!         Cell::fixed(Rpm(1800.0), 0),
//!         Cell::duration(Minutes(30.0)),
//!         Cell::fixed(Amps(11.4), 1),
//!     ]);
//! let report = Report::new("Orchard mower")
//!     .verdict(Tone::Bad, "Falls short", "The first shift takes the charge to 46 %.")
//!     .table(table);
//! let text = text::render(&report, &text::Style::default());
//! assert!(text.contains("idle    1800  30 min  11.4"), "{text}");
//! ```

pub mod csv;
pub(crate) mod flow;
pub mod html;
pub mod markdown;
pub mod model;
pub mod table;
pub mod text;
mod text_table;

pub use model::{Block, Fact, Item, Report, Verdict};
pub use table::{Align, Cell, Column, ColumnKind, Row, Table, Tone};
