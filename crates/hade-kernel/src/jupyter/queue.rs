//! What waits for the session, in the order it came.

use std::collections::VecDeque;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, AtomicU64, Ordering};
use std::sync::mpsc::{self, Receiver, Sender};
use std::time::{Duration, Instant};

use super::message::Request;
use super::replies::Replies;

/// The kind of the requests that run a cell.
pub(super) const EXECUTE: &str = "execute_request";

/// Nobody waits longer for help with writing.
const HELP_WAITS: Duration = Duration::from_secs(10);

/// A request that needs the session.
pub(super) struct Task {
    pub(super) request: Arc<Request>,
    pub(super) replies: Replies,
    /// Its clients have been told that it began.
    pub(super) announced: bool,
    number: u64,
    came: Instant,
}

impl Task {
    /// Whether it runs a cell.
    pub(super) fn is_cell(&self) -> bool {
        self.request.kind() == EXECUTE
    }

    /// Whether its answer would come too late to be of use.
    pub(super) fn is_stale(&self) -> bool {
        self.came.elapsed() > HELP_WAITS
    }
}

#[derive(Default)]
struct Shared {
    came: AtomicU64,
    /// Cells with this number or a lower one do not run.
    aborted: AtomicU64,
    closed: AtomicBool,
}

/// The end at which requests come in.
#[derive(Clone)]
pub(super) struct Queue {
    sender: Sender<Option<Task>>,
    shared: Arc<Shared>,
}

/// The end at which they are worked off.
pub(super) struct Waiting {
    receiver: Receiver<Option<Task>>,
    tasks: VecDeque<Task>,
    shared: Arc<Shared>,
}

pub(super) fn new() -> (Queue, Waiting) {
    let (sender, receiver) = mpsc::channel();
    let shared = Arc::new(Shared::default());
    (Queue { sender, shared: Arc::clone(&shared) }, Waiting { receiver, tasks: VecDeque::new(), shared })
}

impl Queue {
    /// Puts a request at the end.
    pub(super) fn put(&self, request: Request, replies: &Replies) {
        let number = self.shared.came.fetch_add(1, Ordering::SeqCst) + 1;
        let task = Task {
            request: Arc::new(request),
            replies: replies.clone(),
            announced: false,
            number,
            came: Instant::now(),
        };
        let _ = self.sender.send(Some(task));
    }

    /// No cell that waits now will run.
    pub(super) fn abort_cells(&self) {
        self.shared.abort_cells();
    }

    /// Nothing more is worked off.
    pub(super) fn close(&self) {
        self.shared.closed.store(true, Ordering::SeqCst);
        let _ = self.sender.send(None);
    }
}

impl Shared {
    fn abort_cells(&self) {
        self.aborted.store(self.came.load(Ordering::SeqCst), Ordering::SeqCst);
    }
}

impl Waiting {
    /// The next request; waits for one. `None`: the kernel ends.
    pub(super) fn next(&mut self) -> Option<Task> {
        self.look();
        if self.tasks.is_empty()
            && let Ok(Some(task)) = self.receiver.recv()
        {
            self.tasks.push_back(task);
        }
        if self.is_closed() { None } else { self.tasks.pop_front() }
    }

    /// Puts a request back in front.
    pub(super) fn put_back(&mut self, task: Task) {
        self.tasks.push_front(task);
    }

    /// The first cell that waits.
    pub(super) fn first_cell(&mut self) -> Option<&mut Task> {
        self.look();
        let aborted = self.shared.aborted.load(Ordering::SeqCst);
        self.tasks.iter_mut().find(|task| task.is_cell() && task.number > aborted)
    }

    /// Whether nothing waits.
    pub(super) fn is_empty(&mut self) -> bool {
        self.look();
        self.tasks.is_empty() && !self.is_closed()
    }

    /// Whether a cell is not to run.
    pub(super) fn is_aborted(&self, task: &Task) -> bool {
        task.number <= self.shared.aborted.load(Ordering::SeqCst)
    }

    /// No cell that waits now will run.
    pub(super) fn abort_cells(&self) {
        self.shared.abort_cells();
    }

    /// Whether the kernel ends.
    pub(super) fn is_closed(&self) -> bool {
        self.shared.closed.load(Ordering::SeqCst)
    }

    fn look(&mut self) {
        self.tasks.extend(self.receiver.try_iter().flatten());
    }
}

#[cfg(test)]
mod tests {
    use jupyter_protocol::JupyterMessage;
    use serde_json::json;

    use super::*;
    use crate::jupyter::message::untyped;

    fn put(queue: &Queue, kind: &str) {
        let header = JupyterMessage::new(untyped(kind, json!({})), None).header;
        let (sender, _) = tokio::sync::mpsc::unbounded_channel();
        queue.put(Request { identities: vec![], header, content: json!({}) }, &Replies(sender));
    }

    #[test]
    fn only_cells_that_waited_are_aborted() {
        let (queue, mut waiting) = new();
        assert!(waiting.is_empty());
        put(&queue, "complete_request");
        put(&queue, EXECUTE);
        assert!(waiting.first_cell().is_some());
        queue.abort_cells();
        assert!(waiting.first_cell().is_none());
        put(&queue, EXECUTE);
        assert!(waiting.first_cell().is_some());
        let mut aborted = Vec::new();
        while aborted.len() < 3
            && let Some(task) = waiting.next()
        {
            aborted.push(task.is_cell() && waiting.is_aborted(&task));
        }
        assert_eq!(aborted, [false, true, false]);
    }

    #[test]
    fn a_closed_queue_gives_nothing() {
        let (queue, mut waiting) = new();
        put(&queue, EXECUTE);
        queue.close();
        assert!(waiting.next().is_none());
        assert!(!waiting.is_empty());
    }
}
