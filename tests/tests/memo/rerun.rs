//! `hade verify --rerun`: the attached notebook, run again where the memo is read.

use std::io::{BufRead as _, BufReader};
use std::path::Path;
use std::process::{Command, Output, Stdio};

use hade_memo::{MemoInput, MemoOptions, Project, build};
use hade_tests::{hade_binary, root};
use serde_json::Value;

use super::support::{attachments, minimal_memo, said, verify};

/// What the minimal memo is made of: its notebook and its record.
fn minimal() -> (String, String) {
    let folder = tempfile::tempdir().unwrap();
    let pdf = folder.path().join("minimal.pdf");
    std::fs::write(&pdf, minimal_memo()).unwrap();
    let files = attachments(&pdf);
    let of = |name: &str| files.iter().find(|(n, _)| n == name).expect("an attached file").1.clone();
    (String::from_utf8(of("minimal.ipynb")).unwrap(), String::from_utf8(of("record.json")).unwrap())
}

/// A memo in which everything holds but what its notebook would give.
fn memo(notebook: &str, record: &str) -> Vec<u8> {
    let project = Project::read_beside(&root().join("notebooks-demo")).unwrap().unwrap();
    let input = MemoInput {
        record_json: record,
        notebook: ("minimal.ipynb", notebook.as_bytes()),
        folder: Path::new("."),
        project: Some(&project),
    };
    build(&input, &MemoOptions::default()).unwrap().pdf
}

fn report(output: &Output) -> Value {
    serde_json::from_slice(&output.stdout).unwrap_or_else(|e| panic!("{e}: {}", said(output)))
}

#[test]
fn a_notebook_that_gives_the_same_again_is_accepted() {
    let output = verify(minimal_memo(), &["--rerun"]);
    assert_eq!(output.status.code(), Some(0), "{}", said(&output));
    for words in ["runs the code of the attached notebook", "4 cells give the same outcomes", "ACCEPTED"] {
        assert!(said(&output).contains(words), "{words}: {}", said(&output));
    }
}

#[test]
fn a_notebook_that_gives_other_numbers_is_refused() {
    let (notebook, record) = minimal();
    for (old, new, words) in [
        ("41.mpa()", "41.1.mpa()", "item "),
        ("sheet.add(&wall.limits());", "", "items, and the memo has"),
        ("Between {} and {}.", "From {} to {}.", "other conclusions"),
        ("sheet.add(&range);", "panic!(\\\"it is dry\\\");", "it is dry"),
    ] {
        let other = notebook.replace(old, new);
        assert_ne!(other, notebook, "{old}");
        let pdf = memo(&other, &record);
        let output = verify(&pdf, &[]);
        assert_eq!(output.status.code(), Some(0), "without the rerun nothing is wrong: {}", said(&output));
        let output = verify(&pdf, &["--rerun", "--json"]);
        assert_eq!(output.status.code(), Some(1), "{old}: {}", said(&output));
        let report = report(&output);
        assert_eq!(report["accepted"], Value::Bool(false), "{report:#}");
        let findings = report["findings"].as_array().unwrap();
        let fails: Vec<&Value> = findings.iter().filter(|f| f["standing"] == "fails").collect();
        assert!(!fails.is_empty() && fails.iter().all(|f| f["what"] == "notebook run again"), "{fails:#?}");
        assert!(fails.iter().any(|f| f["found"].as_str().unwrap().contains(words)), "{words}: {fails:#?}");
    }
}

#[test]
fn a_notebook_that_cannot_be_run_here_says_nothing_against_the_memo() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("memo.pdf");
    std::fs::write(&path, minimal_memo()).unwrap();
    let output = Command::new(hade_binary())
        .arg("verify")
        .arg(&path)
        .arg("--rerun")
        .env("PATH", folder.path())
        .output()
        .expect("the hade command runs");
    assert_eq!(output.status.code(), Some(3), "{}", said(&output));
    for words in ["nothing was compared", "ACCEPTED", "NOT run again"] {
        assert!(said(&output).contains(words), "{words}: {}", said(&output));
    }
}

#[test]
fn a_cell_that_takes_longer_than_allowed_says_nothing_against_the_memo() {
    let output = verify(&endless(), &["--rerun", "--cell-timeout", "20"]);
    assert_eq!(output.status.code(), Some(3), "{}", said(&output));
    for words in ["stopped after 20 s", "ACCEPTED", "NOT run again"] {
        assert!(said(&output).contains(words), "{words}: {}", said(&output));
    }
}

/// A memo whose notebook never ends.
fn endless() -> Vec<u8> {
    let (notebook, record) = minimal();
    let other = notebook.replace("sheet.add(&range);", "std::thread::sleep(std::time::Duration::from_secs(3600));");
    assert_ne!(other, notebook);
    memo(&other, &record)
}

#[cfg(unix)]
#[test]
fn ctrl_c_ends_the_rerun_and_no_verdict_is_drawn_from_it() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("memo.pdf");
    std::fs::write(&path, endless()).unwrap();
    let mut child = Command::new(hade_binary())
        .arg("verify")
        .arg(&path)
        .args(["--rerun", "--json", "--cell-timeout", "300"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the hade command runs");
    let mut told = BufReader::new(child.stderr.take().expect("its progress")).lines().map_while(Result::ok);
    assert!(told.any(|line| line.starts_with("cell 3 of 4")), "the cell that never ends begins");
    let sent = Command::new("kill").args(["-INT", &child.id().to_string()]).status().expect("kill runs");
    assert!(sent.success());
    let output = child.wait_with_output().unwrap();
    assert_eq!(output.status.code(), Some(130), "{}", said(&output));
    let report = report(&output);
    assert_eq!(report["accepted"], Value::Bool(true), "{report:#}");
    let verdict = report["verdict"].as_str().unwrap();
    assert!(verdict.contains("NOT run again"), "{verdict}");
    assert!(said(&output).contains("interrupted in cell 3 of 4"), "{}", said(&output));
}
