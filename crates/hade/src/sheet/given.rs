//! What the engineer states: values with their source and evidence grade, and data files.

use serde::{Deserialize, Serialize};

use crate::card::Item;
use crate::units::{Quantity, Temperature, Uncertain, Warming, with_typed_unit};

/// How good the evidence for a given is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Grade {
    /// Measured in this hole.
    Measured,
    /// Measured in an offset hole.
    Offset,
    /// From a correlation.
    Correlation,
    /// Assumed.
    Assumed,
    /// Nobody said.
    Unsourced,
}

impl Grade {
    /// The word that is printed.
    pub fn word(self) -> &'static str {
        match self {
            Grade::Measured => "measured",
            Grade::Offset => "offset",
            Grade::Correlation => "correlation",
            Grade::Assumed => "assumed",
            Grade::Unsourced => "no source",
        }
    }
}

/// Where a given comes from.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Source {
    /// The evidence grade.
    pub grade: Grade,
    /// The source in words: test, depth, date, report.
    pub words: String,
    /// The data file of the sheet that holds it, as the sheet names it; empty when there is none.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub file: String,
}

impl Source {
    fn of(grade: Grade, words: impl Into<String>) -> Self {
        let words = words.into();
        let grade = if words.trim().is_empty() { Grade::Unsourced } else { grade };
        Source { grade, words, file: String::new() }
    }
    /// Measured in this hole.
    pub fn measured(words: impl Into<String>) -> Self {
        Source::of(Grade::Measured, words)
    }
    /// Measured in an offset hole.
    pub fn offset(words: impl Into<String>) -> Self {
        Source::of(Grade::Offset, words)
    }
    /// From a correlation, named with its source.
    pub fn correlation(words: impl Into<String>) -> Self {
        Source::of(Grade::Correlation, words)
    }
    /// Assumed, with the reason.
    pub fn assumed(words: impl Into<String>) -> Self {
        Source::of(Grade::Assumed, words)
    }
    /// With the data file that holds it, by the path under which the sheet has it.
    pub fn in_file(self, path: &str) -> Self {
        Source { file: path.to_owned(), ..self }
    }
}

/// On what an assumption rests.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "state", rename_all = "snake_case")]
pub enum Basis {
    /// It was verified, as said.
    Verified {
        /// How.
        words: String,
    },
    /// It was not; it is a hold until somebody does.
    Unverified {
        /// Why it is assumed all the same.
        words: String,
        /// Who has to verify it, empty when nobody was named.
        owner: String,
        /// How it will be verified, empty when nobody said.
        how: String,
    },
}

impl Basis {
    /// Verified, as said.
    pub fn verified(words: impl Into<String>) -> Self {
        Basis::Verified { words: words.into() }
    }
    /// Not verified, with the reason it is assumed all the same.
    pub fn unverified(words: impl Into<String>) -> Self {
        Basis::Unverified { words: words.into(), owner: String::new(), how: String::new() }
    }
    /// Who has to verify it and how.
    pub fn to_be_verified_by(self, owner: &str, how: &str) -> Self {
        let words = match self {
            Basis::Verified { words } | Basis::Unverified { words, .. } => words,
        };
        Basis::Unverified { words, owner: owner.to_owned(), how: how.to_owned() }
    }
}

/// A given of the sheet.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Given {
    /// Symbol, meaning, exact value and shown text.
    pub item: Item,
    /// One standard deviation as people read it, empty when none was stated.
    pub give_or_take: String,
    /// One standard deviation in SI.
    pub sd: Option<f64>,
    /// Where it comes from.
    pub source: Source,
}

/// A data file of the sheet; the memo attaches it.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct DataFile {
    /// The path as the notebook wrote it, relative to the notebook.
    pub path: String,
    /// What it is.
    pub about: String,
    /// SHA-256, lower-case hexadecimal.
    pub sha256: String,
    /// Its size.
    pub bytes: u64,
}

/// What can be a given: a quantity, a plain number, an azimuth, each with or without uncertainty; a depth, a survey,
/// planes, a profile of pressure or temperature. What it is not is said where it is no [`Quantity`].
pub trait IntoGiven {
    /// What `Sheet::given` hands back for the computation.
    type Value;
    /// The value, and how it is written down: symbol, name → item; one standard deviation.
    fn into_given(self, symbol: &str, meaning: &str) -> (Self::Value, Item, Option<(f64, String)>);
}

impl<Q: Quantity> IntoGiven for Q {
    type Value = Q;
    fn into_given(self, symbol: &str, meaning: &str) -> (Q, Item, Option<(f64, String)>) {
        (self, Item::typed(symbol, meaning, self), None)
    }
}

impl<Q: Quantity> IntoGiven for Uncertain<Q> {
    type Value = Q;
    fn into_given(self, symbol: &str, meaning: &str) -> (Q, Item, Option<(f64, String)>) {
        let sd = (self.give_or_take.si(), with_typed_unit(self.give_or_take));
        (self.value, Item::typed(symbol, meaning, self.value), Some(sd))
    }
}

impl IntoGiven for Uncertain<Temperature, Warming> {
    type Value = Temperature;
    fn into_given(self, symbol: &str, meaning: &str) -> (Temperature, Item, Option<(f64, String)>) {
        let (value, item, _) = self.value.into_given(symbol, meaning);
        (value, item, Some((self.give_or_take.si(), with_typed_unit(self.give_or_take))))
    }
}
