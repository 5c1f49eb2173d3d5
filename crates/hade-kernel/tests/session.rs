//! A real session against what a notebook can do to it. No physics is needed here.
//!
//! The test program is started again by the session as the process that runs the cells, so it has
//! a `main` of its own that begins with the hook.

#[path = "session/advice.rs"]
mod advice;
#[path = "session/commands.rs"]
mod commands;
#[path = "session/crashes.rs"]
mod crashes;
#[path = "session/errors.rs"]
mod errors;
#[path = "session/floods.rs"]
mod floods;
#[path = "session/interrupts.rs"]
mod interrupts;
#[path = "session/robustness.rs"]
mod robustness;
#[path = "session/stock.rs"]
mod stock;

use std::collections::BTreeMap;
use std::path::Path;
use std::time::Duration;
use std::{env, fs, process};

use hade_kernel::{
    CellOutcome, Output, Prepared, RunOptions, Session, SessionOptions, Silent, Stream, prepare, run_notebook,
    run_notebooks,
};

type Test = fn(&mut Bench);

const TESTS: &[(&str, Test)] = &[
    ("prints_and_displays_keep_their_order", prints_and_displays_keep_their_order),
    ("variables_of_any_type_stay", variables_of_any_type_stay),
    ("an_err_is_an_error_with_its_own_words", an_err_is_an_error_with_its_own_words),
    ("a_panic_is_an_error_without_noise", a_panic_is_an_error_without_noise),
    ("a_compile_error_is_plain", a_compile_error_is_plain),
    ("unfinished_code_is_named", unfinished_code_is_named),
    ("a_closure_cannot_stay", a_closure_cannot_stay),
    ("variables_listed_at_the_end_stay", variables_listed_at_the_end_stay),
    ("a_number_without_a_unit_is_told_so", a_number_without_a_unit_is_told_so),
    ("text_without_a_line_end_is_kept", text_without_a_line_end_is_kept),
    ("an_exit_is_explained", an_exit_is_explained),
    ("a_stack_overflow_is_explained", a_stack_overflow_is_explained),
    ("a_segfault_is_explained", a_segfault_is_explained),
    ("a_dependency_beside_ours", a_dependency_beside_ours),
    ("an_endless_loop_is_stopped", an_endless_loop_is_stopped),
    ("a_notebook_runs_in_its_folder", a_notebook_runs_in_its_folder),
    ("a_notebook_stops_at_the_first_failure", a_notebook_stops_at_the_first_failure),
    ("notebooks_share_a_session", notebooks_share_a_session),
];

/// In the order in which they run; the last looks at what the others leave.
fn all() -> impl Iterator<Item = &'static (&'static str, Test)> {
    let last: &[(&str, Test)] = &[("nothing_is_left_behind", nothing_is_left_behind)];
    [
        TESTS,
        errors::TESTS,
        advice::TESTS,
        commands::TESTS,
        floods::TESTS,
        crashes::TESTS,
        interrupts::TESTS,
        robustness::TESTS,
        stock::TESTS,
        last,
    ]
    .into_iter()
    .flatten()
}

fn main() {
    hade_kernel::runtime_hook();
    let args: Vec<String> = env::args().skip(1).collect();
    if args.iter().any(|arg| arg == "--list") {
        for (name, _) in all() {
            println!("{name}: test");
        }
        return;
    }
    if let Some(role) = env::var_os(robustness::ROLE_VAR) {
        return robustness::play(&role.to_string_lossy());
    }
    let wanted: Vec<&String> = args.iter().filter(|arg| !arg.starts_with('-')).collect();
    let mut bench = Bench::new();
    for (name, test) in all() {
        if wanted.is_empty() || wanted.iter().any(|part| name.contains(part.as_str())) {
            let started = std::time::Instant::now();
            test(&mut bench);
            println!("test {name} ... ok ({:.1} s)", started.elapsed().as_secs_f64());
        }
    }
}

/// One session for all tests that can share it: starting one is what takes time.
struct Bench {
    prepared: Prepared,
    session: Option<Session>,
}

impl Bench {
    fn new() -> Bench {
        Bench { prepared: prepare(&mut Silent).expect("the libraries can be built"), session: None }
    }

    fn start(&self, options: SessionOptions) -> Session {
        Session::start(&self.prepared, options).expect("a session starts")
    }

    fn run(&mut self, cell: &str) -> CellOutcome {
        if self.session.is_none() {
            self.session = Some(self.start(SessionOptions::default()));
        }
        self.session.as_mut().expect("just made").execute(cell)
    }

    /// Runs a cell that must succeed.
    fn ok(&mut self, cell: &str) {
        assert_eq!(self.run(cell).error, None, "{cell}");
    }

    /// The value of an expression as `{:?}` prints it. (How a value is displayed is the library's
    /// affair.)
    fn value(&mut self, expression: &str) -> String {
        let outcome = self.run(&format!("println!(\"{{:?}}\", {expression});"));
        assert_eq!(outcome.error, None, "{expression}");
        outcome.text(Stream::Stdout).trim_end().to_owned()
    }

    /// Runs a cell that must fail.
    fn failure(&mut self, cell: &str) -> hade_kernel::CellError {
        self.run(cell).error.unwrap_or_else(|| panic!("no error from {cell}"))
    }
}

fn prints_and_displays_keep_their_order(bench: &mut Bench) {
    let outcome = bench.run(
        r#"
fn show(mime: &str, text: &str) { println!("EVCXR_BEGIN_CONTENT {mime}\n{text}\nEVCXR_END_CONTENT"); }
println!("one");
show("text/html", "<b>two</b>");
show("text/plain", "two");
println!("three");
show("text/plain", "four");
show("text/plain", "five");
std::num::Wrapping(42)
"#,
    );
    assert_eq!(outcome.error, None);
    let bundle = |pairs: &[(&str, &str)]| {
        Output::Display(
            pairs.iter().map(|(mime, text)| ((*mime).to_owned(), (*text).to_owned())).collect::<BTreeMap<_, _>>(),
        )
    };
    let text = |text: &str| Output::Text { stream: Stream::Stdout, text: text.to_owned() };
    assert_eq!(
        outcome.outputs,
        [
            text("one\n"),
            bundle(&[("text/html", "<b>two</b>"), ("text/plain", "two")]),
            text("three\n"),
            bundle(&[("text/plain", "four")]),
            bundle(&[("text/plain", "five")]),
            bundle(&[("text/plain", "42")]),
        ]
    );
}

fn variables_of_any_type_stay(bench: &mut Bench) {
    bench.ok("let a = 1.5;\nlet mut v = vec![1.0, 2.0, 3.0];\nlet s = format!(\"{a} m\");");
    bench.ok(
        "v.push(4.0);\nlet total: f64 = v.iter().sum();\nlet half = v.iter().map(|x| x / 2.0).collect::<Vec<_>>();",
    );
    assert_eq!(bench.value("total"), "10.0");
    assert_eq!(bench.value("half"), "[0.5, 1.0, 1.5, 2.0]");
    assert_eq!(bench.value("s.len()"), "5");
    // Types that only the compiler knows.
    bench.ok(
        "let set: std::collections::HashSet<i32> = [1, 2, 2].into_iter().collect();\n\
         let (sorted, n) = { let mut all: Vec<_> = set.iter().copied().collect(); all.sort(); (std::collections::VecDeque::from(all), 2usize) };\n\
         let address = \"127.0.0.1\".parse::<std::net::IpAddr>()?;",
    );
    assert_eq!(bench.value("(sorted, n, address)"), "([1, 2], 2, 127.0.0.1)");
}

fn an_err_is_an_error_with_its_own_words(bench: &mut Bench) {
    bench.ok("let kept = 7;");
    bench.ok("fn depth() -> std::result::Result<f64, String> { std::result::Result::Err(\"depth -3 m is above ground; give 0 m or more\".to_string()) }");
    let outcome = bench.run("println!(\"before\");\nlet d = depth()?;\nd");
    let error = outcome.error.clone().expect("an error");
    assert_eq!(error.name, "Error");
    assert_eq!(error.sentence, "depth -3 m is above ground; give 0 m or more");
    assert_eq!(error.line, Some(2));
    assert_eq!(outcome.text(Stream::Stdout), "before\n");
    assert_eq!(outcome.text(Stream::Stderr), "");
    assert_eq!(bench.value("kept"), "7");
}

fn a_panic_is_an_error_without_noise(bench: &mut Bench) {
    let outcome = bench.run("let list = [1, 2];\nlet at = list.len();\nassert!(at < 2, \"no rock at {at}\");");
    let error = outcome.error.clone().expect("an error");
    assert_eq!((error.name.as_str(), error.sentence.as_str()), ("Panic", "no rock at 2"));
    assert!(!error.detail.contains("backtrace") && !error.detail.contains("lib.rs"), "{}", error.detail);
    assert_eq!(error.line, Some(3));
    assert_eq!(outcome.text(Stream::Stderr), "");
    assert_eq!(bench.value("1 + 1"), "2");
}

fn a_compile_error_is_plain(bench: &mut Bench) {
    let error = bench.failure("let a = 1.0;\nlet b: f64 = \"two\";\nlet c: i32 = a;");
    assert_eq!(error.name, "E0308");
    assert_eq!(error.line, Some(2));
    assert!(error.detail.contains("line 2: let b: f64 = \"two\";\n                       ^^^^^ "), "{}", error.detail);
    assert!(error.detail.contains("line 3: "), "{}", error.detail);
    let error = bench.failure("\nlet c = nowhere + 1.0;");
    assert_eq!((error.name.as_str(), error.line), ("E0425", Some(2)));
    assert!(!error.detail.contains('\u{1b}') && !error.detail.contains("evcxr"));
}

fn unfinished_code_is_named(bench: &mut Bench) {
    let error = bench.failure("let a = 1;\nlet b = std::");
    assert!(!error.detail.contains("evcxr"), "{}", error.detail);
    assert!(!error.sentence.contains("evcxr"), "{}", error.sentence);
    bench.failure("let a = (1;");
}

fn a_closure_cannot_stay(bench: &mut Bench) {
    let error = bench.failure("let double = |x: f64| 2.0 * x;");
    assert!(error.detail.contains("double") && error.sentence.contains("Write a `fn`"), "{}", error.detail);
    let error = bench.failure("let data = vec![1, 2];\nlet parts = data.chunks_exact(2);");
    assert!(error.sentence.contains("parts"), "{}", error.sentence);
}

fn variables_listed_at_the_end_stay(bench: &mut Bench) {
    let outcome = bench.run("let one = vec![1.0];\nlet two = vec![2.0, 3.0];\n(one, two)");
    assert_eq!(outcome.error, None);
    assert_eq!(bench.value("one.len() + two.len()"), "3");
    assert_eq!(bench.run("[one, two]").error, None);
    assert_eq!(bench.value("one.len() + two.len()"), "3");
}

fn a_number_without_a_unit_is_told_so(bench: &mut Bench) {
    let error = bench.failure("let p: Pressure = 41.0;");
    assert!(error.sentence.contains("`41.0.mpa()`"), "{}", error.sentence);
    let error = bench.failure("let hole = Attitude { inclination: 42.deg(), azimuth: 120.deg() };");
    assert!(error.sentence.contains("`Azimuth::from_true_north(120.deg())`"), "{}", error.sentence);
    let error = bench.failure("let p = 3.mpa() + 41.0;\nlet q = 41.0 + p;");
    assert!(error.sentence.contains("`41.0.mpa()`"), "{}", error.sentence);
}

fn text_without_a_line_end_is_kept(bench: &mut Bench) {
    let outcome = bench.run("print!(\"no end\");");
    assert_eq!((outcome.error.as_ref(), outcome.text(Stream::Stdout).as_str()), (None, "no end"));
    let outcome = bench.run("print!(\"as a value\")");
    assert_eq!((outcome.error.as_ref(), outcome.text(Stream::Stdout).as_str()), (None, "as a value"));
}

fn an_exit_is_explained(bench: &mut Bench) {
    bench.ok("let lost_one = 1;");
    let outcome = bench.run("println!(\"last words\");\nstd::process::exit(3)");
    let error = outcome.error.clone().expect("an error");
    assert_eq!(error.name, "ProcessDied");
    assert!(error.sentence.contains("exit status 3"), "{}", error.sentence);
    assert!(error.detail.contains("lost_one"), "{}", error.detail);
    assert_eq!(outcome.text(Stream::Stdout), "last words\n");
    assert_eq!(bench.value("5"), "5");
}

fn a_stack_overflow_is_explained(bench: &mut Bench) {
    bench.ok(
        "fn down(n: u64) -> u64 { let a = [n; 64]; if n == u64::MAX { 0 } else { down(n + a[3] - n + 1) + a[7] } }",
    );
    let error = bench.failure("down(1)");
    assert_eq!(error.name, "ProcessDied");
    assert!(error.sentence.contains("stack"), "{}", error.detail);
    assert_eq!(bench.value("6"), "6");
}

fn a_segfault_is_explained(bench: &mut Bench) {
    let outcome = bench.run("unsafe { *(std::hint::black_box(8usize) as *mut u8) = 1; }");
    let error = outcome.error.clone().expect("an error");
    assert!(error.sentence.contains("segmentation fault"), "{}", error.detail);
    assert_eq!(outcome.text(Stream::Stderr), "");
    assert_eq!(bench.value("7"), "7");
}

fn a_dependency_beside_ours(bench: &mut Bench) {
    let cell =
        ":dep serde_json = \"1\"\nlet value: serde_json::Value = serde_json::from_str(\"{\\\"a\\\": [1, 2]}\")?;";
    assert_eq!(bench.run(cell).error, None);
    assert_eq!(bench.value("value[\"a\"][1].as_i64()"), "Some(2)");
}

fn an_endless_loop_is_stopped(bench: &mut Bench) {
    let mut session =
        bench.start(SessionOptions { cell_timeout: Some(Duration::from_secs(6)), ..SessionOptions::default() });
    let outcome = session.execute("println!(\"begun\");\nlet mut n = 0u64;\nloop { n = std::hint::black_box(n + 1); }");
    let error = outcome.error.clone().expect("an error");
    assert_eq!(error.name, "Timeout");
    assert!(error.sentence.contains("--cell-timeout"), "{}", error.sentence);
    assert_eq!(outcome.text(Stream::Stdout), "begun\n");
    assert_eq!(session.execute("1 + 1").error, None);
}

fn notebook(folder: &Path, cells: &[&str]) -> std::path::PathBuf {
    let cells: Vec<serde_json::Value> = cells
        .iter()
        .map(|source| {
            serde_json::json!({"cell_type": "code", "execution_count": 99, "metadata": {"tags": ["x"]}, "outputs": [], "source": source})
        })
        .collect();
    let json = serde_json::json!({"cells": cells, "metadata": {"mine": true}, "nbformat": 4, "nbformat_minor": 2});
    let path = folder.join("test.ipynb");
    fs::write(&path, json.to_string()).expect("a notebook can be written");
    path
}

fn a_notebook_runs_in_its_folder(_: &mut Bench) {
    let folder = tempfile::tempdir().expect("a folder");
    fs::write(folder.path().join("data.txt"), "from the file").expect("a file");
    // The engine would read its settings here; they must not reach it.
    fs::write(folder.path().join("evcxr.toml"), "[evcxr]\ntmpdir = \"/nowhere\"").expect("a file");
    let record = "println!(\"EVCXR_BEGIN_CONTENT application/vnd.hade.record+json\\n{}\\nEVCXR_END_CONTENT\", r#\"{\"x\": 0.1}\"#);";
    let path = notebook(
        folder.path(),
        &["let text = std::fs::read_to_string(\"data.txt\")?;\nprintln!(\"{text}\");", "", record],
    );
    let run = run_notebook(&path, &RunOptions::default(), &mut Silent).expect("it runs");
    assert_eq!(run.failure(), None);
    let cells = &run.notebook.json()["cells"];
    assert_eq!(cells[0]["outputs"][0]["text"][0], "from the file\n");
    assert_eq!(cells[0]["metadata"]["tags"][0], "x");
    assert_eq!(
        (&cells[1]["execution_count"], &cells[2]["execution_count"]),
        (&serde_json::Value::Null, &serde_json::json!(2))
    );
    assert_eq!(run.last_output(hade_kernel::RECORD_MIME), Some(serde_json::json!({"x": 0.1})));
}

/// What one leaves is there in the next; each runs in its own folder, also after its process has ended.
fn notebooks_share_a_session(_: &mut Bench) {
    let (one, other) = (tempfile::tempdir().expect("a folder"), tempfile::tempdir().expect("a folder"));
    for (folder, text) in [(&one, "first"), (&other, "second")] {
        fs::write(folder.path().join("data.txt"), text).expect("a file");
    }
    let read = "println!(\"{}\", std::fs::read_to_string(\"data.txt\")?);";
    let paths = [
        notebook(one.path(), &["let depth = 2950.0;", read]),
        notebook(other.path(), &["println!(\"{depth}\");", read, "std::process::exit(3)", read, "depth"]),
    ];
    let options = RunOptions { allow_errors: true, ..RunOptions::default() };
    let runs = run_notebooks(&paths, &options, &mut Silent).expect("they run");
    let text = |run: usize, cell: usize| {
        let outputs = &runs[run].notebook.json()["cells"][cell]["outputs"];
        outputs[0]["text"][0].as_str().unwrap_or_default().trim().to_owned()
    };
    assert_eq!([text(0, 1), text(1, 0), text(1, 1), text(1, 3)], ["first", "2950", "second", "second"]);
    let numbers: Vec<usize> = runs.iter().flat_map(|run| run.cells.iter().map(|cell| cell.number)).collect();
    assert_eq!(numbers, [1, 2, 3, 4, 5, 6, 7]);
    assert_eq!(runs[1].notebook.json()["cells"][0]["execution_count"], 3);
    let lost = runs[1].cells[4].outcome.error.as_ref().expect("an error");
    assert!(lost.sentence.contains("cell 5"), "{}", lost.sentence);

    // Nothing of the second runs after a failure in the first, and a file that is none stops both.
    let failing = notebook(one.path(), &["depth"]);
    let runs = run_notebooks(&[&failing, &paths[1]], &RunOptions::default(), &mut Silent).expect("they run");
    assert_eq!(runs.len(), 1);
    fs::write(one.path().join("none.ipynb"), "{}").expect("a file");
    let none = one.path().join("none.ipynb");
    assert!(run_notebooks(&[&paths[1], &none], &RunOptions::default(), &mut Silent).is_err());
}

fn a_notebook_stops_at_the_first_failure(_: &mut Bench) {
    let folder = tempfile::tempdir().expect("a folder");
    let path = notebook(folder.path(), &["1", "let a = 1;\nlet b: f64 = a;", "2"]);
    let run = run_notebook(&path, &RunOptions::default(), &mut Silent).expect("it runs");
    let failure = run.failure().expect("a failure");
    assert!(failure.to_string().starts_with("cell 2 (line 2): "), "{failure}");
    assert_eq!(run.cells.len(), 2);
    let cells = &run.notebook.json()["cells"];
    assert_eq!(cells[1]["outputs"][0]["ename"], "E0308");
    assert_eq!(cells[2]["outputs"], serde_json::json!([]));
}

fn nothing_is_left_behind(bench: &mut Bench) {
    bench.session = None;
    let left: Vec<_> = fs::read_dir(env::temp_dir())
        .expect("the temporary folder")
        .flatten()
        .filter(|entry| entry.file_name().to_string_lossy().starts_with("hade-session-"))
        .filter(|entry| {
            // Another program's session holds its lock.
            fs::File::open(entry.path().join("lock")).is_ok_and(|lock| lock.try_lock().is_ok())
        })
        .collect();
    assert!(left.is_empty(), "{left:?} (process {})", process::id());
}
