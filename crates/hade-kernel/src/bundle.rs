//! A displayed value: mime types and contents.

use std::collections::BTreeMap;

use serde_json::Value;

/// A displayed value may carry a name under this type; a later display of that name replaces it.
pub const DISPLAY_ID_MIME: &str = "application/vnd.hade.display-id";

/// Whether a value is shown as text alone.
pub(crate) fn is_plain(bundle: &BTreeMap<String, String>) -> bool {
    bundle.len() == 1 && bundle.contains_key("text/plain")
}

/// The name under which a value can be replaced.
pub(crate) fn display_id(bundle: &BTreeMap<String, String>) -> Option<&str> {
    bundle.get(DISPLAY_ID_MIME).map(|id| id.trim()).filter(|id| !id.is_empty())
}

/// Whether a value says how far some work is: it is shown while the work lasts and is no output of the cell.
pub(crate) fn is_passing(bundle: &BTreeMap<String, String>) -> bool {
    display_id(bundle).is_some_and(|id| id.starts_with("progress-"))
}

/// What is shown of a value.
pub(crate) fn shown(bundle: &BTreeMap<String, String>) -> impl Iterator<Item = (&str, &str)> {
    bundle.iter().map(|(mime, content)| (mime.as_str(), content.as_str())).filter(|(mime, _)| *mime != DISPLAY_ID_MIME)
}

/// Whether contents of a mime type are JSON.
pub(crate) fn is_json(mime: &str) -> bool {
    mime == "application/json" || mime.ends_with("+json")
}

/// Contents as a JSON value: of JSON types the value itself, of others the text.
pub(crate) fn json_value(mime: &str, content: &str) -> Value {
    if is_json(mime)
        && let Ok(value) = serde_json::from_str(content)
    {
        return value;
    }
    Value::String(content.to_owned())
}

#[cfg(test)]
mod tests {
    use serde_json::json;

    use super::*;

    #[test]
    fn a_bundle_is_taken_apart() {
        let bundle = BTreeMap::from([
            ("text/plain".to_owned(), "1".to_owned()),
            (DISPLAY_ID_MIME.to_owned(), "bar\n".to_owned()),
        ]);
        assert_eq!(display_id(&bundle), Some("bar"));
        assert_eq!(shown(&bundle).collect::<Vec<_>>(), [("text/plain", "1")]);
        assert!(!is_plain(&bundle) && !is_passing(&bundle));
        assert_eq!(json_value(crate::RECORD_MIME, "{\"x\":0.1}"), json!({"x": 0.1}));
        assert_eq!(json_value("application/json", "no json"), json!("no json"));
        assert_eq!(json_value("text/plain", "1"), json!("1"));
    }
}
