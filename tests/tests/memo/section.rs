//! A whole section of a hole, every direction it could take, and how sure the answer is, in one memo.

use hade::sheet::Record;

use super::support::{assert_success, attachments, demo_copy, memo, sheet, text};

#[test]
fn a_depleted_sand_leaves_no_common_mud_weight() {
    let demo = demo_copy();
    assert_success(&memo(demo.path(), "kf3-section.ipynb", "section.pdf"));
    let pdf = demo.path().join("section.pdf");
    let (_, bytes) = attachments(&pdf).into_iter().find(|(name, _)| name == "record.json").expect("record.json");
    let record = Record::from_json(std::str::from_utf8(&bytes).expect("UTF-8")).expect("a record");
    assert_eq!(record.conflicts, Vec::<String>::new());
    assert_eq!(record.unknown_inputs(), vec![], "every input is on the sheet");
    let kinds: Vec<&str> = record.cards().iter().map(|(card, _)| card.kind.as_str()).collect();
    for kind in ["limit-log", "hindcast", "ground-at-depth", "direction-map", "wall-ensemble", "section-ensemble"] {
        assert!(kinds.contains(&kind), "{kinds:?}");
    }
    for (card, _) in record.cards() {
        assert!(card.passed(), "{}: {:#?}", card.title(), card.checks);
    }
    // The first sheet says what came out against the plan, with the item, and so does the item.
    let first = sheet(&pdf, 1);
    assert!(first.contains("What came out against the plan or the observations"), "{first}");
    for (number, (card, _)) in (1..).zip(record.cards()) {
        for said in &card.warnings {
            let begins: String = format!("Item {number}: {said}").chars().take(30).collect();
            let plain = |text: &str| text.replace(['_', '\u{a0}'], "");
            assert!(plain(&first).contains(&plain(&begins)), "{begins} in\n{first}");
        }
    }
    let warned = |kind: &str| record.cards().iter().any(|(card, _)| card.kind == kind && !card.warnings.is_empty());
    assert!(warned("limit-log") && warned("hindcast"));
    let result = |kind: &str, name: &str| {
        let (card, _) = record.cards().into_iter().find(|(card, _)| card.kind == kind).expect("an item");
        let results = &card.explanation.results;
        let found = results.iter().find(|result| result.name.starts_with(name));
        found.unwrap_or_else(|| panic!("no {name} in {:?}", results.iter().map(|r| &r.name).collect::<Vec<_>>())).si[0]
    };
    // By hand at the top of the sand, TVD 2640 m, a fifth of the way from 2600 to 2800 m in the table of pressures.
    let (sv, pore) = (58.44 + 0.2 * (63.27 - 58.44), 27.3 + 0.2 * (29.5 - 27.3));
    let in_sand = pore + 0.50 * (sv - pore) - 0.64 * 12.0;
    let top = (in_sand - 1.0) * 1e6 / (9.80665 * 2640.0);
    assert!((result("limit-log", "lowest top") - top).abs() < 0.01, "{top}");
    assert!(result("limit-log", "highest bottom") > top);
    // P10 of the bottom lies below P90, and the end of the path between the best and the worst.
    assert!(result("wall-ensemble", "P10 of the bottom") < result("wall-ensemble", "P90 of the bottom"));
    let end = result("direction-map", "in the direction of the end of the path");
    assert!(result("direction-map", "best") < end && end < result("direction-map", "worst"));
    // One mud weight keeps the section in fewer draws when the layers move by themselves.
    assert!(
        result("section-ensemble", "share of draws in which it does, each")
            < result("section-ensemble", "share of draws in which it does, all")
    );
    let words = text(&pdf).split_whitespace().collect::<Vec<_>>().join(" ");
    for wanted in [
        "No single mud weight serves the section",
        "Depleted ground is not what it was",
        "Events met are no proof",
        "by the file",
    ] {
        assert!(words.contains(wanted), "{wanted}");
    }
}
