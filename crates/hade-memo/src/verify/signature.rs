//! One signature: which bytes it is over, and whether it holds their digest.

use lopdf::{Document, Object, ObjectId};
use sha2::{Sha256, Sha384, Sha512};

use super::cms::{self, Hash};
use super::report::SignatureFound;
use crate::pdf;

/// The kinds of signature that hold the digest of the bytes in a CMS.
const KINDS: [&[u8]; 2] = [b"adbe.pkcs7.detached", b"ETSI.CAdES.detached"];

/// Looks at the signature in a field, made in the revision that ends at `end`.
///
/// # Errors
/// Why it cannot be told what was signed, in words.
pub(super) fn look(bytes: &[u8], end: usize, document: &Document, field: ObjectId) -> Result<SignatureFound, String> {
    let field = document.get_dictionary(field).map_err(|e| e.to_string())?;
    let name = pdf::text(document, field, b"T").unwrap_or_default();
    let bad = |why: &str| format!("the signature in the field {name} {why}");
    let value = pdf::dictionary(document, field, b"V").ok_or_else(|| bad("is not there"))?;
    let kind = value.get_deref(b"SubFilter", document).and_then(Object::as_name).unwrap_or_default();
    if !KINDS.contains(&kind) {
        return Err(bad(&format!(
            "is of the kind \"{}\", which this program cannot look into",
            String::from_utf8_lossy(kind)
        )));
    }
    let range: Vec<usize> = pdf::array(document, value, b"ByteRange")
        .unwrap_or_default()
        .iter()
        .filter_map(|n| usize::try_from(n.as_i64().ok()?).ok())
        .collect();
    let [0, gap, resume, rest] = range[..] else { return Err(bad("does not begin at the first byte")) };
    if resume.checked_add(rest) != Some(end) || gap >= resume || resume > end {
        return Err(bad("is not over the whole revision that it came with"));
    }
    let (Some(first), Some(between), Some(second)) = (bytes.get(..gap), bytes.get(gap..resume), bytes.get(resume..end))
    else {
        return Err(bad("is over bytes that are not there"));
    };
    let contents = value.get_deref(b"Contents", document).and_then(Object::as_str).unwrap_or_default();
    if hexadecimal(between).as_deref() != Some(contents) {
        return Err(bad("leaves out more than itself from what it is over"));
    }
    let signed = cms::read(contents).ok_or_else(|| bad("is broken, or of a kind that this program does not know"))?;
    let digest = match signed.hash {
        Hash::Sha256 => digest::<Sha256>(first, second),
        Hash::Sha384 => digest::<Sha384>(first, second),
        Hash::Sha512 => digest::<Sha512>(first, second),
    };
    Ok(SignatureFound {
        field: name,
        covers: first.len() + second.len(),
        whole_file: end == bytes.len(),
        algorithm: signed.hash.name().to_owned(),
        agrees: digest == signed.digest,
        digest: digest.iter().map(|b| format!("{b:02x}")).collect(),
    })
}

fn digest<H: sha2::Digest>(first: &[u8], second: &[u8]) -> Vec<u8> {
    H::new().chain_update(first).chain_update(second).finalize().to_vec()
}

/// The bytes of `<…>` when nothing but hexadecimal digits stands between.
fn hexadecimal(text: &[u8]) -> Option<Vec<u8>> {
    let digits = text.strip_prefix(b"<")?.strip_suffix(b">")?;
    let value = |digit: u8| char::from(digit).to_digit(16).and_then(|n| u8::try_from(n).ok());
    if digits.len() % 2 != 0 {
        return None;
    }
    digits.chunks_exact(2).map(|pair| Some(value(pair[0])? << 4 | value(pair[1])?)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_the_hexadecimal_of_a_signature_may_be_left_out() {
        assert_eq!(hexadecimal(b"<00fF>"), Some(vec![0, 255]));
        for bad in [&b"<00f>"[..], b"<00 ff>", b"00ff", b"<00>ff>", b"<00ff> /X"] {
            assert_eq!(hexadecimal(bad), None);
        }
    }
}
