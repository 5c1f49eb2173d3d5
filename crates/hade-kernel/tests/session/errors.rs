//! Messages that say what really happened.

use hade_kernel::Stream;

use crate::{Bench, Test};

pub(crate) const TESTS: &[(&str, Test)] = &[
    ("a_variable_moved_in_another_cell_is_followed", a_variable_moved_in_another_cell_is_followed),
    ("a_value_moved_within_a_cell_is_said_plainly", a_value_moved_within_a_cell_is_said_plainly),
    ("a_variable_of_a_failed_cell_is_explained", a_variable_of_a_failed_cell_is_explained),
    ("a_variable_whose_type_changed_is_explained", a_variable_whose_type_changed_is_explained),
    ("a_decimal_comma_is_named", a_decimal_comma_is_named),
    ("incomplete_code_names_its_line", incomplete_code_names_its_line),
    ("a_panic_deep_in_the_library_has_the_line_of_the_cell", a_panic_deep_in_the_library_has_the_line_of_the_cell),
    ("a_trailing_unit_shows_nothing", a_trailing_unit_shows_nothing),
];

fn a_variable_moved_in_another_cell_is_followed(bench: &mut Bench) {
    bench.session = None;
    bench.ok("let s = vec![1.0, 2.0];");
    bench.ok("let t = s;");
    let error = bench.failure("s.len()");
    assert_eq!((error.name.as_str(), error.line), ("E0425", Some(1)));
    assert_eq!(
        error.sentence,
        "`s` (Vec<f64>) was moved in cell 2, which took it by value, so it is gone; write `&s` or `s.clone()` there, \
         and run cells 1 and 2 again"
    );
    assert!(error.detail.contains("cannot find value `s`"), "{}", error.detail);
    bench.ok("let s = vec![1.0];");
    assert_eq!(bench.value("s.len()"), "1");
    bench.session.as_mut().expect("a session").number_next(17);
    bench.ok("let first = s; let second = first;");
    let error = bench.failure("first.len()");
    assert!(error.sentence.contains("`first` was moved in cell 17, which also defines it"), "{}", error.sentence);
}

fn a_value_moved_within_a_cell_is_said_plainly(bench: &mut Bench) {
    let error = bench.failure("let one = vec![1, 2];\nlet two = one;\nprintln!(\"{}\", one.len());");
    assert_eq!(error.name, "E0382");
    assert!(error.sentence.contains("borrow of moved value: `one`"), "{}", error.sentence);
    assert!(error.detail.contains("`one` was given away on line 2; write `&one` or `one.clone()`"), "{}", error.detail);
}

fn a_variable_of_a_failed_cell_is_explained(bench: &mut Bench) {
    bench.session = None;
    bench.ok("let fine = 1;");
    bench.failure("let never = \"x\".parse::<f64>()?;");
    let error = bench.failure("never + 1.0");
    assert!(error.sentence.starts_with("cell 2, which defines `never`, did not run to its end"), "{}", error.sentence);
    let error = bench.failure("let a = nowhere;");
    assert_eq!(
        error.sentence,
        "there is no variable `nowhere`; the variables are `fine`; run the cell that makes it first"
    );
    assert!(error.detail.contains("cannot find value `nowhere`"), "{}", error.detail);
}

fn a_variable_whose_type_changed_is_explained(bench: &mut Bench) {
    bench.session = None;
    bench.ok("#[derive(Debug)] struct Layer { top: f64 }\nlet layer = Layer { top: 2950.0 };");
    bench.ok("#[derive(Debug)] struct Layer { top: f64, base: f64 }\nlet other = 1;");
    let error = bench.failure("println!(\"{layer:?}\");");
    assert_eq!(error.sentence, "`layer` was lost when cell 2 defined its type anew; run cell 1 again");
}

fn a_decimal_comma_is_named(bench: &mut Bench) {
    for cell in [
        "let depth = 2950.m();\nlet p = 52,5.mpa();",
        "let a = 1;\nlet p = Some(52,5.mpa());",
        "\nlet p: f64 = 52,5;",
        "fn two(p: Pressure) -> Pressure { p }\nlet q = two(52,5.mpa());",
    ] {
        let error = bench.failure(cell);
        assert!(error.sentence.contains("write a decimal number with a point, `52.5"), "{cell}: {}", error.detail);
        assert_eq!(error.line, Some(2), "{cell}");
    }
}

fn incomplete_code_names_its_line(bench: &mut Bench) {
    bench.ok("let ready = 1;");
    for (cell, line, words) in [
        ("let a = 1;\nlet b = std::", 2, "the cell cannot be read"),
        ("let a = 1;\nlet b = (a + 1;\n", 2, "the `(` that begins here is not closed"),
        ("let a = 1\nlet b = 2;", 1, "`;`"),
    ] {
        let started = std::time::Instant::now();
        let error = bench.failure(cell);
        assert_eq!((error.name.as_str(), error.line), ("SyntaxError", Some(line)), "{}", error.detail);
        assert!(error.sentence.contains(words), "{}", error.sentence);
        assert!(started.elapsed().as_millis() < 100, "the compiler was asked about {cell}");
    }
}

fn a_panic_deep_in_the_library_has_the_line_of_the_cell(bench: &mut Bench) {
    // The panic's own place is in the standard library; only the cell's line helps.
    let outcome = bench.run("let list: Vec<f64> = Vec::new();\nlet worst = list[3];\nprintln!(\"{worst}\");");
    let error = outcome.error.clone().expect("an error");
    assert_eq!((error.name.as_str(), error.line), ("Panic", Some(2)), "{}", error.detail);
    assert_eq!(error.sentence, "index out of bounds: the len is 0 but the index is 3");
    for frame in ["evcxr", "hade_kernel", "run_user_code", "lib.rs", "RUST_BACKTRACE"] {
        assert!(!error.detail.contains(frame), "{}", error.detail);
    }
    assert_eq!(outcome.text(Stream::Stderr), "");
}

fn a_trailing_unit_shows_nothing(bench: &mut Bench) {
    let outcome = bench.run("fn quiet() {}\nquiet()");
    assert_eq!((outcome.error.as_ref(), outcome.outputs.len()), (None, 0));
    let outcome = bench.run("println!(\"x\")");
    assert_eq!((outcome.text(Stream::Stdout).as_str(), outcome.displays().count()), ("x\n", 0));
}
