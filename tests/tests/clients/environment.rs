//! A Python environment with the clients, and a Jupyter that knows the kernel of this build.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output};
use std::sync::{Mutex, MutexGuard, PoisonError};

use hade_tests::{hade_binary, python_with, root};

/// A Jupyter of its own, which one test has at a time: a kernel takes both cores.
pub struct Jupyter {
    python: PathBuf,
    folder: tempfile::TempDir,
    _turn: MutexGuard<'static, ()>,
}

impl Jupyter {
    /// `None`, and a word about it, where the clients cannot be had.
    pub fn new() -> Option<Jupyter> {
        Jupyter::with("tests/clients/requirements.txt")
    }

    /// With the packages of a file of pins.
    pub fn with(pins: &str) -> Option<Jupyter> {
        static TURN: Mutex<()> = Mutex::new(());
        let turn = TURN.lock().unwrap_or_else(PoisonError::into_inner);
        let python = python_with(pins)?;
        let jupyter = Jupyter { python, folder: tempfile::tempdir().expect("a folder"), _turn: turn };
        jupyter.install(&[]);
        Some(jupyter)
    }

    /// One whose kernels are taken over by a process that stands by.
    pub fn with_standby() -> Option<Jupyter> {
        let jupyter = Jupyter::new()?;
        jupyter.install(&["--standby"]);
        Some(jupyter)
    }

    /// The folder all its files are in.
    pub fn folder(&self) -> &Path {
        self.folder.path()
    }

    fn install(&self, options: &[&str]) {
        let words = [&["kernel", "install"], options, &["--prefix"]].concat();
        let installed = self.hade(&words, &[self.folder()]);
        assert!(installed.status.success(), "{}", said(&installed));
        fs::create_dir_all(self.folder().join("tmp")).expect("a folder");
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
