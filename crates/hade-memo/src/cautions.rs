//! Cautions and conventions: texts of our own, chosen by what the sheet is about.

use std::collections::BTreeSet;

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};

const CAUTIONS: &str = include_str!("../../../templates/cautions.toml");
const CONVENTIONS: &str = include_str!("../../../templates/conventions.toml");
/// The topic of what concerns every memo.
const ALWAYS: &str = "always";

/// How much a caution weighs.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Deserialize, Serialize)]
#[serde(rename_all = "snake_case")]
pub(crate) enum Severity {
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

/// The cautions for these topics, the gravest first.
pub(crate) fn cautions(topics: &BTreeSet<&str>) -> Result<Vec<Caution>> {
    let file: CautionFile =
        toml::from_str(CAUTIONS).map_err(|e| Error::Defect { what: "the file of cautions", why: e.to_string() })?;
    let mut chosen: Vec<Caution> = file.caution.into_iter().filter(|c| concerns(&c.topics, topics)).collect();
    chosen.sort_by_key(|c| c.severity);
    Ok(chosen)
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
    fn every_caution_has_its_own_id_and_texts_without_markup() {
        let file: CautionFile = toml::from_str(CAUTIONS).unwrap();
        let ids: BTreeSet<&str> = file.caution.iter().map(|c| c.id.as_str()).collect();
        assert_eq!(ids.len(), file.caution.len());
        assert!(file.caution.iter().all(|c| !c.text.contains(['#', '*', '`']) && !c.topics.is_empty()));
    }
}
