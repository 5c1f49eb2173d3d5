//! What a criterion says of itself on a card.

use crate::card::{Formula, Reference, Step};
use crate::units::fixed;

/// The words, formulas and constants of one criterion.
pub(super) struct Account {
    /// The margin, in symbols.
    pub margin: &'static str,
    /// Where it is defined, and what happens outside.
    pub domain: &'static str,
    /// The derived constants, with the numbers put in.
    pub steps: Vec<Step>,
    /// The formulas.
    pub formulas: Vec<Formula>,
    /// What the symbols of the formulas are.
    pub symbols: Vec<(&'static str, &'static str)>,
    /// The sources.
    pub references: Vec<Reference>,
    /// What it assumes, without its domain.
    pub assumptions: Vec<&'static str>,
}

/// A stress (Pa) in MPa with four decimals, in brackets when it is negative.
pub(super) fn mpa(stress: f64) -> String {
    bracketed(fixed(stress * 1e-6, 4))
}

/// A plain number with six decimals, in brackets when it is negative.
pub(super) fn number(value: f64) -> String {
    bracketed(fixed(value, 6))
}

/// A number of any size with seven figures, in brackets when it is negative.
pub(super) fn figures(value: f64) -> String {
    let exponent = value.abs().log10().floor();
    bracketed(match exponent {
        _ if value == 0.0 => "0".to_owned(),
        e if (-4.0..7.0).contains(&e) => fixed(value, (6.0 - e) as usize),
        _ => format!("{value:.6e}"),
    })
}

fn bracketed(text: String) -> String {
    if text.starts_with('-') { format!("({text})") } else { text }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_keep_their_figures() {
        for (value, text) in [
            (0.0, "0"),
            (1.0, "1.000000"),
            (0.004_587_123_4, "0.004587123"),
            (77_052.871_371, "77052.87"),
            (1_234_567.8, "1234568"),
            (1.2e-9, "1.200000e-9"),
            (-0.5, "(-0.5000000)"),
        ] {
            assert_eq!(figures(value), text);
        }
    }
}
