//! The files and cells that the guide shows run as they stand there.

use std::process::Command;

use hade_tests::hade_binary;

use super::support::{assert_success, notebook};

const GUIDE: &str = include_str!("../../../docs/guide.md");

/// The blocks of the guide: what stands after the opening fence, and the lines.
fn blocks() -> Vec<(String, String)> {
    let mut found = Vec::new();
    let mut open: Option<(String, String)> = None;
    for line in GUIDE.lines() {
        match (line.strip_prefix("```"), open.as_mut()) {
            (Some(_), Some(_)) => found.extend(open.take()),
            (Some(after), None) => open = Some((after.to_owned(), String::new())),
            (None, Some((_, lines))) => {
                lines.push_str(line);
                lines.push('\n');
            }
            (None, None) => {}
        }
    }
    found
}

#[test]
fn the_files_and_cells_of_the_guide_run() {
    let place = tempfile::tempdir().unwrap();
    let blocks = blocks();
    let files: Vec<_> = blocks.iter().filter_map(|(kind, text)| Some((kind.strip_prefix("csv ")?, text))).collect();
    assert_eq!(files.len(), 7, "one example of each file");
    for (name, text) in files {
        std::fs::write(place.path().join(name), text).unwrap();
    }
    let mut cells: Vec<&str> =
        blocks.iter().filter(|(kind, _)| kind == "rust").map(|(_, text)| text.as_str()).collect();
    assert_eq!(cells.len(), 2);
    // By hand, at TVD 2236.6 m a sand of ratio 0.50 has P_p + 0.50 (S_v − P_p) across the hole.
    cells.push(
        "assert!((state.sh_min - (state.pore + (state.sv - state.pore).scale(0.5))).abs() < 1e-6.mpa());\nassert_eq!(told.rows().len(), 3);",
    );
    let path = notebook(place.path(), "guide.ipynb", &cells);
    let ran = Command::new(hade_binary()).arg("run").arg(path).output().expect("the hade command runs");
    assert_success(&ran);
}

#[test]
fn the_guide_names_every_kind_of_event() {
    for kind in [
        "losses",
        "gain",
        "tight hole",
        "pack-off",
        "cavings",
        "caliper enlarged",
        "caliper in gauge",
        "leak-off test",
        "formation-integrity test",
    ] {
        assert!(GUIDE.contains(&format!("`{kind}`")), "{kind}");
    }
}
