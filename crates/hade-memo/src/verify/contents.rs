//! What the memo holds: attached files against their hashes, and the record against the library.

use hade::card::{Card, Item};
use hade::sheet::{Record, misprints, trace};
use lopdf::Document;

use super::printed::printed_hashes;
use super::report::{Attached, Contents, Report};
use crate::attach::RECORD_NAME;
use crate::digest::sha256;
use crate::pdf;
use crate::replay::{by_library, judge};

const FILES: &str = "attached files";
const PRINT: &str = "printed hashes";
const RECORD: &str = "record";

/// Checks the contents of a memo as it was made.
pub(super) fn check(memo: &Document, report: &mut Report) -> Option<Contents> {
    let mut files = attached(memo, report)?;
    let Some(place) = files.iter().position(|file| file.name == RECORD_NAME) else {
        report.fails(FILES, format!("{RECORD_NAME} is not among them"));
        return None;
    };
    let json = files.remove(place);
    let text = std::str::from_utf8(&json.bytes).map_err(|e| e.to_string());
    let record = match text.and_then(|text| Record::from_json(text).map_err(|e| e.to_string())) {
        Ok(record) => record,
        Err(why) => {
            report.fails(RECORD, format!("it cannot be read: {why}"));
            return None;
        }
    };
    report.holds(RECORD, format!("schema {}, written by {}: \"{}\"", record.schema, record.program, record.title));
    let (data, rest) = data(&record, files, report);
    let [notebook] = rest.as_slice() else {
        let names: Vec<&str> = rest.iter().map(|file| file.name.as_str()).collect();
        report.fails(
            FILES,
            format!("beside record and data there must be just the notebook, and there is: {}", names.join(", ")),
        );
        return None;
    };
    print(memo, [&json, notebook], report);
    givens(&record, report);
    items(&record, report);
    lineage(&record, report);
    let notebook = (notebook.name.clone(), notebook.bytes.clone());
    Some(Contents { record, notebook, data })
}

/// A file of the memo.
struct File {
    name: String,
    bytes: Vec<u8>,
    sha256: String,
}

/// The attached files.
fn attached(memo: &Document, report: &mut Report) -> Option<Vec<File>> {
    let files = match pdf::attachments(memo) {
        Ok(files) => files,
        Err(why) => {
            report.fails(FILES, why);
            return None;
        }
    };
    let files: Vec<File> =
        files.into_iter().map(|(name, bytes)| File { sha256: sha256(&bytes), name, bytes }).collect();
    for (place, file) in files.iter().enumerate() {
        if files.iter().take(place).any(|other| other.name == file.name) {
            report.fails(FILES, format!("two have the name {}", file.name));
            return None;
        }
        let (name, sha256) = (file.name.clone(), file.sha256.clone());
        report.attachments.push(Attached { name, bytes: file.bytes.len(), sha256 });
    }
    Some(files)
}

/// Finds the data files of the record among the attached files, each by its hash, and gives the files
/// that are none.
fn data(record: &Record, files: Vec<File>, report: &mut Report) -> (Vec<(String, Vec<u8>)>, Vec<File>) {
    let mut found = Vec::new();
    for file in &record.data {
        match files.iter().find(|attached| attached.sha256 == file.sha256) {
            Some(attached) => found.push((file.path.clone(), attached.bytes.clone())),
            None => report.fails(
                FILES,
                format!("none has the SHA-256 that the record states for the data file {}, {}", file.path, file.sha256),
            ),
        }
    }
    if found.len() == record.data.len() {
        report.holds(
            FILES,
            match found.len() {
                0 => "the record and the notebook".to_owned(),
                n => format!("the record, the notebook and {n} data files with the SHA-256 that the record states"),
            },
        );
    }
    let rest = files.into_iter().filter(|file| !record.data.iter().any(|data| data.sha256 == file.sha256)).collect();
    (found, rest)
}

/// Holds record and notebook against the hashes that the sheets print.
fn print(memo: &Document, files: [&File; 2], report: &mut Report) {
    let printed = printed_hashes(memo);
    for File { name, sha256, .. } in files {
        match printed.iter().find(|(found, _)| found == sha256) {
            Some((_, sheet)) => report.holds(PRINT, format!("sheet {sheet} prints the SHA-256 of the attached {name}")),
            None => report.fails(PRINT, format!("no sheet prints the SHA-256 of the attached {name}, {sha256}")),
        }
    }
}

/// Writes every given again from its number.
fn givens(record: &Record, report: &mut Report) {
    let cards = record.cards();
    let inputs: Vec<&Item> = cards.iter().flat_map(|(card, _)| &card.explanation.inputs).collect();
    let wrong: Vec<String> = record.givens.iter().flat_map(|given| misprints(given, &inputs)).collect();
    match wrong.is_empty() {
        true => report.holds("givens", format!("{} print the values computed with", record.givens.len())),
        false => wrong.into_iter().for_each(|words| report.fails("givens", words)),
    }
}

/// Computes every item again.
fn items(record: &Record, report: &mut Report) {
    let cards = record.cards();
    let mut checks = 0;
    let mut good = true;
    for (number, (card, _)) in cards.iter().enumerate() {
        for line in judge(card, by_library).checks {
            checks += 1;
            if !line.passed {
                good = false;
                let allowed =
                    if line.allowed.is_empty() { String::new() } else { format!(" (allowed {})", line.allowed) };
                report.fails(
                    format!("item {}, {}", number + 1, card.title()),
                    format!("{}: {}{allowed}", line.what, line.difference),
                );
            }
        }
    }
    if good {
        report.holds(
            "calculation",
            format!("{} items computed again from their inputs, {checks} checks: all agree", cards.len()),
        );
    }
}

/// Traces the origin of every input again.
fn lineage(record: &Record, report: &mut Report) {
    const LINEAGE: &str = "origins of inputs";
    let cards: Vec<&Card> = record.cards().into_iter().map(|(card, _)| card).collect();
    let mut inputs = 0;
    for (number, (card, stated)) in record.cards().into_iter().enumerate() {
        let traced = trace(card, &record.givens, &record.data, cards.get(..number).unwrap_or_default());
        if traced != stated {
            return report
                .fails(LINEAGE, format!("item {}, {}: the record states other ones", number + 1, card.title()));
        }
        inputs += traced.len();
    }
    report.holds(LINEAGE, format!("{inputs} inputs traced again: the record states the same"));
    for (title, input, _) in record.unknown_inputs() {
        report.note(LINEAGE, format!("{title}: {input} is nowhere on the sheet, as the memo says"));
    }
}
