//! An earlier memo, read from its PDF: what it is called and its record.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::Path;

use hade::sheet::Record;
use lopdf::{Document, Object};

use crate::attach::RECORD_NAME;
use crate::error::{Error, Result};

/// Largest PDF that is read.
const MOST_BYTES: u64 = 256 << 20;

/// An earlier memo.
#[derive(Clone, Debug)]
pub struct EarlierMemo {
    /// Its number and revision, as its title states them.
    pub(crate) name: String,
    pub(crate) record: Record,
}

impl EarlierMemo {
    /// Reads the record that is attached to a memo. It is compared, not trusted: nothing is computed from it.
    ///
    /// # Errors
    /// When the file cannot be read, is no PDF, has no record attached, or one that this version cannot read.
    pub fn read(path: &Path) -> Result<Self> {
        let bad = |why: String| Error::Earlier { path: path.to_path_buf(), why };
        let size = std::fs::metadata(path).map_err(|e| bad(format!("it cannot be read: {e}")))?.len();
        if size > MOST_BYTES {
            return Err(bad(format!("it has {size} bytes, and no memo has more than {MOST_BYTES}")));
        }
        let bytes = std::fs::read(path).map_err(|e| bad(format!("it cannot be read: {e}")))?;
        let found = catch_unwind(AssertUnwindSafe(|| Document::load_mem(&bytes).map(|d| (title(&d), record(&d)))));
        let (title, record) = match found {
            Ok(Ok(found)) => found,
            Ok(Err(e)) => return Err(bad(format!("it is no PDF that can be read: {e}"))),
            Err(_) => return Err(bad("it is no PDF that can be read".to_owned())),
        };
        let record =
            record.ok_or_else(|| bad(format!("no {RECORD_NAME} is attached to it, so it is no memo of Hade")))?;
        let text = String::from_utf8(record).map_err(|_| bad("its record is no text".to_owned()))?;
        let record = Record::from_json(&text)?;
        let name = title.as_deref().and_then(|t| t.split_once(": ")).map(|(name, _)| name.to_owned());
        Ok(EarlierMemo { name: name.unwrap_or_else(|| path.display().to_string()), record })
    }
}

fn title(document: &Document) -> Option<String> {
    let info = document.trailer.get(b"Info").and_then(Object::as_reference).ok()?;
    let title = document.get_dictionary(info).ok()?.get(b"Title").ok()?;
    lopdf::decode_text_string(title).ok()
}

fn record(document: &Document) -> Option<Vec<u8>> {
    let specification = document.objects.values().filter_map(|object| object.as_dict().ok()).find(|spec| {
        let name = spec.get(b"UF").or_else(|_| spec.get(b"F")).ok().and_then(|n| lopdf::decode_text_string(n).ok());
        name.as_deref() == Some(RECORD_NAME) && spec.has(b"EF")
    })?;
    let files = specification.get(b"EF").and_then(Object::as_dict).ok()?;
    let file = files.get(b"F").and_then(Object::as_reference).ok()?;
    let stream = document.get_object(file).and_then(Object::as_stream).ok()?;
    Some(stream.decompressed_content().unwrap_or_else(|_| stream.content.clone()))
}
