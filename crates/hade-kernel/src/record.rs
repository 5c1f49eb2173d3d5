//! The lines by which the process that runs the cells tells the session what happened.
//!
//! A record is one line on standard output: the character U+001E and a JSON value. The notebook
//! engine passes such a line on as ordinary text.

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

/// First character of a line that is a record.
pub(crate) const MARK: char = '\u{1e}';

/// One thing that happened while a cell ran.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub(crate) enum Record {
    /// Text on standard output.
    Out(String),
    /// Text on standard error.
    Err(String),
    /// A displayed value: mime type to content.
    Show(BTreeMap<String, String>),
    /// The cell panicked; the message is the standard error text just before.
    Panic,
    /// `?` met an `Err`; its text is the standard error text just before.
    Early,
    /// The cell printed too much: how much was not passed on, the file that holds its whole text,
    /// and whether it does.
    Cut { bytes: u64, file: Option<String>, whole: bool },
    /// So many displayed values were not passed on, because there were too many.
    NotShown(usize),
    /// The cell was compiled and begins to run.
    Begin,
    /// The cell ended and everything it printed has been passed on.
    Done,
}

impl Record {
    /// The line for this record, with its line end.
    pub(crate) fn to_line(&self) -> String {
        // The engine looks for its own words anywhere in a line; none may appear in a record.
        let json =
            serde_json::to_string(self).unwrap_or_else(|_| "\"Done\"".to_owned()).replace("EVCXR_", "EVCXR\\u005f");
        format!("{MARK}{json}\n")
    }

    /// The record a line holds, if it is one.
    pub(crate) fn from_line(line: &str) -> Option<Record> {
        serde_json::from_str(line.strip_prefix(MARK)?).ok()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_record_survives_the_line() {
        let text = "two\nlines \u{1e} EVCXR_BEGIN_CONTENT text/plain\n\"é\"".to_owned();
        for record in [
            Record::Out(text.clone()),
            Record::Show(BTreeMap::from([("text/plain".to_owned(), text)])),
            Record::Cut { bytes: 7, file: Some("a b".to_owned()), whole: true },
            Record::Done,
        ] {
            let line = record.to_line();
            assert_eq!(line.matches('\n').count(), 1);
            assert!(!line.contains("EVCXR_"));
            assert_eq!(Record::from_line(line.trim_end()), Some(record));
        }
    }

    #[test]
    fn ordinary_text_is_no_record() {
        assert_eq!(Record::from_line("hello"), None);
        assert_eq!(Record::from_line("\u{1e}not json"), None);
    }
}
