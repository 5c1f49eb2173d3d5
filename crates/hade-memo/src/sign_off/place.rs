//! Where the template wants a signature: a link to `sigfield:NAME` round an empty box. The exporter
//! gives such a link all that a form field needs too: a rectangle, a page, a place in the structure.

use lopdf::{Dictionary, Document, Object, ObjectId};

use crate::pdf;
use crate::project::Role;

/// How the target of such a link begins.
const SCHEME: &[u8] = b"sigfield:";

/// A place to sign.
#[derive(Clone, Debug)]
pub(crate) struct Place {
    /// Who signs there.
    pub role: Role,
    /// The annotation.
    pub annotation: ObjectId,
    /// Its page.
    pub page: ObjectId,
    /// Its structure element.
    pub element: ObjectId,
    /// The element's one child: the reference to the annotation.
    pub child: Dictionary,
}

/// The places to sign, in the order of signing.
pub(crate) fn places(document: &Document) -> Result<Vec<Place>, String> {
    let mut found: Vec<Place> = Vec::new();
    for page in document.page_iter() {
        let page_dictionary = document.get_dictionary(page).map_err(|e| e.to_string())?;
        for annotation in pdf::array(document, page_dictionary, b"Annots").unwrap_or_default() {
            let Ok(annotation) = annotation.as_reference() else { continue };
            let Some(name) = target(document, annotation) else { continue };
            let role = Role::ALL.into_iter().find(|role| role.word().to_lowercase() == name).ok_or_else(|| {
                format!("the link sigfield:{name} names no part; the parts are prepared, checked and approved")
            })?;
            if found.iter().any(|place| place.role == role) {
                return Err(format!("there are two links to sigfield:{name}; each part has one"));
            }
            let (element, child) = element(document, annotation).ok_or_else(|| {
                format!("the link sigfield:{name} holds more than an empty box; put the words beside it")
            })?;
            found.push(Place { role, annotation, page, element, child });
        }
    }
    found.sort_by_key(|place| Role::ALL.iter().position(|role| *role == place.role));
    Ok(found)
}

/// The name after the scheme, when an annotation is such a link.
fn target(document: &Document, annotation: ObjectId) -> Option<String> {
    let annotation = document.get_dictionary(annotation).ok()?;
    let action = pdf::dictionary(document, annotation, b"A")?;
    let uri = action.get_deref(b"URI", document).ok()?.as_str().ok()?;
    Some(String::from_utf8_lossy(uri.strip_prefix(SCHEME)?).into_owned())
}

/// The structure element of an annotation that holds nothing but it.
fn element(document: &Document, annotation: ObjectId) -> Option<(ObjectId, Dictionary)> {
    let number = document.get_dictionary(annotation).ok()?.get(b"StructParent").ok()?.as_i64().ok()?;
    let tree = pdf::dictionary(document, document.catalog().ok()?, b"StructTreeRoot")?;
    let parents = pdf::array(document, pdf::dictionary(document, tree, b"ParentTree")?, b"Nums")?;
    let entry = parents.chunks_exact(2).find(|pair| pair[0].as_i64().is_ok_and(|n| n == number))?;
    let element = entry[1].as_reference().ok()?;
    let child = match document.get_dictionary(element).ok()?.get_deref(b"K", document).ok()? {
        Object::Array(children) if children.len() == 1 => document.dereference(&children[0]).ok()?.1.as_dict().ok()?,
        other => other.as_dict().ok()?,
    };
    (pdf::reference(child, b"Obj") == Some(annotation)).then(|| (element, child.clone()))
}
