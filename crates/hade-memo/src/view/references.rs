//! The list of references: each once, numbered in the order of first use.

use serde::Serialize;

use super::text::plain;

/// A reference.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct ReferenceView {
    number: usize,
    words: String,
    /// Whether it was at hand when the method was written down.
    seen: bool,
    items: Vec<usize>,
}

/// Collects references.
#[derive(Default)]
pub(crate) struct References {
    list: Vec<(String, Vec<usize>)>,
}

impl References {
    /// The number of a reference that an item cites.
    pub(crate) fn cite(&mut self, citation: &str, item: usize) -> usize {
        let key = citation.trim();
        let place = match self.list.iter().position(|(known, _)| known == key) {
            Some(place) => place,
            None => {
                self.list.push((key.to_owned(), Vec::new()));
                self.list.len() - 1
            }
        };
        if let Some((_, items)) = self.list.get_mut(place)
            && !items.contains(&item)
        {
            items.push(item);
        }
        place + 1
    }

    /// The list.
    pub(crate) fn done(self) -> Vec<ReferenceView> {
        self.list
            .into_iter()
            .enumerate()
            .map(|(i, (words, items))| {
                let (words, seen) = without_mark(&words);
                ReferenceView { number: i + 1, words: plain(&words), seen, items }
            })
            .collect()
    }
}

/// How the library marks a citation whose print was not looked at.
const UNSEEN: &str = "cited from memory";

/// The citation without the mark, and whether it had none.
fn without_mark(citation: &str) -> (String, bool) {
    let alone = format!(" ({UNSEEN})");
    let last = format!("; {UNSEEN})");
    let words = citation.replace(&alone, "").replace(&last, ")");
    let seen = words == citation;
    (words, seen)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_reference_is_listed_once() {
        let mut references = References::default();
        assert_eq!(references.cite("Kirsch 1898", 1), 1);
        assert_eq!(references.cite("Bradley 1979", 1), 2);
        assert_eq!(references.cite(" Kirsch 1898", 3), 1);
        let done = references.done();
        assert_eq!(done.len(), 2);
        assert_eq!(done[0].items, [1, 3]);
    }

    #[test]
    fn what_was_not_at_hand_is_marked() {
        let (words, seen) = without_mark("Ewy (1999) SPE 14, 85 (SPE 56862; cited from memory)");
        assert_eq!((words.as_str(), seen), ("Ewy (1999) SPE 14, 85 (SPE 56862)", false));
        let (words, seen) = without_mark("Bradley (1979) J. Energy 101 (cited from memory)");
        assert_eq!((words.as_str(), seen), ("Bradley (1979) J. Energy 101", false));
        assert_eq!(without_mark("Zoback (2007)"), ("Zoback (2007)".to_owned(), true));
        let mut citations = Vec::new();
        for card in hade::samples::samples() {
            citations.extend(card.explanation.method.references.into_iter().map(|r| r.citation));
        }
        let marked = citations.iter().filter(|c| c.contains("memory")).count();
        assert!(marked > 10 && citations.iter().all(|c| !without_mark(c).0.contains("memory")), "{citations:#?}");
    }
}
