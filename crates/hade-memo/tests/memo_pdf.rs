//! The way from a record to a PDF: what is printed, what is attached, what is refused.

mod support;

use std::path::Path;

use hade::card::Check;
use hade::sheet::{Entry, Record};
use hade_memo::{Memo, MemoOptions, Project};
use lopdf::{Dictionary, Document, Object};
use sha2::{Digest, Sha256};
use support::{AGREES, PROBE, SURVEY, folder, memo, project, record};

/// The words of each page, letters only: how words are spaced in a PDF is the reader's guess.
fn pages(pdf: &[u8]) -> Vec<String> {
    let document = Document::load_mem(pdf).unwrap();
    document.get_pages().keys().map(|page| squeezed(&document.extract_text(&[*page]).unwrap())).collect()
}

fn squeezed(text: &str) -> String {
    text.chars().filter(|c| !c.is_whitespace() && *c != '\u{200b}').collect()
}

#[track_caller]
fn assert_printed(pages: &[String], words: &str) {
    assert!(pages.iter().any(|p| p.contains(&squeezed(words))), "\"{words}\" is on no page:\n{}", pages.join("\n\n"));
}

fn made(name: &str, change: impl FnOnce(&mut Record)) -> Memo {
    let folder = folder(name);
    let mut record = record(&folder);
    change(&mut record);
    let json = record.to_json().unwrap();
    memo(&json, &folder, Some(&project()), &MemoOptions::default(), AGREES).unwrap()
}

fn refused(name: &str, change: impl FnOnce(&mut Record)) -> String {
    let folder = folder(name);
    let mut record = record(&folder);
    change(&mut record);
    let json = record.to_json().unwrap();
    memo(&json, &folder, Some(&project()), &MemoOptions::default(), AGREES).unwrap_err().to_string()
}

/// Files of a PDF: name, relationship, media type, bytes.
fn attached(pdf: &[u8]) -> Vec<(String, String, String, Vec<u8>)> {
    let document = Document::load_mem(pdf).unwrap();
    let name = |d: &Dictionary, key: &[u8]| String::from_utf8(d.get(key).unwrap().as_name().unwrap().to_vec()).unwrap();
    document
        .objects
        .values()
        .filter_map(|object| object.as_dict().ok())
        .filter(|d| d.get(b"Type").and_then(Object::as_name).is_ok_and(|t| t == b"Filespec"))
        .map(|d| {
            let file = d.get(b"EF").unwrap().as_dict().unwrap().get(b"F").unwrap().as_reference().unwrap();
            let stream = document.get_object(file).unwrap().as_stream().unwrap();
            let bytes = stream.decompressed_content().unwrap_or_else(|_| stream.content.clone());
            let title = lopdf::decode_text_string(d.get(b"UF").unwrap()).unwrap();
            assert!(d.get(b"Desc").is_ok(), "{title} says what it is");
            (title, name(d, b"AFRelationship"), name(&stream.dict, b"Subtype"), bytes)
        })
        .collect()
}

#[test]
fn everything_a_checker_needs_is_printed() {
    let memo = made("everything", |_| {});
    std::fs::write(Path::new(env!("CARGO_TARGET_TMPDIR")).join("everything/memo.pdf"), &memo.pdf).unwrap();
    let pages = pages(&memo.pdf);
    assert_eq!(pages.len(), memo.pages);
    for (i, page) in pages.iter().enumerate() {
        assert!(page.contains(&format!("Sheet{}of{}", i + 1, pages.len())), "{page}");
        assert!(page.contains("KF3-GM-001·revisionB") && page.contains("DRAFT"), "{page}");
    }
    for words in [
        "Kestrel Flat Energy Ltd",
        "Recommended static mud weight at 2950 m TVD: 1.28 sg to 1.49 sg",
        "depths from 2900 m to 3000 m TVD",
        "water-based mud, open less than five days",
        "leak-off test of KF-2 at 1210 m",
        "closure of cycle 2",
        "NO SOURCE",
        "not used",
        "HOLD",
        "To be verified by: C. Approver. How: image log of the next section.",
        "Compression is positive",
        "Item 1: Vertical stress from the density log",
        "item 1: vertical stress",
        "NOT ON THE SHEET",
        "washed out, filled",
        "−0.643582",
        "7.1 × 10⁻¹⁵ MPa",
        "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, eq. 1.5, p. 8 (items 1, 2)",
        "Short-term wall, undrained, first pass",
        "core tests of the shale are expected in June",
        "first issue for comment",
        "PE 54321",
        "PDF/A-3a and PDF/UA-1 as enforced by the exporter",
    ] {
        assert_printed(&pages, words);
    }
    let json = record(&folder("everything-hash")).to_json().unwrap();
    let hash: String = Sha256::digest(json.as_bytes()).iter().map(|b| format!("{b:02x}")).collect();
    assert_printed(&pages, &hash);
}

#[test]
fn what_stands_against_issue_is_on_page_1_and_handed_back() {
    let memo = made("against", |_| {});
    let first = &pages(&memo.pdf)[0];
    for words in [
        "Item 3 (Limits of the wall): failed check",
        "pore pressure that never was stated = 31.23 MPa is not on the sheet",
        "Given c (cohesion of the shale) has no source",
        "is a hold without an owner",
    ] {
        assert!(memo.against_issue.iter().any(|a| a.contains(words)), "{:#?}", memo.against_issue);
        assert!(first.contains(&squeezed(words)), "{first}");
    }
}

#[test]
fn what_came_out_against_the_plan_is_on_page_1_and_at_its_item() {
    let said = "the planned mud is 2.34 MPa below the bottom, #panic()";
    let memo = made("warned", |r| {
        if let Some(Entry::Card { card, .. }) = r.entries.first_mut() {
            card.warnings = (0..14).map(|k| format!("{k}: {said}")).collect();
        }
    });
    let pages = pages(&memo.pdf);
    for words in
        ["What came out against the plan or the observations (14)", "Item 1: 11:", "2 more stand with their items."]
    {
        assert!(pages[0].contains(&squeezed(words)), "{words} in\n{}", pages[0]);
    }
    assert!(pages[0].contains(&squeezed(said)));
    assert!(pages.iter().skip(1).any(|page| page.contains(&squeezed(&format!("13: {said}")))));
    let silent = made("not-warned", |_| {});
    assert_eq!(memo.against_issue, silent.against_issue, "it hinders no issue");
    assert!(!self::pages(&silent.pdf)[0].contains(&squeezed("What came out against")));
}

#[test]
fn text_from_a_record_is_set_as_it_is() {
    let pages = pages(&made("literal", |_| {}).pdf);
    let shown = pages.iter().filter(|p| p.contains(&squeezed(PROBE))).count();
    assert!(shown >= 3, "{}", pages.join("\n"));
}

#[test]
fn the_same_inputs_give_the_same_bytes() {
    assert!(made("same-1", |_| {}).pdf == made("same-2", |_| {}).pdf);
    let other = made("same-3", |r| r.conclusions.push("one more".to_owned()));
    assert!(other.pdf != made("same-4", |_| {}).pdf);
}

#[test]
fn record_notebook_and_data_are_attached() {
    let memo = made("attached", |_| {});
    let json = record(&folder("attached-again")).to_json().unwrap();
    let files = attached(&memo.pdf);
    let of = |name: &str| files.iter().find(|f| f.0 == name).unwrap_or_else(|| panic!("{name} is attached"));
    assert_eq!(of("record.json").3, json.as_bytes());
    assert_eq!((of("record.json").1.as_str(), of("record.json").2.as_str()), ("Source", "application/json"));
    assert_eq!(of("kf3-survey.csv").3, SURVEY.as_bytes());
    assert_eq!((of("kf3-survey.csv").1.as_str(), of("kf3-survey.csv").2.as_str()), ("Data", "text/csv"));
    let notebook = String::from_utf8(of("kf3.ipynb").3.clone()).unwrap();
    assert!(!notebook.contains("1.2 s") && !notebook.contains("execute_reply") && notebook.contains("\"sheet\""));
    assert_eq!(files.len(), 3);
}

#[test]
fn no_annotation_is_written_but_three_signature_fields() {
    let document = Document::load_mem(&made("annotations", |_| {}).pdf).unwrap();
    let mut names = Vec::new();
    for page in document.get_pages().values() {
        for field in document.get_page_annotations(*page).unwrap() {
            assert_eq!(field.get(b"FT").and_then(lopdf::Object::as_name).unwrap(), b"Sig");
            names.push(lopdf::decode_text_string(field.get(b"T").unwrap()).unwrap());
        }
    }
    assert_eq!(names, ["prepared", "checked", "approved"]);
}

#[test]
fn an_item_that_cannot_be_computed_again_stands_against_issue_and_evaluates_nothing() {
    let folder = folder("unknown");
    let mut record = record(&folder);
    for entry in &mut record.entries {
        if let Entry::Card { card, .. } = entry {
            for formula in &mut card.explanation.method.formulas {
                formula.math = "#panic(\"evaluated\")".to_owned();
            }
        }
    }
    let json = record.to_json().unwrap();
    let input = hade_memo::MemoInput {
        record_json: &json,
        notebook: ("n.ipynb", support::NOTEBOOK),
        folder: &folder,
        project: Some(&project()),
    };
    let memo = hade_memo::build(&input, &MemoOptions::default()).unwrap();
    assert!(
        memo.against_issue.iter().any(|a| a.contains("Item 1") && a.contains("not possible")),
        "{:#?}",
        memo.against_issue
    );
    assert_printed(&pages(&memo.pdf), "S′ = Q S Qᵀ");
}

#[test]
fn even_the_library_cannot_smuggle_code_into_a_formula() {
    let memo = made("smuggled", |r| {
        if let Some(Entry::Card { card, .. }) = r.entries.first_mut() {
            card.explanation.method.formulas[0].math = "std.read(\"memo.json\")".to_owned();
        }
    });
    assert!(memo.warnings.iter().any(|w| w.contains("item 1") && w.contains("std")), "{:?}", memo.warnings);
}

#[test]
fn a_memo_of_nothing_says_what_is_missing() {
    let folder = folder("nothing");
    let mut empty = record(&folder);
    empty.title.clear();
    empty.front = Default::default();
    empty.givens.clear();
    empty.data.clear();
    empty.assumptions.clear();
    empty.entries.clear();
    empty.conclusions.clear();
    let project = Project::parse("[memo]\ndate = 2026-01-02\n", Path::new("hade.toml")).unwrap();
    let memo = memo(&empty.to_json().unwrap(), &folder, Some(&project), &MemoOptions::default(), AGREES).unwrap();
    std::fs::write(folder.join("memo.pdf"), &memo.pdf).unwrap();
    for words in [
        "No conclusion is drawn",
        "memo number, revision, project, client, site, hole",
        "prepared, checked, approved",
        "range of validity",
        "no calculation item",
    ] {
        assert!(memo.against_issue.iter().any(|a| a.contains(words)), "{words}: {:#?}", memo.against_issue);
    }
}

#[test]
fn two_thousand_rows_and_one_column_too_many_are_typeset() {
    let memo = made("long", |r| {
        let Some(Entry::Card { card, .. }) = r.entries.first_mut() else { return };
        let Some(hade::card::Step::Table { table }) = card.explanation.steps.get_mut(1) else { return };
        table.rows = (0..2000)
            .map(|i| {
                vec![
                    i.to_string(),
                    format!("{i}.5"),
                    "-1.25".to_owned(),
                    "3".to_owned(),
                    "x".to_owned(),
                    "extra".to_owned(),
                ]
            })
            .collect();
    });
    assert!(memo.pages > 40);
}

#[test]
fn letter_paper_is_a_setting() {
    let folder = folder("letter");
    let json = record(&folder).to_json().unwrap();
    let project =
        Project::parse(&format!("{}\n[template]\npaper = \"us-letter\"\n", support::PROJECT), Path::new("hade.toml"))
            .unwrap();
    let memo = memo(&json, &folder, Some(&project), &MemoOptions::default(), AGREES).unwrap();
    std::fs::write(folder.join("memo.pdf"), &memo.pdf).unwrap();
    let document = Document::load_mem(&memo.pdf).unwrap();
    let page = document.get_pages()[&1];
    let size =
        document.get_dictionary(page).unwrap().get(b"MediaBox").unwrap().as_array().unwrap()[2].as_float().unwrap();
    assert!((size - 612.0).abs() < 0.5, "{size}");
}

#[test]
fn without_a_date_there_is_no_memo() {
    let folder = folder("no-date");
    let json = record(&folder).to_json().unwrap();
    let message = memo(&json, &folder, None, &MemoOptions::default(), AGREES).unwrap_err().to_string();
    assert!(message.contains("hade.toml"), "{message}");
}

#[test]
fn a_newer_record_is_refused() {
    let message = refused("newer", |r| r.schema = 99);
    assert!(message.contains("schema is 99"), "{message}");
}

#[test]
fn a_character_no_font_has_is_refused_with_its_place() {
    let message = refused("glyph", |r| r.conclusions[1] = "地".to_owned());
    assert!(message.contains("/conclusions/1") && message.contains("U+5730"), "{message}");
}

#[test]
fn a_megabyte_in_one_text_is_refused_with_its_place() {
    let message = refused("megabyte", |r| r.front.purpose = "x".repeat(1 << 20));
    assert!(message.contains("/front/purpose"), "{message}");
}

#[test]
fn data_that_changed_or_went_is_named() {
    let folder = folder("data");
    let json = record(&folder).to_json().unwrap();
    let file = folder.join("data/kf3-survey.csv");
    for (bytes, words) in [
        (Some("md_m,inc_deg,azi_deg\n0,0,0\n1500,12.5,118\n2950,42,121\n"), "SHA-256"),
        (Some("short"), "SHA-256"),
        (None, "no such file"),
    ] {
        match bytes {
            Some(bytes) => std::fs::write(&file, bytes).unwrap(),
            None => std::fs::remove_file(&file).unwrap(),
        }
        let message = memo(&json, &folder, Some(&project()), &MemoOptions::default(), AGREES).unwrap_err().to_string();
        assert!(message.contains("data/kf3-survey.csv") && message.contains(words), "{message}");
    }
}

#[test]
fn a_check_is_judged_again() {
    let memo = made("liar", |r| {
        if let Some(Entry::Card { card, .. }) = r.entries.first_mut() {
            card.checks = vec![Check { difference: Some(5.0), passed: true, ..card.checks[0].clone() }];
        }
    });
    assert!(
        memo.against_issue.iter().any(|a| a.contains("Item 1") && a.contains("failed check")),
        "{:#?}",
        memo.against_issue
    );
}

#[test]
fn a_lineage_that_was_altered_stands_against_issue() {
    let memo = made("lineage", |r| {
        for entry in &mut r.entries {
            if let Entry::Card { lineage, .. } = entry {
                lineage.fill(hade::sheet::Origin::Choice);
            }
        }
    });
    assert!(memo.against_issue.iter().any(|a| a.contains("traced again")), "{:#?}", memo.against_issue);
    assert_printed(&pages(&memo.pdf), "NOT ON THE SHEET");
}
