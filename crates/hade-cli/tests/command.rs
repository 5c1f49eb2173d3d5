//! The command line as a user meets it. (That this package has such tests also makes `cargo test`
//! build the command, which the tests of whole memos run.)

use std::process::{Command, Output};

fn hade(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_hade")).args(arguments).output().expect("the command runs")
}

fn said(output: &Output) -> String {
    format!("{}{}", String::from_utf8_lossy(&output.stdout), String::from_utf8_lossy(&output.stderr))
}

#[test]
fn help_names_the_subcommands() {
    let output = hade(&["--help"]);
    assert!(output.status.success());
    for word in ["new", "run", "memo", "kernel"] {
        assert!(said(&output).contains(word), "{word} in {}", said(&output));
    }
}

#[test]
fn a_missing_notebook_is_named() {
    for subcommand in [["run", "nowhere.ipynb"].as_slice(), &["memo", "nowhere.ipynb", "-o", "out.pdf"]] {
        let output = hade(subcommand);
        assert_eq!(output.status.code(), Some(1), "{}", said(&output));
        assert!(said(&output).contains("nowhere.ipynb"), "{}", said(&output));
    }
}

#[test]
fn a_time_limit_must_be_a_number_of_seconds() {
    let output = hade(&["run", "nowhere.ipynb", "--cell-timeout", "soon"]);
    assert!(!output.status.success());
    assert!(said(&output).contains("number of seconds above 0"), "{}", said(&output));
}
