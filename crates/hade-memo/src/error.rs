//! What can go wrong on the way from a record to a PDF, each with what to do.

use std::path::{Path, PathBuf};

/// Result of this crate.
pub type Result<T, E = Error> = std::result::Result<T, E>;

/// What can go wrong on the way from a record to a PDF.
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum Error {
    /// The record cannot be read, or is of a newer schema.
    #[error("{0}")]
    Record(#[from] hade::error::Error),
    /// A text or a list of the record cannot be set.
    #[error("the record cannot be typeset: {place} {why}")]
    Unsettable {
        /// Where in the record, as a JSON pointer.
        place: String,
        /// What is wrong there, and what to do.
        why: String,
    },
    /// A data file is missing, or is not the one the record was made from.
    #[error("data file {path}: {why}")]
    Data {
        /// The path as the record has it.
        path: String,
        /// What is wrong, and what to do.
        why: String,
    },
    /// The project file cannot be used.
    #[error("{}: {why}", path.display())]
    Project {
        /// The file.
        path: PathBuf,
        /// What is wrong, with the line.
        why: String,
    },
    /// No date was stated.
    #[error(
        "the memo has no date, and none is taken from a clock: write it in a file named hade.toml beside the notebook:\n\n[memo]\nnumber = \"GM-001\"\nrevision = \"A\"\ndate = 2026-05-14"
    )]
    NoDate,
    /// The memo was to be issued, and something stands against it.
    #[error("revision {revision} cannot be issued; this stands against it:{}", listed(list))]
    NotIssued {
        /// The revision.
        revision: String,
        /// What stands against it.
        list: Vec<String>,
    },
    /// The earlier memo cannot be compared.
    #[error("the earlier memo {}: {why}", path.display())]
    Earlier {
        /// The file.
        path: PathBuf,
        /// What is wrong.
        why: String,
    },
    /// The notebook is not one.
    #[error("{name} is not a Jupyter notebook: {why}")]
    Notebook {
        /// Its file name.
        name: String,
        /// What it lacks.
        why: String,
    },
    /// The template's folder lacks something, or asks for what this version does not give.
    #[error("template {}: {why}", folder.display())]
    Template {
        /// The folder.
        folder: PathBuf,
        /// What is wrong, and what to do.
        why: String,
    },
    /// The template does not compile with this record.
    #[error("the template does not compile:\n{report}")]
    Typeset {
        /// What Typst says, with file and line.
        report: String,
    },
    /// The pages cannot be written as PDF/A-3a and PDF/UA-1.
    #[error("the exporter refuses to write PDF/A-3a and PDF/UA-1:\n{report}")]
    Export {
        /// What it says, with file and line.
        report: String,
    },
    /// The memo cannot be made ready for signing.
    #[error("the memo cannot be made ready for signing: {why}")]
    SignOff {
        /// What is wrong, and what to do.
        why: String,
    },
    /// A part of the program itself is broken.
    #[error("{what} of this program is broken ({why}); report it as a defect of Hade")]
    Defect {
        /// The part.
        what: &'static str,
        /// What happened.
        why: String,
    },
}

fn listed(list: &[String]) -> String {
    list.iter().map(|line| format!("\n  - {line}")).collect()
}

impl Error {
    pub(crate) fn template(folder: &Path, why: impl Into<String>) -> Self {
        Error::Template { folder: folder.to_path_buf(), why: why.into() }
    }
    pub(crate) fn unsettable(place: impl Into<String>, why: impl Into<String>) -> Self {
        Error::Unsettable { place: place.into(), why: why.into() }
    }
}
