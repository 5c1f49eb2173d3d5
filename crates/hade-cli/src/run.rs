//! `hade run`: notebooks from top to bottom, outputs written back.

use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};

use clap::Args;
use hade_kernel::{NotebookFailure, NotebookRun, RunOptions, run_notebooks};

use crate::Failure;
use crate::bar::Bar;
use crate::cells::{Interrupted, cell_failure, seconds};

/// So many failed cells are told with all that the compiler or the program said.
const IN_FULL: usize = 3;

/// Arguments of `hade run`.
#[derive(Debug, Args)]
pub struct RunArgs {
    /// The notebook (.ipynb); several run one after the other in one session
    #[arg(required = true, value_name = "NOTEBOOK")]
    notebooks: Vec<PathBuf>,
    /// Write the executed notebook here instead of over the one that was read (a folder when there are several)
    #[arg(short, long, value_name = "OUT.ipynb")]
    output: Option<PathBuf>,
    /// Stop a cell that runs longer than this many seconds
    #[arg(long, value_name = "SECONDS", value_parser = seconds)]
    cell_timeout: Option<Duration>,
    /// Go on after a cell that fails (the exit code is still 1)
    #[arg(long)]
    allow_errors: bool,
}

/// Runs the notebooks and writes them.
pub(crate) fn run(args: &RunArgs) -> Result<(), Failure> {
    let started = Instant::now();
    let targets = targets(args)?;
    let mut bar = Bar::new();
    let options = RunOptions { cell_timeout: args.cell_timeout, allow_errors: args.allow_errors, stop_on_ctrl_c: true };
    let runs = run_notebooks(&args.notebooks, &options, &mut bar);
    bar.clear();
    let runs = runs?;
    if let Some(last) = runs.last().filter(|run| run.interrupted) {
        let then = match runs.len() {
            1 if args.notebooks.len() == 1 => "nothing was written, and the notebook stays as it was",
            _ => "nothing was written, and the notebooks stay as they were",
        };
        return Err(Interrupted::of(last, then).into());
    }
    for (run, target) in runs.iter().zip(&targets) {
        run.notebook.save(target)?;
    }
    let mut message = String::new();
    for (run, target) in runs.iter().zip(&targets) {
        if run.failure().is_none() {
            eprintln!("{}: {} cells in {:.1} s", target.display(), run.cells.len(), started.elapsed().as_secs_f64());
            continue;
        }
        if args.notebooks.len() > 1 {
            message.push_str(&format!("{}:\n", run.notebook.path().display()));
        }
        message.push_str(&failures(run, &target.display().to_string()));
    }
    if message.is_empty() {
        return Ok(());
    }
    match args.notebooks.get(runs.len()..) {
        Some([left]) => message.push_str(&format!(" {} was not run.", left.display())),
        Some([_, ..]) => message.push_str(" The notebooks after it were not run."),
        _ => {}
    }
    Err(message.into())
}

/// Where each executed notebook goes. Says before anything runs that it could not.
fn targets(args: &RunArgs) -> Result<Vec<PathBuf>, Failure> {
    let mut targets = args.notebooks.clone();
    match (&args.output, args.notebooks.len()) {
        (None, _) => {}
        (Some(target), 1) => {
            check_target(target)?;
            targets = vec![target.clone()];
        }
        (Some(folder), _) if folder.is_dir() => {
            for target in &mut targets {
                *target = folder.join(target.file_name().unwrap_or_default());
            }
        }
        (Some(target), _) => {
            let target = target.display();
            return Err(format!("{target} is no folder; with several notebooks name one to write them into").into());
        }
    }
    for (at, target) in targets.iter().enumerate() {
        let file = |path: &PathBuf| std::fs::canonicalize(path).unwrap_or_else(|_| path.clone());
        if targets[..at].iter().any(|earlier| file(earlier) == file(target)) {
            return Err(format!("{} would be written twice; give each notebook once", target.display()).into());
        }
    }
    Ok(targets)
}

/// Says before anything runs that the result could not be written.
fn check_target(target: &Path) -> Result<(), Failure> {
    let folder = match target.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    };
    if !folder.is_dir() {
        return Err(format!("the folder {} does not exist; make it first", folder.display()).into());
    }
    if target.is_dir() {
        return Err(format!("{} is a folder; give the name of a file", target.display()).into());
    }
    Ok(())
}

/// The message for a notebook with cells that failed.
fn failures(run: &NotebookRun, target: &str) -> String {
    let mut message = String::new();
    let failed = run.cells.iter().filter_map(|cell| {
        let error = cell.outcome.error.clone()?;
        Some(NotebookFailure { number: cell.number, error })
    });
    for (number, failure) in failed.enumerate() {
        // With --allow-errors there may be many; the notebook holds all of each.
        if number < IN_FULL {
            message.push_str(&cell_failure(&failure));
        } else {
            message.push_str(&format!("{failure}\n"));
        }
    }
    let all = run.notebook.code_cells().len();
    if run.cells.len() < all {
        let left = match all - run.cells.len() {
            1 => "The cell after it was".to_owned(),
            more => format!("The {more} cells after it were"),
        };
        message.push_str(&left);
        message.push_str(" not run. ");
    }
    message.push_str(&format!("Correct the cell and run again; what ran is in {target}."));
    message
}
