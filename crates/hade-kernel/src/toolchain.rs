//! The user's compiler.

use std::path::PathBuf;
use std::process::Command;

use crate::error::{Error, Result};

/// The user's `cargo` and `rustc`, as the notebook engine finds them.
#[derive(Debug, Clone)]
pub(crate) struct Toolchain {
    pub(crate) cargo: PathBuf,
    pub(crate) rustc: PathBuf,
    /// What `rustc -vV` prints: everything compiled is bound to it.
    pub(crate) version: String,
    /// The target it compiles for.
    pub(crate) host: String,
    /// The folder of its shared standard library, which every cell loads.
    pub(crate) shared: PathBuf,
}

impl Toolchain {
    /// Finds the compiler and asks it who it is.
    pub(crate) fn find() -> Result<Toolchain> {
        let rustc = tool("rustc");
        let said = Command::new(&rustc)
            .arg("-vV")
            .output()
            .map_err(|error| Error::Toolchain { tool: "rustc", why: error.to_string() })?;
        let version = String::from_utf8_lossy(&said.stdout).into_owned();
        let host = version
            .lines()
            .find_map(|line| line.strip_prefix("host: "))
            .ok_or_else(|| Error::Toolchain {
                tool: "rustc",
                why: String::from_utf8_lossy(&said.stderr).trim().to_owned(),
            })?
            .to_owned();
        let shared = Command::new(&rustc)
            .args(["--print", "target-libdir"])
            .output()
            .map_err(|error| Error::Toolchain { tool: "rustc", why: error.to_string() })?;
        let shared = PathBuf::from(String::from_utf8_lossy(&shared.stdout).trim());
        Ok(Toolchain { cargo: tool("cargo"), rustc, version, host, shared })
    }

    /// A Cargo command that no setting of the caller's project reaches.
    pub(crate) fn cargo(&self) -> Command {
        let mut command = Command::new(&self.cargo);
        command.env("RUSTC", &self.rustc);
        for variable in [
            "CARGO_BUILD_TARGET",
            "CARGO_BUILD_TARGET_DIR",
            "CARGO_BUILD_BUILD_DIR",
            "CARGO_ENCODED_RUSTFLAGS",
            "CARGO_TARGET_DIR",
            "RUSTC_WRAPPER",
            "RUSTC_WORKSPACE_WRAPPER",
            "RUSTFLAGS",
        ] {
            command.env_remove(variable);
        }
        for (name, _) in std::env::vars_os() {
            if name.to_string_lossy().starts_with("CARGO_PROFILE_") {
                command.env_remove(name);
            }
        }
        command
    }
}

/// The tool rustup would run, else the one on the path. (The engine does the same; a tool behind
/// rustup's proxy starts faster when called directly.)
fn tool(name: &str) -> PathBuf {
    Command::new("rustup")
        .args(["which", name])
        .output()
        .ok()
        .filter(|said| said.status.success())
        .and_then(|said| String::from_utf8(said.stdout).ok())
        .map(|path| PathBuf::from(path.trim()))
        .filter(|path| path.is_file())
        .unwrap_or_else(|| PathBuf::from(name))
}
