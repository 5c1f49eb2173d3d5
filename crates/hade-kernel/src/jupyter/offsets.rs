//! Jupyter counts characters, the engine counts bytes.

/// The byte offset of a character; the end of the text if there are fewer.
pub(super) fn byte_of(text: &str, character: usize) -> usize {
    text.char_indices().nth(character).map_or(text.len(), |(at, _)| at)
}

/// The number of characters before a byte offset.
pub(super) fn character_of(text: &str, byte: usize) -> usize {
    text.char_indices().take_while(|(at, _)| *at < byte).count()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn there_and_back() {
        let text = "σ₁ 𝜎 a";
        for character in 0..=text.chars().count() {
            assert_eq!(character_of(text, byte_of(text, character)), character);
        }
        assert_eq!(byte_of(text, 1), 2);
        assert_eq!(byte_of(text, 99), text.len());
    }
}
