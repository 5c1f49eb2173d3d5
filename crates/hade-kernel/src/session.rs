//! A session: one notebook engine with `hade` loaded.

mod engine;
mod folder;
mod live;
mod place;

use std::env;
use std::fs::{self, File};
use std::io;
use std::path::PathBuf;
use std::time::{Duration, Instant};

use crate::cache;
use crate::cell::{CellOutcome, Output};
use crate::collect::Gathered;
use crate::commands;
use crate::error::{Error, Result};
use crate::hints::Known;
use crate::interrupt::{InterruptHandle, Interrupts};
use crate::ledger::{End, Ledger, Loss, Variable};
use crate::outcome;
use crate::prepare::Prepared;

use self::engine::{Engine, Ran};
use self::folder::{SessionFolder, sweep};

pub(crate) use self::engine::make_template;
pub(crate) use self::folder::remove_folders;
pub(crate) use self::place::Place;

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
    /// Where the cells run, and whether they began elsewhere.
    place: Option<Place>,
    moved: bool,
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
        let begun = options.folder.as_ref().and_then(|folder| fs::canonicalize(folder).ok());
        let interrupts = Interrupts::new(&options.interrupt, engine.target(folder.path()));
        Ok(Session {
            engine,
            options,
            interrupts,
            ledger: Ledger::default(),
            number: 0,
            place: begun.map(Place::folder),
            moved: false,
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
        if matches!(end, End::Lost(_)) {
            self.move_again();
        } else {
            self.ledger.note(self.number, remembered, &before, &after, end);
        }
        self.ledger.note_retyped(self.number, &outcome::retyped(&outcome));
        outcome
    }

    fn outcome(&mut self, ran: Ran, gathered: Gathered, cell: &str, loss: &str) -> CellOutcome {
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
            (Ran::Engine(Err(error)), None) => {
                let (variables, library) = (self.engine.variables(), self.prepared.library());
                let mut complete = |code: &str, at: usize| {
                    let found = self.engine.complete(code, at).map(|found| found.completions).unwrap_or_default();
                    found.into_iter().map(|item| item.code).collect()
                };
                let known = &mut Known {
                    cell,
                    ledger: &self.ledger,
                    variables: &variables,
                    library: &library,
                    complete: &mut complete,
                };
                Some(outcome::failed(&error, known, loss, &mut outputs))
            }
        };
        CellOutcome { outputs, error, elapsed: Duration::ZERO }
    }

    /// Lets the cells that follow run in another folder, with another environment.
    ///
    /// # Errors
    /// If there is no such folder, or the process that runs the cells cannot enter it.
    pub(crate) fn move_to(&mut self, place: Place) -> io::Result<()> {
        let place = Place { folder: fs::canonicalize(&place.folder)?, ..place };
        if self.place.as_ref() == Some(&place) {
            return Ok(());
        }
        match self.run_aside(&place.code()).error {
            None => {
                self.place = Some(place);
                self.moved = true;
                Ok(())
            }
            Some(error) => Err(io::Error::other(error.sentence)),
        }
    }

    /// A process that takes another's place begins where the first one did.
    fn move_again(&mut self) {
        if let Some(place) = self.place.as_ref().filter(|_| self.moved) {
            let ran = self.engine.run(&place.code());
            let _ = self.engine.collector.take(self.engine.ran_code(&ran));
        }
    }

    /// Forgets everything but `hade` itself.
    pub(crate) fn start_over(&mut self) -> Result<()> {
        let forgotten = self.engine.context.execute(":clear");
        forgotten.map_err(|error| Error::Start { why: error.to_string() })?;
        self.engine.load(&self.prepared)?;
        self.move_again();
        Ok(())
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
