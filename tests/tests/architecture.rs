//! The shape of the library: which module may import which, and what its public face may name.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use hade_tests::root;

/// Each module with its place in `error · interrupt · units ← card, sheet ← … ← prelude`. A module imports only
/// from places before its own, or from itself.
const ORDER: [(&str, u32); 21] = [
    ("error", 0),
    ("interrupt", 0),
    ("lanes", 0),
    ("progress", 1),
    ("units", 1),
    ("lines", 2),
    ("card", 2),
    ("spread", 3),
    ("sheet", 3),
    ("frames", 4),
    ("stress", 5),
    ("rock", 6),
    ("faults", 6),
    ("well", 7),
    ("field", 8),
    ("along", 9),
    ("show", 10),
    ("replay", 10),
    ("prelude", 11),
    ("samples", 12),
    ("lib", 13),
];

/// The Rust files of the library with the module each belongs to.
fn sources() -> Vec<(String, PathBuf)> {
    fn walk(folder: &Path, found: &mut Vec<PathBuf>) {
        for entry in std::fs::read_dir(folder).expect("the source") {
            let path = entry.expect("an entry").path();
            if path.is_dir() {
                walk(&path, found);
            } else if path.extension().is_some_and(|e| e == "rs") {
                found.push(path);
            }
        }
    }
    let src = root().join("crates/hade/src");
    let mut files = Vec::new();
    walk(&src, &mut files);
    files
        .into_iter()
        .map(|file| {
            let relative = file.strip_prefix(&src).expect("below the source").to_owned();
            let first = relative.components().next().expect("a name").as_os_str().to_string_lossy().into_owned();
            (first.trim_end_matches(".rs").to_owned(), file)
        })
        .collect()
}

/// The part of a file before its tests; nothing of a file that is all tests.
fn without_tests(text: &str) -> &str {
    if text.contains("\n#![cfg(test)]") {
        return "";
    }
    text.split("#[cfg(test)]").next().unwrap_or_default()
}

#[test]
fn dependencies_point_one_way() {
    let place: BTreeMap<&str, u32> = ORDER.into_iter().collect();
    let mut seen = 0;
    for (module, file) in sources() {
        let own = place.get(module.as_str()).unwrap_or_else(|| panic!("{module} has no place in the order"));
        let text = std::fs::read_to_string(&file).expect("a source file");
        let code: String =
            without_tests(&text).lines().filter(|l| !l.trim_start().starts_with("//")).collect::<Vec<_>>().join("\n");
        for rest in code.split("crate::").skip(1) {
            let name: String = rest.chars().take_while(|c| c.is_ascii_alphanumeric() || *c == '_').collect();
            let Some(other) = place.get(name.as_str()) else { continue };
            seen += 1;
            assert!(
                name == module || other < own,
                "{} imports {name}, which stands beside or after {module}",
                file.display()
            );
        }
    }
    assert!(seen > 100, "only {seen} imports seen");
}

/// The parts of the wall; each imports only from those before it.
const WALL: [&str; 18] = [
    "direction",
    "round",
    "elastic",
    "shear",
    "setup",
    "second_route",
    "wall",
    "method",
    "stress",
    "around",
    "tension",
    "failure_depth",
    "limits",
    "unrolled",
    "direction_map",
    "range",
    "sensitivity",
    "ensemble",
];

#[test]
fn the_parts_of_the_wall_point_one_way() {
    let wall = root().join("crates/hade/src/well/wall");
    let at = |name: &str| WALL.iter().position(|part| *part == name);
    // What `mod.rs` hands on by itself, as `Wall`, is of `wall.rs`.
    let place = |name: &str| at(name).or(at("wall"));
    let mut seen = 0;
    for (_, file) in sources() {
        let Ok(relative) = file.strip_prefix(&wall) else { continue };
        let mut parts = relative.iter().map(|part| part.to_string_lossy().trim_end_matches(".rs").to_owned());
        let (own, inside) = (parts.next().expect("a name"), parts.next().is_some());
        if own == "mod" || own == "tests" {
            continue;
        }
        assert!(WALL.contains(&own.as_str()), "{own} has no place in the order of the wall");
        let text = std::fs::read_to_string(&file).expect("a source file");
        let code: String = without_tests(&text).lines().filter(|l| !l.trim_start().starts_with("//")).collect();
        let from_wall = code.split("crate::well::wall::").skip(1);
        let from_beside = if inside { "" } else { code.as_str() }.split("super::").skip(1);
        for rest in from_wall.chain(from_beside) {
            let names = match rest.strip_prefix('{') {
                Some(list) => list.split('}').next(),
                None => rest.split(|c: char| !(c.is_ascii_alphanumeric() || c == '_')).next(),
            };
            for name in names.unwrap_or_default().split(',').map(str::trim).filter(|name| !name.is_empty()) {
                seen += 1;
                assert!(
                    name == own || place(name) < place(&own),
                    "{} imports {name}, which stands after {own}",
                    file.display()
                );
            }
        }
    }
    assert!(seen > 100, "only {seen} imports seen");
}

/// In a notebook session the third-party crates are not in Cargo's graph, so a public signature
/// that names one would be unknown to the analyser and to a user's cell.
#[test]
fn public_signatures_name_only_std_and_our_own_types() {
    let foreign =
        ["nalgebra::", "serde_json::", "plotters::", "tera::", "csv::", "rayon::", "sha2::", "Matrix3", "Vector3"];
    let mut seen = 0;
    for (_, file) in sources() {
        let text = std::fs::read_to_string(&file).expect("a source file");
        for (number, line) in without_tests(&text).lines().enumerate() {
            let line = line.trim();
            if line.starts_with("pub fn") || line.starts_with("pub const") || line.starts_with("pub trait") {
                seen += 1;
                let named = foreign.iter().find(|name| line.contains(**name));
                assert!(
                    named.is_none(),
                    "{}:{}: {} in a public signature",
                    file.display(),
                    number + 1,
                    named.unwrap_or(&"")
                );
            }
        }
    }
    assert!(seen > 150, "only {seen} signatures seen");
}

#[test]
fn files_stay_small_enough_to_read() {
    for (_, file) in sources() {
        let text = std::fs::read_to_string(&file).expect("a source file");
        let lines = without_tests(&text).lines().count();
        assert!(lines <= 600, "{} has {lines} lines before its tests; split it by role", file.display());
    }
}
