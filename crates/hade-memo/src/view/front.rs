//! What stands before the work: title block, basis, givens, data, assumptions.

use hade::card::Standing;
use hade::sheet::{Basis, Frontmatter, Grade, Origin, Record};
use serde::Serialize;

use super::Sources;
use super::text::{Run, Symbol, plain, rich, shortened, symbol};
use crate::changes::{Change, Changes};
use crate::project::Status;

/// What is printed where nothing was stated.
pub(crate) const NOT_STATED: &str = "not stated";

/// A field of the title block.
#[derive(Serialize)]
pub(crate) struct FieldView {
    name: &'static str,
    value: String,
    stated: bool,
}

/// What the memo is called.
#[derive(Serialize)]
pub(crate) struct MemoView {
    title: String,
    running_title: String,
    document_title: String,
    author: String,
    number: String,
    revision: String,
    date: String,
    status: &'static str,
    watermark: &'static str,
    record_hash: String,
    fields: Vec<FieldView>,
}

fn stated(text: &str) -> String {
    if text.trim().is_empty() { NOT_STATED.to_owned() } else { plain(text) }
}

fn first<'a>(one: &'a str, other: &'a str) -> &'a str {
    if one.trim().is_empty() { other } else { one }
}

/// The title block. What the sheet says of the site goes before what the project file says; of the hole the
/// project file's name and the sheet's place stand beside each other where they differ.
pub(crate) fn memo(sources: &Sources<'_>) -> MemoView {
    let (record, project) = (sources.record, sources.project);
    let title = first(&project.title, &record.title);
    let date = sources.date.to_string();
    let status = project.status.words();
    let (hole, place) = (project.hole.trim(), record.front.place.trim());
    let mut fields: Vec<(&'static str, &str)> = vec![
        ("Memo no.", &project.number),
        ("Revision", &project.revision),
        ("Date", &date),
        ("Status", status),
        ("Project", &project.name),
        ("Client", &project.client),
        ("Site", first(&record.front.site, &project.site)),
        ("Hole", first(hole, place)),
    ];
    if !hole.is_empty() && !place.is_empty() && hole != place {
        fields.push(("Place", place));
    }
    if !project.supersedes.trim().is_empty() {
        fields.push(("Supersedes", &project.supersedes));
    }
    let number = stated(&project.number);
    let revision = stated(&project.revision);
    MemoView {
        title: if title.trim().is_empty() { "Calculation without a title".to_owned() } else { plain(title) },
        running_title: shortened(title, 80),
        document_title: format!("{number} revision {revision}: {}", shortened(title, 200)),
        author: project.person(crate::project::Role::Prepared).map(|p| shortened(&p.name, 80)).unwrap_or_default(),
        number,
        revision,
        date: date.clone(),
        status,
        watermark: match project.status {
            Status::Draft => "DRAFT",
            Status::ForReview => "FOR REVIEW",
            Status::Issued => "",
        },
        record_hash: sources.attachments.first().map(|a| a.sha256.clone()).unwrap_or_default(),
        fields: fields
            .into_iter()
            .map(|(name, value)| FieldView { name, value: stated(value), stated: !value.trim().is_empty() })
            .collect(),
    }
}

/// What the sheet says about itself.
#[derive(Serialize)]
pub(crate) struct FrontView {
    purpose: String,
    scope: String,
    exclusions: Vec<String>,
    valid_for: Vec<String>,
    void_if: Vec<String>,
    left_out: Vec<[String; 2]>,
    open_items: Vec<String>,
    design_basis: Vec<[String; 2]>,
}

/// The sheet's words about itself.
pub(crate) fn front(front: &Frontmatter) -> FrontView {
    let list = |words: &[String]| words.iter().map(|w| plain(w)).collect();
    let pairs = |pairs: &[(String, String)]| pairs.iter().map(|(a, b)| [plain(a), plain(b)]).collect();
    FrontView {
        purpose: stated(&front.purpose),
        scope: stated(&front.scope),
        exclusions: list(&front.exclusions),
        valid_for: list(&front.valid_for),
        void_if: list(&front.void_if),
        left_out: pairs(&front.left_out),
        open_items: list(&front.open_items),
        design_basis: pairs(&front.design_basis),
    }
}

/// What changed since an earlier memo.
#[derive(Serialize)]
pub(crate) struct ChangesView {
    since: String,
    givens: Vec<[Vec<Run>; 3]>,
    outcomes: Vec<[Vec<Run>; 3]>,
    conclusions: Vec<[Vec<Run>; 3]>,
}

/// The changes, in tables of what, before, after.
pub(crate) fn changes(changes: &Changes) -> ChangesView {
    let rows = |list: &[Change]| {
        let or = |value: &Option<String>, none: &str| rich(value.as_deref().unwrap_or(none));
        list.iter().map(|c| [rich(&c.what), or(&c.before, "– (new)"), or(&c.after, "– (gone)")]).collect()
    };
    ChangesView {
        since: plain(&changes.since),
        givens: rows(&changes.givens),
        outcomes: rows(&changes.outcomes),
        conclusions: rows(&changes.conclusions),
    }
}

/// What came out against the plan or the observations, by item.
#[derive(Serialize)]
pub(crate) struct WarningView {
    item: usize,
    words: Vec<Run>,
}

/// Most warnings of the first sheet; the others stand with their items.
const MOST_WARNINGS: usize = 12;

/// The warnings of all items, in order, and how many more there are.
pub(crate) fn warnings(sources: &Sources<'_>) -> (Vec<WarningView>, usize) {
    let all = sources.cards.iter().enumerate();
    let all = all.flat_map(|(i, card)| card.warnings.iter().map(move |words| (i + 1, words)));
    let shown: Vec<_> = all.clone().take(MOST_WARNINGS).collect();
    let more = all.count() - shown.len();
    (shown.into_iter().map(|(item, words)| WarningView { item, words: rich(words) }).collect(), more)
}

/// A choice of the engineer.
#[derive(Serialize)]
pub(crate) struct ChoiceView {
    symbol: Symbol,
    name: Vec<Run>,
    value: Vec<Run>,
    items: String,
}

/// The choices that went into the items, each once.
pub(crate) fn choices(sources: &Sources<'_>) -> Vec<ChoiceView> {
    let mut found: Vec<(&hade::card::Item, Vec<usize>)> = Vec::new();
    for (i, card) in sources.cards.iter().enumerate() {
        for input in card.explanation.inputs.iter().filter(|input| input.standing == Standing::Choice) {
            match found.iter_mut().find(|(known, _)| known.name == input.name && known.shown == input.shown) {
                Some((_, items)) => {
                    if !items.contains(&(i + 1)) {
                        items.push(i + 1);
                    }
                }
                None => found.push((input, vec![i + 1])),
            }
        }
    }
    found
        .into_iter()
        .map(|(input, items)| ChoiceView {
            symbol: symbol(&input.symbol),
            name: rich(&input.name),
            value: rich(&input.shown),
            items: numbers(&items),
        })
        .collect()
}

/// A given.
#[derive(Serialize)]
pub(crate) struct GivenView {
    symbol: Symbol,
    name: Vec<Run>,
    value: Vec<Run>,
    give_or_take: String,
    grade: &'static str,
    sourced: bool,
    source: String,
    used_in: String,
}

/// The givens, and in which items each is used.
pub(crate) fn givens(sources: &Sources<'_>) -> Vec<GivenView> {
    sources
        .record
        .givens
        .iter()
        .map(|given| {
            let (symbol_of, file) = (&given.item.symbol, &given.source.file);
            let used = users(sources, |origin| matches!(origin, Origin::Given { symbol } if symbol == symbol_of));
            // A whole table is an input by the file that it stands in.
            let by_file = users(sources, |origin| matches!(origin, Origin::Data { path } if path == file));
            GivenView {
                symbol: symbol(&given.item.symbol),
                name: rich(&given.item.name),
                value: rich(&given.item.shown),
                give_or_take: plain(&given.give_or_take),
                grade: given.source.grade.word(),
                sourced: given.source.grade != Grade::Unsourced,
                source: match given.source.file.as_str() {
                    "" => plain(&given.source.words),
                    file => plain(&format!("{}; file {file}", given.source.words)),
                },
                used_in: match (used.as_slice(), by_file.as_slice()) {
                    ([], [_, ..]) if given.item.si.len() > 1 => format!("{}, by the file", numbers(&by_file)),
                    _ => numbers(&used),
                },
            }
        })
        .collect()
}

/// A data file.
#[derive(Serialize)]
pub(crate) struct DataView {
    path: String,
    about: String,
    size: String,
    sha256: String,
    used_in: String,
}

/// The data files.
pub(crate) fn data(sources: &Sources<'_>) -> Vec<DataView> {
    sources
        .record
        .data
        .iter()
        .map(|file| DataView {
            path: plain(&file.path),
            about: plain(&file.about),
            size: bytes(file.bytes),
            sha256: crate::clean::lossy(&file.sha256),
            used_in: uses(sources, &file.path),
        })
        .collect()
}

/// What rests on a file: the items that read it, and the givens that were taken from it.
fn uses(sources: &Sources<'_>, file: &str) -> String {
    let items = users(sources, |o| matches!(o, Origin::Data { path } if path == file));
    let givens: Vec<String> = sources
        .record
        .givens
        .iter()
        .filter(|given| given.source.file == file)
        .map(|given| plain(&given.item.symbol).replacen('_', "\u{2009}", 1))
        .collect();
    match (items.as_slice(), givens.as_slice()) {
        (_, []) => numbers(&items),
        ([], _) => format!("given {}", givens.join(", ")),
        _ => format!("{}; given {}", numbers(&items), givens.join(", ")),
    }
}

/// An assumption.
#[derive(Serialize)]
pub(crate) struct AssumptionView {
    words: Vec<Run>,
    verified: bool,
    basis: String,
    owner: String,
    how: String,
}

/// The assumptions; those that are not verified are holds.
pub(crate) fn assumptions(record: &Record) -> Vec<AssumptionView> {
    record
        .assumptions
        .iter()
        .map(|assumption| {
            let words = rich(&assumption.words);
            match &assumption.basis {
                Basis::Verified { words: basis } => AssumptionView {
                    words,
                    verified: true,
                    basis: plain(basis),
                    owner: String::new(),
                    how: String::new(),
                },
                Basis::Unverified { words: basis, owner, how } => AssumptionView {
                    words,
                    verified: false,
                    basis: plain(basis),
                    owner: if owner.trim().is_empty() { "not named".to_owned() } else { plain(owner) },
                    how: stated(how),
                },
            }
        })
        .collect()
}

/// The items that have an input of such an origin.
fn users(sources: &Sources<'_>, wanted: impl Fn(&Origin) -> bool) -> Vec<usize> {
    sources.lineage.iter().enumerate().filter(|(_, origins)| origins.iter().any(&wanted)).map(|(i, _)| i + 1).collect()
}

/// Item numbers in words.
fn numbers(items: &[usize]) -> String {
    match items {
        [] => "not used".to_owned(),
        _ => items.iter().map(ToString::to_string).collect::<Vec<_>>().join(", "),
    }
}

/// A size in bytes with thin spaces between thousands.
pub(crate) fn bytes(size: u64) -> String {
    let digits = size.to_string();
    let mut out = String::new();
    for (i, c) in digits.chars().enumerate() {
        if i > 0 && (digits.len() - i).is_multiple_of(3) {
            out.push('\u{202f}');
        }
        out.push(c);
    }
    out + "\u{a0}B"
}

#[cfg(test)]
mod tests {
    #[test]
    fn sizes_are_grouped() {
        assert_eq!(super::bytes(1234567), "1\u{202f}234\u{202f}567\u{a0}B");
        assert_eq!(super::bytes(12), "12\u{a0}B");
    }
}
