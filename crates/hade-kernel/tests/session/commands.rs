//! The commands a cell may begin with.

use std::fs;

use hade_kernel::Stream;

use crate::{Bench, Test};

pub(crate) const TESTS: &[(&str, Test)] = &[
    ("help_lists_the_commands", help_lists_the_commands),
    ("vars_shows_types_and_values", vars_shows_types_and_values),
    ("a_card_is_shown_by_its_name", a_card_is_shown_by_its_name),
    ("time_is_told", time_is_told),
    ("clear_forgets", clear_forgets),
    ("what_is_no_command_is_refused", what_is_no_command_is_refused),
    ("a_crate_in_a_folder_can_be_used", a_crate_in_a_folder_can_be_used),
    ("a_crate_that_is_not_there_is_explained", a_crate_that_is_not_there_is_explained),
];

fn help_lists_the_commands(bench: &mut Bench) {
    let outcome = bench.run(":help");
    assert_eq!(outcome.error, None);
    let shown = outcome.displays().next().expect("a table");
    for command in [":vars", ":card NAME", ":dep", ":time"] {
        assert!(shown["text/plain"].contains(command) && shown["text/html"].contains(command), "{command}");
    }
    for foreign in [":quit", ":load_config", ":toolchain"] {
        assert!(!shown["text/plain"].contains(foreign), "{foreign}");
    }
}

fn vars_shows_types_and_values(bench: &mut Bench) {
    bench.session = None;
    let empty = bench.run(":vars");
    assert_eq!(empty.displays().next().map(|shown| shown["text/plain"].as_str()), Some("no variables yet"));
    bench.ok("struct Opaque;\nlet depth = 2950.m();\nlet names = vec![\"a<b\".to_string()];\nlet opaque = Opaque;\n\
         let long = vec![7; 1_000_000];");
    let outcome = bench.run(":vars");
    assert_eq!(outcome.error, None);
    let shown = outcome.displays().next().expect("a table").clone();
    let text = &shown["text/plain"];
    let line = |name: &str| text.lines().find(|line| line.starts_with(name)).unwrap_or_default().to_owned();
    assert!(line("depth").contains("Length") && line("depth").contains("2950 m"), "{text}");
    assert!(line("names").contains("Vec<String>") && line("names").contains("[\"a<b\"]"), "{text}");
    assert_eq!(line("opaque").trim_end(), "opaque    Opaque");
    assert!(line("long").contains("[7, 7, 7") && line("long").ends_with('…') && line("long").len() < 120, "{text}");
    assert!(shown["text/html"].contains("a&lt;b"), "{}", shown["text/html"]);
    // Nothing was moved, and the cell counts for nothing.
    assert_eq!(bench.value("long.len() + names.len()"), "1000001");
    let kind = bench.run(":type names");
    assert_eq!(kind.displays().next().map(|shown| shown["text/plain"].as_str()), Some("names: Vec<String>"));
}

fn a_card_is_shown_by_its_name(bench: &mut Bench) {
    bench.ok("let pressure = 52.5.mpa();");
    let (by_name, as_value) = (bench.run(":card pressure"), bench.run("pressure"));
    assert_eq!(by_name.error, None);
    assert!(by_name.displays().count() == 1 && by_name.outputs == as_value.outputs, "{:?}", by_name.outputs);
    let error = bench.failure(":card nothing_of_that_name");
    assert!(error.sentence.contains("nothing_of_that_name"), "{}", error.sentence);
}

fn time_is_told(bench: &mut Bench) {
    let outcome = bench.run(":time\nstd::thread::sleep(std::time::Duration::from_millis(300));");
    let text = outcome.text(Stream::Stdout);
    let ran = text.rsplit("ran in ").next().and_then(|rest| rest.split(' ').next()).and_then(|s| s.parse::<f64>().ok());
    assert!(text.starts_with("compiled in ") && ran.is_some_and(|ran| (0.3..1.0).contains(&ran)), "{text}");
}

fn clear_forgets(bench: &mut Bench) {
    bench.ok("let forgotten = 1;\nfn also() -> i32 { 2 }");
    bench.ok(":clear");
    assert!(bench.session.as_ref().expect("a session").variables().is_empty());
    assert_eq!(bench.failure("forgotten").name, "E0425");
    assert_eq!(bench.failure("also()").name, "E0425");
    assert_eq!(bench.value("1.mpa().in_mpa()"), "1.0");
}

fn what_is_no_command_is_refused(bench: &mut Bench) {
    let error = bench.failure("// a note\n:nonsense 1");
    assert_eq!((error.name.as_str(), error.line), ("CommandError", Some(2)));
    assert!(error.sentence.contains("`:help` lists them"), "{}", error.sentence);
    // It would end the whole program.
    let error = bench.failure(":quit");
    assert!(error.sentence.contains("shut the kernel down"), "{}", error.sentence);
    let error = bench.failure("let a = 1;\n:vars");
    assert!(error.sentence.contains("must stand at the top of its cell"), "{}", error.sentence);
    assert_eq!(error.line, Some(2));
}

fn a_crate_in_a_folder_can_be_used(bench: &mut Bench) {
    bench.session = None;
    let folder = tempfile::tempdir().expect("a folder");
    let write = |name: &str, text: &str| fs::write(folder.path().join(name), text).expect("a file");
    fs::create_dir(folder.path().join("src")).expect("a folder");
    write(
        "Cargo.toml",
        "[package]\nname = \"own\"\nversion = \"0.1.0\"\nedition = \"2024\"\n\
         [dependencies]\nserde = { version = \"1\", features = [\"derive\"] }\n",
    );
    write(
        "src/lib.rs",
        "#[derive(Debug, Clone, serde::Serialize, serde::Deserialize)]\npub struct Sample { pub depth: f64 }\n\
         pub fn sample() -> Sample { Sample { depth: 2950.0 } }\n",
    );
    let outcome = bench.run(&format!(":dep own = {{ path = {:?} }}\nlet mine = own::sample();", folder.path()));
    assert_eq!(outcome.error, None);
    assert!(outcome.text(Stream::Stderr).contains("its version is not pinned"), "{:?}", outcome.outputs);
    assert_eq!(bench.value("mine.depth.m().in_m()"), "2950.0");
    drop(folder);
    let error = bench.failure("1 + 1");
    assert!(error.sentence.starts_with("the crate own, which this session uses, is no longer in "), "{}", error.detail);
    bench.ok(":clear");
    assert_eq!(bench.value("1 + 1"), "2");
}

fn a_crate_that_is_not_there_is_explained(bench: &mut Bench) {
    let error = bench.failure(":dep hade_no_such_crate = \"1\"\nlet a = 1;");
    assert_eq!(error.name, "DependencyError", "{}", error.detail);
    assert!(error.sentence.contains("hade_no_such_crate") && error.sentence.contains(":offline 0"), "{}", error.detail);
    assert_eq!(bench.value("2 + 2"), "4");
}
