//! A Python environment with the PDF clients.

use std::path::{Path, PathBuf};
use std::process::Command;

use hade_tests::{python_with, root};

use super::support::said;

/// The Python with the pinned clients. `None`, and a word about it, where they cannot be had.
pub fn python() -> Option<PathBuf> {
    python_with("tests/clients/pdf/requirements.txt")
}

/// Runs a script of `tests/clients/pdf` and gives what it printed; fails with what it said unless it
/// succeeds.
#[track_caller]
pub fn run_script(python: &Path, script: &str, arguments: &[&Path]) -> serde_json::Value {
    let output = Command::new(python)
        .arg("-B")
        .arg(root().join("tests/clients/pdf").join(script))
        .args(arguments)
        .output()
        .expect("the script runs");
    assert!(output.status.success(), "{script}\n{}", said(&output));
    serde_json::from_slice(&output.stdout).unwrap_or_else(|e| panic!("{script}: {e}\n{}", said(&output)))
}
