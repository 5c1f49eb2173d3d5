//! The list of references: each once, numbered in the order of first use.

use serde::Serialize;

use super::text::plain;

/// A reference.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct ReferenceView {
    number: usize,
    words: String,
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
            .map(|(i, (words, items))| ReferenceView { number: i + 1, words: plain(&words), items })
            .collect()
    }
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
}
