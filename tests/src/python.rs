//! Python environments with pinned packages, for the tests that drive or read what other programs make of this
//! one's work.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};
use std::process::Command;
use std::sync::{Mutex, PoisonError};
use std::{env, fs};

use sha2::{Digest, Sha256};

use crate::root;

/// What a machine that must run these tests sets.
const REQUIRED_VAR: &str = "HADE_REQUIRE_CLIENTS";

/// The Python with the packages of a file of pins, named from the root of the workspace. It is made once in the build
/// folder, and anew when the pins change. `None`, and a word about it, where it cannot be had.
///
/// # Panics
/// Where it cannot be had and must be, see `HADE_REQUIRE_CLIENTS`.
pub fn python_with(pins: &str) -> Option<PathBuf> {
    static MADE: Mutex<BTreeMap<String, Result<PathBuf, String>>> = Mutex::new(BTreeMap::new());
    let mut made = MADE.lock().unwrap_or_else(PoisonError::into_inner);
    match made.entry(pins.to_owned()).or_insert_with(|| environment(pins)) {
        Ok(python) => Some(python.clone()),
        Err(why) => {
            assert!(env::var_os(REQUIRED_VAR).is_none(), "the packages of {pins} are required: {why}");
            eprintln!("SKIPPED: {why}");
            None
        }
    }
}

fn environment(pins: &str) -> Result<PathBuf, String> {
    let pins = root().join(pins);
    let text = fs::read(&pins).map_err(|error| format!("{}: {error}", pins.display()))?;
    let hash: String = Sha256::digest(&text).iter().take(6).map(|byte| format!("{byte:02x}")).collect();
    let folder = build_folder()?.join("python").join(hash);
    let python = folder.join("bin/python");
    let stamp = folder.join("complete");
    if stamp.is_file() && python.is_file() {
        return Ok(python);
    }
    let base = env::var_os("PYTHON").unwrap_or_else(|| "python3".into());
    run(Command::new(&base).args(["-c", "import sys; sys.exit(sys.version_info < (3, 10))"]))
        .map_err(|why| format!("there is no Python 3.10 or newer ({why})"))?;
    let _ = fs::remove_dir_all(&folder);
    run(Command::new(&base).args(["-m", "venv"]).arg(&folder))
        .map_err(|why| format!("no Python environment can be made ({why})"))?;
    run(Command::new(&python)
        .args(["-m", "pip", "install", "--quiet", "--disable-pip-version-check", "--no-input", "--no-compile", "-r"])
        .arg(&pins))
    .map_err(|why| format!("the pinned packages cannot be installed, for want of a network perhaps ({why})"))?;
    fs::write(&stamp, "").map_err(|error| error.to_string())?;
    Ok(python)
}

/// The folder of the build that this test is part of.
fn build_folder() -> Result<PathBuf, String> {
    let program = env::current_exe().map_err(|error| error.to_string())?;
    let profile = program.ancestors().find(|folder| folder.join("deps").is_dir());
    profile.map(Path::to_path_buf).ok_or_else(|| format!("{} lies in no build folder", program.display()))
}

fn run(command: &mut Command) -> Result<(), String> {
    match command.output() {
        Ok(output) if output.status.success() => Ok(()),
        Ok(output) => {
            let said =
                format!("{}{}", String::from_utf8_lossy(&output.stdout), String::from_utf8_lossy(&output.stderr));
            Err(said.lines().last().unwrap_or("it failed").to_owned())
        }
        Err(error) => Err(error.to_string()),
    }
}
