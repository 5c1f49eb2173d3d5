//! A session in which every name of the prelude is used for what it is there for: `data/every_name.rs`.

use std::collections::BTreeSet;
use std::process::Command;

use hade_tests::{data, hade_binary, prelude_names};
use serde_json::Value;

use super::support::{assert_success, demo_copy, notebook};

/// The line that parts two cells.
const PART: &str = "\n// ---\n";

fn session() -> String {
    let path = data().join("every_name.rs");
    std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()))
}

/// The words of the code, without what stands in texts and comments. No text may hold a quotation mark or go on in
/// the next line.
fn words(code: &str) -> BTreeSet<String> {
    let mut words = BTreeSet::new();
    for line in code.lines() {
        let pieces: Vec<&str> = line.split('"').collect();
        assert!(pieces.len() % 2 == 1 && !line.contains("\\\""), "a text that is not plain: {line}");
        let bare: String = pieces.into_iter().step_by(2).collect::<Vec<_>>().join(" ");
        let code = bare.split("//").next().unwrap_or_default();
        words.extend(code.split(|c: char| !(c.is_alphanumeric() || c == '_')).map(str::to_owned));
    }
    words
}

/// The prelude's names that the code does not use.
fn missing(code: &str) -> Vec<String> {
    let used = words(code);
    prelude_names().into_iter().filter(|name| !used.contains(name)).collect()
}

#[test]
fn every_name_of_the_prelude_is_used() {
    let unused = missing(&session());
    assert!(unused.is_empty(), "use these in a cell of tests/data/every_name.rs: {}", unused.join(", "));
}

#[test]
fn a_name_in_a_text_or_a_comment_or_in_a_longer_one_is_not_used() {
    let code = session();
    let without = code.replace("let circles: MohrCircles =", "let circles: MohrCirclesToo = // MohrCircles\n");
    assert_eq!(missing(&without), ["MohrCircles"]);
    let without = code.replace("let column: MudPressure =", "let column = \"MudPressure\";");
    assert_eq!(missing(&without), ["MudPressure"]);
}

#[test]
fn every_cell_runs_and_its_last_value_shows_itself() {
    let session = session();
    let cells: Vec<&str> = session.trim_end().split(PART).collect();
    let folder = demo_copy();
    notebook(folder.path(), "every_name.ipynb", &cells);
    let run = Command::new(hade_binary())
        .args(["run", "every_name.ipynb", "-o", "out.ipynb"])
        .current_dir(folder.path())
        .output()
        .expect("the hade command runs");
    assert_success(&run);

    let text = std::fs::read_to_string(folder.path().join("out.ipynb")).expect("the executed notebook");
    let ran: Value = serde_json::from_str(&text).expect("JSON");
    let ran = ran["cells"].as_array().expect("cells");
    assert_eq!(ran.len(), cells.len());
    let mut checked = 0;
    for (number, cell) in (1..).zip(ran) {
        // What the library does not know how to show comes as text alone: the compiler's own words for it.
        let last = cell["outputs"].as_array().and_then(|outputs| outputs.last());
        let data = last.map(|output| &output["data"]).unwrap_or_else(|| panic!("cell {number} shows nothing"));
        assert!(data["text/html"].is_string() || data["text/html"].is_array(), "cell {number} shows {last:#?}");
        let shown = data["text/plain"].to_string();
        checked += shown.matches("Checks: ").count();
        assert!(!shown.contains("FAILED") && !shown.contains("was not checked"), "cell {number}: {shown}");
    }
    assert!(checked > cells.len(), "only {checked} cards were shown");
}
