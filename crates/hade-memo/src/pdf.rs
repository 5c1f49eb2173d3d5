//! Reading a PDF that may mean harm: with limits on what it may unfold to, and without the repairs
//! that would make two readers see two documents.

use std::sync::atomic::{AtomicUsize, Ordering};
use std::sync::{Mutex, PoisonError};

use lopdf::{Dictionary, Document, LoadOptions, Object, ObjectId};

/// Largest memo that is read back.
pub const MOST_BYTES: usize = 256 << 20;
/// Most bytes that one stream may unfold to.
pub(crate) const MOST_UNFOLDED: usize = 128 << 20;

/// What may still be kept in memory of the file being read. The parser takes a plain function as its
/// filter, so the count is global, and files are read one after another.
static LEFT: AtomicUsize = AtomicUsize::new(0);
static READING: Mutex<()> = Mutex::new(());

/// Parses a file strictly: a table of objects that must be repaired is refused.
///
/// # Errors
/// Why it cannot be read, in words that follow "the file cannot be read: ".
pub(crate) fn load(bytes: &[u8]) -> Result<Document, String> {
    if bytes.len() > MOST_BYTES {
        return Err(format!(
            "it is {} MB long; at most {} MB are read",
            bytes.len().div_ceil(1 << 20),
            MOST_BYTES >> 20
        ));
    }
    if !bytes.starts_with(b"%PDF-") {
        return Err("it does not begin as a PDF does".to_owned());
    }
    let _one_at_a_time = READING.lock().unwrap_or_else(PoisonError::into_inner);
    LEFT.store(2 * bytes.len() + (64 << 20), Ordering::SeqCst);
    let options = LoadOptions {
        strict: true,
        filter: Some(within_budget),
        max_decompressed_size: Some(MOST_UNFOLDED),
        ..LoadOptions::default()
    };
    let document = Document::load_mem_with_options(bytes, options).map_err(|e| e.to_string())?;
    if LEFT.load(Ordering::SeqCst) == 0 {
        return Err("its objects unfold to more than such a file may hold".to_owned());
    }
    if document.xref_recovery.is_some() {
        return Err("its table of objects is damaged".to_owned());
    }
    if document.was_encrypted() || document.is_encrypted() {
        return Err("it is encrypted".to_owned());
    }
    Ok(document)
}

/// Drops every object once the budget is used up, which [`load`] then reports.
fn within_budget(id: ObjectId, object: &mut Object) -> Option<(ObjectId, Object)> {
    let weight = weight(object);
    let taken = LEFT.fetch_update(Ordering::SeqCst, Ordering::SeqCst, |left| Some(left.saturating_sub(weight)));
    match taken {
        // The parser keeps what it handed in, unless the object came out of an object stream, where no
        // stream can be; so what is large need not be copied.
        Ok(left) if left > weight => Some((id, if object.as_stream().is_ok() { Object::Null } else { object.clone() })),
        _ => None,
    }
}

/// About the bytes an object takes. The parser bounds how deep objects nest.
fn weight(object: &Object) -> usize {
    let of = |dictionary: &Dictionary| dictionary.iter().map(|(key, value)| key.len() + weight(value)).sum::<usize>();
    32 + match object {
        Object::Name(bytes) | Object::String(bytes, _) => bytes.len(),
        Object::Array(items) => items.iter().map(weight).sum(),
        Object::Dictionary(dictionary) => of(dictionary),
        Object::Stream(stream) => of(&stream.dict) + stream.content.len(),
        _ => 0,
    }
}

/// The dictionary under a key, direct or by reference.
pub(crate) fn dictionary<'a>(document: &'a Document, from: &'a Dictionary, key: &[u8]) -> Option<&'a Dictionary> {
    from.get_deref(key, document).ok()?.as_dict().ok()
}

/// The array under a key, direct or by reference.
pub(crate) fn array<'a>(document: &'a Document, from: &'a Dictionary, key: &[u8]) -> Option<&'a [Object]> {
    from.get_deref(key, document).ok()?.as_array().ok().map(Vec::as_slice)
}

/// The text under a key.
pub(crate) fn text(document: &Document, from: &Dictionary, key: &[u8]) -> Option<String> {
    lopdf::decode_text_string(from.get_deref(key, document).ok()?).ok()
}

/// The reference under a key.
pub(crate) fn reference(from: &Dictionary, key: &[u8]) -> Option<ObjectId> {
    from.get(key).ok()?.as_reference().ok()
}

/// The files attached to a document, with their names.
///
/// # Errors
/// What is wrong with one, in words.
pub(crate) fn attachments(document: &Document) -> Result<Vec<(String, Vec<u8>)>, String> {
    let catalog = document.catalog().map_err(|e| e.to_string())?;
    let names = dictionary(document, catalog, b"Names")
        .and_then(|names| dictionary(document, names, b"EmbeddedFiles"))
        .and_then(|tree| array(document, tree, b"Names"))
        .ok_or("it has no list of attached files")?;
    let mut left = 2 * MOST_UNFOLDED;
    let mut found = Vec::new();
    for pair in names.chunks(2) {
        let spec = match pair {
            [_, spec] => document.dereference(spec).ok().and_then(|(_, o)| o.as_dict().ok()),
            _ => None,
        };
        let spec = spec.ok_or("its list of attached files is broken")?;
        let name = text(document, spec, b"UF").ok_or("an attached file has no name")?;
        let stream = dictionary(document, spec, b"EF")
            .and_then(|files| files.get_deref(b"F", document).ok())
            .and_then(|file| file.as_stream().ok())
            .ok_or_else(|| format!("the attached file {name} is not there"))?;
        let bytes = stream.get_plain_content_with_limit(left.min(MOST_UNFOLDED)).map_err(|_| {
            format!(
                "the attached file {name} cannot be unpacked, or all of them are over {} MB",
                (2 * MOST_UNFOLDED) >> 20
            )
        })?;
        left -= bytes.len().min(left);
        found.push((name, bytes));
    }
    Ok(found)
}
