//! As much of a CMS signature (RFC 5652) as says which digest was signed: DER of definite lengths,
//! one level at a time.

/// Hash algorithms that a signature may use here.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Hash {
    Sha256,
    Sha384,
    Sha512,
}

impl Hash {
    /// Its name.
    pub(super) fn name(self) -> &'static str {
        match self {
            Hash::Sha256 => "SHA-256",
            Hash::Sha384 => "SHA-384",
            Hash::Sha512 => "SHA-512",
        }
    }

    /// By its object identifier (NIST, 2.16.840.1.101.3.4.2).
    fn of(oid: &[u8]) -> Option<Self> {
        match oid.strip_prefix(&[0x60, 0x86, 0x48, 0x01, 0x65, 0x03, 0x04, 0x02])? {
            [1] => Some(Hash::Sha256),
            [2] => Some(Hash::Sha384),
            [3] => Some(Hash::Sha512),
            _ => None,
        }
    }
}

/// What was signed.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Signed {
    /// The hash algorithm.
    pub hash: Hash,
    /// The digest.
    pub digest: Vec<u8>,
}

const SEQUENCE: u8 = 0x30;
const SET: u8 = 0x31;
const INTEGER: u8 = 0x02;
const OCTETS: u8 = 0x04;
const OID: u8 = 0x06;
const TAGGED_0: u8 = 0xa0;
const TAGGED_1: u8 = 0xa1;
/// 1.2.840.113549.1.7.2
const SIGNED_DATA: &[u8] = &[0x2a, 0x86, 0x48, 0x86, 0xf7, 0x0d, 0x01, 0x07, 0x02];
/// 1.2.840.113549.1.9.4
const MESSAGE_DIGEST: &[u8] = &[0x2a, 0x86, 0x48, 0x86, 0xf7, 0x0d, 0x01, 0x09, 0x04];

/// What remains to be read of one level.
struct Der<'a>(&'a [u8]);

impl<'a> Der<'a> {
    /// The next element, tag and contents.
    fn next(&mut self) -> Option<(u8, &'a [u8])> {
        let (&tag, rest) = self.0.split_first()?;
        let (&length, mut rest) = rest.split_first()?;
        let mut size = usize::from(length);
        if length & 0x80 != 0 {
            let (digits, after) = rest.split_at_checked(usize::from(length & 0x7f))?;
            if digits.is_empty() || digits.len() > 4 {
                return None;
            }
            size = digits.iter().fold(0, |size, digit| size << 8 | usize::from(*digit));
            rest = after;
        }
        let (contents, after) = rest.split_at_checked(size)?;
        self.0 = after;
        Some((tag, contents))
    }

    /// The next element, which must have this tag.
    fn expect(&mut self, tag: u8) -> Option<&'a [u8]> {
        self.next().filter(|(found, _)| *found == tag).map(|(_, contents)| contents)
    }

    /// The next element, read into.
    fn within(&mut self, tag: u8) -> Option<Der<'a>> {
        self.expect(tag).map(Der)
    }

    /// Passes over the next element if it has this tag.
    fn pass(&mut self, tag: u8) {
        if self.0.first() == Some(&tag) {
            self.next();
        }
    }
}

/// Reads the one signer's message digest. Only zeros may follow the signature, which fills its place
/// in the file.
pub(super) fn read(bytes: &[u8]) -> Option<Signed> {
    let mut whole = Der(bytes);
    let mut info = whole.within(SEQUENCE)?;
    if whole.0.iter().any(|b| *b != 0) || info.expect(OID)? != SIGNED_DATA {
        return None;
    }
    let mut data = info.within(TAGGED_0)?.within(SEQUENCE)?;
    data.expect(INTEGER)?;
    data.expect(SET)?;
    data.expect(SEQUENCE)?;
    data.pass(TAGGED_0);
    data.pass(TAGGED_1);
    let mut signers = data.within(SET)?;
    let mut signer = signers.within(SEQUENCE)?;
    if !signers.0.is_empty() {
        return None;
    }
    signer.expect(INTEGER)?;
    // Who signs: an issuer and number, or a key's identifier.
    signer.next()?;
    let hash = Hash::of(signer.within(SEQUENCE)?.expect(OID)?)?;
    let mut attributes = signer.within(TAGGED_0)?;
    let mut digest = None;
    while let Some(mut attribute) = attributes.within(SEQUENCE) {
        if attribute.expect(OID)? == MESSAGE_DIGEST {
            let value = attribute.within(SET)?.expect(OCTETS)?.to_vec();
            if digest.replace(value).is_some() {
                return None;
            }
        }
    }
    Some(Signed { hash, digest: digest? })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn element(tag: u8, parts: &[&[u8]]) -> Vec<u8> {
        let contents = parts.concat();
        let length = u16::try_from(contents.len()).unwrap().to_be_bytes();
        [&[tag, 0x82, length[0], length[1]][..], &contents].concat()
    }

    fn signature(hash: u8, digests: usize) -> Vec<u8> {
        let sha = [&[0x60, 0x86, 0x48, 0x01, 0x65, 0x03, 0x04, 0x02][..], &[hash]].concat();
        let algorithm = element(SEQUENCE, &[&element(OID, &[&sha])]);
        let attribute =
            element(SEQUENCE, &[&element(OID, &[MESSAGE_DIGEST]), &element(SET, &[&element(OCTETS, &[&[7; 32]])])]);
        let other = element(SEQUENCE, &[&element(OID, &[&[0x2a]]), &element(SET, &[])]);
        let attributes = [vec![other], vec![attribute; digests]].concat().concat();
        let signer = element(
            SEQUENCE,
            &[&element(INTEGER, &[&[1]]), &element(SEQUENCE, &[]), &algorithm, &element(TAGGED_0, &[&attributes])],
        );
        let data = element(
            SEQUENCE,
            &[
                &element(INTEGER, &[&[1]]),
                &element(SET, &[&algorithm]),
                &element(SEQUENCE, &[]),
                &element(TAGGED_0, &[b"certificates"]),
                &element(SET, &[&signer]),
            ],
        );
        element(SEQUENCE, &[&element(OID, &[SIGNED_DATA]), &element(TAGGED_0, &[&data])])
    }

    #[test]
    fn the_digest_is_found() {
        let padded = [signature(1, 1), vec![0; 100]].concat();
        assert_eq!(read(&padded), Some(Signed { hash: Hash::Sha256, digest: vec![7; 32] }));
        assert_eq!(read(&signature(3, 1)).unwrap().hash, Hash::Sha512);
    }

    #[test]
    fn what_is_broken_or_ambiguous_is_not_read() {
        let good = signature(1, 1);
        assert_eq!(read(&[good.clone(), vec![0, 1]].concat()), None, "something hides behind it");
        assert_eq!(read(&signature(1, 2)), None, "two digests");
        assert_eq!(read(&signature(1, 0)), None, "no digest");
        assert_eq!(read(&signature(9, 1)), None, "an unknown hash");
        for end in 0..good.len() {
            assert_eq!(read(&good[..end]), None, "cut at {end}");
        }
        assert_eq!(read(&[SEQUENCE, 0x80]), None, "an indefinite length");
        assert_eq!(read(&[SEQUENCE, 0x88, 255, 255, 255, 255, 255, 255, 255, 255]), None);
    }
}
