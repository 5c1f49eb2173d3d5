//! Records that were changed, by mistake or on purpose, on their way to a memo: each is refused with the
//! place, or set literally, or named in the memo; and what became a memo in spite of it is refused by `verify`.

use std::collections::BTreeMap;
use std::sync::OnceLock;
use std::time::{Duration, Instant};

use hade::sheet::Record;
use hade_memo::{Memo, MemoInput, MemoOptions, Project, Standing, build, verify};
use hade_tests::root;
use serde_json::{Value, json};

use super::support::{attachments, minimal_memo, text};

/// More than any of these memos takes on a busy machine.
const BOUNDED: Duration = Duration::from_secs(600);

/// The minimal notebook's name and bytes as attached, and its record.
fn minimal() -> &'static (Vec<u8>, Value) {
    static RECORD: OnceLock<(Vec<u8>, Value)> = OnceLock::new();
    RECORD.get_or_init(|| {
        let folder = tempfile::tempdir().unwrap();
        let pdf = folder.path().join("minimal.pdf");
        std::fs::write(&pdf, minimal_memo()).unwrap();
        let files = attachments(&pdf);
        let of = |name: &str| files.iter().find(|(n, _)| n == name).expect("an attached file").1.clone();
        (of("minimal.ipynb"), serde_json::from_slice(&of("record.json")).unwrap())
    })
}

fn memo(record: &Value, options: &MemoOptions) -> hade_memo::Result<Memo> {
    let folder = root().join("notebooks-demo");
    let project = Project::read_beside(&folder).unwrap().unwrap();
    let (notebook, _) = minimal();
    let input = MemoInput {
        record_json: &record.to_string(),
        notebook: ("minimal.ipynb", notebook),
        folder: &folder,
        project: Some(&project),
    };
    build(&input, options)
}

fn draft(record: &Value) -> hade_memo::Result<Memo> {
    memo(record, &MemoOptions::default())
}

/// What `verify` holds against a memo.
fn against(pdf: Vec<u8>) -> Vec<String> {
    let report = verify(pdf).unwrap().report;
    let fails = report.findings.iter().filter(|f| f.standing == Standing::Fails);
    fails.map(|f| format!("{}: {}", f.what, f.found)).collect()
}

fn printed(memo: &Memo) -> String {
    let folder = tempfile::tempdir().unwrap();
    let pdf = folder.path().join("memo.pdf");
    std::fs::write(&pdf, &memo.pdf).unwrap();
    text(&pdf)
}

/// The JSON pointers of every leaf that `wanted` takes, but for what is computed with and never typeset.
fn leaves(value: &Value, place: &str, wanted: fn(&Value) -> bool, found: &mut Vec<String>) {
    match value {
        _ if place.ends_with("/card/inputs") || place.ends_with("/card/outcome") => {}
        Value::Array(list) => {
            list.iter().enumerate().for_each(|(i, v)| leaves(v, &format!("{place}/{i}"), wanted, found));
        }
        Value::Object(map) => map.iter().for_each(|(k, v)| leaves(v, &format!("{place}/{k}"), wanted, found)),
        leaf if wanted(leaf) => found.push(place.to_owned()),
        _ => {}
    }
}

fn texts(record: &Value) -> Vec<String> {
    let mut found = Vec::new();
    leaves(record, "", Value::is_string, &mut found);
    found
}

fn with(place: &str, value: Value) -> Value {
    let mut record = minimal().1.clone();
    *record.pointer_mut(place).unwrap_or_else(|| panic!("{place} is not in the record")) = value;
    record
}

fn is_record(value: &Value) -> bool {
    Record::from_json(&value.to_string()).is_ok()
}

/// The first and the last place of each field whose text can be any.
fn free_texts() -> &'static [String] {
    static FREE: OnceLock<Vec<String>> = OnceLock::new();
    FREE.get_or_init(|| {
        let all = texts(&minimal().1);
        let chosen = first_and_last(&all);
        let free: Vec<String> = chosen.into_iter().filter(|place| is_record(&with(place, json!("any")))).collect();
        assert!(free.len() > 50, "{free:?}");
        free
    })
}

/// Of places that differ in the numbers of their pointers alone the first and the last.
fn first_and_last(places: &[String]) -> Vec<String> {
    let mut ends: BTreeMap<String, [&String; 2]> = BTreeMap::new();
    for place in places {
        let field = place.chars().filter(|c| !c.is_ascii_digit()).collect();
        ends.entry(field).and_modify(|[_, last]| *last = place).or_insert([place, place]);
    }
    let mut chosen: Vec<String> = ends.into_values().flatten().cloned().collect();
    chosen.sort();
    chosen.dedup();
    chosen
}

#[test]
fn a_text_of_a_megabyte_is_refused_wherever_it_stands() {
    let long = json!("x".repeat(1 << 20));
    for place in free_texts() {
        let said = draft(&with(place, long.clone())).unwrap_err().to_string();
        assert!(said.contains(&format!("{place} is a text of 1048576 bytes")), "{place}: {said:.200}");
    }
}

#[test]
fn characters_that_no_font_has_are_refused_with_their_place() {
    for (character, code) in [("🙂", "U+1F642"), ("漢", "U+6F22"), ("\u{e000}", "U+E000")] {
        for place in free_texts() {
            let said = draft(&with(place, json!(format!("a {character}")))).unwrap_err().to_string();
            assert!(said.contains(&format!("{place} holds ")) && said.contains(code), "{place}: {said}");
        }
    }
}

/// Markup of Typst, HTML, JSON and PDF around a number of its own.
fn probe(number: usize) -> String {
    format!("#p(\"{number}\") $x$ <b>*y*</b> \\{number} &amp; @r{number} /*")
}

#[test]
fn markup_is_set_as_it_stands_in_every_text() {
    let mut record = minimal().1.clone();
    let places = free_texts();
    for (number, place) in places.iter().enumerate() {
        let text = record.pointer_mut(place).unwrap();
        *text = json!(format!("{} {}", text.as_str().unwrap(), probe(number)));
    }
    let memo = draft(&record).unwrap();
    let printed = printed(&memo);
    // What is no text of its own in a memo: names that programs compare, units that stand in their column's head,
    // methods, which the library words anew, and the text alternatives of figures.
    let unprinted = |place: &str| {
        let last = place.rsplit('/').next().unwrap_or_default();
        let part = |words: &str| place.contains(words);
        ["kind", "sha256", "file", "alt"].contains(&last) || part("/lineage/") || part("/topics/") || part("/method/")
    };
    let mut missing = Vec::new();
    for (number, place) in places.iter().enumerate().filter(|(_, place)| !unprinted(place)) {
        if ![format!("#p(\"{number}\")"), format!("\\{number}"), format!("@r{number}")]
            .iter()
            .all(|piece| printed.contains(piece))
        {
            missing.push(place.clone());
        }
    }
    assert!(missing.is_empty(), "{missing:#?}");
    for piece in ["$x$", "<b>*y*</b>", "&amp;", "/*"] {
        assert!(printed.matches(piece).count() > 30, "{piece}");
    }
    assert!(!against(memo.pdf).is_empty(), "the cards' own words are not those of the library");
}

#[test]
fn markup_in_what_the_engineer_wrote_harms_nothing() {
    let mut record = minimal().1.clone();
    let is_own = |place: &&String| {
        let part = |words: &str| place.contains(words);
        place.as_str() == "/title" || part("/front/") || part("/source/words") || part("/conclusions/")
    };
    let own: Vec<String> = free_texts().iter().filter(is_own).cloned().collect();
    assert!(own.len() > 5, "{own:?}");
    for (number, place) in own.iter().enumerate() {
        *record.pointer_mut(place).unwrap() = json!(probe(number));
    }
    record["entries"].as_array_mut().unwrap().push(json!({"entry": "note", "words": probe(777)}));
    record["assumptions"] = json!([{"words": probe(778), "basis": {"state": "verified", "words": probe(779)}}]);
    let memo = draft(&record).unwrap();
    let printed = printed(&memo);
    assert!(printed.contains("#p(\"777\")") && printed.contains("@r778") && printed.contains("\\779"), "{printed}");
    assert_eq!(against(memo.pdf), Vec::<String>::new());
}

#[test]
fn two_thousand_rows_are_set_over_pages() {
    let started = Instant::now();
    let mut record = minimal().1.clone();
    let given = record["givens"][0].clone();
    for n in 0..2000 {
        let mut more = given.clone();
        more["item"]["symbol"] = json!(format!("x_{n}"));
        more["item"]["name"] = json!(format!("row {n} of many"));
        more["item"]["si"] = json!([f64::from(20_000 + n)]);
        more["item"]["shown"] = json!(format!("{} m", 20_000 + n));
        record["givens"].as_array_mut().unwrap().push(more);
    }
    let many = draft(&record).unwrap();
    assert!((40..400).contains(&many.pages), "{} sheets", many.pages);
    let words = printed(&many);
    assert!((0..2000).step_by(97).all(|n| words.contains(&format!("row {n} of many"))));
    assert!(words.matches("Evidence and source").count() > 30, "the head is on every sheet");
    assert_eq!(against(many.pdf), Vec::<String>::new());
    assert!(started.elapsed() < BOUNDED, "{:?}", started.elapsed());

    let started = Instant::now();
    let columns: Vec<Value> =
        (0..6).map(|c| json!({"heading": format!("column {c}"), "unit": "MPa", "numeric": true})).collect();
    let rows: Vec<Value> = (0..2000).map(|r| json!((0..6).map(|c| format!("{r}.{c}")).collect::<Vec<_>>())).collect();
    let table = json!({"step": "table", "table": {"caption": "Two thousand rows", "columns": columns, "rows": rows}});
    let mut record = minimal().1.clone();
    let card = first_card(&record);
    record.pointer_mut(&format!("{card}/explanation/steps")).unwrap().as_array_mut().unwrap().push(table);
    let long = draft(&record).unwrap();
    assert!(long.pages > 30, "{} sheets", long.pages);
    let words = printed(&long);
    assert!((0..2000).step_by(97).all(|r| words.contains(&format!("{r}.5"))));
    assert!(started.elapsed() < BOUNDED, "{:?}", started.elapsed());
    assert!(!long.against_issue.is_empty() && !against(long.pdf).is_empty(), "no card of the library has this table");
}

/// The pointer of the first card.
fn first_card(record: &Value) -> String {
    let entries = record["entries"].as_array().unwrap();
    let place = entries.iter().position(|entry| entry["entry"] == "card").expect("a card");
    format!("/entries/{place}/card")
}

#[test]
fn empty_lists_are_set_and_said_to_be_empty() {
    let mut record = minimal().1.clone();
    for list in ["givens", "data", "assumptions", "entries", "conclusions"] {
        record[list] = json!([]);
    }
    let empty = draft(&record).unwrap();
    for words in ["No conclusion is drawn", "states no given", "holds no calculation item", "No check was made"] {
        assert!(printed(&empty).contains(words), "{words}");
    }
    assert!(!empty.against_issue.is_empty());
    assert_eq!(against(empty.pdf), Vec::<String>::new(), "it is what it was when it was made: empty");

    // Every list of every card, one kind of list at a time; tables and matrices without rows or columns too.
    let mut names = Vec::new();
    collect_lists(&minimal().1["entries"], &mut names);
    for name in ["inputs", "results", "steps", "figures", "checks", "layers", "points", "rows", "columns", "symbols"] {
        assert!(names.iter().any(|n| n == name), "{name} is no list of a card: {names:?}");
    }
    for name in names {
        let mut record = minimal().1.clone();
        empty_lists(&mut record["entries"], &name);
        match is_record(&record) {
            true => {
                let memo = draft(&record).unwrap_or_else(|e| panic!("{name}: {e}"));
                assert!(!against(memo.pdf).is_empty(), "{name} is empty, and nothing says so");
            }
            false => assert!(draft(&record).is_err(), "{name}"),
        }
    }
}

fn collect_lists(value: &Value, names: &mut Vec<String>) {
    each_explained(value, &mut |key, v| {
        if v.as_array().is_some_and(|list| !list.is_empty()) && !names.iter().any(|n| n == key) {
            names.push(key.to_owned());
        }
    });
}

fn each_explained(value: &Value, seen: &mut impl FnMut(&str, &Value)) {
    match value {
        Value::Array(list) => list.iter().for_each(|v| each_explained(v, seen)),
        Value::Object(map) => {
            for (key, v) in map {
                if ["inputs", "outcome"].contains(&key.as_str()) && map.contains_key("explanation") {
                    continue;
                }
                seen(key, v);
                each_explained(v, seen);
            }
        }
        _ => {}
    }
}

fn empty_lists(value: &mut Value, name: &str) {
    match value {
        Value::Array(list) => list.iter_mut().for_each(|v| empty_lists(v, name)),
        Value::Object(map) => {
            let is_card = map.contains_key("explanation");
            for (key, v) in map {
                if is_card && ["inputs", "outcome"].contains(&key.as_str()) {
                    continue;
                }
                match key == name && v.is_array() {
                    true => *v = json!([]),
                    false => empty_lists(v, name),
                }
            }
        }
        _ => {}
    }
}

#[test]
fn a_newer_schema_is_refused() {
    for schema in [json!(2), json!(1000), json!(0), json!(1.5), json!("1"), Value::Null] {
        let said = draft(&with("/schema", schema.clone())).unwrap_err().to_string();
        assert!(said.contains("schema"), "{schema}: {said}");
    }
}

#[test]
fn an_altered_number_is_named_blocks_issue_and_is_refused() {
    let record = &minimal().1;
    let mut places = Vec::new();
    numbers(record, "", &mut places);
    let standing = stands_against(record);
    let mut altered = 0;
    for place in first_and_last(&places) {
        if ["/schema", "/version", "/bytes", "/difference"].iter().any(|end| place.ends_with(end)) {
            continue;
        }
        let number = record.pointer(&place).and_then(Value::as_f64).unwrap();
        let other = with(&place, json!(if number.abs() < 1e-6 { 1e3 } else { number * 1.001 }));
        if !is_record(&other) {
            continue;
        }
        altered += 1;
        let against = stands_against(&other);
        assert!(against.len() > standing.len(), "{place}: {against:#?}");
    }
    assert!(altered > 40, "{altered}");
    for place in ["/givens/1/item/si/0", &format!("{}/outcome", first_card(record))] {
        let place = places.iter().find(|p| p.starts_with(place)).expect("a number");
        let number = record.pointer(place).and_then(Value::as_f64).unwrap();
        let made = draft(&with(place, json!(number * 1.001))).unwrap();
        assert!(made.against_issue.len() > standing.len(), "{place}");
        assert!(!against(made.pdf).is_empty(), "{place}");
    }
    let shown = with("/givens/1/item/shown", json!("41.1 MPa"));
    let refused = memo(&shown, &MemoOptions::default().issued("A")).unwrap_err().to_string();
    assert!(refused.contains("S_v") && refused.contains("41.1 MPa"), "{refused}");
    assert!(against(draft(&shown).unwrap().pdf).iter().any(|line| line.contains("41.1 MPa")));
}

/// What the issue of a record is refused for.
fn stands_against(record: &Value) -> Vec<String> {
    match memo(record, &MemoOptions::default().issued("A")) {
        Err(hade_memo::Error::NotIssued { list, .. }) => list,
        other => panic!("{:?}", other.map(|memo| memo.pages)),
    }
}

fn numbers(value: &Value, place: &str, found: &mut Vec<String>) {
    match value {
        Value::Array(list) => list.iter().enumerate().for_each(|(i, v)| numbers(v, &format!("{place}/{i}"), found)),
        Value::Object(map) => map.iter().for_each(|(k, v)| numbers(v, &format!("{place}/{k}"), found)),
        Value::Number(_) => found.push(place.to_owned()),
        _ => {}
    }
}
