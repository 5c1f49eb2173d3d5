//! Reading and writing single messages.
//!
//! Requests are read by hand: clients leave out fields that the typed messages ask for, and a request
//! that cannot be read in full must still be answered.

use bytes::Bytes;
use chrono::SubsecRound as _;
use jupyter_protocol::{Header, JupyterMessage, JupyterMessageContent, UnknownMessage};
use jupyter_zmq_client::{RawMessage, RouterRecvConnection, RuntimeError};
use serde_json::Value;
use zeromq::SocketRecv as _;

/// The version of the protocol that is spoken.
pub(super) const PROTOCOL: &str = "5.4";

/// A request as it came.
#[derive(Debug, Clone)]
pub(super) struct Request {
    pub(super) identities: Vec<Bytes>,
    pub(super) header: Header,
    pub(super) content: Value,
}

impl Request {
    /// Reads the next request.
    pub(super) async fn read(connection: &mut RouterRecvConnection) -> Result<Request, RuntimeError> {
        let parts = connection.socket.recv().await?;
        let raw = RawMessage::from_multipart(parts, &connection.mac)?;
        Ok(Request {
            header: serde_json::from_slice(&raw.jparts[0])?,
            content: serde_json::from_slice(&raw.jparts[3])?,
            identities: raw.zmq_identities,
        })
    }

    /// What is asked.
    pub(super) fn kind(&self) -> &str {
        &self.header.msg_type
    }

    /// A text of the content; empty if it is not there.
    pub(super) fn text(&self, field: &str) -> &str {
        self.content[field].as_str().unwrap_or_default()
    }

    /// A yes or no of the content.
    pub(super) fn flag(&self, field: &str, otherwise: bool) -> bool {
        self.content[field].as_bool().unwrap_or(otherwise)
    }

    /// A number of the content.
    pub(super) fn number(&self, field: &str) -> Option<i64> {
        self.content[field].as_i64()
    }
}

/// A message to send, in answer to `parent`.
pub(super) fn message(
    content: impl Into<JupyterMessageContent>,
    parent: Option<&Request>,
    identities: Vec<Bytes>,
) -> JupyterMessage {
    let mut message = JupyterMessage::new(content, None);
    if let Some(parent) = parent {
        message.header.username.clone_from(&parent.header.username);
        message.parent_header = Some(parent.header.clone());
    }
    message.header.version = PROTOCOL.to_owned();
    // Python reads no more than microseconds.
    message.header.date = message.header.date.trunc_subsecs(6);
    message.zmq_identities = identities;
    message
}

/// Content that the typed messages cannot express.
pub(super) fn untyped(kind: &str, content: Value) -> UnknownMessage {
    UnknownMessage { msg_type: kind.to_owned(), content }
}

#[cfg(test)]
mod tests {
    use serde_json::json;

    use super::*;

    #[test]
    fn an_answer_names_its_request_and_its_kind() {
        let header = JupyterMessage::new(untyped("x_request", json!({})), None).header;
        let request = Request { identities: vec![], header, content: json!({"n": 3, "code": "é", "silent": true}) };
        assert_eq!((request.kind(), request.text("code"), request.number("n")), ("x_request", "é", Some(3)));
        assert!(request.flag("silent", false) && request.flag("raw", true) && request.text("none").is_empty());
        let answer = message(untyped("x_reply", json!({"status": "ok"})), Some(&request), vec![Bytes::from("peer")]);
        assert_eq!(answer.message_type(), "x_reply");
        assert_eq!(answer.header.msg_type, "x_reply");
        assert_eq!(answer.parent_header.map(|header| header.msg_id), Some(request.header.msg_id));
        assert_eq!(serde_json::to_value(&answer.content).ok(), Some(json!({"status": "ok"})));
        assert_eq!(answer.header.date.timestamp_subsec_nanos() % 1000, 0);
    }
}
