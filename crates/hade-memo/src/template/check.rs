//! Trying a template on everything that a memo can hold.

use std::path::Path;

use hade::card::{Card, Column, Step, Table};
use hade::sheet::{Basis, Entry, Record, Sheet, Source, trace};
use hade::units::Units as _;

use super::Template;
use crate::assemble::{MemoInput, rehearse};
use crate::error::{Error, Result};
use crate::project::{Date, Person, Project, Revision, Role, Status};

/// Typesets samples with the template of a folder: a card of every kind, a table over several sheets, a
/// wide table, unusual characters; and in all three states a short sheet and one with nothing in it. How many
/// sheets the largest took. `progress` is told before each sample which it is, and of how many.
///
/// # Errors
/// The first sample that the template does not take, with Typst's message; a warning counts as an error.
pub fn check_template(folder: &Path, mut progress: impl FnMut(usize, usize, &str)) -> Result<usize> {
    Template::in_folder(folder)?;
    let mut samples = vec![("every kind of result", sheet(usize::MAX), named(Status::Draft))];
    for status in [Status::Draft, Status::ForReview, Status::Issued] {
        samples.push(("a short sheet", sheet(3), named(status)));
        samples.push(("an empty sheet", Sheet::new("").record(), bare(status)));
    }
    let mut pages = 0;
    for (k, (what, record, project)) in samples.iter().enumerate() {
        let words = format!("{what}, {}", project.status.words());
        progress(k + 1, samples.len(), &words);
        let json = record.to_json()?;
        let input = MemoInput {
            record_json: &json,
            notebook: ("sample.ipynb", NOTEBOOK),
            folder: Path::new("."),
            project: Some(project),
        };
        let memo = rehearse(&input, folder)?;
        if let Some(warning) = memo.warnings.first() {
            return Err(Error::template(folder, format!("{words}: {warning}")));
        }
        pages = pages.max(memo.pages);
    }
    Ok(pages)
}

const NOTEBOOK: &[u8] = br#"{"cells":[],"metadata":{},"nbformat":4,"nbformat_minor":5}"#;

/// A sheet with everything, and a card of each of the first so many kinds.
fn sheet(kinds: usize) -> Record {
    let mut sheet =
        Sheet::new("Sample of everything: σ_θ′ ≤ 45° ± ½ ‰, “quoted” #let $x$ @ref *strong* <label> \\ [ { `raw` // ~");
    sheet.site("Sample site");
    sheet.place("Sample hole");
    sheet.purpose("To see that a template takes all that a memo can hold; every number is invented.");
    sheet.scope("No scope.");
    sheet.exclude("Everything else.");
    sheet.valid_for("Nothing.");
    sheet.void_if("Always.");
    sheet.leave_out("A log", "it is a sample");
    sheet
        .open_item("An item that is open, with words long enough to need a second line in a narrow column of a table.");
    sheet.because("Criterion", "a reason");
    sheet.given("S_v", "vertical stress", 66.9.mpa().give_or_take(1.3.mpa()), Source::measured("a log"));
    sheet.given("ρ_m", "a density without a source", 1.25.sg(), Source::measured(""));
    sheet.assume("something holds", Basis::verified("a report"));
    sheet.assume("something may hold", Basis::unverified("no core").to_be_verified_by("A. Person", "by a test"));
    sheet.note("A note between items.");
    sheet.conclude("A conclusion with p_ls = 31.4 MPa.");
    let mut record = sheet.record();
    let mut cards: Vec<Card> = Vec::new();
    for mut card in hade::samples::samples() {
        if cards.len() == kinds {
            break;
        }
        if cards.iter().any(|other| other.kind == card.kind) {
            continue;
        }
        if cards.is_empty() {
            let tables = [table("A table over several sheets", 4, 160), table("A wide table", 14, 12)];
            card.explanation.steps.extend(tables.map(|table| Step::Table { table }));
        }
        let earlier: Vec<&Card> = cards.iter().collect();
        let lineage = trace(&card, &record.givens, &record.data, &earlier);
        cards.push(card.clone());
        record.entries.push(Entry::Card { card: Box::new(card), lineage, added_by_sheet: false });
    }
    record
}

fn table(caption: &str, columns: usize, rows: usize) -> Table {
    Table {
        caption: caption.to_owned(),
        columns: (0..columns).map(|k| Column::number(&format!("column {k}"), "MPa")).collect(),
        rows: (0..rows).map(|r| (0..columns).map(|c| format!("{}.{r:02}", r * c)).collect()).collect(),
    }
}

const DAY: Date = Date { year: 2026, month: 6, day: 1 };

/// A project that states everything.
fn named(status: Status) -> Project {
    let person = |role| Person {
        role,
        name: format!("{} Person", role.word()),
        licence: "PE 12345".to_owned(),
        jurisdiction: "nowhere".to_owned(),
    };
    Project {
        number: "SAMPLE-0001".to_owned(),
        revision: "B".to_owned(),
        supersedes: "SAMPLE-0001 revision A".to_owned(),
        name: "A project with a long name, which must not run into the field beside it".to_owned(),
        client: "Nobody".to_owned(),
        people: Role::ALL.map(person).to_vec(),
        revisions: ["A", "B"]
            .map(|rev| Revision {
                rev: rev.to_owned(),
                date: DAY,
                what: "a change".to_owned(),
                by: "A. Person".to_owned(),
            })
            .to_vec(),
        ..bare(status)
    }
}

/// A project that states the date alone.
fn bare(status: Status) -> Project {
    Project { date: Some(DAY), status, ..Project::default() }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn copy_of(name: &str, whole: bool) -> tempfile::TempDir {
        let place = tempfile::tempdir().unwrap();
        super::super::copy_template(Path::new(name), place.path(), &place.path().join("copy"), whole).unwrap();
        place
    }

    #[test]
    fn the_templates_of_the_program_take_everything() {
        for (name, whole) in [("memo", false), ("summary", true)] {
            let place = copy_of(name, whole);
            assert!(check_template(&place.path().join("copy"), |_, _, _| {}).unwrap() > 1, "{name}");
        }
    }

    #[test]
    fn what_a_template_does_not_take_is_said_with_file_and_line() {
        let place = copy_of("summary", true);
        let (folder, entry) = (place.path().join("copy"), place.path().join("copy/summary.typ"));
        let sound = std::fs::read_to_string(&entry).unwrap();
        for (spoilt, words) in [
            (sound.replace("M.front.purpose", "M.front.purposes"), "purposes"),
            (format!("#set text(font: \"No Such Face\")\n{sound}"), "no such face"),
            (sound.replace("rt(i.headline)", "rt(i.headline).nothing"), "summary.typ:"),
            (sound.replace("#import \"lib.typ\": *", "#import \"lib.typ\": *\n#read(\"../secret\")"), "secret"),
        ] {
            std::fs::write(&entry, spoilt).unwrap();
            let said = check_template(&folder, |_, _, _| {}).unwrap_err().to_string();
            assert!(said.contains(words), "{words}: {said}");
        }
    }
}
