//! Stops a cell that runs too long.

use std::process::Child;
use std::sync::mpsc::{self, RecvTimeoutError, Sender};
use std::sync::{Arc, Mutex, PoisonError};
use std::thread::{self, JoinHandle};
use std::time::Duration;

/// Kills the process that runs the cells unless stopped in time.
pub(crate) struct Timer {
    cancel: Sender<()>,
    thread: JoinHandle<bool>,
}

impl Timer {
    pub(crate) fn start(process: Arc<Mutex<Child>>, limit: Duration) -> Timer {
        let (cancel, cancelled) = mpsc::channel();
        let thread = thread::spawn(move || match cancelled.recv_timeout(limit) {
            Err(RecvTimeoutError::Timeout) => {
                let mut process = process.lock().unwrap_or_else(PoisonError::into_inner);
                let _ = process.kill();
                true
            }
            _ => false,
        });
        Timer { cancel, thread }
    }

    /// Ends the timer; whether it struck.
    pub(crate) fn stop(self) -> bool {
        let _ = self.cancel.send(());
        self.thread.join().unwrap_or(false)
    }
}
