//! The command line as a user meets it. (That this package has such tests also makes `cargo test`
//! build the command, which the tests of whole memos run.)

use std::path::PathBuf;
use std::process::{Command, Output, Stdio};
use std::time::{Duration, Instant};
use std::{fs, thread};

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

/// A folder of the test's own with a notebook whose second cell says that it runs, and runs for a minute.
fn long_notebook(name: &str) -> PathBuf {
    let folder = std::env::temp_dir().join(format!("hade-command-{name}-{}", std::process::id()));
    fs::create_dir_all(&folder).expect("a folder");
    let cells = [
        "let first = 1;",
        "std::fs::write(\"runs\", \"\")?;\nlet begun = std::time::Instant::now();\n\
         while begun.elapsed().as_secs() < 60 { hade::interrupt::check(); }",
        "let last = 3;",
    ];
    let cells: Vec<serde_json::Value> = cells
        .iter()
        .map(|source| {
            serde_json::json!({"cell_type": "code", "execution_count": null, "metadata": {}, "outputs": [], "source": source})
        })
        .collect();
    let json = serde_json::json!({"cells": cells, "metadata": {}, "nbformat": 4, "nbformat_minor": 2});
    fs::write(folder.join("long.ipynb"), json.to_string()).expect("a notebook");
    fs::write(folder.join("hade.toml"), "[memo]\ndate = \"2026-06-01\"\n").expect("a project");
    folder
}

#[test]
fn ctrl_c_stops_a_run_and_writes_nothing() {
    for (arguments, then) in [
        (["run", "long.ipynb"].as_slice(), "the notebook stays as it was"),
        (&["memo", "long.ipynb", "-o", "memo.pdf"], "no memo was written"),
    ] {
        let folder = long_notebook(arguments[0]);
        let notebook = fs::read(folder.join("long.ipynb")).expect("the notebook");
        let child = Command::new(env!("CARGO_BIN_EXE_hade"))
            .args(arguments)
            .current_dir(&folder)
            .stderr(Stdio::piped())
            .spawn()
            .expect("the command starts");
        let started = Instant::now();
        while !folder.join("runs").exists() {
            // The libraries may have to be built first.
            assert!(started.elapsed() < Duration::from_secs(900), "the cell never began");
            thread::sleep(Duration::from_millis(20));
        }
        let pressed = Instant::now();
        let sent = Command::new("kill").args(["-INT", &child.id().to_string()]).status().expect("a signal");
        assert!(sent.success());
        let output = child.wait_with_output().expect("it ends");
        assert!(pressed.elapsed() < Duration::from_secs(2), "{:?}", pressed.elapsed());
        assert_eq!(output.status.code(), Some(130), "{}", said(&output));
        assert!(
            said(&output).contains("interrupted in cell 2 of 3; ") && said(&output).contains(then),
            "{}",
            said(&output)
        );
        assert_eq!(fs::read(folder.join("long.ipynb")).expect("the notebook"), notebook);
        let mut left: Vec<_> = fs::read_dir(&folder)
            .expect("the folder")
            .flatten()
            .map(|entry| entry.file_name().to_string_lossy().into_owned())
            .collect();
        left.sort();
        assert_eq!(left, ["hade.toml", "long.ipynb", "runs"]);
        fs::remove_dir_all(&folder).expect("the folder can be removed");
    }
}

#[test]
fn where_several_notebooks_go_is_checked_first() {
    for (arguments, said_so) in [
        (["run", "a.ipynb", "b.ipynb", "-o", "nowhere"].as_slice(), "nowhere is no folder"),
        (&["run", "a.ipynb", "a.ipynb"], "a.ipynb would be written twice"),
        (&["run"], "<NOTEBOOK>"),
    ] {
        let output = hade(arguments);
        assert!(!output.status.success() && said(&output).contains(said_so), "{arguments:?}: {}", said(&output));
    }
}
