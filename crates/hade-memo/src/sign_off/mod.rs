//! The last step of a memo: its sign-off boxes become signature fields, in a revision of its own
//! that leaves every exported byte where it is and writes down their digest.
//!
//! The fields are empty; nothing here signs. Whoever does, with a program of their choice, adds a
//! revision each, and `verify` can still tell the memo from what came after it.

mod mark;
mod place;

use lopdf::{Dictionary, IncrementalDocument, Object, ObjectId, Stream, StringFormat, dictionary, text_string};
use sha2::{Digest as _, Sha256};

pub(crate) use mark::Mark;
use place::{Place, places};

use crate::pdf;
use crate::project::Role;

/// The exported file with its signature fields. The same file gives the same bytes.
/// Nothing but the file goes into them, so that whoever has it can hold every byte against it.
///
/// # Errors
/// Why the boxes cannot become fields, in words.
pub(crate) fn add(exported: &[u8]) -> Result<Vec<u8>, String> {
    let document = pdf::load(exported)?;
    let root = pdf::reference(&document.trailer, b"Root").ok_or("it has no catalog")?;
    let mut catalog = document.get_dictionary(root).map_err(|e| e.to_string())?.clone();
    if document.xref_section_count != 1 || catalog.has(b"AcroForm") || catalog.has(b"PieceInfo") {
        return Err("the file is not as it was exported".to_owned());
    }
    let places = places(&document)?;
    let mark = Mark::made(&document, exported)?;

    let mut update = IncrementalDocument::create_from(exported.to_vec(), document);
    if !places.is_empty() {
        for place in &places {
            field(&mut update, place)?;
        }
        let fields = places.iter().map(|place| Object::Reference(place.annotation)).collect();
        let form = update.new_document.add_object(dictionary! { "Fields" => Object::Array(fields), "SigFlags" => 0 });
        catalog.set("AcroForm", form);
    }
    catalog.set("PieceInfo", mark.written());
    update.new_document.set_object(root, catalog);
    // The first half of a file's identity stays, the second tells its revisions apart.
    if let Ok([first, _]) = update.new_document.trailer.get(b"ID").and_then(Object::as_array).map(Vec::as_slice) {
        let second = Sha256::digest(exported)[..16].to_vec();
        let identity = vec![first.clone(), Object::String(second, StringFormat::Hexadecimal)];
        update.new_document.trailer.set("ID", Object::Array(identity));
    }

    let mut bytes = Vec::with_capacity(exported.len() + 8192);
    update.save_to(&mut bytes).map_err(|e| e.to_string())?;
    bytes.push(b'\n');
    Ok(bytes)
}

/// What a screen reader says at a field.
fn spoken(role: Role) -> &'static str {
    match role {
        Role::Prepared => "Signature of the person who prepared this calculation",
        Role::Checked => "Signature of the person who checked this calculation",
        Role::Approved => "Signature of the person who approved this calculation",
    }
}

/// Turns the link of a place into a signature field, and its structure element into a form element.
fn field(update: &mut IncrementalDocument, place: &Place) -> Result<(), String> {
    let words = |e: lopdf::Error| e.to_string();
    let before = update.get_prev_documents();
    let link = before.get_dictionary(place.annotation).map_err(words)?;
    let rectangle = link.get_deref(b"Rect", before).map_err(words)?.clone();
    let parent = link.get(b"StructParent").map_err(words)?.clone();
    let mut element = before.get_dictionary(place.element).map_err(words)?.clone();

    // PDF/A wants an appearance on every field, be it an empty one.
    let appearance = Stream::new(
        dictionary! {
            "Type" => "XObject",
            "Subtype" => "Form",
            "BBox" => bounding_box(&rectangle)?,
            "Resources" => Dictionary::new(),
        },
        Vec::new(),
    );
    let appearance: ObjectId = update.new_document.add_object(appearance);
    let widget = dictionary! {
        "Type" => "Annot",
        "Subtype" => "Widget",
        "FT" => "Sig",
        "T" => text_string(&place.role.word().to_lowercase()),
        "TU" => text_string(spoken(place.role)),
        "Contents" => text_string(spoken(place.role)),
        "F" => 4,
        "P" => place.page,
        "Rect" => rectangle,
        "StructParent" => parent,
        "AP" => dictionary! { "N" => appearance },
    };
    update.new_document.set_object(place.annotation, widget);

    element.set("S", "Form");
    // The bare dictionary, not a list of one: programs that compare the revisions of a signed file
    // take only this form for a field that is being filled in.
    element.set("K", place.child.clone());
    update.new_document.set_object(place.element, element);
    Ok(())
}

fn bounding_box(rectangle: &Object) -> Result<Object, String> {
    let corners: Vec<f32> =
        rectangle.as_array().map(|a| a.iter().filter_map(|n| n.as_float().ok()).collect()).unwrap_or_default();
    match corners.as_slice() {
        [x1, y1, x2, y2] => Ok(vec![0.into(), 0.into(), (x2 - x1).abs().into(), (y2 - y1).abs().into()].into()),
        _ => Err("a sign-off box has no rectangle".to_owned()),
    }
}
