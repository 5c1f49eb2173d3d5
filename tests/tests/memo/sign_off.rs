//! The sign-off boxes are signature fields, found from the page, the form and the structure alike.

use lopdf::{Dictionary, Document, Object};
use sha2::{Digest, Sha256};

use super::support::minimal_memo;

fn dictionary<'a>(document: &'a Document, from: &'a Dictionary, key: &str) -> &'a Dictionary {
    from.get_deref(key.as_bytes(), document).and_then(Object::as_dict).unwrap_or_else(|e| panic!("{key}: {e}"))
}

fn array<'a>(document: &'a Document, from: &'a Dictionary, key: &str) -> &'a [Object] {
    from.get_deref(key.as_bytes(), document).and_then(Object::as_array).unwrap_or_else(|e| panic!("{key}: {e}"))
}

fn name<'a>(from: &'a Dictionary, key: &str) -> &'a [u8] {
    from.get(key.as_bytes()).and_then(Object::as_name).unwrap_or_else(|e| panic!("{key}: {e}"))
}

#[test]
fn every_box_is_an_empty_field_in_form_page_and_structure() {
    let document = Document::load_mem(minimal_memo()).unwrap();
    let catalog = document.catalog().unwrap();
    let form = dictionary(&document, catalog, "AcroForm");
    assert_eq!(form.get(b"SigFlags").unwrap().as_i64().unwrap(), 0);
    for refused in ["NeedAppearances", "XFA", "DA", "DR"] {
        assert!(!form.has(refused.as_bytes()), "{refused}");
    }
    let tree = dictionary(&document, catalog, "StructTreeRoot");
    let parents = array(&document, dictionary(&document, tree, "ParentTree"), "Nums");

    let mut names = Vec::new();
    for field in array(&document, form, "Fields") {
        let id = field.as_reference().unwrap();
        let widget = document.get_dictionary(id).unwrap();
        assert_eq!(
            (name(widget, "Subtype"), name(widget, "FT"), widget.get(b"F").unwrap().as_i64().unwrap()),
            (&b"Widget"[..], &b"Sig"[..], 4)
        );
        for absent in ["V", "A", "Border", "MK"] {
            assert!(!widget.has(absent.as_bytes()), "{absent}");
        }
        let text = |key: &str| lopdf::decode_text_string(widget.get(key.as_bytes()).unwrap()).unwrap();
        assert!(text("TU").contains(&text("T")) && text("Contents") == text("TU"), "{}", text("TU"));
        names.push(text("T"));

        let page = dictionary(&document, widget, "P");
        assert!(array(&document, page, "Annots").contains(field), "the page shows it");
        assert_eq!(name(page, "Tabs"), b"S");
        let sides: Vec<f32> = array(&document, widget, "Rect").iter().map(|side| side.as_float().unwrap()).collect();
        let (width, height) = (sides[2] - sides[0], sides[3] - sides[1]);
        assert!(width > 170.0 && height > 55.0, "room for a signature in ink: {width} × {height} pt");
        let appearance = dictionary(&document, widget, "AP").get_deref(b"N", &document).unwrap().as_stream().unwrap();
        assert!(appearance.content.is_empty() && appearance.dict.has(b"BBox") && appearance.dict.has(b"Resources"));

        // StructParent → ParentTree → Form → OBJR → the field.
        let number = widget.get(b"StructParent").unwrap();
        let entry = parents.chunks(2).find(|pair| pair[0] == *number).expect("an entry in the parent tree");
        let element = document.get_dictionary(entry[1].as_reference().unwrap()).unwrap();
        assert_eq!(name(element, "S"), b"Form");
        let child = element.get(b"K").unwrap().as_dict().expect("the bare reference, not a list");
        assert_eq!(name(child, "Type"), b"OBJR");
        assert_eq!(child.get(b"Obj").unwrap().as_reference().unwrap(), id);
    }
    assert_eq!(names, ["prepared", "checked", "approved"]);
}

#[test]
fn the_exported_bytes_stay_and_their_digest_is_written_down() {
    let bytes = minimal_memo();
    let document = Document::load_mem(bytes).unwrap();
    assert_eq!(document.xref_section_count, 2, "the export, and one revision");
    let mut private = document.catalog().unwrap();
    for key in ["PieceInfo", "Hade", "Private"] {
        private = dictionary(&document, private, key);
    }
    let length = usize::try_from(private.get(b"Bytes").unwrap().as_i64().unwrap()).unwrap();
    let exported = &bytes[..length];
    let digest: String = Sha256::digest(exported).iter().map(|b| format!("{b:02x}")).collect();
    assert_eq!(private.get(b"SHA256").unwrap().as_str().unwrap(), digest.as_bytes());
    assert!(exported.ends_with(b"%%EOF") || exported.trim_ascii_end().ends_with(b"%%EOF"));
    let before = Document::load_mem(exported).unwrap();
    assert!(!before.catalog().unwrap().has(b"AcroForm"));
    assert_eq!(before.get_pages().len(), document.get_pages().len());
}
