//! Answers to single clients.

use jupyter_protocol::{JupyterMessage, JupyterMessageContent};
use jupyter_zmq_client::RouterSendConnection;
use tokio::sync::mpsc::{UnboundedReceiver, UnboundedSender};

use super::message::{Request, message};

/// Answers requests of one socket.
#[derive(Clone)]
pub(super) struct Replies(pub(super) UnboundedSender<JupyterMessage>);

impl Replies {
    /// Answers a request.
    pub(super) fn reply(&self, content: impl Into<JupyterMessageContent>, request: &Request) {
        // Nobody listens once the kernel ends.
        let _ = self.0.send(message(content, Some(request), request.identities.clone()));
    }
}

/// Sends the answers.
pub(super) async fn serve(mut connection: RouterSendConnection, mut answers: UnboundedReceiver<JupyterMessage>) {
    while let Some(answer) = answers.recv().await {
        // A client that went away needs no answer.
        let _ = connection.send(answer).await;
    }
}
