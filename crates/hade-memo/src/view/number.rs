//! Numbers as people read them.

use serde::Serialize;

use super::text::{Run, rich};

/// The sign of negative numbers in print.
const MINUS: char = '\u{2212}';

/// A small number such as a difference or a tolerance: plain when it reads well, else with a power
/// of ten.
pub(crate) fn small(value: f64) -> String {
    let size = value.abs();
    if !value.is_finite() {
        return "not a number".to_owned();
    }
    if size == 0.0 {
        return "0".to_owned();
    }
    if (1e-3..1e5).contains(&size) {
        let shortest: f64 = format!("{value:.2e}").parse().unwrap_or(value);
        return format!("{shortest}").replace('-', &MINUS.to_string());
    }
    let text = format!("{value:.1e}");
    let (mantissa, exponent) = text.split_once('e').unwrap_or((&text, "0"));
    let mantissa = mantissa.strip_suffix(".0").unwrap_or(mantissa).replace('-', &MINUS.to_string());
    format!("{mantissa} × 10{}", raised(exponent))
}

/// The same with a unit after it.
pub(crate) fn small_with_unit(value: f64, unit: &str) -> String {
    match unit {
        "" => small(value),
        // After a raised exponent the ring would read as part of it.
        "°" if small(value).contains('×') => format!("{}\u{a0}°", small(value)),
        "°" => format!("{}°", small(value)),
        _ => format!("{}\u{a0}{unit}", small(value)),
    }
}

fn raised(exponent: &str) -> String {
    exponent
        .chars()
        .map(|c| match c {
            '-' => '⁻',
            '1' => '¹',
            '2' => '²',
            '3' => '³',
            '0' => '⁰',
            '4'..='9' => char::from_u32(u32::from(c) - u32::from('4') + 0x2074).unwrap_or(c),
            _ => c,
        })
        .collect()
}

/// Fixed decimals with a true minus sign, and none before zero.
pub(crate) fn fixed(value: f64, decimals: usize) -> String {
    hade::units::fixed(value, decimals.min(12)).replace('-', &MINUS.to_string())
}

/// A cell of a table: a number split at its decimal point, or words.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
#[serde(untagged)]
pub(crate) enum Cell {
    /// A number.
    Number {
        /// What stands before the point, with the sign.
        whole: String,
        /// The point and what follows, empty when there is none.
        part: String,
    },
    /// Words.
    Words {
        /// The words.
        runs: Vec<Run>,
    },
}

/// A cell of a column of words.
pub(crate) fn words(text: &str) -> Cell {
    Cell::Words { runs: rich(text) }
}

/// A cell of a column of numbers. What is not a number stays words.
pub(crate) fn cell(text: &str) -> Cell {
    let trimmed = text.trim();
    let digits = trimmed.trim_start_matches(['-', '+', MINUS]);
    let is_number = !digits.is_empty()
        && trimmed.chars().count() - digits.chars().count() <= 1
        && digits.chars().all(|c| c.is_ascii_digit() || c == '.')
        && digits.matches('.').count() <= 1
        && digits.starts_with(|c: char| c.is_ascii_digit());
    if !is_number {
        return words(trimmed);
    }
    let number = trimmed.replace('-', &MINUS.to_string());
    match number.split_once('.') {
        Some((whole, part)) => Cell::Number { whole: whole.to_owned(), part: format!(".{part}") },
        None => Cell::Number { whole: number, part: String::new() },
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn small_numbers_read_well() {
        assert_eq!(small(0.0), "0");
        assert_eq!(small(0.05), "0.05");
        assert_eq!(small(3.2e-14), "3.2 × 10⁻¹⁴");
        assert_eq!(small(1e-9), "1 × 10⁻⁹");
        assert_eq!(small(-2.5e-4), "−2.5 × 10⁻⁴");
        assert_eq!(small(f64::NAN), "not a number");
        assert_eq!(small_with_unit(1e-6, "MPa"), "1 × 10⁻⁶\u{a0}MPa");
    }

    #[test]
    fn cells_are_split_at_the_point() {
        let number = |whole: &str, part: &str| Cell::Number { whole: whole.to_owned(), part: part.to_owned() };
        assert_eq!(cell("-658.10"), number("−658", ".10"));
        assert_eq!(cell("12"), number("12", ""));
        for words in ["", "n/a", "< 0.1", "1.2.3", "--1", "1e5", "12 MPa"] {
            assert!(matches!(cell(words), Cell::Words { .. }), "{words}");
        }
    }
}
