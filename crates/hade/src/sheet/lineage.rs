//! Where each input of a card came from: matched by kind and exact bits with the givens, the
//! outcomes of earlier cards, and the data files.

use serde::{Deserialize, Serialize};

use super::{DataFile, Given};
use crate::card::{Card, Item, Standing};

/// The origin of one input.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "from", rename_all = "snake_case")]
pub enum Origin {
    /// A given.
    Given {
        /// Its symbol.
        symbol: String,
    },
    /// The outcome of an earlier card.
    Outcome {
        /// The card's number on the sheet, from 1.
        card: usize,
        /// The name of the result.
        result: String,
    },
    /// A data file of the sheet.
    Data {
        /// Its path.
        path: String,
    },
    /// A choice of the engineer, printed as such.
    Choice,
    /// Two or more givens or outcomes have this very value, and none has its symbol.
    Several {
        /// What they are.
        candidates: Vec<String>,
    },
    /// Nothing on the sheet has this value: it bypassed the sheet.
    Unmatched,
}

impl Origin {
    /// Whether a checker can follow it.
    pub fn is_known(&self) -> bool {
        !matches!(self, Origin::Unmatched | Origin::Several { .. })
    }
}

/// The origin of each input of a card, in their order.
pub fn trace(card: &Card, givens: &[Given], data: &[DataFile], earlier: &[&Card]) -> Vec<Origin> {
    card.explanation.inputs.iter().map(|input| origin(input, givens, data, earlier)).collect()
}

fn origin(input: &Item, givens: &[Given], data: &[DataFile], earlier: &[&Card]) -> Origin {
    match input.standing {
        Standing::Choice => Origin::Choice,
        Standing::File => data
            .iter()
            .find(|file| Some(&file.sha256) == input.sha256.as_ref())
            .map_or(Origin::Unmatched, |file| Origin::Data { path: file.path.clone() }),
        Standing::Value => value_origin(input, givens, earlier),
    }
}

fn value_origin(input: &Item, givens: &[Given], earlier: &[&Card]) -> Origin {
    // The nearest outcome first: a card's own predecessor is what the value was taken from.
    let outcomes = earlier.iter().enumerate().rev().flat_map(|(i, card)| {
        card.explanation
            .results
            .iter()
            .filter(|r| r.same_value(input))
            .map(move |r| (r.symbol.clone(), Origin::Outcome { card: i + 1, result: r.name.clone() }))
    });
    let stated = givens
        .iter()
        .filter(|g| g.item.same_value(input))
        .map(|g| (g.item.symbol.clone(), Origin::Given { symbol: g.item.symbol.clone() }));
    let found: Vec<(String, Origin)> = stated.chain(outcomes).collect();
    if let Some((_, origin)) = found.iter().find(|(symbol, _)| *symbol == input.symbol) {
        return origin.clone();
    }
    match found.as_slice() {
        [] => Origin::Unmatched,
        [(_, only)] => only.clone(),
        several => {
            let givens: Vec<&Origin> =
                several.iter().map(|(_, o)| o).filter(|o| matches!(o, Origin::Given { .. })).collect();
            match givens.as_slice() {
                // One stated value that merely passed through cards, or one chain of outcomes.
                [one] => (*one).clone(),
                [] => several[0].1.clone(),
                _ => Origin::Several { candidates: several.iter().map(|(symbol, _)| symbol.clone()).collect() },
            }
        }
    }
}
