//! A calculation record, typeset as a memo that a checker can follow with nothing but the PDF,
//! redo by hand, and sign.
//!
//! - [`build`] takes a record, its notebook and the project's `hade.toml`, and gives the PDF: every
//!   calculation item is computed again ([`hade::replay`]), the origin of every input is
//!   traced again, and what stands against issue is listed on page 1 and handed back.
//! - [`Project`] reads `hade.toml`: number, revision, date, people. No date comes from a clock.
//! - Templates are folders of Typst files; the default one is packed into the program.
//!
//! What a record holds is data. Its strings reach Typst as JSON and are set as they are; formulas
//! come from the library, never from the record. Typesetting reads no file outside the template's
//! folder, no network and no clock, so the same inputs give the same bytes.
//!
//! The PDF is PDF/A-3a and PDF/UA-1 as enforced by the exporter. Record, notebook and data files
//! are attached to it. Its sign-off boxes are signature fields, added in a revision that also holds
//! the digest of all bytes before it; [`verify`] holds a memo against that.
//!
//! # What it does not do
//! It signs nothing and puts no seal: the fields are empty. It runs no notebook. It does not judge
//! an assumption; it prints each with its basis.

mod against;
mod assemble;
mod attach;
mod cautions;
mod changes;
mod clean;
mod digest;
mod draw;
mod earlier;
mod error;
mod fonts;
mod formula;
mod notebook;
mod pdf;
mod project;
mod replay;
mod sign_off;
mod template;
mod typeset;
mod verify;
mod view;
mod world;

pub use assemble::{Memo, MemoInput, MemoOptions, build};
pub use cautions::{ProjectCaution, Severity};
pub use changes::{Change, Changes};
pub use earlier::EarlierMemo;
pub use error::{Error, Result};
pub use formula::lint as lint_formula;
pub use pdf::MOST_BYTES as MOST_VERIFIED_BYTES;
pub use project::{Date, Person, Project, Revision, Role, Status};
pub use template::{FoundTemplate, Place, check_template, copy_template, templates};
pub use verify::{
    Attached, Contents, Finding, LaterRevision, Report, SignatureFound, Standing, Unreadable, Verified, verify,
};

#[doc(hidden)]
pub use assemble::build_with;
#[doc(hidden)]
pub use replay::{Again, Replayer};
