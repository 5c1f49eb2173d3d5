//! What the sheets say in print, as far as a hash is concerned.

use lopdf::Document;

use crate::pdf::MOST_UNFOLDED;

/// Most sheets that are read.
const MOST_SHEETS: usize = 2000;

/// Every SHA-256 that is printed, with the number of its sheet.
pub(super) fn printed_hashes(memo: &Document) -> Vec<(String, u32)> {
    let mut found = Vec::new();
    for sheet in memo.get_pages().into_keys().take(MOST_SHEETS) {
        let Ok(text) = memo.extract_text_with_limit(&[sheet], MOST_UNFOLDED) else { continue };
        let words = text.split(|c: char| !c.is_ascii_hexdigit());
        found.extend(words.filter(|word| word.len() == 64).map(|word| (word.to_owned(), sheet)));
    }
    found
}
