//! From draft to issue: what stands in the way is listed, and nothing is issued over it.

use std::path::Path;
use std::process::{Command, Output};

use hade_tests::hade_binary;

use super::support::{assert_success, demo_copy, notebook, said, text};

const PROJECT: &str = r#"
[memo]
number = "T-7"
revision = "B"
date = "2026-03-01"
status = "FOR REVIEW"
supersedes = "T-7 revision A"

[project]
name = "Trial"
client = "Nobody"
site = "Nowhere"
hole = "X-1"

[[people]]
role = "prepared"
name = "P. Maker"

[[people]]
role = "checked"
name = "CHECKER"

[[people]]
role = "approved"
name = "A. Owner"

[[revisions]]
rev = "A"
date = "2026-02-01"
what = "first issue"
by = "P. Maker"

[[revisions]]
rev = "B"
date = "2026-03-01"
what = "pore pressure revised"
by = "P. Maker"
"#;

const CELLS: [&str; 3] = [
    "let mut sheet = Sheet::new(\"A trial\");\nsheet.purpose(\"To try.\");\nsheet.scope(\"One tensor.\");\nsheet.valid_for(\"The trial.\");\nlet sv = sheet.given(\"S_v\", \"vertical stress\", 60.mpa(), Source::measured(\"a log\"));\nlet sh_max = sheet.given(\"S_Hmax\", \"larger horizontal stress\", 50.mpa(), Source::measured(\"a test\"));\nlet sh_min = sheet.given(\"S_hmin\", \"smaller horizontal stress\", 42.mpa(), Source::measured(\"a test\"));\nlet a = sheet.given(\"A_Hmax\", \"azimuth of S_Hmax\", Azimuth::from_true_north(35.deg()), Source::measured(\"an image\"));",
    "let s = Stress::from_horizontals(Horizontals { sv, sh_max, sh_min, sh_max_azimuth: a })?;\nsheet.add(&s);\nsheet.assume(\"the rock is linear elastic\", Basis::unverified(\"no core\").to_be_verified_by(\"P. Maker\", \"by tests on the next core\"));\nsheet.conclude(\"It was tried.\");",
    "sheet",
];

fn run(folder: &Path, more: &[&str]) -> Output {
    Command::new(hade_binary())
        .args(["memo", "trial.ipynb", "-o", "out.pdf"])
        .args(more)
        .current_dir(folder)
        .output()
        .expect("the hade command runs")
}

#[test]
fn a_memo_is_issued_when_nothing_stands_against_it_and_not_before() {
    let place = tempfile::tempdir().unwrap();
    let folder = place.path();
    notebook(folder, "trial.ipynb", &CELLS);
    let pdf = folder.join("out.pdf");
    let project =
        |checker: &str| std::fs::write(folder.join("hade.toml"), PROJECT.replace("CHECKER", checker)).unwrap();

    project("");
    let refused = run(folder, &["--issue", "B"]);
    assert_eq!(refused.status.code(), Some(1));
    assert!(said(&refused).contains("No name is stated for: checked."), "{}", said(&refused));
    project("P. Maker");
    let refused = run(folder, &["--issue", "B"]);
    assert!(said(&refused).contains("prepared and the one who checked"), "{}", said(&refused));
    project("C. Hecker");
    let refused = run(folder, &["--issue", "C"]);
    assert!(said(&refused).contains("hade.toml is at revision B, not C."), "{}", said(&refused));
    assert!(!pdf.exists(), "nothing was written");

    assert_success(&run(folder, &["--issue", "B"]));
    let issued = text(&pdf);
    for words in
        ["ISSUED", "Nothing stands against issue.", "T-7 revision A", "Hold: the rock is linear elastic", "C. Hecker"]
    {
        assert!(issued.contains(words), "{words} in\n{issued}");
    }
    assert!(!issued.contains("FOR REVIEW") && !issued.contains("DRAFT"), "{issued}");

    assert_success(&run(folder, &[]));
    let review = text(&pdf);
    assert!(review.contains("FOR REVIEW") && !review.contains("ISSUED"), "{review}");
}

#[test]
fn the_summary_has_two_sheets_and_the_same_conclusions() {
    let place = tempfile::tempdir().unwrap();
    let folder = place.path();
    notebook(folder, "trial.ipynb", &CELLS);
    std::fs::write(folder.join("hade.toml"), PROJECT.replace("CHECKER", "C. Hecker")).unwrap();
    let made = run(folder, &["--template", "summary"]);
    assert_success(&made);
    assert!(said(&made).contains(": 2 sheets"), "{}", said(&made));
    let printed = text(&folder.join("out.pdf"));
    for words in ["It was tried.", "Sign-off", "C. Hecker", "SUMMARY"] {
        assert!(printed.contains(words), "{words} in\n{printed}");
    }
    let unknown = run(folder, &["--template", "sumary"]);
    assert!(said(&unknown).contains("memo, summary"), "{}", said(&unknown));
}

/// Nineteen items, six critical cautions, three people.
#[test]
fn the_summary_of_the_demo_fits_on_two_sheets() {
    let demo = demo_copy();
    let made = Command::new(hade_binary())
        .args(["memo", "kf3.ipynb", "-o", "summary.pdf", "--template", "summary"])
        .current_dir(demo.path())
        .output()
        .expect("the hade command runs");
    assert_success(&made);
    assert!(said(&made).contains(": 2 sheets"), "{}", said(&made));
    let pdf = demo.path().join("summary.pdf");
    let printed = text(&pdf);
    for words in
        ["Sheet 2 of 2", "Every check of every item passed.", "Rules and responsible people go before", "Approved"]
    {
        assert!(printed.contains(words), "{words} in\n{printed}");
    }
}

#[test]
fn what_changed_since_an_earlier_memo_is_printed() {
    let place = tempfile::tempdir().unwrap();
    let folder = place.path();
    std::fs::write(folder.join("hade.toml"), PROJECT.replace("CHECKER", "C. Hecker")).unwrap();
    notebook(folder, "trial.ipynb", &CELLS);
    assert_success(&run(folder, &[]));
    std::fs::rename(folder.join("out.pdf"), folder.join("old.pdf")).unwrap();
    let same = run(folder, &["--diff", "old.pdf"]);
    assert_success(&same);
    assert!(
        said(&same).contains("0 givens, 0 outcomes and 0 conclusions changed since T-7 revision B"),
        "{}",
        said(&same)
    );

    let cells = CELLS.map(|cell| cell.replace("60.mpa()", "61.mpa()").replace("It was tried.", "It was tried again."));
    notebook(folder, "trial.ipynb", &cells.each_ref().map(String::as_str));
    let changed = run(folder, &["--diff", "old.pdf"]);
    assert_success(&changed);
    let (heard, printed) = (said(&changed), text(&folder.join("out.pdf")));
    for words in ["It was tried again.", "60 MPa", "61 MPa"] {
        assert!(heard.contains(words), "{words} in {heard}");
        assert!(printed.contains(words), "{words} in\n{printed}");
    }
    assert!(printed.contains("Changes since T-7 revision B"), "{printed}");

    std::fs::write(folder.join("no.pdf"), "%PDF-1.7 not one").unwrap();
    let refused = run(folder, &["--diff", "no.pdf"]);
    assert_eq!(refused.status.code(), Some(1));
    assert!(said(&refused).contains("no.pdf"), "{}", said(&refused));
}
