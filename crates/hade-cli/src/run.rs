//! `hade run`: a notebook from top to bottom, outputs written back.

use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};

use clap::Args;
use hade_kernel::{NotebookFailure, NotebookRun, RunOptions, run_notebook};

use crate::Failure;
use crate::bar::Bar;
use crate::cells::{Interrupted, cell_failure, seconds};

/// So many failed cells are told with all that the compiler or the program said.
const IN_FULL: usize = 3;

/// Arguments of `hade run`.
#[derive(Debug, Args)]
pub struct RunArgs {
    /// The notebook (.ipynb)
    notebook: PathBuf,
    /// Write the executed notebook here instead of over the one that was read
    #[arg(short, long, value_name = "OUT.ipynb")]
    output: Option<PathBuf>,
    /// Stop a cell that runs longer than this many seconds
    #[arg(long, value_name = "SECONDS", value_parser = seconds)]
    cell_timeout: Option<Duration>,
    /// Go on after a cell that fails (the exit code is still 1)
    #[arg(long)]
    allow_errors: bool,
}

/// Runs the notebook and writes it.
pub(crate) fn run(args: &RunArgs) -> Result<(), Failure> {
    let started = Instant::now();
    if let Some(target) = &args.output {
        check_target(target)?;
    }
    let mut bar = Bar::new();
    let options = RunOptions { cell_timeout: args.cell_timeout, allow_errors: args.allow_errors, stop_on_ctrl_c: true };
    let run = run_notebook(&args.notebook, &options, &mut bar);
    bar.clear();
    let run = run?;
    if run.interrupted {
        return Err(Interrupted::of(&run, "nothing was written, and the notebook stays as it was").into());
    }
    let target = args.output.as_ref().unwrap_or(&args.notebook);
    run.notebook.save(target)?;
    if run.failure().is_some() {
        return Err(failures(&run, &target.display().to_string()).into());
    }
    eprintln!("{}: {} cells in {:.1} s", target.display(), run.cells.len(), started.elapsed().as_secs_f64());
    Ok(())
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
