//! The memo as the template sees it: every text final, every number rounded, every list in order.
//! The template lays it out and decides nothing else.

mod closing;
mod front;
mod item;
pub(crate) mod number;
mod references;
mod table;
mod text;

pub(crate) use front::NOT_STATED;

use std::collections::{BTreeMap, BTreeSet};

use hade::card::Card;
use hade::sheet::{Entry, Origin, Record};
use serde::Serialize;

use crate::attach::Attachment;
use crate::cautions::{conventions, for_memo};
use crate::changes::Changes;
use crate::error::Result;
use crate::project::{Date, Project};
use crate::replay::Judged;
use crate::template::Template;

/// Bytes of a text that still fits a sheet when it stands in a narrow column.
const LONGEST_IN_WHOLE_ROW: usize = 900;

/// Everything the view is made of.
pub(crate) struct Sources<'a> {
    /// The record, cleaned.
    pub record: &'a Record,
    /// Its cards in order.
    pub cards: &'a [&'a Card],
    /// The origin of each input of each card, traced again.
    pub lineage: &'a [Vec<Origin>],
    /// Each card, judged.
    pub judged: &'a [Judged],
    /// The project file.
    pub project: &'a Project,
    /// The document's date.
    pub date: Date,
    /// The attachments.
    pub attachments: &'a [Attachment],
    /// What stands against issue.
    pub against: &'a [String],
    /// What changed since an earlier memo.
    pub changes: Option<&'a Changes>,
    /// Bytes of the longest text.
    pub longest: usize,
    /// The template.
    pub template: &'a Template,
    /// Its settings.
    pub settings: BTreeMap<String, String>,
}

/// The memo's files for the template.
pub(crate) struct View {
    /// `memo.json`.
    pub memo: serde_json::Value,
    /// `formulas.json`: the library's own mathematics, the only text that is evaluated.
    pub formulas: serde_json::Value,
    /// The figures, by file name.
    pub figures: BTreeMap<String, String>,
    /// What the reader of the terminal should know.
    pub warnings: Vec<String>,
}

/// One entry of the work.
#[derive(Serialize)]
#[serde(tag = "entry", rename_all = "snake_case")]
enum EntryView {
    Note { words: Vec<text::Run> },
    Item(Box<item::ItemView>),
}

#[derive(Serialize)]
struct Whole {
    memo: front::MemoView,
    /// Whether a row of a table can be kept on one sheet: no text is longer than a sheet.
    whole_rows: bool,
    settings: BTreeMap<String, String>,
    against: Vec<Vec<text::Run>>,
    /// What came out against the plan or the observations, and how many more such lines there are.
    warnings: Vec<front::WarningView>,
    more_warnings: usize,
    conclusions: Vec<Vec<text::Run>>,
    changes: Option<front::ChangesView>,
    front: front::FrontView,
    choices: Vec<front::ChoiceView>,
    givens: Vec<front::GivenView>,
    data: Vec<front::DataView>,
    assumptions: Vec<front::AssumptionView>,
    conventions: Vec<[String; 2]>,
    entries: Vec<EntryView>,
    checks: Vec<closing::CheckView>,
    cautions: Vec<closing::CautionView>,
    /// Title and reason of each caution that the project withholds.
    withheld: Vec<[String; 2]>,
    references: Vec<references::ReferenceView>,
    revisions: Vec<closing::RevisionView>,
    program: Vec<[String; 2]>,
    attachments: Vec<closing::AttachmentView>,
    signoff: Vec<closing::SignView>,
}

/// Functions stay with what they are of.
fn unbroken(text: &str) -> String {
    text.replace("sin ", "sin\u{a0}").replace("cos ", "cos\u{a0}")
}

/// Makes the view.
pub(crate) fn make(sources: &Sources<'_>) -> Result<View> {
    let record = sources.record;
    let topics: BTreeSet<&str> =
        sources.cards.iter().flat_map(|c| c.explanation.topics.iter().map(String::as_str)).collect();
    let mut maker = item::Maker::new(sources);
    let mut entries = Vec::new();
    let mut number = 0;
    for entry in &record.entries {
        entries.push(match entry {
            Entry::Note { words } => EntryView::Note { words: text::rich(words) },
            Entry::Card { .. } => {
                number += 1;
                match maker.item(number) {
                    Some(item) => EntryView::Item(Box::new(item)),
                    None => continue,
                }
            }
        });
    }
    let item::Made { formulas, figures, references, warnings } = maker.done();
    let (cautions, withheld) = for_memo(&topics, &sources.project.cautions, &sources.project.withhold)?;
    let (warnings_shown, more_warnings) = front::warnings(sources);
    let whole = Whole {
        memo: front::memo(sources),
        whole_rows: sources.longest <= LONGEST_IN_WHOLE_ROW,
        settings: sources.settings.clone(),
        against: sources.against.iter().map(|s| text::rich(s)).collect(),
        warnings: warnings_shown,
        more_warnings,
        conclusions: record.conclusions.iter().map(|s| text::rich(s)).collect(),
        changes: sources.changes.map(front::changes),
        front: front::front(&record.front),
        choices: front::choices(sources),
        givens: front::givens(sources),
        data: front::data(sources),
        assumptions: front::assumptions(record),
        conventions: conventions(&topics)?.into_iter().map(|c| [c.title, unbroken(&c.text)]).collect(),
        entries,
        checks: closing::checks(sources),
        cautions: cautions.iter().map(closing::caution).collect(),
        withheld: withheld.into_iter().map(|w| [w.title, text::plain(&w.reason)]).collect(),
        references,
        revisions: closing::revisions(sources.project),
        program: closing::program(sources),
        attachments: sources.attachments.iter().map(closing::attachment).collect(),
        signoff: closing::signoff(sources.project),
    };
    let broken = |e: serde_json::Error| crate::error::Error::Defect { what: "the memo's view", why: e.to_string() };
    Ok(View {
        memo: serde_json::to_value(&whole).map_err(broken)?,
        formulas: serde_json::to_value(&formulas).map_err(broken)?,
        figures,
        warnings,
    })
}
