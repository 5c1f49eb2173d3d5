//! Running the command in a folder of its own, and reading its PDF.

use std::path::{Path, PathBuf};
use std::process::{Command, Output};
use std::sync::OnceLock;

use hade_tests::{hade_binary, root};
use serde_json::{Value, json};

/// A copy of the demo folder that a test may change.
pub fn demo_copy() -> tempfile::TempDir {
    let folder = tempfile::tempdir().expect("a temporary folder");
    copy(&root().join("notebooks-demo"), folder.path());
    folder
}

fn copy(from: &Path, to: &Path) {
    std::fs::create_dir_all(to).expect("a folder");
    for entry in std::fs::read_dir(from).expect("the demo") {
        let path = entry.expect("an entry").path();
        let target = to.join(path.file_name().expect("a name"));
        if path.is_dir() {
            copy(&path, &target);
        } else {
            std::fs::copy(&path, &target).expect("a copy");
        }
    }
}

/// `hade memo NOTEBOOK -o OUT` in a folder.
pub fn memo(folder: &Path, notebook: &str, out: &str) -> Output {
    Command::new(hade_binary())
        .args(["memo", notebook, "-o", out])
        .current_dir(folder)
        .output()
        .expect("the hade command runs")
}

/// The memo of the minimal notebook, made once.
pub fn minimal_memo() -> &'static [u8] {
    static MEMO: OnceLock<Vec<u8>> = OnceLock::new();
    MEMO.get_or_init(|| {
        let demo = demo_copy();
        assert_success(&memo(demo.path(), "minimal.ipynb", "minimal.pdf"));
        std::fs::read(demo.path().join("minimal.pdf")).expect("the memo")
    })
}

/// `hade verify` of these bytes, in a folder of its own.
pub fn verify(bytes: &[u8], options: &[&str]) -> Output {
    let folder = tempfile::tempdir().expect("a temporary folder");
    let path = folder.path().join("memo.pdf");
    std::fs::write(&path, bytes).expect("a file");
    Command::new(hade_binary()).arg("verify").arg(path).args(options).output().expect("the hade command runs")
}

/// Fails with what the command said unless it succeeded.
#[track_caller]
pub fn assert_success(output: &Output) {
    assert!(
        output.status.success(),
        "{}\n{}",
        String::from_utf8_lossy(&output.stdout),
        String::from_utf8_lossy(&output.stderr)
    );
}

/// What the command said, both streams.
pub fn said(output: &Output) -> String {
    format!("{}{}", String::from_utf8_lossy(&output.stdout), String::from_utf8_lossy(&output.stderr))
}

/// The files attached to a PDF: name and bytes.
pub fn attachments(pdf: &Path) -> Vec<(String, Vec<u8>)> {
    let document = lopdf::Document::load(pdf).expect("a PDF that lopdf reads");
    let mut found = Vec::new();
    for object in document.objects.values() {
        let Ok(spec) = object.as_dict() else { continue };
        if spec.get(b"Type").and_then(lopdf::Object::as_name).is_ok_and(|n| n == b"Filespec") {
            let name = spec.get(b"UF").or_else(|_| spec.get(b"F")).expect("a file name");
            let name = lopdf::decode_text_string(name).expect("a file name in text");
            let files = spec.get(b"EF").and_then(lopdf::Object::as_dict).expect("an embedded file");
            let id = files.get(b"F").and_then(lopdf::Object::as_reference).expect("a reference");
            let stream = document.get_object(id).and_then(lopdf::Object::as_stream).expect("a stream");
            found.push((name, stream.decompressed_content().unwrap_or_else(|_| stream.content.clone())));
        }
    }
    found.sort();
    found
}

/// The text of a PDF as pdftotext lays it out.
pub fn text(pdf: &Path) -> String {
    laid_out(pdf, &[])
}

/// The text of one of its sheets.
pub fn sheet(pdf: &Path, number: usize) -> String {
    let number = number.to_string();
    laid_out(pdf, &["-f", &number, "-l", &number])
}

fn laid_out(pdf: &Path, pages: &[&str]) -> String {
    let output = Command::new("pdftotext")
        .args(["-layout", "-enc", "UTF-8"])
        .args(pages)
        .arg(pdf)
        .arg("-")
        .output()
        .expect("pdftotext runs");
    assert!(output.status.success());
    String::from_utf8(output.stdout).expect("UTF-8")
}

/// Writes a notebook of code cells.
pub fn notebook(folder: &Path, name: &str, cells: &[&str]) -> PathBuf {
    let cells: Vec<Value> = cells
        .iter()
        .enumerate()
        .map(|(i, source)| json!({"cell_type": "code", "id": format!("cell{i}"), "metadata": {}, "execution_count": null, "outputs": [], "source": source}))
        .collect();
    let notebook = json!({
        "nbformat": 4, "nbformat_minor": 5,
        "metadata": {"kernelspec": {"name": "hade", "display_name": "Hade (Rust)", "language": "rust"}},
        "cells": cells,
    });
    let path = folder.join(name);
    std::fs::write(&path, serde_json::to_string_pretty(&notebook).expect("JSON")).expect("a notebook");
    path
}
