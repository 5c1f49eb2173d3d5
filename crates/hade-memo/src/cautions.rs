//! Cautions and conventions: texts of our own, chosen by what the sheet is about.

use std::collections::{BTreeMap, BTreeSet};
use std::path::PathBuf;

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};

const CAUTIONS: &str = include_str!("../../../templates/cautions.toml");
const CONVENTIONS: &str = include_str!("../../../templates/conventions.toml");
/// The topic of what concerns every memo.
const ALWAYS: &str = "always";

/// How much a caution weighs.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Deserialize, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Severity {
    /// Overlooking it can make the result wrong or unsafe.
    Critical,
    /// It limits the use of the result.
    Important,
    /// It is good to know.
    Note,
}

/// A caution.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Caution {
    pub id: String,
    pub severity: Severity,
    pub title: String,
    pub text: String,
    topics: Vec<String>,
}

/// A caution that a project adds to its memos.
#[derive(Clone, Debug, PartialEq, Eq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ProjectCaution {
    /// How much it weighs.
    pub severity: Severity,
    /// Its title.
    pub title: String,
    /// Its text.
    pub text: String,
}

/// A caution that was withheld, with the reason that is printed.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Withheld {
    pub title: String,
    pub reason: String,
}

/// A convention.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Convention {
    pub title: String,
    pub text: String,
    topics: Vec<String>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct CautionFile {
    caution: Vec<Caution>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct ConventionFile {
    convention: Vec<Convention>,
}

fn concerns(topics: &[String], wanted: &BTreeSet<&str>) -> bool {
    topics.iter().any(|t| t == ALWAYS || wanted.contains(t.as_str()))
}

impl Caution {
    /// Whether it stands in every memo and weighs most.
    fn stands_always(&self) -> bool {
        self.severity == Severity::Critical && self.topics.iter().any(|t| t == ALWAYS)
    }
}

fn all() -> Result<Vec<Caution>> {
    let file: CautionFile =
        toml::from_str(CAUTIONS).map_err(|e| Error::Defect { what: "the file of cautions", why: e.to_string() })?;
    Ok(file.caution)
}

/// The cautions for these topics, the gravest first.
fn cautions(topics: &BTreeSet<&str>) -> Result<Vec<Caution>> {
    let mut chosen: Vec<Caution> = all()?.into_iter().filter(|c| concerns(&c.topics, topics)).collect();
    chosen.sort_by_key(|c| c.severity);
    Ok(chosen)
}

/// The cautions of a memo: those for its topics and the project's own, less those that the project
/// withholds (by id, with a reason).
pub(crate) fn for_memo(
    topics: &BTreeSet<&str>,
    own: &[ProjectCaution],
    withhold: &BTreeMap<String, String>,
) -> Result<(Vec<Caution>, Vec<Withheld>)> {
    let bad = |why: String| Error::Project { path: PathBuf::from("hade.toml"), why };
    let all = all()?;
    for (id, reason) in withhold {
        let Some(caution) = all.iter().find(|c| c.id == *id) else {
            let ids: Vec<&str> = all.iter().filter(|c| !c.stands_always()).map(|c| c.id.as_str()).collect();
            return Err(bad(format!("[withhold] names the caution \"{id}\", which is none of: {}", ids.join(", "))));
        };
        if caution.stands_always() {
            return Err(bad(format!("[withhold] names \"{id}\", which stands in every memo and cannot be withheld")));
        }
        if reason.trim().is_empty() {
            return Err(bad(format!("[withhold] gives no reason for \"{id}\"; it is printed in place of the caution")));
        }
    }
    let (held, mut chosen): (Vec<Caution>, Vec<Caution>) =
        cautions(topics)?.into_iter().partition(|c| withhold.contains_key(&c.id));
    let reason = |c: &Caution| withhold.get(&c.id).cloned().unwrap_or_default();
    let held = held.into_iter().map(|c| Withheld { reason: reason(&c), title: c.title }).collect();
    chosen.extend(own.iter().enumerate().map(|(k, c)| Caution {
        id: format!("project-{}", k + 1),
        severity: c.severity,
        title: c.title.clone(),
        text: c.text.clone(),
        topics: vec![ALWAYS.to_owned()],
    }));
    chosen.sort_by_key(|c| c.severity);
    Ok((chosen, held))
}

/// The conventions for these topics, in the order of the file.
pub(crate) fn conventions(topics: &BTreeSet<&str>) -> Result<Vec<Convention>> {
    let file: ConventionFile = toml::from_str(CONVENTIONS)
        .map_err(|e| Error::Defect { what: "the file of conventions", why: e.to_string() })?;
    Ok(file.convention.into_iter().filter(|c| concerns(&c.topics, topics)).collect())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn topics_choose_and_always_stays() {
        let none = cautions(&BTreeSet::new()).unwrap();
        let wall = cautions(&BTreeSet::from(["wall"])).unwrap();
        assert!(!none.is_empty() && wall.len() > none.len());
        assert!(none.iter().any(|c| c.text.contains("regulat")));
        assert!(wall.is_sorted_by_key(|c| c.severity));
        assert!(!conventions(&BTreeSet::new()).unwrap().is_empty());
    }

    #[test]
    fn a_project_adds_and_withholds_with_a_reason() {
        let own = [ProjectCaution {
            severity: Severity::Critical,
            title: "Sour gas".to_owned(),
            text: "The zone is sour.".to_owned(),
        }];
        let wall = BTreeSet::from(["wall", "survey"]);
        let hold = |id: &str, reason: &str| BTreeMap::from([(id.to_owned(), reason.to_owned())]);
        let (chosen, held) = for_memo(&wall, &own, &hold("north", "the survey is gyroscopic")).unwrap();
        assert!(chosen.iter().any(|c| c.title == "Sour gas") && chosen.iter().all(|c| c.id != "north"));
        assert_eq!(held, [Withheld { title: "One north".to_owned(), reason: "the survey is gyroscopic".to_owned() }]);
        assert!(chosen.is_sorted_by_key(|c| c.severity));
        for (id, reason, words) in
            [("nort", "because", "none of: "), ("north", " ", "no reason"), ("authority", "because", "every memo")]
        {
            let said = for_memo(&wall, &own, &hold(id, reason)).unwrap_err().to_string();
            assert!(said.contains(words), "{said}");
        }
    }

    #[test]
    fn every_caution_has_its_own_id_and_texts_without_markup() {
        let file: CautionFile = toml::from_str(CAUTIONS).unwrap();
        let ids: BTreeSet<&str> = file.caution.iter().map(|c| c.id.as_str()).collect();
        assert_eq!(ids.len(), file.caution.len());
        assert!(file.caution.iter().all(|c| !c.text.contains(['#', '*', '`']) && !c.topics.is_empty()));
    }
}
