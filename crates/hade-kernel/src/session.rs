//! A session: one notebook engine with `hade` loaded.

mod live;

use std::fs::{self, File};
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::{Path, PathBuf};
use std::sync::{Mutex, PoisonError};
use std::time::{Duration, Instant};
use std::{env, process};

use evcxr::{CommandContext, EvalContext, EvalOutputs};

use crate::cache;
use crate::cell::{CellError, CellOutcome, Output};
use crate::collect::{Collector, Gathered};
use crate::commands;
use crate::compile_error;
use crate::error::{Error, Result};
use crate::hook::OPEN_FLAG_VAR;
use crate::interrupt::{self, InterruptHandle, Interrupts};
use crate::ledger::{End, Ledger, Loss, Variable};
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

/// How a session runs.
#[derive(Debug, Clone, Default)]
pub struct SessionOptions {
    /// The folder in which the cells run: the notebook's own. `None`: the current one.
    pub folder: Option<PathBuf>,
    /// A cell that runs longer is stopped.
    pub cell_timeout: Option<Duration>,
    /// Stops cells of this session.
    pub interrupt: InterruptHandle,
}

/// A notebook session with `hade` loaded.
///
/// Variables, items and imports of one cell are there in the next. The session's files lie in a
/// temporary folder that goes with it.
pub struct Session {
    // Dropped in this order: the process that runs the cells ends before its folder goes.
    engine: Engine,
    options: SessionOptions,
    interrupts: Interrupts,
    ledger: Ledger,
    /// The number of the cell that runs.
    number: usize,
    /// How long the last cell ran, once it was compiled.
    ran_for: Duration,
    prepared: Prepared,
    folder: SessionFolder,
    _cache: File,
}

impl Session {
    /// Starts a session.
    ///
    /// # Errors
    /// If the session's folder cannot be made or the engine does not start.
    pub fn start(prepared: &Prepared, options: SessionOptions) -> Result<Session> {
        Session::begin(prepared, options).map_err(|error| error.in_temporary(&env::temp_dir()))
    }

    fn begin(prepared: &Prepared, options: SessionOptions) -> Result<Session> {
        sweep();
        let held = cache::hold(prepared.cache())?;
        let folder = SessionFolder::new()?;
        let work = folder.path().join("work");
        cache::copy_folder(&prepared.template(), &work)?;
        let engine = Engine::start(prepared, &work, folder.path(), options.folder.as_deref())?;
        let interrupts = Interrupts::new(&options.interrupt, engine.target(folder.path()));
        Ok(Session {
            engine,
            options,
            interrupts,
            ledger: Ledger::default(),
            number: 0,
            ran_for: Duration::ZERO,
            prepared: prepared.clone(),
            folder,
            _cache: held,
        })
    }

    /// Runs a cell. A cell that fails is an outcome with an error; the session goes on.
    pub fn execute(&mut self, cell: &str) -> CellOutcome {
        let started = Instant::now();
        self.number += 1;
        let mut outcome = match commands::split(cell) {
            Ok(split) => self.carry_out(&split),
            Err(error) => CellOutcome { error: Some(error), ..CellOutcome::default() },
        };
        outcome.elapsed = started.elapsed();
        outcome
    }

    /// The number by which messages name the next cell (Jupyter's `[n]`). Without it cells are counted from 1.
    pub fn number_next(&mut self, number: usize) {
        self.number = number.saturating_sub(1);
    }

    /// Runs the code of the cell.
    pub(crate) fn run_code(&mut self, code: &str) -> CellOutcome {
        self.run(code, code)
    }

    /// Runs code that is no cell: what it names and defines is not remembered.
    pub(crate) fn run_aside(&mut self, code: &str) -> CellOutcome {
        self.run(code, "")
    }

    fn run(&mut self, code: &str, remembered: &str) -> CellOutcome {
        let before = self.engine.variables();
        let watch = self.interrupts.watch(self.options.cell_timeout);
        let ran = self.engine.run(code);
        let stopped = watch.end();
        let killed = stopped.is_some_and(|stopped| stopped.killed);
        let died = matches!(ran, Ran::Engine(Err(evcxr::Error::SubprocessTerminated(_))));
        let gathered = self.engine.collector.take(!died && !killed && self.engine.ran_code(&ran));
        if killed && !died {
            // Ended just as the cell did: the engine has not noticed yet.
            let _ = self.engine.context.execute(":restart");
        }
        self.ran_for = ran.ran_for();
        let end = match &ran {
            _ if killed => End::Lost(Loss::Stopped),
            _ if died => End::Lost(Loss::Crashed),
            Ran::Engine(Ok(_)) if gathered.stop.is_none() => End::Whole,
            _ => End::Early,
        };
        let after = self.engine.variables();
        let mut loss = String::new();
        if matches!(end, End::Lost(_)) {
            self.ledger.note(self.number, remembered, &before, &after, end);
            loss = self.ledger.loss(self.number);
        }
        let mut outcome = self.outcome(ran, gathered, code, &loss);
        if let Some(error) = stopped.and_then(|stopped| outcome::interrupted(stopped, outcome.error.as_ref(), &loss)) {
            outcome.error = Some(error);
        }
        outcome.error = outcome.error.map(outcome::bounded);
        if !matches!(end, End::Lost(_)) {
            self.ledger.note(self.number, remembered, &before, &after, end);
        }
        self.ledger.note_retyped(self.number, &outcome::retyped(&outcome));
        outcome
    }

    fn outcome(&self, ran: Ran, gathered: Gathered, cell: &str, loss: &str) -> CellOutcome {
        let Gathered { mut outputs, stop, .. } = gathered;
        let error = match (ran, stop) {
            (_, Some(stop)) => Some(outcome::stopped(stop, &self.engine.work, cell)),
            (Ran::Refused(error), None) => Some(error),
            (Ran::Engine(Ok(shown)), None) => {
                if !shown.is_empty() {
                    outputs.push(Output::Display(shown.content_by_mime_type.into_iter().collect()));
                }
                None
            }
            (Ran::Engine(Err(_)), None) if !self.engine.work.exists() => Some(outcome::gone(self.folder.path())),
            (Ran::Engine(Err(_)), None) if !self.prepared.is_there() => Some(outcome::gone(self.prepared.cache())),
            (Ran::Engine(Err(error)), None) => Some(outcome::failed(&error, cell, loss, &mut outputs, &self.ledger)),
        };
        CellOutcome { outputs, error, elapsed: Duration::ZERO }
    }

    /// Forgets everything but `hade` itself.
    pub(crate) fn start_over(&mut self) -> Result<()> {
        let forgotten = self.engine.context.execute(":clear");
        forgotten.map_err(|error| Error::Start { why: error.to_string() })?;
        self.engine.load(&self.prepared)
    }

    pub(crate) fn ledger(&mut self) -> &mut Ledger {
        &mut self.ledger
    }

    pub(crate) fn ran_for(&self) -> Duration {
        self.ran_for
    }

    /// The variables the cells so far left behind.
    pub fn variables(&self) -> Vec<String> {
        self.engine.variables().into_iter().map(|(name, _)| name).collect()
    }

    /// The same with their types.
    pub(crate) fn variables_and_types(&self) -> Vec<Variable> {
        self.engine.variables()
    }
}

/// What became of a cell.
enum Ran {
    /// The engine's answer.
    Engine(std::result::Result<EvalOutputs, evcxr::Error>),
    /// It could not be run, for a reason of ours.
    Refused(CellError),
}

impl Ran {
    /// How long it ran once it was compiled.
    fn ran_for(&self) -> Duration {
        match self {
            Ran::Engine(Ok(shown)) => {
                shown.phases.iter().filter(|phase| phase.name == "Execution").map(|phase| phase.duration).sum()
            }
            _ => Duration::ZERO,
        }
    }
}

/// The embedded engine and what reads its output.
struct Engine {
    context: CommandContext,
    collector: Collector,
    /// The folder the engine compiles in.
    work: PathBuf,
}

impl Engine {
    /// Starts the engine in `work`, which may hold a copy of the template, with `hade` loaded.
    fn start(prepared: &Prepared, work: &Path, config: &Path, cwd: Option<&Path>) -> Result<Engine> {
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
    fn load(&mut self, prepared: &Prepared) -> Result<()> {
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
        let error = outcome::failed(&error, &load, "", &mut Vec::new(), &Ledger::default());
        let printed =
            CellOutcome { outputs: gathered.outputs, ..CellOutcome::default() }.text(crate::cell::Stream::Stderr);
        Err(failed(format!("{}\n{printed}", error.detail).trim().to_owned()))
    }

    /// What stops a cell, in the session whose folder is given.
    fn target(&self, folder: &Path) -> interrupt::Target {
        interrupt::Target {
            process: self.context.process_handle(),
            work: fs::canonicalize(&self.work).unwrap_or_else(|_| self.work.clone()),
            flag: folder.join(INTERRUPT_FLAG),
            begun: self.collector.begun(),
        }
    }

    /// The variables and their types, by name.
    fn variables(&self) -> Vec<Variable> {
        let known = self.context.variables_and_types();
        let mut variables: Vec<Variable> = known.map(|(name, kind)| (name.to_owned(), kind.to_owned())).collect();
        variables.sort();
        variables
    }

    /// Whether the process that runs the cells ran anything, so that its last record will come.
    fn ran_code(&self, ran: &Ran) -> bool {
        matches!(ran, Ran::Engine(Ok(shown)) if shown.phases.iter().any(|phase| phase.name == "Execution"))
    }

    fn run(&mut self, cell: &str) -> Ran {
        if syntax::reads_input(cell) {
            // It would wait for ever: its standard input carries the engine's own commands.
            return Ran::Refused(outcome::asks_for_input());
        }
        let outline = syntax::outline(cell);
        if let Some((line, what)) = &outline.problem {
            return Ran::Refused(compile_error::unreadable(*line, what, cell));
        }
        let mut code = cell.to_owned();
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

/// One session's folder, held by a lock so that a later session can tell it from a left-over.
struct SessionFolder {
    folder: tempfile::TempDir,
    _lock: File,
}

/// Begins the name; after it comes the number of the process.
const FOLDER_PREFIX: &str = "hade-session-";
const FOLDER_LOCK: &str = "lock";

/// In the session's folder: asks the running cell to stop.
const INTERRUPT_FLAG: &str = "interrupt";

impl SessionFolder {
    fn new() -> Result<SessionFolder> {
        let place = env::temp_dir();
        let folder =
            tempfile::Builder::new().prefix(&own_prefix()).tempdir().map_err(Error::file("make a folder in", place))?;
        let path = folder.path().join(FOLDER_LOCK);
        let lock = File::create(&path).map_err(Error::file("write", &path))?;
        lock.lock().map_err(Error::file("lock", &path))?;
        Ok(SessionFolder { folder, _lock: lock })
    }

    fn path(&self) -> &Path {
        self.folder.path()
    }
}

fn own_prefix() -> String {
    format!("{FOLDER_PREFIX}{}-", process::id())
}

/// Removes the folders of this process's sessions, when it ends before they do.
pub(crate) fn remove_folders() {
    for entry in fs::read_dir(env::temp_dir()).into_iter().flatten().flatten() {
        if entry.file_name().to_string_lossy().starts_with(&own_prefix()) {
            let _ = fs::remove_dir_all(entry.path());
        }
    }
}

/// Removes the folders of sessions that were killed.
fn sweep() {
    for entry in fs::read_dir(env::temp_dir()).into_iter().flatten().flatten() {
        if !entry.file_name().to_string_lossy().starts_with(FOLDER_PREFIX) {
            continue;
        }
        let path = entry.path();
        if let Ok(lock) = File::open(path.join(FOLDER_LOCK))
            && lock.try_lock().is_ok()
        {
            let _ = fs::remove_dir_all(path);
        }
    }
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
