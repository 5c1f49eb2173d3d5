//! The whole way from a record to a memo.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use hade::card::Card;
use hade::sheet::{Origin, Record, trace};
use typst::foundations::Bytes;

use crate::error::{Error, Result};
use crate::project::{Person, Project, Revision};
use crate::replay::{Judged, Replayer, by_library, judge};
use crate::sign_off;
use crate::template::Template;
use crate::typeset::{Job, run};
use crate::view::{Sources, make};
use crate::{against, attach, clean, notebook};

/// What a memo is made from.
#[derive(Clone, Debug)]
pub struct MemoInput<'a> {
    /// The record, as the notebook's last sheet emitted it.
    pub record_json: &'a str,
    /// The notebook's file name and bytes.
    pub notebook: (&'a str, &'a [u8]),
    /// The notebook's folder, from which the record's data files are read again.
    pub folder: &'a Path,
    /// The project file, when there is one.
    pub project: Option<&'a Project>,
}

/// How a memo is made.
#[derive(Clone, Debug, Default)]
pub struct MemoOptions {
    /// The template's folder; the packed template when `None`.
    template: Option<PathBuf>,
}

impl MemoOptions {
    /// With the template in a folder.
    pub fn with_template(self, folder: impl Into<PathBuf>) -> Self {
        MemoOptions { template: Some(folder.into()) }
    }
}

/// A memo.
#[derive(Clone, Debug)]
#[non_exhaustive]
pub struct Memo {
    /// The PDF.
    pub pdf: Vec<u8>,
    /// What stands against issue, as page 1 lists it.
    pub against_issue: Vec<String>,
    /// What the person at the terminal should know.
    pub warnings: Vec<String>,
    /// How many sheets.
    pub pages: usize,
}

/// Makes the memo of a record: reads it, computes every item again, traces the origin of every
/// input, attaches record, notebook and data, and typesets.
///
/// # Errors
/// A record of a newer schema; a text that cannot be typeset, with its place; a data file that is
/// not the one of the record; no date in the project file; a template that is refused or does not
/// compile, with file and line.
pub fn build(input: &MemoInput<'_>, options: &MemoOptions) -> Result<Memo> {
    build_with(input, options, by_library)
}

/// [`build`] with another way of computing an item again: for tests.
#[doc(hidden)]
pub fn build_with(input: &MemoInput<'_>, options: &MemoOptions, replayer: Replayer) -> Result<Memo> {
    let nothing = Project::default();
    let project = cleaned_project(input.project.unwrap_or(&nothing))?;
    let date = project.stated_date()?;
    let template = match &options.template {
        Some(folder) => Template::in_folder(folder)?,
        None => Template::packed()?,
    };
    let settings = template.settings(&project.template)?;

    let recorded = Record::from_json(input.record_json)?;
    let clean::Cleaned { value, longest, mut warnings } = clean::record(input.record_json)?;
    let record: Record = serde_json::from_value(value)
        .map_err(|e| Error::Defect { what: "the cleaning of records", why: e.to_string() })?;

    let judged: Vec<Judged> = recorded.cards().iter().map(|(card, _)| judge(card, replayer)).collect();
    let cards: Vec<&Card> = record.cards().iter().map(|(card, _)| *card).collect();
    let lineage: Vec<Vec<Origin>> = cards
        .iter()
        .enumerate()
        .map(|(i, card)| trace(card, &record.givens, &record.data, cards.get(..i).unwrap_or_default()))
        .collect();
    let against = against::list(&record, &cards, &lineage, &judged, &project);

    let (name, bytes) = input.notebook;
    let stripped = notebook::strip(name, bytes)?;
    // Paths are those the notebook wrote, so they come from the record as it was written.
    let attachments = attach::collect(input.record_json, &recorded, (name, stripped), input.folder)?;

    let view = make(&Sources {
        record: &record,
        cards: &cards,
        lineage: &lineage,
        judged: &judged,
        project: &project,
        date,
        attachments: &attachments,
        against: &against,
        longest,
        template: &template,
        settings,
    })?;
    warnings.extend(view.warnings);
    let mut own: BTreeMap<String, Bytes> = BTreeMap::from([
        ("memo.json".to_owned(), Bytes::from_string(view.memo.to_string())),
        ("formulas.json".to_owned(), Bytes::from_string(view.formulas.to_string())),
    ]);
    own.extend(view.figures.into_iter().map(|(file, svg)| (file, Bytes::from_string(svg))));
    own.extend(attachments.into_iter().enumerate().map(|(i, a)| (format!("attached/{i}"), Bytes::new(a.bytes))));

    let identity = format!("{}/{}", project.number, project.revision);
    let typeset = run(Job { template: &template, own, identity, date })?;
    warnings.extend(typeset.warnings);
    let pdf = sign_off::add(&typeset.pdf).map_err(|why| Error::SignOff { why })?;
    Ok(Memo { pdf, against_issue: against, warnings, pages: typeset.pages })
}

/// The project file with texts that can be typeset.
fn cleaned_project(project: &Project) -> Result<Project> {
    let text = |text: &str| clean::text("hade.toml", text);
    let people = project
        .people
        .iter()
        .map(|p| {
            Ok(Person {
                role: p.role,
                name: text(&p.name)?,
                licence: text(&p.licence)?,
                jurisdiction: text(&p.jurisdiction)?,
            })
        })
        .collect::<Result<_>>()?;
    let revisions = project
        .revisions
        .iter()
        .map(|r| Ok(Revision { rev: text(&r.rev)?, date: r.date, what: text(&r.what)?, by: text(&r.by)? }))
        .collect::<Result<_>>()?;
    Ok(Project {
        number: text(&project.number)?,
        revision: text(&project.revision)?,
        title: text(&project.title)?,
        name: text(&project.name)?,
        client: text(&project.client)?,
        site: text(&project.site)?,
        hole: text(&project.hole)?,
        people,
        revisions,
        ..project.clone()
    })
}
