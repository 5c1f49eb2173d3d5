//! What running one cell gives.

use std::collections::BTreeMap;
use std::time::Duration;

/// A stream a cell prints on.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Stream {
    /// Standard output.
    Stdout,
    /// Standard error.
    Stderr,
}

impl Stream {
    /// The name Jupyter gives it.
    pub fn name(self) -> &'static str {
        match self {
            Stream::Stdout => "stdout",
            Stream::Stderr => "stderr",
        }
    }
}

/// Something a cell put out.
#[derive(Debug, Clone, PartialEq)]
pub enum Output {
    /// Printed text.
    Text {
        /// Where it was printed.
        stream: Stream,
        /// The text.
        text: String,
    },
    /// A displayed value: mime type to content.
    Display(BTreeMap<String, String>),
}

/// Whether an output may come after the cell's result: standard error has no sure place among the others.
pub(crate) fn is_aside(output: &Output) -> bool {
    matches!(output, Output::Text { stream: Stream::Stderr, .. })
}

/// Why a cell failed.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct CellError {
    /// A short name: `Error` (an `Err` met by `?`), `Panic`, a compiler code such as `E0308`,
    /// `CompileError`, `SyntaxError`, `CommandError`, `DependencyError`, `Interrupted`, `Timeout`, `ProcessDied`,
    /// `DiskFull` or `SessionError`.
    pub name: String,
    /// What happened, in a sentence.
    pub sentence: String,
    /// The whole story in plain text: for a compile error every message with its place.
    pub detail: String,
    /// The line of the cell, from 1, where it is known.
    pub line: Option<usize>,
}

/// What running one cell gives.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct CellOutcome {
    /// What the cell put out, in order.
    pub outputs: Vec<Output>,
    /// Why it failed, if it did.
    pub error: Option<CellError>,
    /// How long it took.
    pub elapsed: Duration,
}

impl CellOutcome {
    /// Everything printed on one stream.
    pub fn text(&self, wanted: Stream) -> String {
        self.outputs
            .iter()
            .filter_map(|output| match output {
                Output::Text { stream, text } if *stream == wanted => Some(text.as_str()),
                _ => None,
            })
            .collect()
    }

    /// The displayed values, in order.
    pub fn displays(&self) -> impl Iterator<Item = &BTreeMap<String, String>> {
        self.outputs.iter().filter_map(|output| match output {
            Output::Display(bundle) => Some(bundle),
            Output::Text { .. } => None,
        })
    }
}
