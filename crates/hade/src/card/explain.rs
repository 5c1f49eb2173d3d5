//! The trait by which a result explains itself, and the card that comes of it.

use serde::de::DeserializeOwned;
use serde::{Deserialize, Serialize};

use super::{Check, Figure, Item, Method, Step};
use crate::error::{Error, Result};
use crate::interrupt;

/// Typed data written as JSON, kept behind a type of our own.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Json(serde_json::Value);

/// Typed data that can be written as JSON and read back, bit for bit. Everything that derives
/// serde's two traits is it.
pub trait Data: Sized + Clone {
    /// Writes it. Numbers keep every bit; what JSON cannot hold (NaN) becomes null, which no replay
    /// accepts.
    fn write(&self) -> Json;
    /// Reads it.
    fn read(json: &Json) -> Result<Self>;
}

impl<T: Serialize + DeserializeOwned + Clone> Data for T {
    fn write(&self) -> Json {
        Json(serde_json::to_value(self).unwrap_or(serde_json::Value::Null))
    }
    fn read(json: &Json) -> Result<Self> {
        T::deserialize(&json.0).map_err(|e| unreadable("a card of the record", &e))
    }
}

impl Json {
    /// The text.
    pub fn text(&self) -> String {
        self.0.to_string()
    }

    /// From a text.
    pub fn parse(text: &str) -> Result<Self> {
        serde_json::from_str(text).map(Json).map_err(|e| unreadable("the record", &e))
    }

    /// Every number in it, with its place as a JSON pointer, in order.
    pub fn numbers(&self) -> Vec<(String, f64)> {
        fn walk(value: &serde_json::Value, place: &str, found: &mut Vec<(String, f64)>) {
            match value {
                serde_json::Value::Number(n) => {
                    found.push((place.to_owned(), n.as_f64().unwrap_or(f64::NAN)));
                }
                serde_json::Value::Array(list) => {
                    list.iter().enumerate().for_each(|(i, v)| walk(v, &format!("{place}/{i}"), found));
                }
                serde_json::Value::Object(map) => {
                    map.iter().for_each(|(k, v)| walk(v, &format!("{place}/{k}"), found));
                }
                _ => {}
            }
        }
        let mut found = Vec::new();
        walk(&self.0, "", &mut found);
        found
    }

    /// The same with the number at a JSON pointer put in place of the old one.
    pub fn with_number(&self, place: &str, number: f64) -> Self {
        let mut copy = self.0.clone();
        if let Some(slot) = copy.pointer_mut(place) {
            *slot = serde_json::Value::from(number);
        }
        Json(copy)
    }

    /// Where two outcomes differ by more than a relative tolerance, as a sentence. Numbers of one
    /// list (a tensor, an axis) are held against the largest of that list.
    pub fn difference(&self, other: &Json, relative: f64) -> Option<String> {
        compare(&self.0, &other.0, "", 0.0, relative)
    }
}

fn compare(a: &serde_json::Value, b: &serde_json::Value, place: &str, scale: f64, relative: f64) -> Option<String> {
    use serde_json::Value::{Array, Number, Object};
    match (a, b) {
        (Number(x), Number(y)) => {
            let (x, y) = (x.as_f64()?, y.as_f64()?);
            let allowed = relative * x.abs().max(y.abs()).max(scale).max(1.0e-3);
            ((x - y).abs() > allowed || !(x - y).is_finite()).then(|| format!("{place}: {x} is not {y}"))
        }
        (Array(x), Array(y)) if x.len() == y.len() => {
            let largest = x.iter().filter_map(|v| v.as_f64()).fold(0.0_f64, |m, v| m.max(v.abs()));
            x.iter()
                .zip(y)
                .enumerate()
                .find_map(|(i, (x, y))| compare(x, y, &format!("{place}/{i}"), largest, relative))
        }
        (Object(x), Object(y)) if x.len() == y.len() && x.keys().eq(y.keys()) => {
            x.iter().find_map(|(k, v)| compare(v, &y[k], &format!("{place}/{k}"), 0.0, relative))
        }
        _ => (a != b).then(|| format!("{place}: {a} is not {b}")),
    }
}

fn unreadable(path: &str, error: &serde_json::Error) -> Error {
    Error::Unreadable {
        path: path.to_owned(),
        line: None,
        column: None,
        why: error.to_string(),
        fix: "make the record again from its notebook".to_owned(),
    }
}

/// A result that can explain itself, be computed again from its inputs, and be checked by another
/// route. Every type that implements it has a row in [`crate::replay`].
pub trait Explain: Sized + 'static {
    /// The kind, as the record writes it ("principal-stresses").
    const KIND: &'static str;
    /// Grows when the meaning of the inputs or the outcome changes.
    const VERSION: u32 = 1;
    /// The relative tolerance at which a replay must agree (arithmetic differs by machine).
    const REPLAY_TOLERANCE: f64 = 1e-9;
    /// Everything the computation takes, in SI.
    type Inputs: Data;
    /// Everything it gives, in SI.
    type Outcome: Data;

    /// Computes the result.
    fn compute(inputs: Self::Inputs) -> Result<Self>;
    /// What it was computed from.
    fn inputs(&self) -> Self::Inputs;
    /// What came out.
    fn outcome(&self) -> Self::Outcome;
    /// Checks an outcome by routes that the computation did not take. A changed outcome must fail.
    fn check(inputs: &Self::Inputs, outcome: &Self::Outcome) -> Vec<Check>;
    /// Title, named inputs and results, method, steps, figures.
    fn explain(&self) -> Explanation;
    /// What came out against what was planned, stated or observed, or that there is no answer, a sentence each: it
    /// stands before the result wherever the card is shown, and on a memo's first sheet.
    fn warnings(&self) -> Vec<String> {
        Vec::new()
    }
    /// The cards this one stands on, as far as the value remembers how it was made.
    fn upstream(&self) -> Vec<Card> {
        Vec::new()
    }

    /// The card.
    fn card(&self) -> Card {
        interrupt::check();
        let (inputs, outcome) = (self.inputs(), self.outcome());
        Card {
            kind: Self::KIND.to_owned(),
            version: Self::VERSION,
            inputs: inputs.write(),
            outcome: outcome.write(),
            checks: Self::check(&inputs, &outcome),
            warnings: self.warnings(),
            explanation: self.explain(),
        }
    }
}

/// What a card says, in the order it is read.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct Explanation {
    /// The title; kind and title together name a card on a sheet.
    pub title: String,
    /// The answer in one sentence, with unit and frame.
    pub headline: String,
    /// What went in.
    pub inputs: Vec<Item>,
    /// What came out.
    pub results: Vec<Item>,
    /// The method.
    pub method: Method,
    /// The work, step by step.
    pub steps: Vec<Step>,
    /// The figures.
    pub figures: Vec<Figure>,
    /// What a reader must know about this result ("governed by pore pressure", "in tension").
    pub notes: Vec<String>,
    /// What the result is about; chooses the memo's cautions ("wall", "survey", "overburden").
    pub topics: Vec<String>,
}

/// A result that explains itself: plain data, the same for the notebook and the memo.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Card {
    /// The kind ([`Explain::KIND`]).
    pub kind: String,
    /// The version of the kind.
    pub version: u32,
    /// Everything the computation took, in SI.
    pub inputs: Json,
    /// Everything it gave, in SI.
    pub outcome: Json,
    /// The checks by other routes.
    pub checks: Vec<Check>,
    /// What came out against what was planned, stated or observed ([`Explain::warnings`]).
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub warnings: Vec<String>,
    /// What it says.
    pub explanation: Explanation,
}

impl Card {
    /// The title.
    pub fn title(&self) -> &str {
        &self.explanation.title
    }
    /// Whether every check passed. A card without a check has not passed.
    pub fn passed(&self) -> bool {
        !self.checks.is_empty() && self.checks.iter().all(|c| c.passed)
    }
}
