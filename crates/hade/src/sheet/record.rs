//! The record: a sheet as plain data, with a schema version.

use serde::{Deserialize, Serialize};

use super::{Basis, DataFile, Given, Origin};
use crate::card::{Card, Json};
use crate::error::{Error, Result};

/// The schema this library writes; a newer one is refused.
pub const RECORD_SCHEMA: u32 = 1;
/// The media type under which a sheet emits its record in a notebook.
pub const RECORD_MIME: &str = "application/vnd.hade.record+json";

/// An assumption with its basis.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Assumption {
    /// What is assumed.
    pub words: String,
    /// On what it rests.
    pub basis: Basis,
}

/// One entry of the sheet, in order.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "entry", rename_all = "snake_case")]
pub enum Entry {
    /// A card and where its inputs came from.
    Card {
        /// The card.
        card: Box<Card>,
        /// One origin for each of its inputs, in their order.
        lineage: Vec<Origin>,
        /// Whether the sheet added it because another card stands on it.
        added_by_sheet: bool,
    },
    /// A note between cards.
    Note {
        /// The words.
        words: String,
    },
}

/// What the sheet says about itself before any number.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Frontmatter {
    /// The site.
    pub site: String,
    /// The hole, face or fault.
    pub place: String,
    /// What the calculation is for.
    pub purpose: String,
    /// What it covers.
    pub scope: String,
    /// What it leaves out.
    pub exclusions: Vec<String>,
    /// The range over which the conclusions hold (depths, inclinations, mud, time open).
    pub valid_for: Vec<String>,
    /// What makes the conclusions void.
    pub void_if: Vec<String>,
    /// Data that was left out, and why.
    pub left_out: Vec<(String, String)>,
    /// Open items.
    pub open_items: Vec<String>,
    /// Why the criterion, the wall model and the like were chosen: the topic and the reason.
    pub design_basis: Vec<(String, String)>,
}

/// A sheet as plain data.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Record {
    /// The schema ([`RECORD_SCHEMA`]).
    pub schema: u32,
    /// The program and version that wrote it.
    pub program: String,
    /// The title.
    pub title: String,
    /// What the sheet says about itself.
    pub front: Frontmatter,
    /// The givens.
    pub givens: Vec<Given>,
    /// The data files.
    pub data: Vec<DataFile>,
    /// The assumptions.
    pub assumptions: Vec<Assumption>,
    /// Cards and notes in order.
    pub entries: Vec<Entry>,
    /// The conclusions.
    pub conclusions: Vec<String>,
    /// Symbols that were given two meanings, each in a sentence.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub conflicts: Vec<String>,
    /// Givens and results that were left out because they are no numbers, each in a sentence.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub no_numbers: Vec<String>,
}

impl Record {
    /// The text of the record; the same sheet always gives the same bytes.
    pub fn to_json(&self) -> Result<String> {
        serde_json::to_string_pretty(self).map_err(|e| Error::Unreadable {
            path: "the record".to_owned(),
            line: None,
            column: None,
            why: e.to_string(),
            fix: "report this as a defect of Hade".to_owned(),
        })
    }

    /// Reads a record, refusing a schema newer than this library's.
    pub fn from_json(text: &str) -> Result<Self> {
        let schema = Json::parse(text)?.numbers().into_iter().find(|(place, _)| place == "/schema").map(|(_, n)| n);
        match schema {
            Some(n) if n == f64::from(RECORD_SCHEMA) => {}
            Some(n) => {
                return Err(Error::Unreadable {
                    path: "the record".to_owned(),
                    line: None,
                    column: None,
                    why: format!("its schema is {n}, and this version of Hade reads schema {RECORD_SCHEMA}"),
                    fix: "use the version of Hade that wrote it".to_owned(),
                });
            }
            None => {
                return Err(Error::Unreadable {
                    path: "the record".to_owned(),
                    line: None,
                    column: None,
                    why: "it names no schema, so it is not a record of Hade".to_owned(),
                    fix: "run the notebook again and end it with the sheet".to_owned(),
                });
            }
        }
        serde_json::from_str(text).map_err(|e| Error::Unreadable {
            path: "the record".to_owned(),
            line: Some(e.line()),
            column: None,
            why: e.to_string(),
            fix: "run the notebook again and end it with the sheet".to_owned(),
        })
    }

    /// The cards in order, numbered from 1 by their position here.
    pub fn cards(&self) -> Vec<(&Card, &[Origin])> {
        self.entries
            .iter()
            .filter_map(|e| match e {
                Entry::Card { card, lineage, .. } => Some((card.as_ref(), lineage.as_slice())),
                Entry::Note { .. } => None,
            })
            .collect()
    }

    /// Inputs whose origin a checker cannot follow: card title, input, origin.
    pub fn unknown_inputs(&self) -> Vec<(String, String, Origin)> {
        self.cards()
            .into_iter()
            .flat_map(|(card, lineage)| {
                card.explanation.inputs.iter().zip(lineage).filter(|(_, o)| !o.is_known()).map(|(input, origin)| {
                    (card.title().to_owned(), format!("{} = {}", input.name, input.shown), origin.clone())
                })
            })
            .collect()
    }
}
