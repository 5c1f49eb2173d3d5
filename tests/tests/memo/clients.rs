//! What general PDF programs make of a memo: three people sign it with pyHanko, pdfsig and
//! accessibility checkers look at it, pikepdf takes the record out.

use std::process::Command;

use serde_json::Value;

use super::python::{python, run_script};
use super::support::{minimal_memo, said, text, verify};

fn report(bytes: &[u8]) -> Value {
    let output = verify(bytes, &["--json"]);
    serde_json::from_slice(&output.stdout).unwrap_or_else(|e| panic!("{e}: {}", said(&output)))
}

#[test]
fn three_people_sign_and_the_memo_is_still_the_memo() {
    let Some(python) = python() else { return };
    let folder = tempfile::tempdir().unwrap();
    let memo = folder.path().join("memo.pdf");
    std::fs::write(&memo, minimal_memo()).unwrap();
    let signatures = run_script(&python, "sign.py", &[&memo, folder.path()]);
    let signatures = signatures.as_array().unwrap();
    assert_eq!(signatures.len(), 3);
    for (signature, field) in signatures.iter().zip(["prepared", "checked", "approved"]) {
        assert_eq!(signature["field"], field);
        for holds in ["intact", "valid", "trusted", "bottom_line"] {
            assert_eq!(signature[holds], Value::Bool(true), "{signature}");
        }
    }

    for (number, fields) in [(1, 1), (2, 2), (3, 3), (4, 3)] {
        let path = folder.path().join(format!("signed-{number}.pdf"));
        let bytes = std::fs::read(&path).unwrap();
        assert!(bytes.starts_with(minimal_memo()), "signing leaves the memo where it is");
        let report = report(&bytes);
        assert_eq!(report["accepted"], Value::Bool(true), "{number}: {report:#}");
        let found = report["signatures"].as_array().unwrap();
        assert_eq!(found.len(), fields, "{report:#}");
        assert!(found.iter().all(|s| s["agrees"] == true && s["algorithm"] == "SHA-256"), "{report:#}");
        let later = report["later_revisions"].as_array().unwrap();
        assert_eq!(later.len(), number, "{report:#}");
        assert_eq!(later[0]["adds"], "a signature in the field prepared");
        if number == 4 {
            assert_eq!(later[3]["adds"], "data for validating signatures");
        }
    }

    let signed = folder.path().join("signed-3.pdf");
    if hade_tests::tool("pdfsig") {
        let output = Command::new("pdfsig").arg("-nocert").arg(&signed).output().unwrap();
        assert_eq!(said(&output).matches("Signature is Valid.").count(), 3, "{}", said(&output));
    }

    // A byte of the memo, of the first signature's revision and of the last one's.
    let bytes = std::fs::read(&signed).unwrap();
    let first = std::fs::metadata(folder.path().join("signed-1.pdf")).unwrap().len() as usize;
    for place in [1000, minimal_memo().len() / 2, minimal_memo().len() + 40, first - 100, bytes.len() - 100] {
        let mut other = bytes.clone();
        other[place] ^= 1;
        let output = verify(&other, &[]);
        assert!(matches!(output.status.code(), Some(1 | 2)), "byte {place}: {}", said(&output));
    }
    // A page replaced after everybody signed.
    let other = super::verify::with_page_changed(&bytes);
    let output = verify(&other, &[]);
    assert_eq!(output.status.code(), Some(1), "{}", said(&output));
    assert!(said(&output).contains("sheet 1"), "{}", said(&output));
}

#[test]
fn general_programs_read_the_memo_and_find_nothing_to_object_to() {
    let Some(python) = python() else { return };
    let folder = tempfile::tempdir().unwrap();
    let memo = folder.path().join("memo.pdf");
    std::fs::write(&memo, minimal_memo()).unwrap();
    let look = run_script(&python, "look.py", &[&memo]);
    for program in ["outloud", "pdfua"] {
        assert_eq!(look[program]["code"], 0, "{program}: {}", look[program]["said"].as_str().unwrap_or_default());
    }
    let record = look["attached"]["record.json"].as_str().expect("the record");
    if hade_tests::tool("pdftotext") {
        assert!(text(&memo).contains(record), "the SHA-256 of the record that pikepdf takes out is printed");
    }
    if hade_tests::tool("qpdf") {
        let output = Command::new("qpdf").arg("--check").arg(&memo).output().unwrap();
        assert!(output.status.success() && !said(&output).contains("WARNING"), "{}", said(&output));
    }
}
