//! An earlier memo, read from its PDF: what it is called and its record.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::Path;

use hade::sheet::Record;
use lopdf::Document;

use crate::attach::RECORD_NAME;
use crate::error::{Error, Result};
use crate::pdf;
use crate::view::NOT_STATED;

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
        if size > pdf::MOST_BYTES as u64 {
            return Err(bad(format!("it has {size} bytes, and no memo has more than {}", pdf::MOST_BYTES)));
        }
        let bytes = std::fs::read(path).map_err(|e| bad(format!("it cannot be read: {e}")))?;
        let read = || {
            let document = pdf::load(&bytes)?;
            Ok((title(&document), pdf::attachments(&document)?))
        };
        // A defect of the parser costs no more than this file.
        let (title, files) = catch_unwind(AssertUnwindSafe(read))
            .unwrap_or_else(|_| Err("it is broken in a way that this program does not understand".to_owned()))
            .map_err(|why: String| bad(format!("it is no memo that can be read: {why}")))?;
        let record = files.into_iter().find(|(name, _)| name == RECORD_NAME).map(|(_, bytes)| bytes);
        let record =
            record.ok_or_else(|| bad(format!("no {RECORD_NAME} is attached to it, so it is no memo of Hade")))?;
        let text = String::from_utf8(record).map_err(|_| bad("its record is no text".to_owned()))?;
        let record = Record::from_json(&text)?;
        let stated = title.as_deref().and_then(|t| t.split_once(": ")).map(|(name, _)| name);
        // Without a number only its file tells it from others.
        let name = match stated {
            Some(name) if !name.starts_with(NOT_STATED) => name.to_owned(),
            _ => path.file_name().map_or_else(String::new, |file| file.to_string_lossy().into_owned()),
        };
        Ok(EarlierMemo { name, record })
    }
}

fn title(document: &Document) -> Option<String> {
    pdf::text(document, pdf::dictionary(document, &document.trailer, b"Info")?, b"Title")
}
