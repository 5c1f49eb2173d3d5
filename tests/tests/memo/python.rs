//! A Python environment with the PDF clients.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;
use std::sync::OnceLock;

use hade_tests::root;
use sha2::{Digest, Sha256};

use super::support::said;

/// What a machine that must run these tests sets.
const REQUIRED_VAR: &str = "HADE_REQUIRE_CLIENTS";

/// The Python with the pinned clients. `None`, and a word about it, where they cannot be had.
pub fn python() -> Option<PathBuf> {
    static PYTHON: OnceLock<Result<PathBuf, String>> = OnceLock::new();
    match PYTHON.get_or_init(environment) {
        Ok(python) => Some(python.clone()),
        Err(why) => {
            assert!(std::env::var_os(REQUIRED_VAR).is_none(), "the PDF clients are required: {why}");
            eprintln!("SKIPPED: {why}");
            None
        }
    }
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

/// Made once in the build folder, and anew when the pins change.
fn environment() -> Result<PathBuf, String> {
    let pins = root().join("tests/clients/pdf/requirements.txt");
    let text = fs::read(&pins).map_err(|error| format!("{}: {error}", pins.display()))?;
    let hash: String = Sha256::digest(&text).iter().take(6).map(|byte| format!("{byte:02x}")).collect();
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(format!("pdf-clients-{hash}"));
    let python = folder.join("bin/python");
    let stamp = folder.join("complete");
    if stamp.is_file() && python.is_file() {
        return Ok(python);
    }
    let base = std::env::var_os("PYTHON").unwrap_or_else(|| "python3".into());
    run(Command::new(&base).args(["-c", "import sys; sys.exit(sys.version_info < (3, 10))"]))
        .map_err(|why| format!("there is no Python 3.10 or newer ({why})"))?;
    let _ = fs::remove_dir_all(&folder);
    run(Command::new(&base).args(["-m", "venv"]).arg(&folder))
        .map_err(|why| format!("no Python environment can be made ({why})"))?;
    run(Command::new(&python)
        .args(["-m", "pip", "install", "--quiet", "--disable-pip-version-check", "--no-input", "--no-compile", "-r"])
        .arg(&pins))
    .map_err(|why| format!("the pinned clients cannot be installed, for want of a network perhaps ({why})"))?;
    fs::write(&stamp, "").map_err(|error| error.to_string())?;
    Ok(python)
}

fn run(command: &mut Command) -> Result<(), String> {
    match command.output() {
        Ok(output) if output.status.success() => Ok(()),
        Ok(output) => Err(said(&output).lines().last().unwrap_or("it failed").to_owned()),
        Err(error) => Err(error.to_string()),
    }
}
