//! A folder from `hade new`: its notebook runs as it is, in either units, and becomes a memo.

use std::path::Path;
use std::process::{Command, Output};

use hade_tests::hade_binary;

use super::support::{assert_success, memo, said, text};

fn new(folder: &Path, arguments: &[&str]) -> Output {
    Command::new(hade_binary()).arg("new").args(arguments).current_dir(folder).output().expect("the hade command runs")
}

#[test]
fn a_new_project_becomes_a_memo_at_once_in_either_units() {
    let place = tempfile::tempdir().unwrap();
    for (units, given) in [("metric", "2350"), ("field", "2346.96")] {
        let made = new(place.path(), &[units, "--units", units, "--project", "Grey Bank", "--number", "GB-1"]);
        assert_success(&made);
        assert!(said(&made).contains("hade memo"), "{}", said(&made));
        let folder = place.path().join(units);
        assert_success(&memo(&folder, "analysis.ipynb", "memo.pdf"));
        let printed = text(&folder.join("memo.pdf"));
        for word in ["Grey Bank: stability of the wall at one depth", "GB-1", "invented starting value", given] {
            assert!(printed.contains(word), "{units}: {word}");
        }
    }
}

#[test]
fn a_folder_that_holds_something_stays_as_it_is() {
    let place = tempfile::tempdir().unwrap();
    std::fs::create_dir(place.path().join("full")).unwrap();
    std::fs::write(place.path().join("full/hade.toml"), "mine").unwrap();
    std::fs::write(place.path().join("file"), "mine").unwrap();
    for (name, words) in [("full", "is not empty"), ("file", "is a file")] {
        let refused = new(place.path(), &[name]);
        assert_eq!(refused.status.code(), Some(1));
        assert!(said(&refused).contains(words), "{}", said(&refused));
    }
    assert_eq!(std::fs::read_to_string(place.path().join("full/hade.toml")).unwrap(), "mine");
    assert_eq!(std::fs::read_dir(place.path().join("full")).unwrap().count(), 1);
}
