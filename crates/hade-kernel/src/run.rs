//! Runs a notebook from top to bottom in a fresh session.

use std::fmt;
use std::path::Path;
use std::time::Duration;

use serde_json::Value;

use crate::cell::{CellError, CellOutcome};
use crate::error::Result;
use crate::notebook::Notebook;
use crate::prepare::prepare;
use crate::progress::{Progress, Step};
use crate::session::{Session, SessionOptions};

/// How a notebook is run.
#[derive(Debug, Clone, Default)]
pub struct RunOptions {
    /// A cell that runs longer is stopped and counts as failed.
    pub cell_timeout: Option<Duration>,
    /// Go on after a cell that fails.
    pub allow_errors: bool,
}

/// What became of one cell that holds code.
#[derive(Debug, Clone)]
pub struct CellReport {
    /// Its number among the cells that hold code, from 1 (Jupyter's `[n]`).
    pub number: usize,
    /// Its place among all cells of the notebook, from 0.
    pub index: usize,
    /// What it gave.
    pub outcome: CellOutcome,
}

/// A cell that failed.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct NotebookFailure {
    /// The cell's number among the cells that hold code, from 1.
    pub number: usize,
    /// Why it failed.
    pub error: CellError,
}

impl fmt::Display for NotebookFailure {
    /// `cell 4 (line 2): the sentence`
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "cell {}", self.number)?;
        if let Some(line) = self.error.line {
            write!(f, " (line {line})")?;
        }
        write!(f, ": {}", self.error.sentence)
    }
}

impl std::error::Error for NotebookFailure {}

/// A notebook that has been run.
#[derive(Debug, Clone)]
pub struct NotebookRun {
    /// The notebook with its outputs. Cells after the first failure have none.
    pub notebook: Notebook,
    /// What became of each cell that was run, in order.
    pub cells: Vec<CellReport>,
}

impl NotebookRun {
    /// The first cell that failed.
    pub fn failure(&self) -> Option<NotebookFailure> {
        self.cells
            .iter()
            .find_map(|cell| cell.outcome.error.clone().map(|error| NotebookFailure { number: cell.number, error }))
    }

    /// The last output of a mime type, such as [`RECORD_MIME`](crate::RECORD_MIME). JSON types
    /// give the JSON value, others a string.
    pub fn last_output(&self, mime: &str) -> Option<Value> {
        self.notebook.last_output(mime)
    }

    /// The executed notebook as the bytes of its file.
    ///
    /// # Errors
    /// As [`Notebook::to_bytes`].
    pub fn to_bytes(&self) -> Result<Vec<u8>> {
        self.notebook.to_bytes()
    }
}

/// Runs a notebook from top to bottom in a fresh session, in the notebook's own folder, preparing
/// the cache first if need be. The file is not changed: see [`Notebook::save`].
///
/// A cell that fails is part of the result, see [`NotebookRun::failure`].
///
/// # Errors
/// If the file is not a notebook, the libraries cannot be built or the session does not start.
pub fn run_notebook(path: impl AsRef<Path>, options: &RunOptions, progress: &mut dyn Progress) -> Result<NotebookRun> {
    let mut notebook = Notebook::read(path)?;
    let prepared = prepare(progress)?;
    progress.step(Step::Starting);
    let mut session = Session::start(
        &prepared,
        SessionOptions {
            folder: Some(notebook.folder().to_path_buf()),
            cell_timeout: options.cell_timeout,
            ..SessionOptions::default()
        },
    )?;
    notebook.clear_outputs();
    let sources = notebook.code_cells();
    let mut cells = Vec::new();
    for (at, (index, source)) in sources.iter().enumerate() {
        let number = at + 1;
        progress.step(Step::Cell { number, of: sources.len(), first_line: first_line(source) });
        let outcome = session.execute(source);
        notebook.set_outcome(*index, number, &outcome);
        let failed = outcome.error.is_some();
        cells.push(CellReport { number, index: *index, outcome });
        if failed && !options.allow_errors {
            break;
        }
    }
    progress.step(Step::Done);
    Ok(NotebookRun { notebook, cells })
}

/// The first line that says something: not blank, not a comment unless there is nothing else.
fn first_line(source: &str) -> &str {
    let mut lines = source.lines().map(str::trim).filter(|line| !line.is_empty());
    let first = lines.clone().next().unwrap_or_default();
    lines.find(|line| !line.starts_with("//")).unwrap_or(first)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_first_line_says_something() {
        assert_eq!(first_line("\n// why\n  let a = 1;\n"), "let a = 1;");
        assert_eq!(first_line("// only this"), "// only this");
    }

    #[test]
    fn a_failure_names_its_cell() {
        let failure = NotebookFailure {
            number: 4,
            error: CellError {
                name: "Error".into(),
                sentence: "no depth datum".into(),
                detail: String::new(),
                line: Some(2),
            },
        };
        assert_eq!(failure.to_string(), "cell 4 (line 2): no depth datum");
    }
}
