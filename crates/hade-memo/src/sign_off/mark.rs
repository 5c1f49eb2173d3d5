//! What the revision with the signature fields says of the file it was added to.

use lopdf::{Dictionary, Document, Object, StringFormat, decode_text_string, dictionary, text_string};

use crate::digest::sha256;
use crate::pdf;

/// The key of this program in the document's page-piece dictionary.
const OWNER: &[u8] = b"Hade";

/// What is written down of a memo, so that it can be held against the file later.
///
/// It stands in the catalog's `/PieceInfo`: the place ISO 32000-1, 14.5, sets apart for a program's
/// own data. PDF/A allows it, viewers leave it alone, and programs that sign carry the catalog over
/// as it is.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Mark {
    /// The program that made the memo.
    pub program: String,
    /// The memo's date as PDF writes it.
    pub modified: String,
    /// Each attached file and its SHA-256.
    pub files: Vec<(String, String)>,
    /// How many bytes were exported.
    pub length: usize,
    /// Their SHA-256.
    pub sha256: String,
}

impl Mark {
    /// Of an exported file: what it says of itself, and its digest.
    pub(crate) fn made(document: &Document, exported: &[u8]) -> Result<Self, String> {
        let information = pdf::dictionary(document, &document.trailer, b"Info");
        let stated = |key: &[u8]| information.and_then(|information| pdf::text(document, information, key));
        let files = pdf::attachments(document).map_err(|why| {
            format!(
                "{why}; a template attaches every file of `attachments` by pdf.attach, as the program's memo.typ does"
            )
        })?;
        Ok(Mark {
            program: stated(b"Creator").ok_or("it does not say what made it")?,
            modified: stated(b"ModDate").ok_or("it has no date")?,
            files: files.into_iter().map(|(name, bytes)| (name, sha256(&bytes))).collect(),
            length: exported.len(),
            sha256: sha256(exported),
        })
    }

    /// As the value of `/PieceInfo`.
    pub(crate) fn written(&self) -> Dictionary {
        let plain = |text: &str| Object::String(text.into(), StringFormat::Literal);
        let files = self.files.iter().map(|(name, hash)| Object::Array(vec![text_string(name), plain(hash)])).collect();
        dictionary! {
            OWNER.to_vec() => dictionary! {
                "LastModified" => plain(&self.modified),
                "Private" => dictionary! {
                    "Program" => text_string(&self.program),
                    "Bytes" => i64::try_from(self.length).unwrap_or(i64::MAX),
                    "SHA256" => plain(&self.sha256),
                    "Files" => Object::Array(files),
                },
            },
        }
    }

    /// Whether the bytes of a file that cannot be read hold what only a memo does: its mark's place, or the name of
    /// the program that made it.
    pub(crate) fn traces(bytes: &[u8]) -> bool {
        let holds = |words: &[u8]| bytes.windows(words.len()).any(|window| window == words);
        holds(b"/PieceInfo<</Hade") || holds(b"CreatorTool>Hade ")
    }

    /// The mark of a document.
    pub(crate) fn of(document: &Document) -> Option<Self> {
        let catalog = document.catalog().ok()?;
        let own = pdf::dictionary(document, pdf::dictionary(document, catalog, b"PieceInfo")?, OWNER)?;
        let private = pdf::dictionary(document, own, b"Private")?;
        let files = pdf::array(document, private, b"Files")?
            .iter()
            .map(|pair| match pair.as_array().ok()?.as_slice() {
                [name, hash] => Some((decode_text_string(name).ok()?, decode_text_string(hash).ok()?)),
                _ => None,
            })
            .collect::<Option<Vec<_>>>()?;
        Some(Mark {
            program: pdf::text(document, private, b"Program")?,
            modified: pdf::text(document, own, b"LastModified")?,
            files,
            length: usize::try_from(private.get(b"Bytes").ok()?.as_i64().ok()?).ok()?,
            sha256: pdf::text(document, private, b"SHA256")?,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn is_read_back_as_it_was_written() {
        let mark = Mark {
            program: "hade-memo 0".to_owned(),
            modified: "D:20260514000000Z".to_owned(),
            files: vec![("a (1).json".to_owned(), "00".repeat(32)), ("Müller.csv".to_owned(), "ff".repeat(32))],
            length: 12_345,
            sha256: "ab".repeat(32),
        };
        let mut document = Document::with_version("1.7");
        let catalog = document.add_object(dictionary! { "PieceInfo" => mark.written() });
        document.trailer.set("Root", catalog);
        assert_eq!(Mark::of(&document), Some(mark));
    }
}
