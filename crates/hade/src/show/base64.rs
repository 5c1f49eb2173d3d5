//! Base64 (RFC 4648, section 4), for the pictures inside HTML.

const ALPHABET: &[u8; 64] = b"ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";

/// The bytes in base64, with padding.
pub(super) fn encode(bytes: &[u8]) -> String {
    let mut out = String::with_capacity(bytes.len().div_ceil(3) * 4);
    for chunk in bytes.chunks(3) {
        let group =
            chunk.iter().enumerate().fold(0_u32, |sum, (i, byte)| sum | u32::from(*byte) << (16 - 8 * i.min(2)));
        for place in 0..4_usize {
            if place > chunk.len() {
                out.push('=');
            } else {
                let index = (group >> (18 - 6 * place)) & 63;
                out.push(ALPHABET.get(index as usize).copied().map_or('=', char::from));
            }
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::encode;

    #[test]
    fn gives_the_test_vectors_of_rfc_4648() {
        // RFC 4648, section 10.
        for (plain, coded) in [
            ("", ""),
            ("f", "Zg=="),
            ("fo", "Zm8="),
            ("foo", "Zm9v"),
            ("foob", "Zm9vYg=="),
            ("fooba", "Zm9vYmE="),
            ("foobar", "Zm9vYmFy"),
        ] {
            assert_eq!(encode(plain.as_bytes()), coded);
        }
        assert_eq!(encode(&[0xff, 0xfe, 0xfb]), "//77");
    }
}
