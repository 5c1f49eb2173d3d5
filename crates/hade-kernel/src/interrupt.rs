//! Stops the cell that runs, when it is asked for or when its time is over.
//!
//! A cell that is being compiled stops with its compiler. One that runs is asked first, by a file at which the long
//! loops of the library look, and loses nothing but itself; if it goes on, its process is ended.

use std::fs;
use std::path::PathBuf;
use std::process::Child;
use std::sync::atomic::{AtomicBool, Ordering};
use std::sync::{Arc, Condvar, Mutex, MutexGuard, PoisonError};
use std::thread::{self, JoinHandle};
use std::time::{Duration, Instant};

use crate::children;

/// Named in the process that runs the cells: the file that asks the running cell to stop.
pub(crate) const FLAG_VAR: &str = "HADE_INTERRUPT";

/// A cell that runs on for so long after it was asked to stop is ended.
const PATIENCE: Duration = Duration::from_millis(1500);

/// How often a cell that was asked to stop is looked at.
const TICK: Duration = Duration::from_millis(20);

/// Stops the cell that a session runs, from another thread. Made before its session, see
/// [`SessionOptions`](crate::SessionOptions).
#[derive(Clone, Debug, Default)]
pub struct InterruptHandle {
    switch: Arc<Switch>,
}

impl InterruptHandle {
    /// Stops the running cell; nothing happens when none runs. Returns at once: the outcome of the cell says
    /// what became of it.
    pub fn interrupt(&self) {
        let mut state = self.switch.lock();
        if state.running && state.why.is_none() {
            state.why = Some(Why::Asked);
            self.switch.changed.notify_all();
        }
    }

    /// Stops the running cell and every cell that begins later. Returns at once.
    pub(crate) fn interrupt_for_good(&self) {
        self.switch.lock().for_good = true;
        self.interrupt();
    }
}

/// Why a cell was stopped.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Why {
    /// Somebody asked for it.
    Asked,
    /// Its time was over.
    TooLong(Duration),
}

/// That a cell was stopped.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Stopped {
    pub(crate) why: Why,
    /// Its process had to be ended, and the variables with it.
    pub(crate) killed: bool,
    /// It was still being compiled when it was asked.
    pub(crate) compiling: bool,
}

#[derive(Debug, Default)]
struct Switch {
    state: Mutex<State>,
    changed: Condvar,
}

#[derive(Debug, Default)]
struct State {
    running: bool,
    why: Option<Why>,
    /// Whether a cell that begins is stopped as well.
    for_good: bool,
}

impl Switch {
    fn lock(&self) -> MutexGuard<'_, State> {
        self.state.lock().unwrap_or_else(PoisonError::into_inner)
    }

    fn wait<'a>(&self, state: MutexGuard<'a, State>, limit: Option<Duration>) -> MutexGuard<'a, State> {
        match limit {
            Some(limit) => self.changed.wait_timeout(state, limit).unwrap_or_else(PoisonError::into_inner).0,
            None => self.changed.wait(state).unwrap_or_else(PoisonError::into_inner),
        }
    }
}

/// What is stopped, and how.
#[derive(Clone)]
pub(crate) struct Target {
    /// The process that runs the cells.
    pub(crate) process: Arc<Mutex<Child>>,
    /// The folder the engine compiles in.
    pub(crate) work: PathBuf,
    /// The file that asks the library to stop.
    pub(crate) flag: PathBuf,
    /// Whether the cell has begun to run.
    pub(crate) begun: Arc<AtomicBool>,
}

/// Stops the cells of one session.
pub(crate) struct Interrupts {
    switch: Arc<Switch>,
    target: Target,
}

impl Interrupts {
    pub(crate) fn new(handle: &InterruptHandle, target: Target) -> Interrupts {
        Interrupts { switch: Arc::clone(&handle.switch), target }
    }

    /// A cell is about to be compiled and run. It can be stopped until the watch ends, and no cell after it is
    /// touched, unless the session was interrupted for good.
    pub(crate) fn watch(&self, limit: Option<Duration>) -> Watch {
        let _ = fs::remove_file(&self.target.flag);
        self.target.begun.store(false, Ordering::Relaxed);
        let mut state = self.switch.lock();
        let why = state.for_good.then_some(Why::Asked);
        *state = State { running: true, why, ..*state };
        drop(state);
        let (switch, target) = (Arc::clone(&self.switch), self.target.clone());
        Watch { switch: Arc::clone(&self.switch), thread: thread::spawn(move || watch(&switch, &target, limit)) }
    }
}

/// Stands by while one cell runs.
pub(crate) struct Watch {
    switch: Arc<Switch>,
    thread: JoinHandle<Option<Stopped>>,
}

impl Watch {
    /// The cell ended; whether it was stopped.
    pub(crate) fn end(self) -> Option<Stopped> {
        self.switch.lock().running = false;
        self.switch.changed.notify_all();
        self.thread.join().unwrap_or(None)
    }
}

fn watch(switch: &Switch, target: &Target, limit: Option<Duration>) -> Option<Stopped> {
    let start = Instant::now();
    let mut state = switch.lock();
    let why = loop {
        if let Some(why) = state.why {
            break why;
        }
        if !state.running {
            return None;
        }
        let left = limit.map(|limit| limit.saturating_sub(start.elapsed()));
        if let (Some(limit), Some(Duration::ZERO)) = (limit, left) {
            state.why = Some(Why::TooLong(limit));
        } else {
            state = switch.wait(state, left);
        }
    };
    let has_begun = || target.begun.load(Ordering::Relaxed);
    let mut stopped = Stopped { why, killed: false, compiling: !has_begun() };
    // If it cannot be written the cell is not asked, only ended.
    let _ = fs::write(&target.flag, "");
    let mut asked = None;
    while state.running {
        if !has_begun() {
            children::kill_compilers(&target.work);
        } else if asked.get_or_insert_with(Instant::now).elapsed() > PATIENCE && !stopped.killed {
            stopped.killed = true;
            let _ = target.process.lock().unwrap_or_else(PoisonError::into_inner).kill();
        }
        state = switch.wait(state, Some(TICK));
    }
    let _ = fs::remove_file(&target.flag);
    Some(stopped)
}

#[cfg(test)]
mod tests {
    use std::process::Command;

    use super::*;

    fn interrupts(handle: &InterruptHandle, folder: &std::path::Path) -> std::io::Result<Interrupts> {
        let child = Command::new("sleep").arg("60").spawn()?;
        let target = Target {
            process: Arc::new(Mutex::new(child)),
            work: folder.join("work"),
            flag: folder.join("interrupt"),
            begun: Arc::default(),
        };
        Ok(Interrupts::new(handle, target))
    }

    fn is_alive(interrupts: &Interrupts) -> bool {
        let mut child = interrupts.target.process.lock().unwrap_or_else(PoisonError::into_inner);
        matches!(child.try_wait(), Ok(None))
    }

    fn end(interrupts: &Interrupts) {
        let mut child = interrupts.target.process.lock().unwrap_or_else(PoisonError::into_inner);
        let _ = child.kill();
        let _ = child.wait();
    }

    #[test]
    fn a_cell_is_asked_first_and_the_next_is_left_alone() -> std::io::Result<()> {
        let dir = tempfile::tempdir()?;
        let handle = InterruptHandle::default();
        let interrupts = interrupts(&handle, dir.path())?;
        handle.interrupt();
        let watch = interrupts.watch(None);
        interrupts.target.begun.store(true, Ordering::Relaxed);
        thread::sleep(2 * TICK);
        assert!(!interrupts.target.flag.exists(), "an interrupt between the cells reached the next one");
        handle.interrupt();
        while !interrupts.target.flag.exists() {
            thread::sleep(Duration::from_millis(1));
        }
        let stopped = watch.end();
        assert_eq!(stopped, Some(Stopped { why: Why::Asked, killed: false, compiling: false }));
        assert!(!interrupts.target.flag.exists());
        let watch = interrupts.watch(None);
        interrupts.target.begun.store(true, Ordering::Relaxed);
        thread::sleep(PATIENCE + 5 * TICK);
        assert_eq!(watch.end(), None);
        assert!(is_alive(&interrupts), "the next cell was ended");
        end(&interrupts);
        Ok(())
    }

    #[test]
    fn an_interrupt_for_good_reaches_a_cell_that_begins_after_it() -> std::io::Result<()> {
        let dir = tempfile::tempdir()?;
        let handle = InterruptHandle::default();
        let interrupts = interrupts(&handle, dir.path())?;
        handle.interrupt_for_good();
        for _ in 0..2 {
            let watch = interrupts.watch(None);
            interrupts.target.begun.store(true, Ordering::Relaxed);
            let start = Instant::now();
            while !interrupts.target.flag.exists() {
                assert!(start.elapsed() < PATIENCE, "the cell was not asked to stop");
                thread::sleep(Duration::from_millis(1));
            }
            assert_eq!(watch.end(), Some(Stopped { why: Why::Asked, killed: false, compiling: false }));
        }
        end(&interrupts);
        Ok(())
    }

    #[test]
    fn a_cell_that_runs_on_is_ended() -> std::io::Result<()> {
        let dir = tempfile::tempdir()?;
        let interrupts = interrupts(&InterruptHandle::default(), dir.path())?;
        let limit = Duration::from_millis(50);
        let watch = interrupts.watch(Some(limit));
        interrupts.target.begun.store(true, Ordering::Relaxed);
        let start = Instant::now();
        while is_alive(&interrupts) {
            assert!(start.elapsed() < 3 * PATIENCE, "never ended");
            thread::sleep(TICK);
        }
        assert!(start.elapsed() > PATIENCE);
        assert_eq!(watch.end(), Some(Stopped { why: Why::TooLong(limit), killed: true, compiling: false }));
        end(&interrupts);
        Ok(())
    }
}
