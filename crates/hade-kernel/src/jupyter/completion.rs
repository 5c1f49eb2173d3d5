//! Completing what is being written.

use std::collections::BTreeSet;

use jupyter_protocol::CompleteReply;
use serde_json::{Map, json};

use super::message::Request;
use super::offsets::{byte_of, character_of};
use crate::session::Session;

/// Answers a request; without a session, or where the engine knows nothing, with no suggestion.
pub(super) fn reply(session: Option<&mut Session>, request: &Request) -> CompleteReply {
    let code = request.text("code");
    let at = cursor(request, code);
    let found = session.and_then(|session| session.complete(code, at));
    let Some(found) = found.filter(|found| found.start_offset <= found.end_offset && found.end_offset <= code.len())
    else {
        let at = character_of(code, at);
        return CompleteReply { cursor_start: at, cursor_end: at, ..CompleteReply::default() };
    };
    let start = character_of(code, found.start_offset);
    let end = character_of(code, found.end_offset);
    let mut seen = BTreeSet::new();
    let mut items: Vec<_> = found.completions.iter().filter(|item| seen.insert(&item.code)).collect();
    items.sort_by_key(|item| (item.code.starts_with('_'), item.code.to_lowercase()));
    let types: Vec<_> = items
        .iter()
        .map(|item| json!({"start": start, "end": end, "text": item.code, "type": item.kind, "signature": ""}))
        .collect();
    CompleteReply {
        matches: items.iter().map(|item| item.code.clone()).collect(),
        cursor_start: start,
        cursor_end: end,
        // What editors show beside each suggestion.
        metadata: Map::from_iter([("_jupyter_types_experimental".to_owned(), json!(types))]),
        ..CompleteReply::default()
    }
}

/// Where the cursor is, in bytes.
pub(super) fn cursor(request: &Request, code: &str) -> usize {
    let position = request.number("cursor_pos").and_then(|at| usize::try_from(at).ok());
    position.map_or(code.len(), |at| byte_of(code, at))
}
