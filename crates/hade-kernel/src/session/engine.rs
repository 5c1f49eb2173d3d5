//! The embedded engine, started in an environment of our own, with `hade` loaded.

use std::fs;
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::{Path, PathBuf};
use std::sync::{Mutex, PoisonError};
use std::time::Duration;
use std::{env, process};

use evcxr::{CommandContext, Completions, EvalContext, EvalOutputs};

use super::folder::SessionFolder;
use crate::cell::{CellError, CellOutcome, Stream};
use crate::collect::Collector;
use crate::compile_error;
use crate::error::{Error, Result};
use crate::hints::Known;
use crate::hook::OPEN_FLAG_VAR;
use crate::interrupt;
use crate::ledger::{Ledger, Variable};
use crate::outcome;
use crate::prepare::Prepared;
use crate::probe::{self, Answer};
use crate::syntax;
use crate::wrapper::PLAN_VAR;

/// What every session has before its first cell.
const PRELUDE: &str = "use hade::prelude::*;";

/// From the first `?` on evcxr compiles every cell as a function that returns a `Result`. Met only in a
/// user's cell, it would also give up showing that cell's value by its own display.
const QUESTION_MARK: &str = "std::result::Result::<(), std::string::String>::Ok(())?;";

/// Sends on what a cell printed without a line end.
const FLUSH: &str = "\nstd::io::Write::flush(&mut std::io::stdout()).ok();";

/// In the session's folder: asks the running cell to stop.
const INTERRUPT_FLAG: &str = "interrupt";

/// What became of a cell.
pub(super) enum Ran {
    /// The engine's answer.
    Engine(std::result::Result<EvalOutputs, evcxr::Error>),
    /// It could not be run, for a reason of ours.
    Refused(CellError),
}

impl Ran {
    /// How long it ran once it was compiled.
    pub(super) fn ran_for(&self) -> Duration {
        match self {
            Ran::Engine(Ok(shown)) => {
                shown.phases.iter().filter(|phase| phase.name == "Execution").map(|phase| phase.duration).sum()
            }
            _ => Duration::ZERO,
        }
    }
}

/// The embedded engine and what reads its output.
pub(super) struct Engine {
    pub(super) context: CommandContext,
    pub(super) collector: Collector,
    /// The folder the engine compiles in.
    pub(super) work: PathBuf,
}

impl Engine {
    /// Starts the engine in `work`, which may hold a copy of the template, with `hade` loaded.
    pub(super) fn start(prepared: &Prepared, work: &Path, config: &Path, cwd: Option<&Path>) -> Result<Engine> {
        let failed = |why: String| Error::Start { why };
        fs::create_dir_all(work).map_err(Error::file("make the folder", work))?;
        let settings = config.join("evcxr.toml");
        let text = format!("[evcxr]\ntmpdir = {}\noffline_mode = true\nopt_level = \"0\"\n", toml_string(work));
        fs::write(&settings, text).map_err(Error::file("write", &settings))?;
        let flag = config.join("open");
        let program = env::current_exe().map_err(|error| failed(error.to_string()))?;
        let mut command = process::Command::new(&program);
        command.env(OPEN_FLAG_VAR, &flag);
        command.env(interrupt::FLAG_VAR, config.join(INTERRUPT_FLAG));
        outputs_folder(&mut command, &prepared.outputs());
        command.env(LOADER_PATH_VAR, loader_path(prepared.shared()));
        if let Some(cwd) = cwd {
            let cwd = fs::canonicalize(cwd).map_err(Error::file("find the folder", cwd))?;
            command.current_dir(cwd);
        }
        let (context, outputs) =
            in_controlled_environment(config, prepared, || EvalContext::with_subprocess_command(command))?
                .map_err(|error| failed(error.to_string()))?;
        open_flag(&flag)?;
        let mut engine = Engine {
            context: CommandContext::with_eval_context(context),
            collector: Collector::new(outputs),
            work: work.to_path_buf(),
        };
        engine.load(prepared)?;
        Ok(engine)
    }

    /// Loads `hade`.
    pub(super) fn load(&mut self, prepared: &Prepared) -> Result<()> {
        let failed = |why: String| Error::Start { why };
        let program = env::current_exe().map_err(|error| failed(error.to_string()))?;
        let load = format!(
            ":build_env RUSTC_WRAPPER={}\n:build_env {PLAN_VAR}={}\n:build_env CARGO_TERM_QUIET=true\n\
             :dep hade = {{ path = {} }}\n{PRELUDE}\n{QUESTION_MARK}",
            program.display(),
            prepared.plan().display(),
            toml_string(&prepared.library()),
        );
        let loaded = self.context.execute(&load);
        let gathered = self.collector.take(false);
        let Err(error) = loaded else {
            return Ok(());
        };
        let known = &mut Known {
            cell: &load,
            ledger: &Ledger::default(),
            variables: &[],
            library: &prepared.library(),
            complete: &mut |_, _| Vec::new(),
        };
        let error = outcome::failed(&error, known, "", &mut Vec::new());
        let printed = CellOutcome { outputs: gathered.outputs, ..CellOutcome::default() }.text(Stream::Stderr);
        Err(failed(format!("{}\n{printed}", error.detail).trim().to_owned()))
    }

    /// What stops a cell, in the session whose folder is given.
    pub(super) fn target(&self, folder: &Path) -> interrupt::Target {
        interrupt::Target {
            process: self.context.process_handle(),
            work: fs::canonicalize(&self.work).unwrap_or_else(|_| self.work.clone()),
            flag: folder.join(INTERRUPT_FLAG),
            begun: self.collector.begun(),
        }
    }

    /// The variables and their types, by name.
    pub(super) fn variables(&self) -> Vec<Variable> {
        let known = self.context.variables_and_types();
        let mut variables: Vec<Variable> = known.map(|(name, kind)| (name.to_owned(), kind.to_owned())).collect();
        variables.sort();
        variables
    }

    /// What could be written at a byte offset of a cell.
    pub(super) fn complete(&mut self, cell: &str, at: usize) -> Option<Completions> {
        catch_unwind(AssertUnwindSafe(|| self.context.completions(cell, at).ok())).ok().flatten()
    }

    /// Whether the process that runs the cells ran anything, so that its last record will come.
    pub(super) fn ran_code(&self, ran: &Ran) -> bool {
        matches!(ran, Ran::Engine(Ok(shown)) if shown.phases.iter().any(|phase| phase.name == "Execution"))
    }

    pub(super) fn run(&mut self, cell: &str) -> Ran {
        if syntax::reads_input(cell) {
            // It would wait for ever: its standard input carries the engine's own commands.
            return Ran::Refused(outcome::asks_for_input());
        }
        let outline = syntax::outline(cell);
        if let Some((line, what)) = &outline.problem {
            return Ran::Refused(compile_error::unreadable(*line, what, cell));
        }
        let known = self.variables();
        let is_variable = |name: &str| {
            known.iter().any(|(known, _)| known == name) || outline.bindings.iter().any(|bound| bound.name == name)
        };
        let mut code = syntax::listed_by_reference(cell, is_variable).unwrap_or_else(|| cell.to_owned());
        if cell.contains("print!(") && !outline.ends_in_expression {
            code.push_str(FLUSH);
        }
        match self.guarded(&code) {
            Ran::Engine(Err(evcxr::Error::Message(message))) if probe::is_needed(&message) => {
                match probe::ask(&mut self.context, &self.work, &code) {
                    Answer::Rewritten(code) => self.guarded(&code),
                    Answer::Unstorable(variables) => Ran::Refused(outcome::unstorable(&variables)),
                    Answer::Nothing => Ran::Engine(Err(evcxr::Error::Message(message))),
                }
            }
            other => other,
        }
    }

    /// Runs code; a panic of the engine itself becomes an error of the cell.
    fn guarded(&mut self, code: &str) -> Ran {
        match catch_unwind(AssertUnwindSafe(|| self.context.execute(code))) {
            Ok(result) => Ran::Engine(result),
            Err(_) => Ran::Refused(outcome::engine_failed()),
        }
    }
}

/// Compiles `hade` in the template folder, by a session that is not kept.
pub(crate) fn make_template(prepared: &Prepared) -> Result<()> {
    let template = prepared.template();
    let config = SessionFolder::new()?;
    let mut engine = Engine::start(prepared, &template, config.path(), None).map_err(|error| match error {
        Error::Start { why } => Error::Build { why },
        other => other,
    })?;
    // A check compiles the library's interface once; the first failed cell would wait for it.
    let _ = engine.context.check("let hade_ready = 1;");
    drop(engine);
    Ok(())
}

#[cfg(unix)]
fn outputs_folder(command: &mut process::Command, folder: &Path) {
    command.env(crate::filter::OUTPUTS_VAR, folder);
}

#[cfg(not(unix))]
fn outputs_folder(_: &mut process::Command, _: &Path) {}

#[cfg(unix)]
fn open_flag(flag: &Path) -> Result<()> {
    crate::filter::open(flag).map_err(Error::file("write", flag))
}

#[cfg(not(unix))]
fn open_flag(_: &Path) -> Result<()> {
    Err(Error::Platform)
}

/// A path as a TOML string.
fn toml_string(path: &Path) -> String {
    serde_json::to_string(&path.to_string_lossy()).unwrap_or_default()
}

/// Where the loader looks for shared libraries first.
const LOADER_PATH_VAR: &str = if cfg!(target_os = "macos") { "DYLD_LIBRARY_PATH" } else { "LD_LIBRARY_PATH" };

/// The loader's path with the compiler's shared standard library in front. Cells carry a path to it
/// that is relative to where they were linked, and are loaded from elsewhere.
fn loader_path(shared: &Path) -> std::ffi::OsString {
    let rest = env::var_os(LOADER_PATH_VAR).unwrap_or_default();
    let folders =
        std::iter::once(shared.to_path_buf()).chain(env::split_paths(&rest).filter(|p| !p.as_os_str().is_empty()));
    env::join_paths(folders).unwrap_or_else(|_| shared.as_os_str().to_owned())
}

/// The engine reads its settings from a variable of this process and, before that, from a file
/// in the current folder, which must not be the user's.
fn in_controlled_environment<T>(config: &Path, prepared: &Prepared, start: impl FnOnce() -> T) -> Result<T> {
    static ONE_AT_A_TIME: Mutex<()> = Mutex::new(());
    let _guard = ONE_AT_A_TIME.lock().unwrap_or_else(PoisonError::into_inner);
    // SAFETY: starts are serialised, and no other code of this program reads or writes the
    // environment while a session starts.
    unsafe {
        env::set_var("EVCXR_CONFIG_DIR", config);
        env::set_var("RUST_SRC_PATH", prepared.ministd());
    }
    let here = env::current_dir().ok().filter(|here| here.join("evcxr.toml").exists());
    if here.is_some() {
        env::set_current_dir(config).map_err(Error::file("enter the folder", config))?;
    }
    let started = start();
    if let Some(here) = here {
        env::set_current_dir(&here).map_err(Error::file("enter the folder", &here))?;
    }
    Ok(started)
}
