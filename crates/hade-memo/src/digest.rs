//! SHA-256 as text.

use sha2::{Digest, Sha256};

/// The SHA-256 of bytes, lower-case hexadecimal.
pub(crate) fn sha256(bytes: &[u8]) -> String {
    Sha256::digest(bytes).iter().map(|b| format!("{b:02x}")).collect()
}

#[cfg(test)]
mod tests {
    #[test]
    fn agrees_with_the_published_vector() {
        // FIPS 180-4 example, message "abc".
        assert_eq!(super::sha256(b"abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    }
}
