//! The calculation sheet: givens, cards, notes and conclusions in the order they were made, with
//! the origin of every input. Written out it is the record, the only bridge to the memo.

mod given;
mod lineage;
mod misprint;
mod record;
#[allow(clippy::module_inception)]
mod sheet;

pub use given::{Basis, DataFile, Given, Grade, IntoGiven, Source};
pub use lineage::{Origin, trace};
pub use misprint::misprints;
pub use record::{Assumption, Entry, Frontmatter, RECORD_MIME, RECORD_SCHEMA, Record};
pub use sheet::Sheet;
