//! Messages that name the line, and say what to write instead.

use crate::{Bench, Test};

pub(crate) const TESTS: &[(&str, Test)] = &[
    ("the_question_mark_that_met_an_error_is_named", the_question_mark_that_met_an_error_is_named),
    ("a_reference_is_not_kept_and_told_what_to_be", a_reference_is_not_kept_and_told_what_to_be),
    ("a_name_that_is_not_there_is_told_which_are", a_name_that_is_not_there_is_told_which_are),
    ("a_value_of_another_type_is_told_how_the_wanted_is_made", a_value_of_another_type_is_told_how_the_wanted_is_made),
    ("a_question_mark_left_out_is_one_error", a_question_mark_left_out_is_one_error),
    ("small_slips_are_told_what_to_write", small_slips_are_told_what_to_write),
];

const DEPTH: &str = "fn depth(d: f64) -> std::result::Result<f64, String> {\n    \
                     if d < 0.0 { std::result::Result::Err(format!(\"depth {d} m is above ground\")) } \
                     else { std::result::Result::Ok(d) }\n}";

fn the_question_mark_that_met_an_error_is_named(bench: &mut Bench) {
    bench.ok(DEPTH);
    for (cell, line) in [
        // Several of them, and the same line twice.
        ("let a = depth(1.0)?;\nlet b = depth(-2.0)?;\nlet c = depth(3.0)?;", 2),
        ("let mut d = 1.0;\nlet a = depth(d)?;\nd = -2.0;\nlet a = depth(d)?;", 4),
        // Two statements on a line, a statement of several lines, and a last expression.
        ("let a = depth(1.0)?; let b = a;\nlet c = depth(2.0)?; let d = depth(-2.0)?;", 2),
        ("let a = depth(1.0)?;\nlet b = [\n    depth(1.0)?,\n    depth(-2.0)?,\n    depth(3.0)?,\n];", 4),
        ("let a = depth(1.0)?;\n\n// why\ndepth(-2.0)?", 4),
        ("let a = depth(1.0)?;\nlet b = 2.0;\n(a, b, depth(-2.0)?)", 3),
        // In blocks; in a closure or a function of the user's the place where its own error is met.
        ("for d in [1.0, -2.0] {\n    if d < 5.0 {\n        depth(d)?;\n    }\n    depth(1.0)?;\n}", 3),
        (
            "let b = {\n    let deeper = |d: f64| -> std::result::Result<f64, String> {\n        let e = depth(d)?;\n        \
             depth(e)\n    };\n    deeper(1.0)? +\n    deeper(-2.0)?\n};",
            7,
        ),
        (
            "fn twice(d: f64) -> std::result::Result<f64, String> {\n    depth(d)?;\n    depth(d)\n}\nlet a = \
             twice(1.0)?;\nlet b = twice(-2.0)?;",
            6,
        ),
        (":vars\nlet a = depth(1.0)?;\nlet b = depth(-2.0)?;", 3),
    ] {
        let outcome = bench.run(cell);
        let error = outcome.error.unwrap_or_else(|| panic!("no error from {cell}"));
        assert_eq!(error.sentence, "depth -2 m is above ground", "{cell}");
        assert_eq!(error.line, Some(line), "{cell}");
        let text = cell.lines().nth(line - 1).unwrap_or_default().trim();
        assert_eq!(error.detail, format!("{}\n  line {line}: {text}", error.sentence), "{cell}");
    }
    // A panic in a line that stands twice.
    let error = bench.failure("let v = vec![1];\nlet mut i = 0;\nlet a = v[i];\ni = 7;\nlet a = v[i];");
    assert_eq!((error.name.as_str(), error.line), ("Panic", Some(5)), "{}", error.detail);
}

fn a_reference_is_not_kept_and_told_what_to_be(bench: &mut Bench) {
    bench.ok("let a = vec![1.0, 2.0];");
    let error = bench.failure("let c = 1;\nlet b = &a;");
    assert_eq!(
        error.sentence,
        "`b` is a reference, and only values are kept from one cell to the next; write `let b = a.clone();`, or `&a` \
         where `b` is used"
    );
    assert_eq!(error.line, Some(2));
    bench.ok("let b = a.clone();");
}

fn a_name_that_is_not_there_is_told_which_are(bench: &mut Bench) {
    bench.session = None;
    bench.ok("let s = Stress::from_horizontals(Horizontals { sv: 50.mpa(), sh_max: 40.mpa(), sh_min: 30.mpa(), \
         sh_max_azimuth: Azimuth::from_true_north(10.deg()) })?;\nlet state = s.horizontal_stresses();");
    for (cell, wanted) in [
        ("let p = s.principal();", "`Stress` has no `principal`; did you mean `principals`? There are also "),
        ("let a = 1;\nlet p = s.zzz;", "`Stress` has no `zzz`; there are "),
        ("let p = Stress::from_horizontal(s);", "`Stress` has no `from_horizontal`; did you mean `from_horizontals`?"),
        ("let p = 5.bars();", "a number has no `bars`; did you mean `bar`?"),
        ("let p = stat + 1;", "there is no variable `stat`; did you mean `state`? There are also `s`"),
        ("let p = Sorce::measured(\"x\");", "there is no `Sorce`; did you mean `Source`?"),
        (
            "let p = Horizontals { sv: 50.mpa(), shmax: 40.mpa(), ..todo!() };",
            "`Horizontals` has no field `shmax`; did you mean `sh_max`? There are also `sh_m",
        ),
        (
            "let p = Horizontals { sv: 50.mpa(), sh_min: 40.mpa(), sh_max: 3.mpa() };",
            "`Horizontals` lacks `sh_max_azimuth: …` (of type Azimuth); write it between the braces",
        ),
    ] {
        let error = bench.failure(cell);
        assert!(error.sentence.starts_with(wanted), "{cell}: {}\n{}", error.sentence, error.detail);
    }
    // What is private to the library, and what every type has, is no advice.
    let error = bench.failure("s.zzz");
    assert!(error.sentence.contains("invariants") && error.sentence.contains("critical_planes"), "{}", error.sentence);
    for hidden in ["carried", "clone", "html", "with_label", "upstream"] {
        assert!(!error.sentence.contains(hidden), "{hidden}: {}", error.sentence);
    }
}

fn a_value_of_another_type_is_told_how_the_wanted_is_made(bench: &mut Bench) {
    for (cell, wanted) in [
        (
            "let mut sheet = Sheet::new(\"t\"); let a = sheet.given(\"a\", \"b\", 5.mpa(), \"measured\");",
            "a `Source` is wanted here; write `Source::measured(\"…\")`, `Source::offset(\"…\")`, \
             `Source::correlation(\"…\")` or `Source::assumed(\"…\")`",
        ),
        (
            "let a = Azimuth::from_true_north(152.mpa());",
            "an angle is wanted here, and `152.mpa()` is a pressure; write a value with `.deg()` (or .rad())",
        ),
        (
            "let p: Horizontals = 5.0;",
            "a `Horizontals` is wanted here; write `Horizontals { sv: …, sh_max: …, sh_min: …, sh_max_azimuth: … }`",
        ),
    ] {
        let error = bench.failure(cell);
        assert_eq!((error.name.as_str(), error.sentence.as_str()), ("E0308", wanted), "{}", error.detail);
    }
}

fn a_question_mark_left_out_is_one_error(bench: &mut Bench) {
    bench.session = None;
    let error = bench.failure("let s = Survey::read_csv(\"data/a long name of a file of a survey.csv\").named(\"x\");");
    assert_eq!(
        error.sentence,
        "`Survey::read_csv(…)` may be refused; write `Survey::read_csv(…)?` to go on with what it gives"
    );
    let error = bench.failure(
        "let mut sheet = Sheet::new(\"t\");\nlet f = sheet.data(\"a.csv\", \"b\");\n\
         let p = PressureProfile::read_csv(&f, \"sv\")?.of(\"S_v\", \"vertical stress\");\n\
         let q = sheet.given(\"S_v\", \"c\", p, Source::measured(\"d\").in_file(&f));",
    );
    assert_eq!(error.sentence, "`f` may be refused; write `?` at the end of line 2, which makes it");
    assert_eq!((error.line, error.detail.matches("error[").count()), (Some(2), 1), "{}", error.detail);
    bench.ok(DEPTH);
    bench.ok("let d = depth(1.0);");
    let error = bench.failure("let e = d + 1.0;");
    assert!(
        error.sentence.starts_with("`d` may be refused; write `?` at the end of what makes it in cell 4"),
        "{}",
        error.detail
    );
}

fn small_slips_are_told_what_to_write(bench: &mut Bench) {
    bench.session = None;
    bench.ok("let sheet = Sheet::new(\"t\");");
    for (cell, wanted) in [
        ("let p = 50mpa;", "a unit is a call behind a point; write `50.mpa()`"),
        (
            "sheet.note(\"x\");",
            "`sheet` is changed here and was not made to be; write `let mut sheet` in cell 1, and run that cell again",
        ),
        (
            "let a = 1;\nlet b = (\n  2);\na = 3;",
            "`a` is changed here and was not made to be; write `let mut a` on line 1",
        ),
        ("let a = 1.mpa()?;", "what stands before this `?` cannot be refused; take the `?` away"),
        (
            "let a = \"x\".find('x')?;",
            "what stands before this `?` may be absent; write `.ok_or(\"why it must be there\")?`",
        ),
        ("let a = 1\nlet b = 2;", "the cell cannot be read: a `;` is missing at the end of this line"),
        (
            "let a = \"x;\nlet b = 2;",
            "the cell cannot be read: the text that begins on this line has no `\"` at its end",
        ),
    ] {
        let error = bench.failure(cell);
        assert_eq!(error.sentence, wanted, "{cell}: {}", error.detail);
    }
}
