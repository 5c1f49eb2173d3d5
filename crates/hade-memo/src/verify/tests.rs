//! Memos made here, and by people who know how the digest is made.

use std::path::Path;

use hade::card::Card;
use hade::prelude::*;
use lopdf::{Document, Object};

use super::{Standing, Verified, verify};
use crate::assemble::{MemoInput, MemoOptions, build_with};
use crate::project::Project;
use crate::replay::{Again, Replayer, by_library};
use crate::sign_off::{self, Mark};

fn record() -> String {
    let mut sheet = Sheet::new("A test");
    let source = || Source::measured("a test");
    let sv = sheet.given("S_v", "vertical stress", 60.mpa(), source());
    let sh_max = sheet.given("S_Hmax", "larger horizontal stress", 55.mpa(), source());
    let sh_min = sheet.given("S_hmin", "smaller horizontal stress", 40.mpa(), source());
    let azimuth = sheet.given("A", "its azimuth", Azimuth::from_true_north(30.deg()), source());
    let stress = Stress::from_horizontals(Horizontals { sv, sh_max, sh_min, sh_max_azimuth: azimuth }).unwrap();
    sheet.add(&stress.principals());
    sheet.record().to_json().unwrap()
}

fn memo(record_json: &str, replayer: Replayer) -> Vec<u8> {
    let project = Project::parse("[memo]\nnumber = \"T-1\"\ndate = 2026-03-01\n", Path::new("hade.toml")).unwrap();
    let input = MemoInput {
        record_json,
        notebook: ("test.ipynb", br#"{"cells":[],"nbformat":4}"#),
        folder: Path::new("."),
        project: Some(&project),
    };
    build_with(&input, &MemoOptions::default(), replayer).unwrap().pdf
}

fn against(verified: &Verified) -> Vec<String> {
    let fails = verified.report.findings.iter().filter(|f| f.standing == Standing::Fails);
    fails.map(|f| format!("{}: {}", f.what, f.found)).collect()
}

#[test]
fn a_memo_is_the_same_twice_and_accepted() {
    let bytes = memo(&record(), by_library);
    assert!(bytes == memo(&record(), by_library), "the same inputs give the same bytes");
    let verified = verify(bytes).unwrap();
    assert!(verified.report.accepted, "{:#?}", verified.report);
    assert_eq!(verified.contents.unwrap().record.title, "A test");
}

/// The memo with other bytes in place of the attached record, and a digest that fits them.
fn forged(other: &str) -> Vec<u8> {
    let bytes = memo(&record(), by_library);
    let mark = Mark::of(&Document::load_mem(&bytes).unwrap()).unwrap();
    let mut exported = Document::load_mem(&bytes[..mark.length]).unwrap();
    let is_record = |object: &Object| {
        object.as_stream().is_ok_and(|s| s.get_plain_content().is_ok_and(|c| c == record().as_bytes()))
    };
    let id = *exported.objects.iter().find(|(_, object)| is_record(object)).expect("the record").0;
    let stream = exported.get_object_mut(id).and_then(Object::as_stream_mut).unwrap();
    stream.set_plain_content(other.as_bytes().to_vec());
    let mut base = Vec::new();
    exported.save_to(&mut base).unwrap();
    sign_off::add(&base).unwrap()
}

#[test]
fn a_digest_made_to_fit_does_not_fit_the_print() {
    let same = verify(forged(&record())).unwrap();
    assert!(same.report.accepted, "only the contents matter: {:?}", against(&same));
    let other = verify(forged(&record().replace("A test", "B test"))).unwrap();
    assert!(!other.report.accepted);
    assert!(against(&other).iter().any(|line| line.contains("no sheet prints")), "{:?}", against(&other));
}

#[test]
fn a_record_with_another_outcome_is_computed_again() {
    let number = |text: &str| {
        let place = text.find("\"outcome\"").expect("an outcome");
        let digit = place + text[place..].find(|c: char| ('1'..='8').contains(&c)).expect("a number");
        let mut other = text.to_owned();
        other.replace_range(digit..=digit, "9");
        other
    };
    let believes = |card: &Card| Ok(Again { card: card.clone(), difference: None, checks: card.checks.clone() });
    let verified = verify(memo(&number(&record()), believes)).unwrap();
    assert!(!verified.report.accepted);
    assert!(verified.contents.is_none());
    let against = against(&verified);
    assert!(against.iter().any(|line| line.starts_with("item 1")), "{against:?}");
}

#[test]
fn a_damaged_memo_is_called_so_and_another_file_is_not() {
    let bytes = memo(&record(), by_library);
    let cut = bytes[..bytes.len() - 40].to_vec();
    let mut torn = bytes.clone();
    let middle = torn.len() / 2;
    torn.drain(middle..middle + 100);
    for damaged in [cut, torn] {
        let said = verify(damaged).unwrap_err().to_string();
        assert!(said.starts_with("the file was a memo and is damaged; ask its maker for it again: "), "{said}");
    }
    let said = verify(b"%PDF-1.7 something else".to_vec()).unwrap_err().to_string();
    assert!(said.starts_with("the file cannot be read as a memo: "), "{said}");
}
