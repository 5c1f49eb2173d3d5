//! What the cards of ranges share: the rule as formulas, an end as a result or a row of a table.

use super::ends::RangeEnd;
use crate::card::{Column, Formula, Item};
use crate::units::{Quantity, fixed};

/// The rule that sets both ends.
pub(crate) fn rule() -> [Formula; 2] {
    [
        Formula::new("p_b = max(p_(l s)(w), P_p + m_b)", "p_b = max(p_ls(w), P_p + m_b)"),
        Formula::new("p_t = min(S_3, p_i, p_(u s)) - m_t", "p_t = min(S_3, p_i, p_us) − m_t"),
    ]
}

/// What the symbols of the rule are.
pub(crate) fn rule_symbols() -> Vec<(String, String)> {
    [
        (
            "p_ls",
            "lower shear limit at w: the lowest pressure at which no arc that fails in shear is wider than w. An arc's width is the tool face from edge to edge in one lobe; it fails on one side of the criterion or the other, by too little pressure or by too much, and both count: at a permeable wall, where the pressure supports the rock less, both may fail at every pressure",
        ),
        ("p_i", "fracture initiation"),
        ("p_us", "upper shear limit, above which the hole is pushed out"),
        ("S_3", "least principal stress of the far field"),
    ]
    .map(|(symbol, meaning)| (symbol.to_owned(), meaning.to_owned()))
    .to_vec()
}

/// A number of an end, rounded into the range.
pub(super) fn end_item<Q: Quantity>(end: RangeEnd, symbol: &str, name: String, value: Q, decimals: usize) -> Item {
    Item::new(symbol, name, Q::KIND, vec![value.si()], end.inward(value, decimals))
}

/// An end as cells below [`pressure_columns`], each rounded into the range.
pub(super) fn end_cells(end: RangeEnd) -> [String; 3] {
    [end.inward(end.pressure, 2), end.inward(end.gradient, 2), end.inward(end.mud_weight, 3)].map(number)
}

/// The number of a text with its unit.
fn number(text: String) -> String {
    text.split(' ').next().unwrap_or_default().to_owned()
}

/// The columns of a pressure with its mean gradient and mud weight.
pub(super) fn pressure_columns() -> [Column; 3] {
    [Column::number("pressure", "MPa"), Column::number("gradient", "MPa/km"), Column::number("mud weight", "sg")]
}

/// A number with its sign.
pub(crate) fn signed(value: f64, decimals: usize) -> String {
    let text = fixed(value, decimals);
    if text.starts_with('-') || text.chars().all(|c| c == '0' || c == '.') { text } else { format!("+{text}") }
}
