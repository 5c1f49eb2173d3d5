//! What stands after the work: checks, cautions, history, program, attachments, sign-off.

use serde::Serialize;

use super::Sources;
use super::item::{CheckRow, check};
use super::text::plain;
use crate::attach::Attachment;
use crate::cautions::{Caution, Severity};
use crate::project::{Project, Role};
use crate::replay::CheckLine;

/// The checks of one item in a line, and those that failed.
#[derive(Serialize)]
pub(crate) struct CheckView {
    item: usize,
    made: usize,
    passed: usize,
    closest: Option<CheckRow>,
    failed: Vec<CheckRow>,
}

/// The checks of all items: how many were made and passed, the one that came closest to what is
/// allowed, and each that failed.
pub(crate) fn checks(sources: &Sources<'_>) -> Vec<CheckView> {
    let by_part = |a: &&CheckLine, b: &&CheckLine| a.part.total_cmp(&b.part);
    sources
        .judged
        .iter()
        .enumerate()
        .map(|(i, judged)| CheckView {
            item: i + 1,
            made: judged.checks.len(),
            passed: judged.checks.iter().filter(|c| c.passed).count(),
            closest: judged.checks.iter().filter(|c| c.passed).max_by(by_part).map(check),
            failed: judged.checks.iter().filter(|c| !c.passed).map(check).collect(),
        })
        .collect()
}

/// A caution.
#[derive(Serialize)]
pub(crate) struct CautionView {
    id: String,
    severity: &'static str,
    title: String,
    text: String,
}

/// A caution as it is printed.
pub(crate) fn caution(caution: &Caution) -> CautionView {
    CautionView {
        id: caution.id.clone(),
        severity: match caution.severity {
            Severity::Critical => "critical",
            Severity::Important => "important",
            Severity::Note => "note",
        },
        title: caution.title.clone(),
        text: caution.text.clone(),
    }
}

/// A line of the revision history.
#[derive(Serialize)]
pub(crate) struct RevisionView {
    revision: String,
    date: String,
    what: String,
    by: String,
}

/// The revision history.
pub(crate) fn revisions(project: &Project) -> Vec<RevisionView> {
    project
        .revisions
        .iter()
        .map(|r| RevisionView {
            revision: plain(&r.rev),
            date: r.date.to_string(),
            what: plain(&r.what),
            by: plain(&r.by),
        })
        .collect()
}

/// What computed and what typeset.
pub(crate) fn program(sources: &Sources<'_>) -> Vec<[String; 2]> {
    let record = sources.record;
    let hash = |place: usize| sources.attachments.get(place).map(|a| a.sha256.clone()).unwrap_or_default();
    vec![
        ["Program that computed".to_owned(), plain(&record.program)],
        ["Program that typeset".to_owned(), concat!("hade-memo ", env!("CARGO_PKG_VERSION")).to_owned()],
        ["Template".to_owned(), plain(&format!("{} {}", sources.template.name, sources.template.version))],
        ["Platform".to_owned(), format!("{} {}", std::env::consts::OS, std::env::consts::ARCH)],
        ["Record schema".to_owned(), record.schema.to_string()],
        ["Record, SHA-256".to_owned(), hash(0)],
        ["Notebook, SHA-256".to_owned(), hash(1)],
        ["File format".to_owned(), "PDF/A-3a and PDF/UA-1 as enforced by the exporter".to_owned()],
    ]
}

/// An attachment.
#[derive(Serialize)]
pub(crate) struct AttachmentView {
    name: String,
    shown: String,
    about: String,
    description: String,
    mime: &'static str,
    relationship: &'static str,
    size: String,
}

/// An attachment as it is listed and attached.
pub(crate) fn attachment(attachment: &Attachment) -> AttachmentView {
    let path = attachment.path.as_ref().filter(|p| **p != attachment.name);
    let from = path.map(|p| format!(" (from {p})")).unwrap_or_default();
    AttachmentView {
        name: attachment.name.clone(),
        shown: plain(&attachment.name),
        about: plain(&format!("{}{from}", attachment.about)),
        description: crate::clean::lossy(&format!("{}{from}", attachment.about)),
        mime: attachment.mime,
        relationship: attachment.relationship,
        size: super::front::bytes(attachment.bytes.len() as u64),
    }
}

/// A place to sign.
#[derive(Serialize)]
pub(crate) struct SignView {
    role: &'static str,
    does: &'static str,
    field: String,
    name: String,
    named: bool,
    licence: String,
    jurisdiction: String,
}

/// The places to sign, in the order of signing.
pub(crate) fn signoff(project: &Project) -> Vec<SignView> {
    Role::ALL
        .into_iter()
        .map(|role| {
            let person = project.person(role);
            let name = person.map(|p| p.name.trim()).unwrap_or_default();
            let or_line = |text: &str| if text.trim().is_empty() { "not stated".to_owned() } else { plain(text) };
            SignView {
                role: role.word(),
                does: match role {
                    Role::Prepared => "made this calculation",
                    Role::Checked => "checked it independently of its maker",
                    Role::Approved => "approved it for its stated purpose",
                },
                field: role.word().to_lowercase(),
                name: or_line(name),
                named: !name.is_empty(),
                licence: or_line(person.map(|p| p.licence.as_str()).unwrap_or_default()),
                jurisdiction: or_line(person.map(|p| p.jurisdiction.as_str()).unwrap_or_default()),
            }
        })
        .collect()
}
