//! The thread that owns the session and works off what needs it.

use std::collections::HashSet;
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::sync::Arc;
use std::thread;

use tokio::sync::oneshot;

use super::display::Display;
use super::ending::Ending;
use super::execution;
use super::history::SharedHistory;
use super::iopub::IoPub;
use super::preparing::prepare_visibly;
use super::queue::{EXECUTE, Task, Waiting};
use super::{completion, inspection};
use crate::cell::CellError;
use crate::error::{Error, Result};
use crate::interrupt::InterruptHandle;
use crate::session::{Place, Session, SessionOptions};

/// A session that is warm, and where it is to run.
pub(super) struct Ready {
    pub(super) session: Session,
    pub(super) place: Place,
}

/// Owns the session.
pub(super) struct Worker {
    waiting: Waiting,
    iopub: IoPub,
    history: SharedHistory,
    interrupt: InterruptHandle,
    ending: Arc<Ending>,
    session: Option<Session>,
    ready: Option<Ready>,
    /// Why there is none, until it has been told.
    trouble: Option<Error>,
    /// The number of the last cell that counts.
    count: usize,
    /// The displays that later ones may replace.
    displays: HashSet<String>,
}

impl Worker {
    pub(super) fn new(
        waiting: Waiting,
        iopub: IoPub,
        history: SharedHistory,
        interrupt: InterruptHandle,
        ending: Arc<Ending>,
        ready: Option<Ready>,
    ) -> Worker {
        let (session, trouble, count, displays) = (None, None, 0, HashSet::new());
        Worker { waiting, iopub, history, interrupt, ending, session, ready, trouble, count, displays }
    }

    /// Starts the thread. What is returned hears when the session has ended.
    pub(super) fn spawn(self) -> Result<oneshot::Receiver<()>> {
        let (ended, wait) = oneshot::channel();
        thread::Builder::new()
            .name("session".to_owned())
            .spawn(move || {
                let ending = Arc::clone(&self.ending);
                let _ = catch_unwind(AssertUnwindSafe(|| self.run()));
                // Without a session there is nothing to serve.
                ending.end();
                let _ = ended.send(());
            })
            .map_err(|error| Error::Start { why: error.to_string() })?;
        Ok(wait)
    }

    fn run(mut self) {
        let was_ready = self.ready.is_some();
        match self.start() {
            Ok(()) => {
                if !was_ready
                    && self.waiting.is_empty()
                    && let Some(session) = &mut self.session
                {
                    session.warm();
                }
            }
            // A start that the end of the kernel cut short is no trouble.
            Err(_) if self.waiting.is_closed() => {}
            Err(error) => {
                eprintln!("hade: {error}");
                self.trouble = Some(error);
            }
        }
        while let Some(task) = self.waiting.next() {
            match task.request.kind() {
                EXECUTE => self.execute(task),
                "complete_request" => self.help(&task, |session| {
                    task.replies.reply(completion::reply(session, &task.request), &task.request);
                }),
                _ => self.help(&task, |session| {
                    task.replies.reply(inspection::reply(session, &task.request), &task.request);
                }),
            }
        }
    }

    fn start(&mut self) -> Result<()> {
        if let Some(Ready { mut session, place }) = self.ready.take() {
            self.ending.watch(session.process());
            let folder = place.folder.clone();
            session.move_to(place).map_err(Error::file("enter the folder", &folder))?;
            self.session = Some(session);
            return Ok(());
        }
        let prepared = prepare_visibly(&mut self.waiting, &self.iopub, self.count + 1)?;
        let options = SessionOptions { interrupt: self.interrupt.clone(), ..SessionOptions::default() };
        let session = Session::start(&prepared, options)?;
        self.ending.watch(session.process());
        self.session = Some(session);
        Ok(())
    }

    fn help(&mut self, task: &Task, answer: impl FnOnce(Option<&mut Session>)) {
        self.iopub.busy(&task.request);
        answer(self.session.as_mut().filter(|_| !task.is_stale()));
        self.iopub.idle(&task.request);
    }

    fn execute(&mut self, mut task: Task) {
        if self.waiting.is_aborted(&task) {
            return execution::abort(&task, &self.iopub);
        }
        if self.session.is_none() && self.trouble.is_none() {
            self.waiting.put_back(task);
            self.trouble = self.start().err();
            match self.waiting.next() {
                Some(first) => task = first,
                None => return,
            }
        }
        let silent = execution::is_silent(&task);
        let code = task.request.text("code").to_owned();
        let stored = !silent && !code.trim().is_empty() && task.request.flag("store_history", true);
        self.count += usize::from(stored);
        execution::announce(&mut task, &self.iopub, self.count);

        let mut display = Display::new(&self.iopub, &task.request, self.count, silent, &mut self.displays);
        let error = match &mut self.session {
            Some(session) => {
                session.number_next(self.count);
                session.execute_live(&code, &mut |output| display.show(output)).error
            }
            // The next cell tries again: what was missing may be there by then.
            None => self.trouble.take().map(|error| not_started(&error)),
        };
        let result = display.finish(error.is_some());

        if stored {
            self.history.push(self.count, &code, result);
        }
        if error.is_some() && task.request.flag("stop_on_error", true) {
            self.waiting.abort_cells();
        }
        execution::conclude(&task, &self.iopub, self.count, error.as_ref());
    }
}

fn not_started(error: &Error) -> CellError {
    let sentence = error.to_string();
    CellError { name: "StartError".to_owned(), detail: sentence.clone(), sentence, line: None }
}
