//! What must not become a memo, and what the user is told.

use super::support::{assert_success, attachments, memo, notebook, said};

const OPENING: &str = "let mut sheet = Sheet::new(\"A test\");\nlet sv = sheet.given(\"S_v\", \"vertical stress\", 60.mpa(), Source::measured(\"a log\"));";

/// A folder with a project file that states a date.
fn dated_folder() -> tempfile::TempDir {
    let folder = tempfile::tempdir().unwrap();
    std::fs::write(
        folder.path().join("hade.toml"),
        "[memo]\nnumber = \"T-1\"\nrevision = \"A\"\ndate = \"2026-03-01\"\n",
    )
    .unwrap();
    folder
}

/// Runs a notebook whose second cell is at fault and returns what was said.
#[track_caller]
fn refused(cell: &str) -> String {
    let folder = dated_folder();
    notebook(folder.path(), "faulty.ipynb", &[OPENING, cell, "sheet"]);
    let output = memo(folder.path(), "faulty.ipynb", "out.pdf");
    assert!(!output.status.success(), "{}", said(&output));
    let mut left: Vec<_> =
        std::fs::read_dir(folder.path()).unwrap().map(|e| e.unwrap().file_name().into_string().unwrap()).collect();
    left.sort();
    assert_eq!(left, ["faulty.ipynb", "hade.toml"], "no part of a memo is left");
    said(&output)
}

#[test]
fn a_cell_that_ends_in_an_error_names_the_cell_and_the_sentence() {
    let said = refused(
        "let hole = Attitude { inclination: 190.deg(), azimuth: Azimuth::from_true_north(0.deg()) };\nlet chain = hole.chain()?;",
    );
    assert!(said.contains("cell 2"), "{said}");
    assert!(said.contains("inclination is 190°, but it must be between 0° and 180°."), "{said}");
}

#[test]
fn a_cell_that_panics_names_the_cell_and_the_message() {
    let said = refused("panic!(\"the well is dry\");");
    assert!(said.contains("cell 2") && said.contains("the well is dry"), "{said}");
}

#[test]
fn a_cell_that_does_not_compile_names_the_cell_and_the_mistake() {
    let said = refused("let hole = Attitude { inclination: 42.mpa(), azimuth: Azimuth::from_true_north(0.deg()) };");
    assert!(said.contains("cell 2"), "{said}");
    assert!(said.contains("E0308") && said.contains("expected `Angle`, found `Pressure`"), "{said}");
}

#[test]
fn a_notebook_without_a_sheet_and_a_file_that_is_no_notebook_are_refused() {
    let folder = dated_folder();
    notebook(folder.path(), "bare.ipynb", &["let x = 1.0;"]);
    let output = memo(folder.path(), "bare.ipynb", "out.pdf");
    assert!(!output.status.success());
    assert!(said(&output).contains("sheet"), "{}", said(&output));
    std::fs::write(folder.path().join("letter.ipynb"), "Dear sir").unwrap();
    let output = memo(folder.path(), "letter.ipynb", "out.pdf");
    assert!(!output.status.success());
    assert!(said(&output).contains("letter.ipynb"), "{}", said(&output));
    assert!(!folder.path().join("out.pdf").exists());
}

#[test]
fn an_input_that_bypasses_the_sheet_is_named() {
    let folder = dated_folder();
    notebook(
        folder.path(),
        "bypass.ipynb",
        &[
            OPENING,
            "let s = Stress::from_horizontals(Horizontals { sv, sh_max: 55.25.mpa(), sh_min: 40.mpa(), sh_max_azimuth: Azimuth::from_true_north(30.deg()) })?;\nsheet.given(\"S_hmin\", \"smaller horizontal stress\", 40.mpa(), Source::measured(\"a leak-off test\"));\nsheet.given(\"A\", \"azimuth\", Azimuth::from_true_north(30.deg()), Source::measured(\"an image log\"));\nsheet.add(&s.principals());",
            "sheet",
        ],
    );
    std::fs::write(
        folder.path().join("hade.toml"),
        "[memo]\nnumber = \"T-1\"\nrevision = \"A\"\ndate = \"2026-03-01\"\n",
    )
    .unwrap();
    let output = memo(folder.path(), "bypass.ipynb", "out.pdf");
    assert_success(&output);
    assert!(said(&output).contains("larger horizontal stress = 55.25 MPa"), "{}", said(&output));
    let attached = attachments(&folder.path().join("out.pdf"));
    assert!(
        attached.iter().any(|(name, _)| name == "record.json"),
        "{:?}",
        attached.iter().map(|(n, _)| n).collect::<Vec<_>>()
    );
    if hade_tests::tool("pdftotext") {
        let text = super::support::text(&folder.path().join("out.pdf"));
        assert!(text.contains("larger horizontal stress"), "{text}");
        assert!(text.to_lowercase().contains("not on the sheet"), "{text}");
    }
}

#[test]
fn nothing_but_a_memo_is_written_over_and_a_missing_date_is_said_before_anything_runs() {
    let folder = dated_folder();
    let path = notebook(folder.path(), "mine.ipynb", &[OPENING, "sheet"]);
    let before = std::fs::read(&path).unwrap();
    for target in ["mine.ipynb", "hade.toml"] {
        let output = memo(folder.path(), "mine.ipynb", target);
        assert!(!output.status.success());
        assert!(said(&output).contains("is no PDF; it stays as it is"), "{}", said(&output));
    }
    assert_eq!(std::fs::read(&path).unwrap(), before);
    std::fs::remove_file(folder.path().join("hade.toml")).unwrap();
    let output = memo(folder.path(), "mine.ipynb", "out.pdf");
    assert!(!output.status.success());
    assert!(said(&output).contains("a memo needs a date") && !said(&output).contains("cell 1"), "{}", said(&output));
}
