//! `hade verify` accepts a memo as it was made, and nothing that was done to it since.

use std::panic::catch_unwind;

use hade_memo::{Standing, verify};
use hade_tests::splitmix::SplitMix64;
use lopdf::{Dictionary, Document, IncrementalDocument, Object, ObjectId, Stream, StringFormat, dictionary};
use serde_json::Value;

use super::support::{minimal_memo, said, verify as verify_command};

/// What is held against these bytes; empty when they are accepted.
fn against(bytes: Vec<u8>) -> Vec<String> {
    match verify(bytes) {
        Err(why) => vec![why.to_string()],
        Ok(verified) => {
            let report = verified.report;
            let fails = report.findings.iter().filter(|f| f.standing == Standing::Fails);
            let list: Vec<String> = fails.map(|f| format!("{}: {}", f.what, f.found)).collect();
            assert_eq!(list.is_empty(), report.accepted, "{report:#?}");
            assert_eq!(report.accepted, verified.contents.is_some());
            list
        }
    }
}

/// The memo with a revision of somebody else's after it.
fn changed(change: impl FnOnce(&mut IncrementalDocument)) -> Vec<u8> {
    revised(minimal_memo().to_vec(), change)
}

/// A file whose first page is turned by a revision after it.
pub fn with_page_changed(bytes: &[u8]) -> Vec<u8> {
    revised(bytes.to_vec(), |update| {
        let (id, mut page) = first_page(update);
        page.set("Rotate", 90);
        update.new_document.set_object(id, page);
    })
}

fn revised(bytes: Vec<u8>, change: impl FnOnce(&mut IncrementalDocument)) -> Vec<u8> {
    let document = Document::load_mem(&bytes).unwrap();
    let mut update = IncrementalDocument::create_from(bytes, document);
    change(&mut update);
    let mut out = Vec::new();
    update.save_to(&mut out).unwrap();
    out
}

fn catalog(update: &IncrementalDocument) -> (ObjectId, Dictionary) {
    let id = update.get_prev_documents().trailer.get(b"Root").unwrap().as_reference().unwrap();
    (id, update.get_prev_documents().get_dictionary(id).unwrap().clone())
}

fn first_page(update: &IncrementalDocument) -> (ObjectId, Dictionary) {
    let id = update.get_prev_documents().page_iter().next().unwrap();
    (id, update.get_prev_documents().get_dictionary(id).unwrap().clone())
}

fn first_field(update: &IncrementalDocument) -> (ObjectId, Dictionary) {
    let (_, catalog) = catalog(update);
    let document = update.get_prev_documents();
    let form = catalog.get_deref(b"AcroForm", document).unwrap().as_dict().unwrap();
    let id = form.get(b"Fields").unwrap().as_array().unwrap()[0].as_reference().unwrap();
    (id, document.get_dictionary(id).unwrap().clone())
}

#[test]
fn a_fresh_memo_is_accepted_in_words_and_as_json() {
    let output = verify_command(minimal_memo(), &[]);
    assert_eq!(output.status.code(), Some(0), "{}", said(&output));
    for words in ["ACCEPTED", "integrity, not authenticity", "no electronic signature", "items computed again"] {
        assert!(said(&output).contains(words), "{words}: {}", said(&output));
    }
    let output = verify_command(minimal_memo(), &["--json"]);
    let report: Value = serde_json::from_slice(&output.stdout).expect("JSON");
    assert_eq!(report["accepted"], Value::Bool(true));
    let names: Vec<&str> =
        report["attachments"].as_array().unwrap().iter().map(|a| a["name"].as_str().unwrap()).collect();
    assert!(names.contains(&"record.json") && names.contains(&"minimal.ipynb"), "{names:?}");
}

#[test]
fn a_flipped_byte_is_found_wherever_it_is() {
    let bytes = minimal_memo();
    // Through the whole file in uneven steps, and closer where the revision with the fields is.
    let places = (0..bytes.len()).step_by(7919).chain((bytes.len() - 2700..bytes.len()).step_by(37));
    for place in places {
        let mut other = bytes.to_vec();
        other[place] ^= 1;
        assert!(!against(other).is_empty(), "byte {place} of {}", bytes.len());
    }
    // Within the attached record, where it breaks nothing but the digest.
    let mut other = bytes.to_vec();
    let file = bytes.windows(13).position(|w| w == b"/EmbeddedFile").expect("an attached file");
    let data = file + bytes[file..].windows(7).position(|w| w == b"stream\n").expect("its bytes");
    other[data + 200] ^= 1;
    let output = verify_command(&other, &[]);
    assert_eq!(output.status.code(), Some(1), "{}", said(&output));
    assert!(said(&output).contains("REFUSED") && said(&output).contains("SHA-256"), "{}", said(&output));
}

#[test]
fn a_memo_cut_short_or_lengthened_is_not_accepted() {
    let bytes = minimal_memo();
    for end in [0, 4, 100, bytes.len() / 2, bytes.len() - 1000, bytes.len() - 7, bytes.len() - 1] {
        assert!(!against(bytes[..end].to_vec()).is_empty(), "cut at {end}");
    }
    for more in ["\n", " ", "%%EOF\n", "\0\0\0\0", "%PDF-1.7\n"] {
        assert!(!against([bytes, more.as_bytes()].concat()).is_empty(), "with {more:?}");
    }
    assert!(!against([b"\n", bytes].concat()).is_empty(), "with something before it");
    let output = verify_command(&bytes[..bytes.len() / 2], &[]);
    assert_eq!(output.status.code(), Some(2), "{}", said(&output));
}

#[test]
fn what_is_no_memo_is_said_to_be_none() {
    let mut document = Document::with_version("1.7");
    let pages = document.add_object(dictionary! { "Type" => "Pages", "Kids" => Vec::<Object>::new(), "Count" => 0 });
    let catalog = document.add_object(dictionary! { "Type" => "Catalog", "Pages" => pages });
    document.trailer.set("Root", catalog);
    let mut other = Vec::new();
    document.save_to(&mut other).unwrap();
    for (bytes, word) in [(other.as_slice(), "carries no digest"), (b"Dear sir", "does not begin as a PDF")] {
        let output = verify_command(bytes, &[]);
        assert_eq!(output.status.code(), Some(2), "{}", said(&output));
        assert!(said(&output).contains(word), "{}", said(&output));
    }
}

#[test]
fn a_later_revision_may_add_nothing_but_signatures() {
    type Change = Box<dyn FnOnce(&mut IncrementalDocument)>;
    let set = |of: fn(&IncrementalDocument) -> (ObjectId, Dictionary), key: &'static str, value: Object| -> Change {
        Box::new(move |update| {
            let (id, mut dictionary) = of(update);
            dictionary.set(key, value);
            update.new_document.set_object(id, dictionary);
        })
    };
    let no_signature: Change = Box::new(|update| {
        let value = update.new_document.add_object(dictionary! { "Type" => "Sig" });
        let (id, mut field) = first_field(update);
        field.set("V", value);
        update.new_document.set_object(id, field);
    });
    let page_added: Change = Box::new(|update| {
        let (_, page) = first_page(update);
        let extra = update.new_document.add_object(page);
        let (_, catalog) = catalog(update);
        let id = catalog.get(b"Pages").unwrap().as_reference().unwrap();
        let mut pages = update.get_prev_documents().get_dictionary(id).unwrap().clone();
        let mut kids = pages.get(b"Kids").unwrap().as_array().unwrap().clone();
        kids.push(extra.into());
        pages.set("Count", pages.get(b"Count").unwrap().as_i64().unwrap() + 1);
        pages.set("Kids", kids);
        update.new_document.set_object(id, pages);
    });
    let contents_changed: Change = Box::new(|update| {
        let (_, page) = first_page(update);
        let id = page.get(b"Contents").unwrap().as_reference().unwrap();
        update.new_document.set_object(id, Stream::new(Dictionary::new(), b"0 0 100 100 re f".to_vec()));
    });
    let attachment_swapped: Change = Box::new(|update| {
        let document = update.get_prev_documents();
        let is_file = |o: &Object| o.as_stream().is_ok_and(|s| s.dict.has_type(b"EmbeddedFile"));
        let (id, old) = document.objects.iter().find(|(_, o)| is_file(o)).expect("an attached file");
        let dictionary = old.as_stream().unwrap().dict.clone();
        update.new_document.set_object(*id, Stream::new(dictionary, b"{}".to_vec()));
    });
    let words = Object::String(b"signed".to_vec(), StringFormat::Literal);
    let script = Object::from(dictionary! { "S" => "JavaScript", "JS" => words.clone() });
    for (change, word) in [
        (page_added, "the list of sheets"),
        (contents_changed, "it changes object"),
        (attachment_swapped, "an attached file"),
        (no_signature, "no signature"),
        (set(first_field, "V", words), "no signature"),
        (set(first_field, "Rect", vec![0.into(), 0.into(), 600.into(), 800.into()].into()), "Rect"),
        (set(first_page, "Rotate", 90.into()), "sheet 1"),
        (set(catalog, "OpenAction", script), "OpenAction"),
        (set(catalog, "PieceInfo", Dictionary::new().into()), "carries no digest"),
        (set(catalog, "AcroForm", dictionary! { "Fields" => Vec::<Object>::new() }.into()), "AcroForm"),
    ] {
        let found = against(changed(change));
        assert!(found.iter().any(|line| line.contains(word)), "{word}: {found:?}");
    }
}

#[test]
fn random_damage_is_never_accepted_and_never_a_crash() {
    let bytes = minimal_memo();
    let mut random = SplitMix64::new(20_260_514);
    let mut below = |bound: usize| ((random.unit() * bound as f64) as usize).min(bound - 1);
    let mut tried = 0;
    while tried < 300 {
        let mut other = bytes.to_vec();
        let (kind, place, length) = (below(7), below(bytes.len()), 1 + below(4000));
        let end = (place + length).min(bytes.len());
        match kind {
            0 => other[place] ^= 1 << below(8),
            1 => other[place..end].fill(u8::try_from(below(256)).unwrap()),
            2 => drop(other.drain(place..end)),
            3 => drop(other.splice(place..place, bytes[place..end].to_vec())),
            4 => other.truncate(place),
            5 => other[place..end].reverse(),
            // Near the end stand the tables that readers begin with.
            _ => {
                let place = bytes.len() - 1 - below(9000.min(bytes.len()));
                other[place] = b"0123456789/<>[]() %\n"[below(20)];
            }
        }
        if other == bytes {
            continue;
        }
        tried += 1;
        let verdict = catch_unwind(|| against(other));
        assert!(verdict.is_ok_and(|found| !found.is_empty()), "kind {kind} at {place}, {length} bytes");
    }
}

#[test]
fn a_file_that_unfolds_without_end_is_put_away() {
    // Two thousand entries of the table of objects lead to one object of 4 MB.
    let mut bytes = b"%PDF-1.7\n1 0 obj\n<</Length 4000000>>\nstream\n".to_vec();
    bytes.resize(bytes.len() + 4_000_000, b' ');
    bytes.extend_from_slice(b"\nendstream\nendobj\n");
    let table = bytes.len();
    bytes.extend_from_slice(b"xref\n0 2001\n0000000000 65535 f \n");
    bytes.extend_from_slice("0000000009 00000 n \n".repeat(2000).as_bytes());
    bytes.extend_from_slice(format!("trailer\n<</Size 2001/Root 1 0 R>>\nstartxref\n{table}\n%%EOF\n").as_bytes());
    assert!(!against(bytes).is_empty());
    // Arrays in arrays in arrays.
    let mut bytes = b"%PDF-1.7\n1 0 obj\n".to_vec();
    bytes.resize(bytes.len() + 1_000_000, b'[');
    let table = bytes.len();
    bytes.extend_from_slice(b"xref\n0 2\n0000000000 65535 f \n0000000009 00000 n \n");
    bytes.extend_from_slice(format!("trailer\n<</Size 2/Root 1 0 R>>\nstartxref\n{table}\n%%EOF\n").as_bytes());
    assert!(!against(bytes).is_empty());
}
