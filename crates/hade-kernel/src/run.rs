//! Runs notebooks from top to bottom in a fresh session.

use std::fmt;
use std::path::Path;
use std::time::Duration;

use serde_json::Value;

use crate::cell::{CellError, CellOutcome};
use crate::ctrl_c::Keyboard;
use crate::error::{Error, Result};
use crate::interrupt::InterruptHandle;
use crate::notebook::Notebook;
use crate::prepare::prepare;
use crate::progress::{Progress, Step};
use crate::session::{Place, Session, SessionOptions};

/// How a notebook is run.
#[derive(Debug, Clone, Default)]
pub struct RunOptions {
    /// A cell that runs longer is stopped and counts as failed.
    pub cell_timeout: Option<Duration>,
    /// Go on after a cell that fails.
    pub allow_errors: bool,
    /// Ctrl-C stops the running cell and the run; otherwise it does what it does in the program anyway.
    pub stop_on_ctrl_c: bool,
}

/// What became of one cell that holds code.
#[derive(Debug, Clone)]
pub struct CellReport {
    /// Its number among the cells that hold code and that the session ran, from 1 (Jupyter's `[n]`).
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
    /// Ctrl-C ended the run.
    pub interrupted: bool,
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
    let notebook = Notebook::read(path)?;
    let mut engine = Runner::start(notebook.folder(), options, progress)?;
    let run = engine.run(notebook, progress)?;
    progress.step(Step::Done);
    Ok(run)
}

/// Runs notebooks one after the other in one fresh session: what one leaves behind is there in the next, each
/// runs in its own folder, and their cells are numbered on, as in a Jupyter session that several notebooks share.
/// All are read before the first runs. After a cell that fails no other notebook runs (unless errors are allowed),
/// so there may be fewer results than notebooks.
///
/// # Errors
/// If a file is not a notebook, the libraries cannot be built or the session does not start, or a notebook's
/// folder has gone.
pub fn run_notebooks<P: AsRef<Path>>(
    paths: &[P],
    options: &RunOptions,
    progress: &mut dyn Progress,
) -> Result<Vec<NotebookRun>> {
    let notebooks = paths.iter().map(Notebook::read).collect::<Result<Vec<_>>>()?;
    let mut runs = Vec::with_capacity(notebooks.len());
    let Some(first) = notebooks.first() else {
        return Ok(runs);
    };
    let mut engine = Runner::start(first.folder(), options, progress)?;
    for notebook in notebooks {
        engine.enter(&notebook)?;
        let run = engine.run(notebook, progress)?;
        let ends = run.interrupted || (run.failure().is_some() && !options.allow_errors);
        runs.push(run);
        if ends {
            break;
        }
    }
    progress.step(Step::Done);
    Ok(runs)
}

/// A session that works off notebooks.
struct Runner<'a> {
    session: Session,
    keyboard: Keyboard,
    options: &'a RunOptions,
    /// How many cells it has run.
    ran: usize,
}

impl<'a> Runner<'a> {
    fn start(folder: &Path, options: &'a RunOptions, progress: &mut dyn Progress) -> Result<Runner<'a>> {
        let prepared = prepare(progress)?;
        progress.step(Step::Starting);
        let interrupt = InterruptHandle::default();
        let session = Session::start(
            &prepared,
            SessionOptions {
                folder: Some(folder.to_path_buf()),
                cell_timeout: options.cell_timeout,
                interrupt: interrupt.clone(),
            },
        )?;
        let keyboard = Keyboard::listen(options.stop_on_ctrl_c, interrupt)?;
        Ok(Runner { session, keyboard, options, ran: 0 })
    }

    /// Goes to the folder of a notebook.
    fn enter(&mut self, notebook: &Notebook) -> Result<()> {
        let folder = notebook.folder();
        self.session.move_to(Place::folder(folder.to_path_buf())).map_err(Error::file("enter the folder", folder))
    }

    fn run(&mut self, mut notebook: Notebook, progress: &mut dyn Progress) -> Result<NotebookRun> {
        notebook.clear_outputs();
        let sources = notebook.code_cells();
        let mut cells = Vec::new();
        for (at, (index, source)) in sources.iter().enumerate() {
            progress.step(Step::Cell { number: at + 1, of: sources.len(), first_line: first_line(source) });
            self.ran += 1;
            self.session.number_next(self.ran);
            let outcome = self.session.execute(source);
            notebook.set_outcome(*index, self.ran, &outcome);
            let failed = outcome.error.is_some();
            cells.push(CellReport { number: self.ran, index: *index, outcome });
            if (failed && !self.options.allow_errors) || self.keyboard.was_pressed() {
                break;
            }
        }
        Ok(NotebookRun { notebook, cells, interrupted: self.keyboard.was_pressed() })
    }
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
