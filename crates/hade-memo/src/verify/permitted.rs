//! What a later revision may change: a signature in a field of the memo, and the data that goes
//! with signatures. Everything else is refused, whatever it would show.

use std::collections::{BTreeMap, BTreeSet};

use lopdf::{Dictionary, Document, Object, ObjectId};

use crate::pdf;

/// Keys that signing sets in a field that is also its own annotation.
const OF_FIELD: [&[u8]; 5] = [b"V", b"AP", b"M", b"MK", b"DA"];
/// Keys that signing sets in the form: that there are signatures, and the faces of their stamps.
const OF_FORM: [&[u8]; 3] = [b"SigFlags", b"DR", b"DA"];
/// Keys that signing sets in the catalog: validation data, a certification, extensions, metadata.
const OF_CATALOG: [&[u8]; 4] = [b"DSS", b"Perms", b"Extensions", b"Metadata"];
/// Keys of the document's information that say when it was last changed, and by what.
const OF_INFORMATION: [&[u8]; 2] = [b"ModDate", b"Producer"];

/// The objects of a memo that signing touches.
pub(super) struct Fields {
    catalog: Option<ObjectId>,
    form: Option<ObjectId>,
    information: Option<ObjectId>,
    fields: BTreeSet<ObjectId>,
}

impl Fields {
    /// Those of a memo.
    pub(super) fn of(memo: &Document) -> Self {
        let form = memo.catalog().ok().and_then(|catalog| pdf::reference(catalog, b"AcroForm"));
        let fields = form
            .and_then(|form| memo.get_dictionary(form).ok())
            .and_then(|form| pdf::array(memo, form, b"Fields"))
            .unwrap_or_default()
            .iter()
            .filter_map(|field| field.as_reference().ok())
            .collect();
        Fields {
            catalog: pdf::reference(&memo.trailer, b"Root"),
            form,
            information: pdf::reference(&memo.trailer, b"Info"),
            fields,
        }
    }
}

/// What a revision adds.
#[derive(Debug, Default, PartialEq, Eq)]
pub(super) struct Change {
    /// The fields that it signs.
    pub signed: Vec<ObjectId>,
    names: Vec<String>,
    validation: bool,
    metadata: bool,
}

impl Change {
    /// In words.
    pub(super) fn words(&self) -> String {
        let mut words: Vec<String> = self.names.iter().map(|name| format!("a signature in the field {name}")).collect();
        if self.validation {
            words.push("data for validating signatures".to_owned());
        }
        if self.metadata && words.is_empty() {
            words.push("a date of change".to_owned());
        }
        if words.is_empty() { "nothing".to_owned() } else { words.join(" and ") }
    }
}

/// Compares a revision with the one before it.
///
/// # Errors
/// What it changes that signing does not, in words.
pub(super) fn compare(memo: &Document, before: &Document, after: &Document, fields: &Fields) -> Result<Change, String> {
    for key in [b"Root".as_slice(), b"Info"] {
        if before.trailer.has(key) && before.trailer.get(key).ok() != after.trailer.get(key).ok() {
            return Err(format!("it puts another {} in place of the memo's", lossy(key)));
        }
    }
    let dangling = references(before.objects.values().chain([&Object::Dictionary(before.trailer.clone())]));
    let filled = after.objects.keys().find(|id| !before.objects.contains_key(id) && dangling.contains(id));
    if let Some(id) = filled {
        return Err(format!("it adds object {}, which the memo refers to and does not have", id.0));
    }
    if let Some(id) = before.objects.keys().find(|id| !after.objects.contains_key(id)) {
        return Err(format!("it removes object {} of the memo", id.0));
    }

    let validation = reachable(before, before.catalog().ok().and_then(|c| c.get(b"DSS").ok()));
    let metadata = before.catalog().ok().and_then(|c| pdf::reference(c, b"Metadata"));
    let mut change = Change::default();
    for (id, old) in &before.objects {
        let Some(new) = after.objects.get(id).filter(|new| *new != old) else { continue };
        let only = |keys: &[&[u8]]| match (old.as_dict(), new.as_dict()) {
            (Ok(old), Ok(new)) => other_key(old, new, keys),
            _ => Some("its kind".to_owned()),
        };
        if fields.fields.contains(id) {
            if let Some(key) = only(&OF_FIELD) {
                return Err(format!("it changes {key} of a signature field"));
            }
            sign(*id, old, new, before, after, &mut change)?;
        } else if Some(*id) == fields.form {
            if let Some(key) = only(&OF_FORM) {
                return Err(format!("it changes {key} of the form"));
            }
        } else if Some(*id) == fields.catalog {
            if let Some(key) = only(&OF_CATALOG) {
                return Err(format!("it changes {key} of the catalog"));
            }
            let dss = |object: &Object| object.as_dict().ok().and_then(|d| d.get(b"DSS").ok().cloned());
            change.validation |= dss(old) != dss(new);
            let described = after.catalog().ok().and_then(|c| c.get_deref(b"Metadata", after).ok());
            if !described.is_some_and(is_metadata) {
                return Err("it puts something else in place of the metadata".to_owned());
            }
        } else if Some(*id) == fields.information {
            if let Some(key) = only(&OF_INFORMATION) {
                return Err(format!("it changes {key} of the document's information"));
            }
            change.metadata = true;
        } else if Some(*id) == metadata {
            if !is_metadata(new) {
                return Err("it puts something else in place of the metadata".to_owned());
            }
            change.metadata = true;
        } else if !memo.objects.contains_key(id) && validation.contains(id) {
            change.validation = true;
        } else {
            return Err(format!("it changes {}", described(*id, old, before)));
        }
    }
    Ok(change)
}

/// Takes down that a field is signed.
fn sign(
    id: ObjectId,
    old: &Object,
    new: &Object,
    before: &Document,
    after: &Document,
    change: &mut Change,
) -> Result<(), String> {
    let (Ok(old), Ok(new)) = (old.as_dict(), new.as_dict()) else {
        return Err("it replaces a signature field".to_owned());
    };
    let name = pdf::text(before, old, b"T").unwrap_or_default();
    if old.has(b"V") {
        return Err(format!("it changes the field {name}, which is signed already"));
    }
    let value = pdf::reference(new, b"V").filter(|value| !before.objects.contains_key(value));
    let value = value.and_then(|value| after.get_dictionary(value).ok());
    if !value.is_some_and(|value| value.has(b"ByteRange") && value.has(b"Contents")) {
        return Err(format!("it fills the field {name} with something that is no signature"));
    }
    change.signed.push(id);
    change.names.push(name);
    Ok(())
}

/// The first key, but for those allowed, in which two dictionaries differ.
fn other_key(old: &Dictionary, new: &Dictionary, allowed: &[&[u8]]) -> Option<String> {
    let keys: BTreeSet<&Vec<u8>> = old.iter().chain(new.iter()).map(|(key, _)| key).collect();
    keys.into_iter()
        .filter(|key| !allowed.contains(&key.as_slice()))
        .find(|key| old.get(key).ok() != new.get(key).ok())
        .map(|key| lossy(key))
}

fn is_metadata(object: &Object) -> bool {
    object.as_stream().is_ok_and(|stream| {
        let named = |key: &[u8], name: &[u8]| stream.dict.get(key).and_then(Object::as_name).is_ok_and(|n| n == name);
        named(b"Type", b"Metadata") && named(b"Subtype", b"XML")
    })
}

/// What an object is to a reader.
fn described(id: ObjectId, object: &Object, document: &Document) -> String {
    let dictionary = match object {
        Object::Dictionary(dictionary) => Some(dictionary),
        Object::Stream(stream) => Some(&stream.dict),
        _ => None,
    };
    let kind = dictionary.and_then(|d| d.get(b"Type").ok()).and_then(|t| t.as_name().ok()).map(lossy);
    let pages: BTreeMap<ObjectId, u32> = document.get_pages().into_iter().map(|(number, id)| (id, number)).collect();
    if let Some(number) = pages.get(&id) {
        return format!("sheet {number}");
    }
    match kind.as_deref() {
        Some("Pages") => "the list of sheets".to_owned(),
        Some("EmbeddedFile" | "Filespec") => format!("an attached file (object {})", id.0),
        Some(kind) => format!("object {} of the memo ({kind})", id.0),
        None => format!("object {} of the memo", id.0),
    }
}

/// Every object that these refer to.
fn references<'a>(objects: impl Iterator<Item = &'a Object>) -> BTreeSet<ObjectId> {
    let mut found = BTreeSet::new();
    objects.for_each(|object| collect(object, &mut found));
    found
}

/// The parser bounds how deep objects nest.
fn collect(object: &Object, found: &mut BTreeSet<ObjectId>) {
    match object {
        Object::Reference(id) => {
            found.insert(*id);
        }
        Object::Array(items) => items.iter().for_each(|item| collect(item, found)),
        Object::Dictionary(dictionary) => dictionary.iter().for_each(|(_, value)| collect(value, found)),
        Object::Stream(stream) => stream.dict.iter().for_each(|(_, value)| collect(value, found)),
        _ => {}
    }
}

/// Every object that can be reached from one.
fn reachable(document: &Document, from: Option<&Object>) -> BTreeSet<ObjectId> {
    let mut found = BTreeSet::new();
    let mut open: Vec<ObjectId> =
        from.map(|object| references([object].into_iter())).unwrap_or_default().into_iter().collect();
    while let Some(id) = open.pop() {
        if found.insert(id)
            && let Some(object) = document.objects.get(&id)
        {
            open.extend(references([object].into_iter()));
        }
    }
    found
}

fn lossy(name: &[u8]) -> String {
    String::from_utf8_lossy(name).into_owned()
}
