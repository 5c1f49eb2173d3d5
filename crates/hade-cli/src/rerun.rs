//! Running the notebook of a memo again, in a folder made for it.

use std::fs::{self, OpenOptions};
use std::io::Write as _;
use std::path::{Component, Path};
use std::time::Duration;

use hade::replay::KINDS;
use hade::sheet::{RECORD_MIME, Record};
use hade_kernel::{RunOptions, run_notebook};
use hade_memo::Contents;

use crate::Failure;
use crate::bar::Bar;
use crate::cells::Interrupted;

/// What a rerun gave.
pub(crate) struct Rerun {
    /// How many cells ran.
    pub cells: usize,
    /// In what the outcomes differ from those of the memo.
    pub differences: Vec<String>,
}

/// What running a notebook that came in a file means.
pub(crate) fn warning(contents: &Contents) -> String {
    format!(
        "--rerun runs the code of the attached notebook {} on this machine, with all that you may do on it; \
         use it only on a memo from somebody you would take a program from",
        contents.notebook.0
    )
}

/// Runs the notebook on the attached data and compares outcomes and conclusions.
pub(crate) fn rerun(contents: &Contents, cell_timeout: Option<Duration>) -> Result<Rerun, Failure> {
    let folder = tempfile::tempdir()?;
    let (name, notebook) = &contents.notebook;
    if Path::new(name).components().count() != 1 {
        return Err(format!("the notebook's name, {name}, is a path").into());
    }
    put(folder.path(), name, notebook)?;
    for (path, bytes) in &contents.data {
        put(folder.path(), path, bytes)?;
    }
    let mut bar = Bar::new();
    let options = RunOptions { cell_timeout, allow_errors: false, stop_on_ctrl_c: true };
    let run = run_notebook(folder.path().join(name), &options, &mut bar);
    bar.clear();
    let run = run?;
    if run.interrupted {
        return Err(Interrupted::of(&run, "nothing was compared").into());
    }
    if let Some(failure) = run.failure() {
        // The reader's own limit says nothing about the memo.
        if failure.error.name == "Timeout" {
            return Err(failure.to_string().into());
        }
        return Ok(Rerun { cells: run.cells.len(), differences: vec![failure.to_string()] });
    }
    let differences = match run.last_output(RECORD_MIME) {
        None => vec!["it shows no sheet".to_owned()],
        Some(value) => {
            let text = value.as_str().map_or_else(|| value.to_string(), str::to_owned);
            differences(&contents.record, &Record::from_json(&text)?)
        }
    };
    Ok(Rerun { cells: run.cells.len(), differences })
}

/// Writes a file of the memo into the folder, where its path leads to nowhere else.
fn put(folder: &Path, path: &str, bytes: &[u8]) -> Result<(), Failure> {
    let within = Path::new(path).components().all(|part| matches!(part, Component::Normal(_) | Component::CurDir));
    if !within || path.is_empty() || path.contains(['\\', ':', '\0']) {
        return Err(
            format!("the notebook reads {path}, which is outside its folder, so it cannot be run again here").into()
        );
    }
    let target = folder.join(path);
    if let Some(parent) = target.parent() {
        fs::create_dir_all(parent)?;
    }
    // Never over another file of the memo.
    let mut file = OpenOptions::new().write(true).create_new(true).open(&target)?;
    Ok(file.write_all(bytes)?)
}

/// In what two records differ: the items and their outcomes, and the conclusions.
fn differences(memo: &Record, again: &Record) -> Vec<String> {
    let (old, new) = (memo.cards(), again.cards());
    let mut found = Vec::new();
    if old.len() != new.len() {
        found.push(format!("it makes {} items, and the memo has {}", new.len(), old.len()));
    }
    for (number, ((old, _), (new, _))) in old.iter().zip(&new).enumerate() {
        let item = format!("item {}, {}", number + 1, old.title());
        if old.kind != new.kind || old.title() != new.title() {
            found.push(format!("{item}: it makes {} instead", new.title()));
            continue;
        }
        let tolerance = KINDS.iter().find(|kind| kind.name == old.kind).map_or(0.0, |kind| kind.tolerance);
        if let Some(difference) = old.outcome.difference(&new.outcome, tolerance) {
            found.push(format!("{item}: {difference}"));
        }
    }
    if memo.conclusions != again.conclusions {
        found.push("it draws other conclusions".to_owned());
    }
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_path_of_the_memo_stays_in_the_folder() {
        let folder = tempfile::tempdir().unwrap();
        assert!(put(folder.path(), "data/a.csv", b"1").is_ok());
        assert!(put(folder.path(), "data/a.csv", b"2").is_err(), "written twice");
        assert!(put(folder.path(), "./b.csv", b"1").is_ok());
        for bad in ["../a.csv", "/tmp/a.csv", "data/../../a.csv", "", "c:\\a.csv", "a\0b"] {
            assert!(put(folder.path(), bad, b"1").is_err(), "{bad:?}");
        }
        assert_eq!(fs::read(folder.path().join("data/a.csv")).unwrap(), b"1");
    }
}
