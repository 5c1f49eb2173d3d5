//! Stops the cell that runs, on request.

use std::process::Child;
use std::sync::{Arc, Mutex, MutexGuard, PoisonError};
use std::thread;
use std::time::Duration;

/// A cell that has not ended by itself so long after the request is stopped by force.
const PATIENCE: Duration = Duration::from_millis(1500);

/// Asks the cell that runs to stop. Made before a session starts, see
/// [`SessionOptions`](crate::SessionOptions); its clones stop the same session, from any thread.
#[derive(Debug, Clone, Default)]
pub struct InterruptHandle {
    state: Arc<Mutex<State>>,
}

#[derive(Debug, Default)]
struct State {
    /// The process that runs the cells, while one runs.
    process: Option<Arc<Mutex<Child>>>,
    /// Counts the cells, so that a late timer does not strike the next one.
    cell: u64,
    requested: bool,
}

impl InterruptHandle {
    /// Asks the cell that runs to stop; without one it does nothing.
    pub fn interrupt(&self) {
        let mut state = self.lock();
        if state.process.is_none() || state.requested {
            return;
        }
        state.requested = true;
        let cell = state.cell;
        let handle = self.clone();
        thread::spawn(move || {
            thread::sleep(PATIENCE);
            handle.strike(cell);
        });
    }

    fn strike(&self, cell: u64) {
        let state = self.lock();
        if state.cell == cell
            && let Some(process) = &state.process
        {
            let _ = process.lock().unwrap_or_else(PoisonError::into_inner).kill();
        }
    }

    /// A cell begins.
    pub(crate) fn begin(&self, process: Arc<Mutex<Child>>) {
        let mut state = self.lock();
        state.cell += 1;
        state.process = Some(process);
        state.requested = false;
    }

    /// The cell has ended; whether it was asked to.
    pub(crate) fn end(&self) -> bool {
        let mut state = self.lock();
        state.process = None;
        state.requested
    }

    fn lock(&self) -> MutexGuard<'_, State> {
        self.state.lock().unwrap_or_else(PoisonError::into_inner)
    }
}
