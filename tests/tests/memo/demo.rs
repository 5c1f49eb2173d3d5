//! The Kestrel Flat demo: from field data to PDF.

use hade::replay::replay;
use hade::sheet::Record;

use super::support::{assert_success, attachments, demo_copy, memo, text};

fn record(pdf: &std::path::Path) -> Record {
    let (_, bytes) =
        attachments(pdf).into_iter().find(|(name, _)| name == "record.json").expect("record.json is attached");
    Record::from_json(std::str::from_utf8(&bytes).expect("UTF-8")).expect("a record")
}

#[test]
fn the_demo_becomes_a_memo_that_a_checker_can_follow() {
    let demo = demo_copy();
    assert_success(&memo(demo.path(), "kf3.ipynb", "first.pdf"));
    assert_success(&memo(demo.path(), "kf3.ipynb", "second.pdf"));
    let first = demo.path().join("first.pdf");
    assert!(
        std::fs::read(&first).unwrap() == std::fs::read(demo.path().join("second.pdf")).unwrap(),
        "two runs give the same bytes"
    );

    let names: Vec<String> = attachments(&first).into_iter().map(|(name, _)| name).collect();
    for name in ["record.json", "kf3.ipynb", "kf3-survey.csv", "kf1-density.las"] {
        assert!(names.iter().any(|n| n == name), "{name} is attached: {names:?}");
    }

    let record = record(&first);
    assert_eq!(record.unknown_inputs(), vec![], "every input is on the sheet");
    assert!(record.cards().len() >= 9, "{} cards", record.cards().len());
    for (card, _) in record.cards() {
        assert!(card.passed(), "{}: {:#?}", card.title(), card.checks);
        let again = replay(card).unwrap_or_else(|e| panic!("{}: {e}", card.title()));
        assert!(again.agrees(), "{}: {:?}", card.title(), again.difference);
    }

    if hade_tests::tool("pdftotext") {
        let text = text(&first);
        for words in [
            "DRAFT",
            "Kestrel Flat",
            "KF-3",
            "2950",
            "vertical stress",
            "Principal stresses",
            "Turn from north, east, down",
            "fracture initiation",
            "lower shear",
            "recommended",
            "sg",
            "Cautions",
            "Prepared",
            "Checked",
            "Approved",
            "measured",
            "KF-1",
        ] {
            assert!(text.to_lowercase().contains(&words.to_lowercase()), "\"{words}\" is printed in\n{text}");
        }
        assert!(!text.contains("NOT ON THE SHEET"), "no input bypasses the sheet");
    }
    if hade_tests::tool("qpdf") {
        let output = std::process::Command::new("qpdf").arg("--check").arg(&first).output().unwrap();
        assert!(output.status.success(), "{}", String::from_utf8_lossy(&output.stdout));
        let output = std::process::Command::new("qpdf").arg("--list-attachments").arg(&first).output().unwrap();
        let listed = String::from_utf8_lossy(&output.stdout).into_owned();
        assert!(listed.contains("record.json") && listed.contains("kf3.ipynb"), "{listed}");
    }
}

#[test]
fn one_changed_number_in_the_survey_changes_the_memo() {
    let demo = demo_copy();
    assert_success(&memo(demo.path(), "kf3.ipynb", "before.pdf"));
    let survey = demo.path().join("data/kf3-survey.csv");
    let text = std::fs::read_to_string(&survey).unwrap();
    // The inclination of a station in the tangent section, a tenth of a degree more.
    let lines: Vec<String> = text.lines().map(str::to_owned).collect();
    let row = lines.iter().rposition(|l| l.starts_with(|c: char| c.is_ascii_digit())).expect("rows") - 8;
    let mut cells: Vec<String> = lines[row].split(',').map(str::to_owned).collect();
    let inclination: f64 = cells[1].trim().parse().expect("an inclination");
    cells[1] = format!("{:.2}", inclination + 0.1);
    let mut changed = lines.clone();
    changed[row] = cells.join(",");
    assert_ne!(changed, lines);
    std::fs::write(&survey, changed.join("\n") + "\n").unwrap();
    assert_success(&memo(demo.path(), "kf3.ipynb", "after.pdf"));
    let (before, after) = (record(&demo.path().join("before.pdf")), record(&demo.path().join("after.pdf")));
    let outcomes = |r: &Record| r.cards().iter().map(|(c, _)| c.outcome.text()).collect::<Vec<_>>();
    assert_ne!(outcomes(&before), outcomes(&after));
    assert_ne!(before.data[0].sha256, after.data[0].sha256);
}

#[test]
fn the_minimal_notebook_becomes_a_memo_with_every_input_known() {
    let demo = demo_copy();
    assert_success(&memo(demo.path(), "minimal.ipynb", "minimal.pdf"));
    let record = record(&demo.path().join("minimal.pdf"));
    assert_eq!(record.unknown_inputs(), vec![]);
    // A vertical hole by hand: Kirsch and Mohr–Coulomb give 25.64 MPa for no failing arc, and
    // initiation at 3 S_hmin − S_Hmax − P_p + T_0 = 37.00 MPa.
    let limits = record.cards().into_iter().find(|(c, _)| c.kind == "wall-limits").expect("the limits").0.clone();
    let shown =
        |symbol: &str| limits.explanation.results.iter().find(|r| r.symbol == symbol).expect("a limit").si[0] * 1e-6;
    let (q, ucs) =
        ((1.0 + 28_f64.to_radians().sin()) / (1.0 - 28_f64.to_radians().sin()), 12.0 * (59_f64).to_radians().tan());
    assert!(
        (shown("p_ls") - (3.0 * 38.0 - 31.0 - 19.0 - ucs + q * 19.0) / (1.0 + q)).abs() < 1e-4,
        "{}",
        shown("p_ls")
    );
    assert!((shown("p_i") - (3.0 * 31.0 - 38.0 - 19.0 + 1.0)).abs() < 1e-4, "{}", shown("p_i"));
}
