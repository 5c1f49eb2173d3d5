//! What stands against issue: the list on page 1, and what the command prints.

use hade::card::{Card, Item};
use hade::sheet::{Basis, Grade, Origin, Record, misprints};

use crate::project::{Project, Role};
use crate::replay::Judged;

/// Everything that stands against issue, the gravest first.
pub(crate) fn list(
    record: &Record,
    cards: &[&Card],
    lineage: &[Vec<Origin>],
    judged: &[Judged],
    project: &Project,
) -> Vec<String> {
    let mut list = Vec::new();
    for (i, (card, judged)) in cards.iter().zip(judged).enumerate() {
        for check in judged.checks.iter().filter(|c| !c.passed) {
            let allowed = if check.allowed.is_empty() { String::new() } else { format!(", allowed {}", check.allowed) };
            list.push(format!(
                "Item {} ({}): failed check \u{2013} {}: {}{allowed}.",
                i + 1,
                card.title(),
                check.what,
                check.difference
            ));
        }
    }
    for (i, (card, origins)) in cards.iter().zip(lineage).enumerate() {
        for (input, origin) in card.explanation.inputs.iter().zip(origins) {
            match origin {
                Origin::Unmatched => list.push(format!(
                    "Item {} ({}): the input {} = {} is not on the sheet.",
                    i + 1,
                    card.title(),
                    input.name,
                    input.shown
                )),
                Origin::Several { candidates } => list.push(format!(
                    "Item {} ({}): the input {} = {} could come from any of {}.",
                    i + 1,
                    card.title(),
                    input.name,
                    input.shown,
                    candidates.join(", ")
                )),
                _ => {}
            }
        }
    }
    let recorded = record.cards();
    if recorded.iter().zip(lineage).any(|((_, written), traced)| *written != traced.as_slice()) {
        list.push("The origins of inputs that the record states are not those that were traced again.".to_owned());
    }
    let inputs: Vec<&Item> = cards.iter().flat_map(|card| &card.explanation.inputs).collect();
    list.extend(record.givens.iter().flat_map(|given| misprints(given, &inputs)).map(|words| format!("{words}.")));
    list.extend(record.conflicts.iter().chain(&record.no_numbers).map(|said| format!("{said}.")));
    for given in record.givens.iter().filter(|g| g.source.grade == Grade::Unsourced) {
        list.push(format!("Given {} ({}) has no source.", given.item.symbol, given.item.name));
    }
    for assumption in &record.assumptions {
        if let Basis::Unverified { owner, how, .. } = &assumption.basis
            && (owner.trim().is_empty() || how.trim().is_empty())
        {
            list.push(format!(
                "The assumption \u{201c}{}\u{201d} is a hold without {}.",
                assumption.words,
                match (owner.trim().is_empty(), how.trim().is_empty()) {
                    (true, true) => "an owner and a way of verifying it",
                    (true, false) => "an owner",
                    _ => "a way of verifying it",
                }
            ));
        }
    }
    let front = &record.front;
    let stated = [
        (!record.conclusions.is_empty(), "No conclusion is drawn."),
        (!cards.is_empty(), "There is no calculation item."),
        (!front.purpose.trim().is_empty(), "The purpose is not stated."),
        (!front.scope.trim().is_empty(), "The scope is not stated."),
        (!front.valid_for.is_empty(), "The range of validity is not stated."),
    ];
    list.extend(stated.iter().filter(|(there, _)| !there).map(|(_, words)| (*words).to_owned()));
    list.extend(project_gaps(record, project));
    list
}

/// What `hade.toml` does not say.
fn project_gaps(record: &Record, project: &Project) -> Vec<String> {
    let mut list = Vec::new();
    let site = [&record.front.site, &project.site];
    let hole = [&record.front.place, &project.hole];
    let missing: Vec<&str> = [
        (project.number.trim().is_empty(), "memo number"),
        (project.revision.trim().is_empty(), "revision"),
        (project.name.trim().is_empty(), "project"),
        (project.client.trim().is_empty(), "client"),
        (site.iter().all(|s| s.trim().is_empty()), "site"),
        (hole.iter().all(|s| s.trim().is_empty()), "hole"),
    ]
    .into_iter()
    .filter_map(|(missing, name)| missing.then_some(name))
    .collect();
    if !missing.is_empty() {
        list.push(format!("Not stated in hade.toml: {}.", missing.join(", ")));
    }
    if project.revisions.is_empty() {
        list.push("The revision history is empty.".to_owned());
    } else if !project.revisions.iter().any(|r| r.rev == project.revision) {
        list.push(format!("The revision history has no line for revision {}.", project.revision));
    }
    let name = |role: Role| project.person(role).map(|p| p.name.trim()).unwrap_or_default();
    let unnamed: Vec<String> =
        Role::ALL.into_iter().filter(|r| name(*r).is_empty()).map(|r| r.word().to_lowercase()).collect();
    if !unnamed.is_empty() {
        list.push(format!("No name is stated for: {}.", unnamed.join(", ")));
    }
    let (maker, checker) = (name(Role::Prepared), name(Role::Checked));
    if !maker.is_empty() && maker.eq_ignore_ascii_case(checker) {
        list.push(format!("{maker} is named as the one who prepared and the one who checked."));
    }
    list
}
