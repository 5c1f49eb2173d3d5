//! The whole way from a record to a memo.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use hade::card::Card;
use hade::sheet::{Origin, Record, trace};
use typst::foundations::Bytes;

use crate::cautions::ProjectCaution;
use crate::changes::Changes;
use crate::earlier::EarlierMemo;
use crate::error::{Error, Result};
use crate::project::{Person, Project, Revision, Status};
use crate::replay::{Judged, Replayer, by_library, judge};
use crate::sign_off;
use crate::template::Template;
use crate::typeset::{Job, run};
use crate::view::{Sources, make};
use crate::{against, attach, changes, clean, notebook};

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
    /// The template's folder or name; the calculation memo when `None`.
    template: Option<PathBuf>,
    /// The revision to issue.
    issue: Option<String>,
    /// The memo since which changes are listed.
    earlier: Option<EarlierMemo>,
}

impl MemoOptions {
    /// With a template by its folder, or by its name (see [`templates`](crate::templates)).
    pub fn with_template(self, template: impl Into<PathBuf>) -> Self {
        MemoOptions { template: Some(template.into()), ..self }
    }

    /// Issued as a revision, which must be the one of the project file. Refused while anything stands
    /// against it.
    pub fn issued(self, revision: impl Into<String>) -> Self {
        MemoOptions { issue: Some(revision.into()), ..self }
    }

    /// With a list of what changed since an earlier memo.
    pub fn with_changes_since(self, earlier: EarlierMemo) -> Self {
        MemoOptions { earlier: Some(earlier), ..self }
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
    /// What changed since the earlier memo, where one was given.
    pub changes: Option<Changes>,
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
/// compile, with file and line; a memo to be issued against which something stands.
pub fn build(input: &MemoInput<'_>, options: &MemoOptions) -> Result<Memo> {
    build_with(input, options, by_library)
}

/// [`build`] with another way of computing an item again: for tests.
#[doc(hidden)]
pub fn build_with(input: &MemoInput<'_>, options: &MemoOptions, replayer: Replayer) -> Result<Memo> {
    let mut project = input.project.cloned().unwrap_or_default();
    project.status = match (&options.issue, project.status) {
        (Some(_), _) => Status::Issued,
        // Only an issue that was asked for is one.
        (None, Status::Issued) => Status::ForReview,
        (None, status) => status,
    };
    make_memo(&MemoInput { project: Some(&project), ..*input }, options, replayer)
}

/// A memo as a trial of a template, in the project's state whatever stands against it.
pub(crate) fn rehearse(input: &MemoInput<'_>, template: &Path) -> Result<Memo> {
    make_memo(input, &MemoOptions::default().with_template(template), by_library)
}

fn make_memo(input: &MemoInput<'_>, options: &MemoOptions, replayer: Replayer) -> Result<Memo> {
    let nothing = Project::default();
    let project = cleaned_project(input.project.unwrap_or(&nothing))?;
    let date = project.stated_date()?;
    let template = match &options.template {
        Some(wanted) => Template::named(wanted, input.folder)?,
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
    let mut against = against::list(&record, &cards, &lineage, &judged, &project);
    if let Some(revision) = &options.issue {
        if *revision != project.revision {
            against.push(format!("hade.toml is at revision {}, not {revision}.", project.revision));
        }
        if !against.is_empty() {
            return Err(Error::NotIssued { revision: revision.clone(), list: against });
        }
    }

    let changes =
        options.earlier.as_ref().map(|earlier| changes::between(earlier.name.clone(), &earlier.record, &record));

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
        changes: changes.as_ref(),
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
    Ok(Memo { pdf, against_issue: against, changes, warnings, pages: typeset.pages })
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
    let cautions = project
        .cautions
        .iter()
        .map(|c| Ok(ProjectCaution { severity: c.severity, title: text(&c.title)?, text: text(&c.text)? }))
        .collect::<Result<_>>()?;
    let withhold =
        project.withhold.iter().map(|(id, reason)| Ok((id.clone(), text(reason)?))).collect::<Result<_>>()?;
    Ok(Project {
        number: text(&project.number)?,
        revision: text(&project.revision)?,
        title: text(&project.title)?,
        supersedes: text(&project.supersedes)?,
        name: text(&project.name)?,
        client: text(&project.client)?,
        site: text(&project.site)?,
        hole: text(&project.hole)?,
        people,
        revisions,
        cautions,
        withhold,
        ..project.clone()
    })
}
