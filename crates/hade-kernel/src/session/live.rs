//! What a client that sits before a notebook wants beyond running its cells.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::process::Child;
use std::sync::mpsc::{self, RecvTimeoutError};
use std::sync::{Arc, Mutex};
use std::thread;
use std::time::Duration;

use super::Session;
use crate::cell::{CellOutcome, Output};

/// A value is kept and a method looked up; nothing stays, because the value is moved.
const WARM_UP: &str = "let hade_warm_up = 1.0.mpa().in_mpa().to_string();\ndrop(hade_warm_up);";

/// How often outputs are shown while a cell runs.
const SHOW_EVERY: Duration = Duration::from_millis(20);

impl Session {
    /// As [`execute`](Session::execute), but each output goes to `show` as soon as it is there, on
    /// another thread; the outcome holds none. Text that comes fast is shown in larger pieces.
    pub fn execute_live(&mut self, cell: &str, show: &mut (dyn FnMut(Output) + Send)) -> CellOutcome {
        let live = self.engine.collector.live();
        let (running, ended) = mpsc::channel::<()>();
        thread::scope(|scope| {
            let shower = scope.spawn(move || {
                while ended.recv_timeout(SHOW_EVERY) == Err(RecvTimeoutError::Timeout) {
                    live.ready().into_iter().for_each(&mut *show);
                }
                show
            });
            let mut outcome = self.execute(cell);
            drop(running);
            if let Ok(show) = shower.join() {
                outcome.outputs.drain(..).for_each(show);
            }
            outcome
        })
    }

    /// Does what the first cell would wait for: the engine reads the library at the first `let`.
    pub(crate) fn warm(&mut self) {
        let _ = self.run_aside(WARM_UP);
    }

    /// What could be written at a byte offset of a cell.
    pub(crate) fn complete(&mut self, cell: &str, at: usize) -> Option<evcxr::Completions> {
        self.engine.complete(cell, at)
    }

    /// What is known about the name before a byte offset of a cell: as plain text and as HTML.
    pub(crate) fn inspect(&mut self, cell: &str, at: usize) -> Option<(String, String)> {
        catch_unwind(AssertUnwindSafe(|| self.engine.context.hover_at(cell, at).ok())).ok().flatten()
    }

    /// The process that runs the cells, also after it was started anew.
    pub(crate) fn process(&self) -> Arc<Mutex<Child>> {
        self.engine.context.process_handle()
    }
}
