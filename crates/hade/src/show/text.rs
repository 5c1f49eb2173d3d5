//! A card and a sheet as plain text, for terminals and for text/plain.

use super::typeset::true_minus;
use crate::card::{Card, Check, Item, Step, Table};
use crate::sheet::{Entry, Origin, Record};

/// A card as plain text: the answer first, then results, inputs and checks in aligned columns.
pub fn card_text(card: &Card) -> String {
    let e = &card.explanation;
    let mut out = vec![true_minus(&e.title)];
    if !e.headline.is_empty() {
        out.push(format!("  {}", true_minus(&e.headline)));
    }
    out.extend(card.warnings.iter().map(|w| format!("  WARNING: {}", true_minus(w))));
    items(&mut out, "Results", &e.results);
    items(&mut out, "Inputs", &e.inputs);
    for step in &e.steps {
        if let Step::Table { table: shown } = step {
            table(&mut out, shown);
        }
    }
    if !e.notes.is_empty() {
        out.push("Notes".to_owned());
        out.extend(e.notes.iter().map(|n| format!("  {}", true_minus(n))));
    }
    out.push(format!("Checks: {}", check_summary(&card.checks)));
    let rows = card.checks.iter().map(|c| {
        vec![check_word(c).to_owned(), c.what.clone(), format!("{} (allowed {})", difference(c), tolerance(c))]
    });
    columns(&mut out, rows.collect());
    out.join("\n")
}

/// A sheet as plain text: what is on it and what stands against it.
pub fn sheet_text(record: &Record) -> String {
    let mut out = vec![record.title.clone(), format!("  {}", counts(record))];
    if !record.conclusions.is_empty() {
        out.push("Conclusions".to_owned());
        out.extend(record.conclusions.iter().map(|c| format!("  {}", true_minus(c))));
    }
    if !record.givens.is_empty() {
        out.push("Givens".to_owned());
        let rows = record.givens.iter().map(|g| {
            let sd = if g.give_or_take.is_empty() { String::new() } else { format!(" ± {}", g.give_or_take) };
            vec![
                g.item.symbol.clone(),
                format!("{}{sd}", true_minus(&g.item.shown)),
                g.item.name.clone(),
                format!("{}: {}", g.source.grade.word(), g.source.words),
            ]
        });
        columns(&mut out, rows.collect());
    }
    out.push("Results".to_owned());
    for (i, (card, _)) in record.cards().iter().enumerate() {
        out.push(format!("  {}. {}", i + 1, true_minus(&format!("{}: {}", card.title(), card.explanation.headline))));
    }
    out.extend(record.no_numbers.iter().map(|said| format!("Left out: {said}.")));
    out.extend(unmatched(record).into_iter().map(|line| format!("Unmatched input: {line}")));
    out.extend(failed(record).into_iter().map(|line| format!("FAILED check: {line}")));
    out.join("\n")
}

/// "4 givens, 6 results, 2 data files, 3 assumptions, 1 note".
pub(super) fn counts(record: &Record) -> String {
    let notes = record.entries.iter().filter(|e| matches!(e, Entry::Note { .. })).count();
    [
        (record.givens.len(), "given", "givens"),
        (record.cards().len(), "result", "results"),
        (record.data.len(), "data file", "data files"),
        (record.assumptions.len(), "assumption", "assumptions"),
        (notes, "note", "notes"),
        (record.conclusions.len(), "conclusion", "conclusions"),
    ]
    .iter()
    .filter(|(n, ..)| *n > 0)
    .map(|(n, one, more)| format!("{n} {}", if *n == 1 { one } else { more }))
    .reduce(|a, b| format!("{a}, {b}"))
    .unwrap_or_else(|| "empty sheet".to_owned())
}

/// Each input whose origin cannot be followed, as a sentence.
pub(super) fn unmatched(record: &Record) -> Vec<String> {
    record
        .unknown_inputs()
        .into_iter()
        .map(|(card, input, origin)| match origin {
            Origin::Several { candidates } => format!(
                "{input} of \"{card}\" has the value of {}; give it the symbol of the one that is meant.",
                candidates.join(" and ")
            ),
            _ => format!(
                "{input} of \"{card}\" is neither a given, nor an earlier result, nor a data file of this sheet; state it with sheet.given(…) first."
            ),
        })
        .collect()
}

/// Each failed check, and each card without a check, as a sentence.
pub(super) fn failed(record: &Record) -> Vec<String> {
    let mut out = Vec::new();
    for (card, _) in record.cards() {
        if card.checks.is_empty() {
            out.push(format!("\"{}\" was not checked.", card.title()));
        }
        for check in card.checks.iter().filter(|c| !c.passed) {
            out.push(format!(
                "\"{}\": {} differs by {}; allowed is {}.",
                card.title(),
                check.what,
                difference(check),
                tolerance(check)
            ));
        }
    }
    out
}

/// "3 of 3 passed", or what did not.
pub(super) fn check_summary(checks: &[Check]) -> String {
    let passed = checks.iter().filter(|c| c.passed).count();
    match checks.len() {
        0 => "none; this result was not checked".to_owned(),
        all if all == passed => format!("{passed} of {all} passed"),
        all => format!("{} of {all} FAILED", all - passed),
    }
}

/// The word for a check.
pub(super) fn check_word(check: &Check) -> &'static str {
    if check.passed { "passed" } else { "FAILED" }
}

/// The difference a check found.
pub(super) fn difference(check: &Check) -> String {
    check.difference.map_or_else(|| "not a number".to_owned(), |d| small(d, &check.unit))
}

/// The difference a check allows.
pub(super) fn tolerance(check: &Check) -> String {
    small(check.tolerance, &check.unit)
}

fn small(value: f64, unit: &str) -> String {
    let number = if value == 0.0 {
        "0".to_owned()
    } else if (1e-3..1e4).contains(&value.abs()) {
        let short: f64 = format!("{value:.2e}").parse().unwrap_or(value);
        format!("{short}")
    } else {
        let text = format!("{value:.1e}");
        match text.split_once('e') {
            Some((lead, power)) => format!("{}·10{}", lead.strip_suffix(".0").unwrap_or(lead), raised(power)),
            None => text,
        }
    };
    match unit {
        "" => number,
        "°" => format!("{number}°"),
        _ => format!("{number} {unit}"),
    }
}

fn raised(power: &str) -> String {
    const DIGITS: [char; 10] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
    power
        .chars()
        .filter_map(|c| match c {
            '-' => Some('⁻'),
            c => c.to_digit(10).and_then(|d| DIGITS.get(d as usize).copied()),
        })
        .collect()
}

fn items(out: &mut Vec<String>, heading: &str, items: &[Item]) {
    if items.is_empty() {
        return;
    }
    out.push(heading.to_owned());
    let rows = items.iter().map(|i| vec![i.symbol.clone(), true_minus(&i.shown), i.name.clone()]);
    columns(out, rows.collect());
}

fn table(out: &mut Vec<String>, table: &Table) {
    out.push(table.caption.clone());
    let heading = table
        .columns
        .iter()
        .map(|c| if c.unit.is_empty() { c.heading.clone() } else { format!("{} ({})", c.heading, c.unit) })
        .collect();
    let mut rows: Vec<Vec<String>> = vec![heading];
    rows.extend(table.rows.iter().map(|r| r.iter().map(|c| true_minus(c)).collect()));
    let numeric: Vec<bool> = table.columns.iter().map(|c| c.numeric).collect();
    aligned(out, rows, &numeric);
}

/// A table as plain text, its caption first.
pub(super) fn table_text(shown: &Table) -> String {
    let mut out = Vec::new();
    table(&mut out, shown);
    out.join("\n")
}

/// Rows in aligned columns of words.
fn columns(out: &mut Vec<String>, rows: Vec<Vec<String>>) {
    aligned(out, rows, &[]);
}

/// Rows in aligned columns, indented; columns of numbers stand at their right edge.
fn aligned(out: &mut Vec<String>, rows: Vec<Vec<String>>, numeric: &[bool]) {
    let count = rows.iter().map(Vec::len).max().unwrap_or(0);
    let widths: Vec<usize> = (0..count)
        .map(|i| rows.iter().filter_map(|r| r.get(i)).map(|c| c.chars().count()).max().unwrap_or(0))
        .collect();
    for row in rows {
        let mut line = String::from(" ");
        for (i, (cell, width)) in row.iter().zip(&widths).enumerate() {
            let number = numeric.get(i).copied().unwrap_or(false);
            if *width > 0 && number {
                line.push_str(&format!(" {cell:>width$} "));
            } else if *width > 0 {
                line.push_str(&format!(" {cell:<width$} "));
            }
        }
        out.push(line.trim_end().to_owned());
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::show::sample;

    #[test]
    fn begins_with_title_and_answer_and_lines_columns_up() {
        let text = card_text(&sample::card());
        let lines: Vec<&str> = text.lines().collect();
        assert_eq!(lines[0], "Limits of the wall at 2950 m");
        assert!(lines[1].contains("41.3 MPa"), "{text}");
        let starts: Vec<usize> = lines.iter().filter(|l| l.contains(" MPa ")).filter_map(|l| l.find(" MPa ")).collect();
        assert!(starts.len() >= 2);
        assert!(text.contains("1 of 2 FAILED"));
        assert!(text.contains("passed") && text.contains("FAILED"));
        assert!(text.contains('−'));
    }

    #[test]
    fn small_numbers_read_well() {
        assert_eq!(small(1.0e-9, "MPa"), "1·10⁻⁹ MPa");
        assert_eq!(small(2.34e-13, ""), "2.3·10⁻¹³");
        assert_eq!(small(0.02, "°"), "0.02°");
        assert_eq!(small(0.0, "MPa"), "0 MPa");
    }

    #[test]
    fn a_sheet_says_what_stands_against_it() {
        let text = sheet_text(&sample::sheet().record());
        assert!(text.contains("Unmatched input: pore pressure"), "{text}");
        assert!(text.contains("FAILED check"));
        assert!(text.contains("1 given, 1 result"));
    }
}
