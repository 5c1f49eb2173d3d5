//! A named value that went into a card or came out of it.

use serde::{Deserialize, Serialize};

use crate::units::{Quantity, with_typed_unit};

/// How an input stands: whether the sheet must know where it came from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Standing {
    /// A value that must be a given of the sheet or the outcome of an earlier card.
    Value,
    /// A choice the engineer made, printed as such (a margin, an allowed width, a wall model).
    Choice,
    /// A data file, matched by its SHA-256 with the files of the sheet.
    File,
}

/// A named value with its exact SI numbers and the text people read.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Item {
    /// The symbol in plain text ("S_v"); an underscore begins a subscript.
    pub symbol: String,
    /// What it is.
    pub name: String,
    /// The kind; lineage joins only values of one kind ("pressure", "azimuth from true north").
    pub kind: String,
    /// The exact numbers in SI (for a file: none).
    pub si: Vec<f64>,
    /// The value with unit and frame, as people read it (for a file: its path).
    pub shown: String,
    /// Whether the sheet must know where it came from.
    pub standing: Standing,
    /// The SHA-256 of a file, lower-case hexadecimal.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub sha256: Option<String>,
}

impl Item {
    /// A value made of any numbers.
    pub fn new(
        symbol: &str,
        name: impl Into<String>,
        kind: impl Into<String>,
        si: Vec<f64>,
        shown: impl Into<String>,
    ) -> Self {
        Item {
            symbol: symbol.to_owned(),
            name: name.into(),
            kind: kind.into(),
            si,
            shown: shown.into(),
            standing: Standing::Value,
            sha256: None,
        }
    }

    /// One quantity, shown as it was typed.
    pub fn typed<Q: Quantity>(symbol: &str, name: impl Into<String>, value: Q) -> Self {
        Item::new(symbol, name, Q::KIND, vec![value.si()], with_typed_unit(value))
    }

    /// One quantity, shown with its usual decimals: for what was computed.
    pub fn computed<Q: Quantity + std::fmt::Display>(symbol: &str, name: impl Into<String>, value: Q) -> Self {
        Item::new(symbol, name, Q::KIND, vec![value.si()], value.to_string())
    }

    /// A choice in words.
    pub fn choice(symbol: &str, name: impl Into<String>, shown: impl Into<String>) -> Self {
        Item { standing: Standing::Choice, ..Item::new(symbol, name, "choice", Vec::new(), shown) }
    }

    /// A data file.
    pub fn file(name: impl Into<String>, path: impl Into<String>, sha256: impl Into<String>) -> Self {
        Item { standing: Standing::File, sha256: Some(sha256.into()), ..Item::new("", name, "file", Vec::new(), path) }
    }

    /// The same value as a choice of the engineer.
    pub fn chosen(self) -> Self {
        Item { standing: Standing::Choice, ..self }
    }

    /// Whether both are the same kind with the same bits.
    pub fn same_value(&self, other: &Item) -> bool {
        self.kind == other.kind
            && !self.si.is_empty()
            && self.si.len() == other.si.len()
            && self.si.iter().zip(&other.si).all(|(a, b)| a.to_bits() == b.to_bits())
    }
}
