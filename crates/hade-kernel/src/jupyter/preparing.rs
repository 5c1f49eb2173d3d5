//! Tells the client whose first cell waits what it waits for.

use std::sync::mpsc::{self, Receiver, RecvTimeoutError, Sender};
use std::thread;
use std::time::{Duration, Instant};

use super::execution;
use super::iopub::IoPub;
use super::queue::Waiting;
use crate::cell::Stream;
use crate::error::{Error, Result};
use crate::prepare::{Prepared, prepare};
use crate::progress::{Progress, Step};

/// How often it is looked whether a cell waits.
const LOOK_EVERY: Duration = Duration::from_millis(300);

/// No more than one line in this time about one stage.
const PAUSE: Duration = Duration::from_secs(10);

/// Prepares the libraries and says how far they are under the first cell that waits, whose execution
/// count is given.
pub(super) fn prepare_visibly(waiting: &mut Waiting, iopub: &IoPub, count: usize) -> Result<Prepared> {
    let (sender, stages) = mpsc::channel();
    thread::scope(|scope| {
        let work = scope.spawn(move || prepare(&mut Stages(sender)));
        Teller { waiting, iopub, count, started: Instant::now(), told: None }.follow(&stages);
        work.join().unwrap_or_else(|_| Err(Error::Start { why: "preparing the libraries failed".to_owned() }))
    })
}

/// What is being done, and how far it is.
#[derive(Debug, Clone, Default)]
struct Stage {
    name: String,
    detail: String,
}

/// Passes the stages on.
struct Stages(Sender<Stage>);

impl Progress for Stages {
    fn step(&mut self, step: Step<'_>) {
        let (name, detail) = match step {
            Step::Notice(text) => (text, String::new()),
            Step::Libraries { done, total, .. } => (
                "building the libraries a session needs, once for this compiler; this takes minutes",
                format!(" ({done} of about {total})"),
            ),
            Step::Library => ("compiling hade for notebooks, once for this version", String::new()),
            Step::Waiting => ("another hade is preparing the libraries; waiting for it", String::new()),
            _ => return,
        };
        let _ = self.0.send(Stage { name: name.to_owned(), detail });
    }
}

/// Says it.
struct Teller<'a> {
    waiting: &'a mut Waiting,
    iopub: &'a IoPub,
    count: usize,
    started: Instant,
    /// The line told last, its stage, and when.
    told: Option<(String, String, Instant)>,
}

impl Teller<'_> {
    fn follow(mut self, stages: &Receiver<Stage>) {
        let mut stage = Stage::default();
        loop {
            match stages.recv_timeout(LOOK_EVERY) {
                Ok(next) => {
                    if next.name != stage.name {
                        eprintln!("hade: {}", next.name);
                    }
                    stage = next;
                }
                Err(RecvTimeoutError::Timeout) => {}
                Err(RecvTimeoutError::Disconnected) => break,
            }
            self.tell(&stage);
        }
        if self.told.is_some() {
            self.say(&format!("ready after {:.0} s\n", self.started.elapsed().as_secs_f64()));
        }
    }

    fn tell(&mut self, stage: &Stage) {
        let line = format!("{}{}\n", stage.name, stage.detail);
        let due = !stage.name.is_empty()
            && self
                .told
                .as_ref()
                .is_none_or(|(told, about, when)| *about != stage.name || (*told != line && when.elapsed() >= PAUSE));
        if due && self.say(&line) {
            self.told = Some((line, stage.name.clone(), Instant::now()));
        }
    }

    /// Prints a line under the first cell that waits; whether one does.
    fn say(&mut self, line: &str) -> bool {
        let Some(task) = self.waiting.first_cell() else {
            return false;
        };
        execution::announce(task, self.iopub, self.count);
        if !execution::is_silent(task) {
            self.iopub.stream(Stream::Stderr, line, &task.request);
        }
        true
    }
}
