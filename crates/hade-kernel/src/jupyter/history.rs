//! The cells run so far, kept while the kernel lives.

use std::sync::{Arc, Mutex, PoisonError};

use jupyter_protocol::{HistoryEntry, HistoryReply};

use super::message::Request;

/// The number of this session in answers; 0 is the current one.
const SESSION: usize = 0;

#[derive(Debug, Clone)]
struct Entry {
    number: usize,
    input: String,
    output: String,
}

/// The history, written by the worker and read at the desk.
#[derive(Debug, Clone, Default)]
pub(super) struct SharedHistory(Arc<Mutex<Vec<Entry>>>);

impl SharedHistory {
    /// Adds a cell and the text of its result, if it has one.
    pub(super) fn push(&self, number: usize, input: &str, output: Option<String>) {
        let entry = Entry { number, input: input.to_owned(), output: output.unwrap_or_default() };
        self.0.lock().unwrap_or_else(PoisonError::into_inner).push(entry);
    }

    /// Answers a request, whatever of its fields is missing.
    pub(super) fn reply(&self, request: &Request) -> HistoryReply {
        let entries = self.0.lock().unwrap_or_else(PoisonError::into_inner);
        let number = |field: &str| request.number(field).and_then(|n| usize::try_from(n).ok());
        let chosen: Vec<&Entry> = match request.text("hist_access_type") {
            "range" if request.number("session").unwrap_or(0) == 0 => {
                let from = number("start").unwrap_or(0);
                let to = number("stop").unwrap_or(usize::MAX);
                entries.iter().filter(|entry| (from..to).contains(&entry.number)).collect()
            }
            // Other sessions are not kept.
            "range" => Vec::new(),
            "search" => {
                let pattern: Vec<char> = request.text("pattern").chars().collect();
                let mut found: Vec<&Entry> = entries
                    .iter()
                    .filter(|entry| matches(&pattern, &entry.input.chars().collect::<Vec<_>>()))
                    .collect();
                if request.flag("unique", false) {
                    let all = found.clone();
                    let mut at = 0;
                    found.retain(|entry| {
                        at += 1;
                        all[at..].iter().all(|later| later.input != entry.input)
                    });
                }
                last(found, number("n"))
            }
            _ => last(entries.iter().collect(), number("n")),
        };
        let with_output = request.flag("output", false);
        let shown = |entry: &Entry| {
            let (number, input) = (entry.number, entry.input.clone());
            if with_output {
                HistoryEntry::InputOutput(SESSION, number, (input, entry.output.clone()))
            } else {
                HistoryEntry::Input(SESSION, number, input)
            }
        };
        HistoryReply::new(chosen.into_iter().map(shown).collect())
    }
}

fn last(mut entries: Vec<&Entry>, n: Option<usize>) -> Vec<&Entry> {
    let skipped = entries.len().saturating_sub(n.unwrap_or(usize::MAX));
    entries.split_off(skipped)
}

/// Whether a text matches a pattern in which `*` stands for any text and `?` for any character.
fn matches(pattern: &[char], text: &[char]) -> bool {
    let (mut p, mut t) = (0, 0);
    // Where to go on when the text after the last star does not fit.
    let mut star: Option<(usize, usize)> = None;
    while t < text.len() {
        match pattern.get(p) {
            Some('*') => {
                star = Some((p, t));
                p += 1;
            }
            Some(c) if *c == '?' || *c == text[t] => {
                p += 1;
                t += 1;
            }
            _ => match star {
                Some((at, tried)) => {
                    star = Some((at, tried + 1));
                    p = at + 1;
                    t = tried + 1;
                }
                None => return false,
            },
        }
    }
    pattern[p..].iter().all(|c| *c == '*')
}

#[cfg(test)]
mod tests {
    use jupyter_protocol::JupyterMessage;
    use serde_json::{Value, json};

    use super::*;
    use crate::jupyter::message::untyped;

    fn ask(content: Value) -> Value {
        let history = SharedHistory::default();
        for (number, input) in ["let a = 1;", "a + 1", "let b = 2;", "a + 1"].into_iter().enumerate() {
            history.push(number + 1, input, (number == 1).then(|| "2".to_owned()));
        }
        let header = JupyterMessage::new(untyped("history_request", json!({})), None).header;
        let reply = history.reply(&Request { identities: vec![], header, content });
        serde_json::to_value(reply.history).unwrap_or_default()
    }

    #[test]
    fn the_three_ways_of_asking() {
        assert_eq!(ask(json!({"hist_access_type": "tail", "n": 1})), json!([[0, 4, "a + 1"]]));
        assert_eq!(
            ask(json!({"hist_access_type": "range", "session": 0, "start": 2, "stop": 3, "output": true})),
            json!([[0, 2, ["a + 1", "2"]]])
        );
        assert_eq!(ask(json!({"hist_access_type": "range", "session": 7})), json!([]));
        let search = |n, unique| ask(json!({"hist_access_type": "search", "pattern": "a*1", "n": n, "unique": unique}));
        assert_eq!(search(json!(null), false), json!([[0, 2, "a + 1"], [0, 4, "a + 1"]]));
        assert_eq!(search(json!(1), false), json!([[0, 4, "a + 1"]]));
        assert_eq!(search(json!(5), true), json!([[0, 4, "a + 1"]]));
        assert_eq!(ask(json!({})).as_array().map(Vec::len), Some(4));
    }

    #[test]
    fn stars_and_question_marks() {
        let fits = |pattern: &str, text: &str| {
            matches(&pattern.chars().collect::<Vec<_>>(), &text.chars().collect::<Vec<_>>())
        };
        assert!(fits("*", "") && fits("a*c", "abbc") && fits("a?c*", "abc") && fits("*ab*ab", "abxabab"));
        assert!(!fits("a", "ab") && !fits("a?c", "ac") && !fits("*b", "abc") && !fits("", "a"));
    }
}
