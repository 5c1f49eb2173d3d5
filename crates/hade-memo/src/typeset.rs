//! From a template and the memo's files to PDF bytes.

use std::collections::BTreeMap;

use typst::diag::{SourceDiagnostic, Warned};
use typst::foundations::{Bytes, Datetime, Smart};
use typst_kit::diagnostics::{DiagnosticFormat, emit, termcolor::NoColor};
use typst_layout::PagedDocument;
use typst_pdf::{PdfOptions, PdfStandard, PdfStandards, Timestamp};

use crate::error::{Error, Result};
use crate::project::Date;
use crate::template::Template;
use crate::world::MemoWorld;

/// This program, as the file's information names it.
pub(crate) const CREATOR: &str = concat!("Hade ", env!("CARGO_PKG_VERSION"));

/// What is to be typeset.
pub(crate) struct Job<'a> {
    /// The template.
    pub template: &'a Template,
    /// The files that exist only for this memo.
    pub own: BTreeMap<String, Bytes>,
    /// What tells this document from every other: number and revision.
    pub identity: String,
    /// The document's date.
    pub date: Date,
}

/// What came out.
pub(crate) struct Typeset {
    /// The file.
    pub pdf: Vec<u8>,
    /// How many sheets.
    pub pages: usize,
    /// What Typst warns of.
    pub warnings: Vec<String>,
}

/// Typesets and exports.
pub(crate) fn run(job: Job<'_>) -> Result<Typeset> {
    let shown_as = job.template.shown_as();
    let world = MemoWorld::new(job.template.root.clone(), job.own, &job.template.entry, shown_as);
    let Warned { output, warnings } = typst::compile::<PagedDocument>(&world);
    let document = output.map_err(|errors| Error::Typeset { report: report(&world, &errors) })?;
    let date = Datetime::from_ymd(i32::from(job.date.year), job.date.month, job.date.day)
        .ok_or_else(|| Error::Defect { what: "the date", why: format!("{} is no day", job.date) })?;
    let standards = PdfStandards::new(&[PdfStandard::A_3a, PdfStandard::Ua_1])
        .map_err(|e| Error::Defect { what: "the choice of PDF standards", why: e.message().to_string() })?;
    let options = PdfOptions {
        ident: Smart::Custom(job.identity),
        creator: Smart::Custom(Some(CREATOR.to_owned())),
        timestamp: Some(Timestamp::new_utc(date)),
        standards,
        ..PdfOptions::default()
    };
    let pdf =
        typst_pdf::pdf(&document, &options).map_err(|errors| Error::Export { report: report(&world, &errors) })?;
    let warnings = warnings.iter().map(|w| report(&world, std::slice::from_ref(w))).collect();
    let pages = document.pages().len();
    // Typst remembers every layout; a second memo of the same process needs only the latest.
    typst::comemo::evict(2);
    Ok(Typeset { pdf, pages, warnings })
}

/// What Typst says, with file, line and column.
fn report(world: &MemoWorld, diagnostics: &[SourceDiagnostic]) -> String {
    let mut out = NoColor::new(Vec::new());
    if emit(&mut out, world, diagnostics, DiagnosticFormat::Human).is_err() {
        return diagnostics.iter().map(|d| d.message.to_string()).collect::<Vec<_>>().join("\n");
    }
    String::from_utf8_lossy(&out.into_inner()).trim_end().to_owned()
}
