//! Cells that put out too much.

use std::fs;
use std::os::unix::fs::PermissionsExt as _;
use std::time::Instant;

use hade_kernel::{Output, RunOptions, Silent, Stream, run_notebook};

use crate::{Bench, Test, notebook};

pub(crate) const TESTS: &[(&str, Test)] = &[
    ("a_flood_is_cut_and_kept_in_a_file", a_flood_is_cut_and_kept_in_a_file),
    ("a_flood_on_both_streams_is_cut", a_flood_on_both_streams_is_cut),
    ("a_large_value_is_cut", a_large_value_is_cut),
    ("many_values_are_cut", many_values_are_cut),
    ("a_long_message_is_cut", a_long_message_is_cut),
    ("a_notebook_of_floods_stays_small", a_notebook_of_floods_stays_small),
];

const MB: usize = 1024 * 1024;

fn a_flood_is_cut_and_kept_in_a_file(bench: &mut Bench) {
    bench.ok("1 + 1");
    let started = Instant::now();
    let outcome = bench.run("for i in 0..1_000_000 { println!(\"line {i}\"); }");
    println!("a million lines: {:.2} s", started.elapsed().as_secs_f64());
    assert_eq!(outcome.error, None);
    let text = outcome.text(Stream::Stdout);
    assert_eq!(text.len(), 2 * MB);
    assert!(text.starts_with("line 0\nline 1\n"));
    let whole: usize = (0..1_000_000).map(|i| format!("line {i}\n").len()).sum();
    let notice = outcome.text(Stream::Stderr);
    let left = (whole - 2 * MB).div_ceil(1024);
    assert!(notice.starts_with(&format!("[{left} kB more were printed and are left out here; ")), "{notice}");
    let file = notice.rsplit("the whole text is in ").next().expect("a file").trim_end().trim_end_matches(']');
    let kept = fs::read_to_string(file).expect("the file can be read");
    assert_eq!(kept.len(), whole);
    assert!(kept.ends_with("line 999999\n"));
    assert_eq!(fs::metadata(file).expect("the file").permissions().mode() & 0o777, 0o600);
    fs::remove_file(file).expect("the file can be removed");
    assert_eq!(bench.value("3"), "3");
}

fn a_flood_on_both_streams_is_cut(bench: &mut Bench) {
    let outcome = bench
        .run("for i in 0..200_000 { println!(\"out {i:>20}\"); eprintln!(\"err {i:>20}\"); }\npanic!(\"the end\");");
    let error = outcome.error.clone().expect("an error");
    assert_eq!(error.sentence, "the end");
    let printed = outcome.text(Stream::Stdout).len() + outcome.text(Stream::Stderr).len();
    assert!((2 * MB..2 * MB + 40_000).contains(&printed), "{printed} bytes");
    assert!(outcome.outputs.len() < 2000, "{} outputs", outcome.outputs.len());
    assert!(outcome.text(Stream::Stderr).contains("kB more were printed"));
}

fn a_large_value_is_cut(bench: &mut Bench) {
    let started = Instant::now();
    let outcome =
        bench.run("std::num::Wrapping(vec![1234567; 2_000_000]).0.iter().collect::<std::collections::VecDeque<_>>()");
    println!("an 18 MB value: {:.2} s", started.elapsed().as_secs_f64());
    assert_eq!(outcome.error, None);
    let shown = outcome.displays().next().expect("a value")["text/plain"].clone();
    assert!(shown.len() < MB + 100 && shown.starts_with("[1234567, "), "{} bytes", shown.len());
    assert!(shown.ends_with("kB more of this value are left out]"), "{}", &shown[shown.len() - 100..]);
}

fn many_values_are_cut(bench: &mut Bench) {
    let outcome =
        bench.run("for i in 0..50_000 { println!(\"EVCXR_BEGIN_CONTENT text/plain\\n{i}\\nEVCXR_END_CONTENT\"); }");
    assert_eq!(outcome.displays().count(), 1000);
    assert!(
        outcome.text(Stream::Stderr).contains("[49000 more values were displayed and are left out here]"),
        "{:?}",
        outcome.outputs.last()
    );
}

fn a_long_message_is_cut(bench: &mut Bench) {
    let error = bench.failure("panic!(\"{}\", \"long \".repeat(1_000_000));");
    assert!(error.sentence.len() < 1000 && error.detail.len() < 30_000, "{} bytes", error.detail.len());
    assert!(error.sentence.starts_with("long long "));
}

fn a_notebook_of_floods_stays_small(_: &mut Bench) {
    let folder = tempfile::tempdir().expect("a folder");
    let flood = "for i in 0..1_000_000 { println!(\"line {i}\"); }\nlet a: f64 = \"flood\".parse()?;";
    let path = notebook(folder.path(), &[flood, flood, "println!(\"after\");"]);
    let options = RunOptions { allow_errors: true, ..RunOptions::default() };
    let started = Instant::now();
    let run = run_notebook(&path, &options, &mut Silent).expect("it runs");
    println!("a notebook with two million lines: {:.2} s", started.elapsed().as_secs_f64());
    assert_eq!(run.cells.len(), 3);
    let text = |stream| run.cells[2].outcome.text(stream);
    assert_eq!(text(Stream::Stdout), "after\n");
    let bytes = run.to_bytes().expect("it can be written").len();
    assert!((4 * MB..10 * MB).contains(&bytes), "{bytes} bytes");
    for cell in &run.cells[..2] {
        let file = cell.outcome.outputs.iter().find_map(|output| match output {
            Output::Text { text, .. } => text.rsplit_once("the whole text is in ").map(|(_, file)| file.to_owned()),
            Output::Display(_) => None,
        });
        let file = file.expect("a file with the whole text");
        fs::remove_file(file.trim_end().trim_end_matches(']')).expect("the file can be removed");
    }
}
