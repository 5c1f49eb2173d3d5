//! Telling what a name means.

use jupyter_protocol::{InspectReply, UnknownMessage};
use serde_json::json;

use super::completion::cursor;
use super::message::{Request, untyped};
use crate::session::Session;

/// What the engine says where it knows nothing.
const NOTHING: &str = "No documentation found";

/// Answers a request.
pub(super) fn reply(session: Option<&mut Session>, request: &Request) -> UnknownMessage {
    let code = request.text("code");
    let at = end_of_name(code, cursor(request, code));
    let found = session
        .and_then(|session| session.inspect(code, at))
        .filter(|(plain, _)| !plain.trim().is_empty() && plain != NOTHING);
    let reply = InspectReply { found: found.is_some(), ..InspectReply::default() };
    let mut content = serde_json::to_value(reply).unwrap_or_default();
    content["data"] = match found {
        Some((plain, html)) => json!({"text/plain": plain, "text/html": small_headings(&without_links(&html))}),
        None => json!({}),
    };
    untyped("inspect_reply", content)
}

/// The text without its links: they lead to pages that need not exist.
fn without_links(html: &str) -> String {
    let mut parts = html.split("<a ");
    let mut text = parts.next().unwrap_or_default().to_owned();
    for part in parts {
        text.push_str(part.split_once('>').map_or("", |(_, rest)| rest));
    }
    text.replace("</a>", "")
}

/// Headings as bold lines: a note beside a cell is no page.
fn small_headings(html: &str) -> String {
    let mut text = html.to_owned();
    for level in 1..=6 {
        text = text.replace(&format!("<h{level}>"), "<p><b>").replace(&format!("</h{level}>"), "</b></p>");
    }
    text
}

/// The end of the name at the cursor, with an opening parenthesis after it: the engine looks at what
/// stands before, and tells a method by its parenthesis.
fn end_of_name(code: &str, at: usize) -> usize {
    let rest = code.get(at..).unwrap_or_default();
    let end = at + rest.find(|c: char| !c.is_alphanumeric() && c != '_').unwrap_or(rest.len());
    if code[end..].starts_with('(') { end + 1 } else { end }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn links_are_left_out() {
        let html = "<p>See <a href=\"x\"><code>A</code></a>, <a href=\"y\">B</a>.</p>";
        assert_eq!(without_links(html), "<p>See <code>A</code>, B.</p>");
        assert_eq!(small_headings("<h1>Errors</h1><p>No</p>"), "<p><b>Errors</b></p><p>No</p>");
    }

    #[test]
    fn the_whole_name_is_looked_at() {
        let code = "let σ = stress.regime(); Stress";
        for (at, before) in [(4, "let σ"), (9, "let σ = stress"), (18, "let σ = stress.regime("), (30, code)] {
            assert_eq!(&code[..end_of_name(code, at)], before);
        }
        assert_eq!(end_of_name(code, code.len()), code.len());
    }
}
