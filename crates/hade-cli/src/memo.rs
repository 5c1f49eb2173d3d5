//! `hade memo`: a notebook, run from clean, becomes a calculation memo.

use std::ffi::OsString;
use std::fs::{self, File};
use std::io::{Read as _, Write as _};
use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};

use clap::Args;
use hade::sheet::{RECORD_MIME, Record};
use hade_kernel::{Notebook, NotebookRun, RunOptions, run_notebook};
use hade_memo::{EarlierMemo, MemoInput, MemoOptions, Project, build};

use crate::Failure;
use crate::bar::Bar;
use crate::cells::{Interrupted, cell_failure, seconds};

/// Arguments of `hade memo`.
#[derive(Debug, Args)]
pub struct MemoArgs {
    /// The notebook (.ipynb); its last cell ends with the sheet
    notebook: PathBuf,
    /// Where to write the memo
    #[arg(short, long, value_name = "MEMO.pdf")]
    output: PathBuf,
    /// Another template: its name (see `hade template list`) or its folder
    #[arg(long, value_name = "NAME|DIR")]
    template: Option<PathBuf>,
    /// Issue the memo as this revision; refused, with the list, while anything stands against it
    #[arg(long, value_name = "REVISION")]
    issue: Option<String>,
    /// Print what changed since an earlier memo of this calculation
    #[arg(long, value_name = "OLD.pdf")]
    diff: Option<PathBuf>,
    /// Stop a cell that runs longer than this many seconds
    #[arg(long, value_name = "SECONDS", value_parser = seconds)]
    cell_timeout: Option<Duration>,
}

/// Runs the notebook in a fresh session and writes the memo of its sheet. The notebook file stays
/// as it is.
pub(crate) fn run(args: &MemoArgs) -> Result<(), Failure> {
    let started = Instant::now();
    check_target(&args.output)?;
    let folder = Notebook::read(&args.notebook)?.folder().to_path_buf();
    let earlier = args.diff.as_deref().map(EarlierMemo::read).transpose()?;
    let project = Project::read_beside(&folder)?.map(|project| project.for_notebook(&args.notebook));
    if project.as_ref().is_none_or(|p| p.date.is_none()) {
        return Err(format!(
            "a memo needs a date, and the clock is never asked; write into {}:\n    [memo]\n    date = \"2026-06-01\"",
            folder.join("hade.toml").display()
        )
        .into());
    }

    let mut bar = Bar::new();
    let run_options = RunOptions { cell_timeout: args.cell_timeout, allow_errors: false, stop_on_ctrl_c: true };
    let run = run_notebook(&args.notebook, &run_options, &mut bar);
    bar.clear();
    let run = run?;
    if run.interrupted {
        return Err(Interrupted::of(&run, "no memo was written, and an earlier one stays as it was").into());
    }
    if let Some(message) = failed_cell(&run) {
        return Err(message.into());
    }
    let record = record_text(&run, &args.notebook)?;

    bar.say("typesetting the memo");
    let name = args.notebook.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
    let bytes = run.to_bytes()?;
    let input =
        MemoInput { record_json: &record, notebook: (&name, &bytes), folder: &folder, project: project.as_ref() };
    let mut options = MemoOptions::default();
    if let Some(folder) = &args.template {
        options = options.with_template(folder);
    }
    if let Some(earlier) = earlier {
        options = options.with_changes_since(earlier);
    }
    if let Some(revision) = &args.issue {
        options = options.issued(revision);
    }
    let memo = build(&input, &options);
    bar.clear();
    let memo = memo?;
    write_aside(&args.output, &memo.pdf)?;

    for warning in &memo.warnings {
        eprintln!("warning: {warning}");
    }
    if let Some(changes) = &memo.changes {
        eprintln!("{}:", changes.words());
        for change in changes.conclusions.iter().chain(&changes.givens).chain(&changes.outcomes) {
            eprintln!("  - {}", change.words());
        }
    }
    if !memo.against_issue.is_empty() {
        eprintln!("what stands against issue:");
        for line in &memo.against_issue {
            eprintln!("  - {line}");
        }
    }
    eprintln!("{}: {} sheets in {:.1} s", args.output.display(), memo.pages, started.elapsed().as_secs_f64());
    Ok(())
}

/// The record that the notebook ended with, in the library's own spelling.
fn record_text(run: &NotebookRun, notebook: &Path) -> Result<String, Failure> {
    let Some(record) = run.last_output(RECORD_MIME) else {
        return Err(format!(
            "{} shows no sheet, so there is nothing to make a memo of; end the last cell with the sheet (a line that says just `sheet`)",
            notebook.display()
        )
        .into());
    };
    let text = record.as_str().map_or_else(|| record.to_string(), str::to_owned);
    Ok(Record::from_json(&text)?.to_json()?)
}

/// What to say of the cell that failed, when one did.
fn failed_cell(run: &NotebookRun) -> Option<String> {
    let failure = run.failure()?;
    let mut message = cell_failure(&failure);
    message.push_str("No memo was written; an earlier one stays as it was. Correct the cell and run again.");
    Some(message)
}

/// Says before anything runs that the memo could not be written.
fn check_target(target: &Path) -> Result<(), Failure> {
    if target.is_dir() {
        return Err(format!("{} is a folder; name a file for the memo", target.display()).into());
    }
    if target.exists() && !is_pdf(target) {
        return Err(format!(
            "{} is there and is no PDF; it stays as it is. Name another file for the memo",
            target.display()
        )
        .into());
    }
    if !parent(target).is_dir() {
        return Err(format!("the folder {} does not exist; make it first", parent(target).display()).into());
    }
    Ok(())
}

/// Whether a file begins as a PDF does. Nothing else is ever written over.
fn is_pdf(file: &Path) -> bool {
    let mut head = [0_u8; 5];
    File::open(file).and_then(|mut f| f.read_exact(&mut head)).is_ok() && &head == b"%PDF-"
}

/// Writes beside the target and renames, so that the target is never half written.
fn write_aside(target: &Path, bytes: &[u8]) -> Result<(), Failure> {
    let mut name = OsString::from(".");
    name.push(target.file_name().unwrap_or_default());
    name.push(format!(".{}.part", std::process::id()));
    let aside = parent(target).join(name);
    let written = File::create(&aside)
        .and_then(|mut file| file.write_all(bytes).and_then(|()| file.sync_all()))
        .and_then(|()| fs::rename(&aside, target));
    written.map_err(|error| {
        // What is left of it is of no use; if it cannot be removed, the first error says why.
        let _ = fs::remove_file(&aside);
        format!("cannot write {}: {error}", target.display()).into()
    })
}

fn parent(target: &Path) -> &Path {
    match target.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    }
}
