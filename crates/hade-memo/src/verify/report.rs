//! What was found, for people and for programs.

use hade::sheet::Record;
use serde::Serialize;

/// Why a file cannot be verified at all.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{}: {why}", if *.damaged { DAMAGED } else { "the file cannot be read as a memo" })]
pub struct Unreadable {
    why: String,
    damaged: bool,
}

const DAMAGED: &str = "the file was a memo and is damaged; ask its maker for it again";

impl Unreadable {
    pub(crate) fn new(why: impl Into<String>) -> Self {
        Unreadable { why: why.into(), damaged: false }
    }
    pub(crate) fn damaged(why: impl Into<String>) -> Self {
        Unreadable { why: why.into(), damaged: true }
    }
}

/// What a finding means for the verdict.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Standing {
    /// It is as it must be.
    Holds,
    /// It is not, and the memo is refused.
    Fails,
    /// It is worth knowing and changes no verdict.
    Note,
}

/// One thing that was looked at.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Finding {
    /// What was looked at.
    pub what: String,
    /// What it means.
    pub standing: Standing,
    /// What was found.
    pub found: String,
}

/// A revision after the memo itself.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct LaterRevision {
    /// The first byte after it.
    pub end: usize,
    /// What it adds, in words.
    pub adds: String,
}

/// A signature, as far as it can be looked at without judging its certificate.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct SignatureFound {
    /// The field.
    pub field: String,
    /// How many bytes it is over, from the first.
    pub covers: usize,
    /// Whether that is the whole file.
    pub whole_file: bool,
    /// The hash algorithm.
    pub algorithm: String,
    /// The digest of those bytes, lower-case hexadecimal.
    pub digest: String,
    /// Whether the signature holds the same digest.
    pub agrees: bool,
}

/// An attached file.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Attached {
    /// Its name.
    pub name: String,
    /// Its size.
    pub bytes: usize,
    /// Its SHA-256, lower-case hexadecimal.
    pub sha256: String,
}

/// What running the notebook again is called.
const RERUN: &str = "notebook run again";

/// What verifying a memo found.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize)]
#[non_exhaustive]
pub struct Report {
    /// Whether everything holds.
    pub accepted: bool,
    /// The verdict in a sentence, and what it does not say.
    pub verdict: String,
    /// How long the file is.
    pub bytes: usize,
    /// What was looked at, in order.
    pub findings: Vec<Finding>,
    /// The revisions after the memo itself.
    pub later_revisions: Vec<LaterRevision>,
    /// The signatures.
    pub signatures: Vec<SignatureFound>,
    /// The attached files.
    pub attachments: Vec<Attached>,
}

impl Report {
    pub(super) fn holds(&mut self, what: impl Into<String>, found: impl Into<String>) {
        self.find(Standing::Holds, what.into(), found.into());
    }
    pub(super) fn fails(&mut self, what: impl Into<String>, found: impl Into<String>) {
        self.find(Standing::Fails, what.into(), found.into());
    }
    pub(super) fn note(&mut self, what: impl Into<String>, found: impl Into<String>) {
        self.find(Standing::Note, what.into(), found.into());
    }
    fn find(&mut self, standing: Standing, what: String, found: String) {
        self.findings.push(Finding { what, standing, found });
    }

    /// Whether something fails.
    pub(super) fn failed(&self) -> bool {
        self.findings.iter().any(|f| f.standing == Standing::Fails)
    }

    /// Takes in what running the notebook again gave, and draws the verdict anew.
    pub fn take_in_rerun(&mut self, cells: usize, differences: &[String]) {
        if differences.is_empty() {
            self.holds(RERUN, format!("{cells} cells give the same outcomes and conclusions"));
        }
        differences.iter().for_each(|difference| self.fails(RERUN, difference));
        self.conclude();
    }

    /// Takes in that the notebook was to be run again and could not be: that says nothing against the memo.
    pub fn take_in_no_rerun(&mut self, why: &str) {
        self.note(RERUN, format!("nothing was compared: {why}"));
        self.verdict.push_str(" The notebook was NOT run again.");
    }

    /// Draws the verdict.
    pub(super) fn conclude(&mut self) {
        let holds = self.findings.iter().any(|f| f.standing == Standing::Holds);
        self.accepted = holds && !self.failed();
        self.verdict = if self.accepted {
            let signed = match self.signatures.len() {
                0 => "It bears no electronic signature.".to_owned(),
                1 => "It bears one electronic signature, whose certificate was not looked at.".to_owned(),
                n => format!("It bears {n} electronic signatures, whose certificates were not looked at."),
            };
            format!(
                "ACCEPTED: all {} bytes are those of a memo as it was made and of signatures after it. {signed} This is integrity, not authenticity: it does not say who made the memo.",
                self.bytes
            )
        } else {
            let failed = self.findings.iter().filter(|f| f.standing == Standing::Fails).count();
            let what = if failed == 1 { "one thing does".to_owned() } else { format!("{failed} things do") };
            format!("REFUSED: {what} not hold. Do not rely on this file; ask its maker for the memo as it was issued.")
        };
    }
}

/// What a memo that was accepted holds, for whoever wants to run it again.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct Contents {
    /// The record.
    pub record: Record,
    /// The notebook's name and bytes.
    pub notebook: (String, Vec<u8>),
    /// The data files: the path that the notebook wrote, and the bytes.
    pub data: Vec<(String, Vec<u8>)>,
}

/// A memo, verified.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct Verified {
    /// What was found.
    pub report: Report,
    /// What it holds; `None` unless it was accepted.
    pub contents: Option<Contents>,
}
