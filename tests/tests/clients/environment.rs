//! A Python environment with the clients, and a Jupyter that knows the kernel of this build.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output};
use std::sync::{Mutex, MutexGuard, OnceLock, PoisonError};

use hade_tests::{hade_binary, root};
use sha2::{Digest, Sha256};

/// What a machine that must run these tests sets.
const REQUIRED_VAR: &str = "HADE_REQUIRE_CLIENTS";

/// A Jupyter of its own, which one test has at a time: a kernel takes both cores.
pub struct Jupyter {
    python: PathBuf,
    folder: tempfile::TempDir,
    _turn: MutexGuard<'static, ()>,
}

impl Jupyter {
    /// `None`, and a word about it, where the clients cannot be had.
    pub fn new() -> Option<Jupyter> {
        static TURN: Mutex<()> = Mutex::new(());
        static PYTHON: OnceLock<Result<PathBuf, String>> = OnceLock::new();
        let turn = TURN.lock().unwrap_or_else(PoisonError::into_inner);
        match PYTHON.get_or_init(environment) {
            Ok(python) => {
                let jupyter =
                    Jupyter { python: python.clone(), folder: tempfile::tempdir().expect("a folder"), _turn: turn };
                jupyter.install();
                Some(jupyter)
            }
            Err(why) => {
                assert!(std::env::var_os(REQUIRED_VAR).is_none(), "the Jupyter clients are required: {why}");
                eprintln!("SKIPPED: {why}");
                None
            }
        }
    }

    /// The folder all its files are in.
    pub fn folder(&self) -> &Path {
        self.folder.path()
    }

    fn install(&self) {
        let installed = self.hade(&["kernel", "install", "--prefix"], &[self.folder()]);
        assert!(installed.status.success(), "{}", said(&installed));
        fs::create_dir(self.folder().join("tmp")).expect("a folder");
    }

    /// Runs the command of this build.
    pub fn hade(&self, words: &[&str], paths: &[&Path]) -> Output {
        Command::new(hade_binary()).args(words).args(paths).output().expect("the hade command runs")
    }

    /// Runs a script of `tests/clients`; fails with what it said unless it succeeds.
    #[track_caller]
    pub fn run(&self, script: &str, arguments: &[&str]) -> Output {
        let output = Command::new(&self.python)
            .arg("-B")
            .arg(root().join("tests/clients").join(script))
            .args(arguments)
            .current_dir(self.folder())
            .env("JUPYTER_PATH", self.folder().join("share/jupyter"))
            .env("JUPYTER_NO_CONFIG", "1")
            .env("JUPYTER_PLATFORM_DIRS", "1")
            .env("JUPYTER_DATA_DIR", self.folder().join("data"))
            .env("JUPYTER_CONFIG_DIR", self.folder().join("config"))
            .env("JUPYTER_RUNTIME_DIR", self.folder().join("runtime"))
            .env("TMPDIR", self.folder().join("tmp"))
            .output()
            .expect("the script runs");
        assert!(output.status.success(), "{script} {arguments:?}\n{}", said(&output));
        output
    }
}

pub fn said(output: &Output) -> String {
    format!("{}{}", String::from_utf8_lossy(&output.stdout), String::from_utf8_lossy(&output.stderr))
}

/// The Python with the pinned clients: made once in the build folder, and anew when the pins change.
fn environment() -> Result<PathBuf, String> {
    let pins = root().join("tests/clients/requirements.txt");
    let text = fs::read(&pins).map_err(|error| format!("{}: {error}", pins.display()))?;
    let hash: String = Sha256::digest(&text).iter().take(6).map(|byte| format!("{byte:02x}")).collect();
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(format!("clients-{hash}"));
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
        .args(["-m", "pip", "install", "--quiet", "--disable-pip-version-check", "--no-input", "-r"])
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
