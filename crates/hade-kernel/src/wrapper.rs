//! The compiler wrapper: Cargo calls our own executable, which adds the prebuilt libraries.
//!
//! `--extern` flags go only to the compilation of `hade` itself, so a user's own dependency that
//! brings another `serde` builds beside it. The cells get the folders only, where the compiler
//! finds what `hade` was built from.

use std::ffi::OsString;
use std::fmt::Write as _;
use std::path::Path;
use std::process::Command;
use std::{env, fs};

use crate::{early, source_map};

/// Set for the compiler wrapper: the path of the [`Plan`].
pub(crate) const PLAN_VAR: &str = "HADE_RUSTC_PLAN";

/// While this file lies beside the cell's manifest, types in messages are written in full.
pub(crate) const FULL_TYPES_FILE: &str = ".full-types";

/// The crate name of the library.
const LIBRARY_CRATE: &str = "hade";

/// The crate name the engine gives a cell.
const CELL_CRATE: &str = "ctx";

/// What to add to which compilation; one line an argument in the file.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct Plan {
    /// Arguments for the compilation of `hade`.
    pub(crate) library: Vec<String>,
    /// Arguments for the compilation of a cell.
    pub(crate) cell: Vec<String>,
}

impl Plan {
    /// The text of the plan file.
    pub(crate) fn to_text(&self) -> String {
        let mut text = String::new();
        for (role, args) in [("library", &self.library), ("cell", &self.cell)] {
            for arg in args {
                let _ = writeln!(text, "{role} {arg}");
            }
        }
        text
    }

    fn from_text(text: &str) -> Plan {
        let mut plan = Plan::default();
        for line in text.lines() {
            match line.split_once(' ') {
                Some(("library", arg)) => plan.library.push(arg.to_owned()),
                Some(("cell", arg)) => plan.cell.push(arg.to_owned()),
                _ => {}
            }
        }
        plan
    }

    /// The compiler's arguments with what the plan adds.
    fn completed(&self, mut args: Vec<OsString>) -> Vec<OsString> {
        let added = match crate_name(&args) {
            Some(LIBRARY_CRATE) => {
                // Compiled once and never again in this folder, which is copied for each session.
                drop_incremental(&mut args);
                &self.library
            }
            Some(CELL_CRATE) => &self.cell,
            _ => return args,
        };
        args.extend(added.iter().map(OsString::from));
        args
    }
}

fn crate_name(args: &[OsString]) -> Option<&str> {
    args.iter().skip_while(|arg| *arg != "--crate-name").nth(1)?.to_str()
}

fn drop_incremental(args: &mut Vec<OsString>) {
    let place =
        args.windows(2).position(|pair| pair[0] == "-C" && pair[1].to_string_lossy().starts_with("incremental="));
    if let Some(at) = place {
        args.drain(at..at + 2);
    }
}

/// Runs the compiler named by the first argument, with what the plan adds; does not return.
pub(crate) fn run(plan: &Path) -> ! {
    let mut args: Vec<OsString> = env::args_os().skip(1).collect();
    if args.is_empty() {
        eprintln!("hade was called as a compiler wrapper without a compiler");
        std::process::exit(2);
    }
    let plan = match fs::read_to_string(plan) {
        Ok(text) => Plan::from_text(&text),
        Err(error) => {
            eprintln!("cannot read {}: {error}", plan.display());
            std::process::exit(2);
        }
    };
    let mut command = Command::new(args.remove(0));
    let is_cell = crate_name(&args) == Some(CELL_CRATE);
    command.args(plan.completed(args));
    if is_cell {
        // Without it an error is told without its line.
        let _ = early::add_places(Path::new(source_map::MADE));
    }
    if is_cell && Path::new(FULL_TYPES_FILE).exists() {
        // Names only how types are printed in the messages of this one check.
        command.arg("--verbose").arg("-Ztrim-diagnostic-paths=no").env("RUSTC_BOOTSTRAP", "1");
    }
    command.env_remove(PLAN_VAR);
    become_command(command)
}

#[cfg(unix)]
fn become_command(mut command: Command) -> ! {
    use std::os::unix::process::CommandExt as _;
    let error = command.exec();
    eprintln!("cannot start the compiler: {error}");
    std::process::exit(2)
}

#[cfg(not(unix))]
fn become_command(mut command: Command) -> ! {
    match command.status() {
        Ok(status) => std::process::exit(status.code().unwrap_or(2)),
        Err(error) => {
            eprintln!("cannot start the compiler: {error}");
            std::process::exit(2)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn plan() -> Plan {
        Plan { library: vec!["--extern=serde=/a b/libserde.rlib".into()], cell: vec!["-Ldependency=/a b".into()] }
    }

    #[test]
    fn the_file_gives_the_plan_back() {
        assert_eq!(Plan::from_text(&plan().to_text()), plan());
    }

    #[test]
    fn only_hade_gets_the_libraries() {
        let args =
            |name: &str| ["--crate-name", name, "-C", "incremental=x", "-C", "metadata=y"].map(OsString::from).to_vec();
        let hade = plan().completed(args("hade"));
        assert!(hade.contains(&"--extern=serde=/a b/libserde.rlib".into()));
        assert!(!hade.contains(&"incremental=x".into()) && hade.contains(&"metadata=y".into()));
        let cell = plan().completed(args("ctx"));
        assert_eq!(cell[..6], args("ctx"));
        assert_eq!(cell[6], "-Ldependency=/a b");
        assert_eq!(plan().completed(args("serde")), args("serde"));
        assert_eq!(plan().completed(vec!["-vV".into()]), ["-vV"]);
    }
}
