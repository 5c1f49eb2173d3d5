//! What every client sees: outputs and the kernel's state.

use std::sync::{Arc, Mutex, MutexGuard, PoisonError};
use std::time::Duration;

use bytes::Bytes;
use jupyter_protocol::{IoPubWelcome, JupyterMessage, JupyterMessageContent, Status, StreamContent};
use jupyter_zmq_client::{KernelIoPubXPubConnection, SubscriptionEvent};
use tokio::sync::mpsc::{UnboundedReceiver, UnboundedSender};

use super::message::{Request, message};

/// Publishes to all clients, in the order of the calls.
#[derive(Clone)]
pub(super) struct IoPub {
    sender: UnboundedSender<JupyterMessage>,
    /// The request whose cell runs.
    running: Arc<Mutex<Option<Arc<Request>>>>,
}

impl IoPub {
    pub(super) fn new(sender: UnboundedSender<JupyterMessage>) -> IoPub {
        IoPub { sender, running: Arc::default() }
    }

    /// Publishes something that belongs to a request.
    pub(super) fn publish(&self, content: impl Into<JupyterMessageContent>, parent: &Request) {
        self.send(content.into(), Some(parent));
    }

    /// Publishes text.
    pub(super) fn stream(&self, stream: crate::cell::Stream, text: &str, parent: &Request) {
        let content = match stream {
            crate::cell::Stream::Stdout => StreamContent::stdout(text),
            crate::cell::Stream::Stderr => StreamContent::stderr(text),
        };
        self.publish(content, parent);
    }

    /// Says that the kernel starts.
    pub(super) fn starting(&self) {
        self.send(Status::starting().into(), None);
    }

    /// Says that work on a request begins.
    pub(super) fn busy(&self, parent: &Request) {
        self.publish(Status::busy(), parent);
    }

    /// Says that a request is dealt with.
    pub(super) fn idle(&self, parent: &Request) {
        self.publish(Status::idle(), parent);
        // A client shows the last state it heard of; while a cell runs the kernel is busy.
        if let Some(running) = self.running().as_deref()
            && running.header.msg_id != parent.header.msg_id
        {
            self.busy(running);
        }
    }

    /// A cell runs from now on.
    pub(super) fn cell_begins(&self, request: &Arc<Request>) {
        *self.running() = Some(Arc::clone(request));
        self.busy(request);
    }

    /// The cell has ended.
    pub(super) fn cell_ends(&self, request: &Request) {
        *self.running() = None;
        self.idle(request);
    }

    fn running(&self) -> MutexGuard<'_, Option<Arc<Request>>> {
        self.running.lock().unwrap_or_else(PoisonError::into_inner)
    }

    fn send(&self, content: JupyterMessageContent, parent: Option<&Request>) {
        let topic = Bytes::from(content.message_type().to_owned());
        // Nobody listens once the kernel ends.
        let _ = self.sender.send(message(content, parent, vec![topic]));
    }
}

/// Sends what is published, and greets each client once its subscription counts.
pub(super) async fn serve(mut connection: KernelIoPubXPubConnection, mut published: UnboundedReceiver<JupyterMessage>) {
    loop {
        tokio::select! {
            biased;
            event = connection.recv_subscription() => match event {
                Ok(SubscriptionEvent::Subscribe(topic)) => {
                    let identity = vec![Bytes::from(topic.clone())];
                    let _ = connection.send(message(IoPubWelcome::new(topic), None, identity)).await;
                }
                Ok(SubscriptionEvent::Unsubscribe(_)) => {}
                // A client went away.
                Err(_) => tokio::time::sleep(Duration::from_millis(5)).await,
            },
            next = published.recv() => match next {
                Some(message) => if let Err(error) = connection.send(message).await {
                    eprintln!("hade: an output could not be sent: {error}");
                },
                None => return,
            },
        }
    }
}
