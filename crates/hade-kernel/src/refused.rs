//! What to say where a value is used that may be refused or absent, as a `?` left out leaves it.

use evcxr::CompilationError;

use crate::hints::{Hint, Known, parts, place_of};
use crate::ledger::short;
use crate::{mismatch, syntax};

/// A longer piece of code is not repeated whole.
const LONGEST: usize = 48;

/// What to do about an error that comes from a `Result` or an `Option` in the place of what it holds.
pub(crate) fn hint(error: &CompilationError, known: &Known<'_>) -> Option<Hint> {
    let message = error.message();
    let quoted: Vec<&str> = message.split('`').skip(1).step_by(2).collect();
    let parts = || parts(error, known.cell).into_iter();
    let (kind, value) = match error.code()? {
        "E0599" | "E0609" => {
            let at = place_of(error, known.cell)?;
            (short(quoted.get(1)?), syntax::receiver(known.cell, at)?)
        }
        "E0277" => {
            let part = parts().find(|part| part.primary)?;
            (short(quoted.first()?.split(": ").next()?), part.code)
        }
        "E0308" => parts().find_map(|part| {
            let (wanted, found) = mismatch::sides(&part.label)?;
            (holder(&wanted) != holder(&found)).then_some((found, part.code))
        })?,
        "E0369" => parts().find_map(|part| {
            let kind = short(part.label.trim_matches('`'));
            holder(&kind).map(|_| (kind, part.code))
        })?,
        _ => return None,
    };
    let holder = holder(&kind)?;
    let value = value.trim().trim_start_matches('&').trim_start_matches("mut ").trim();
    let (words, line) = words(holder, value, known);
    Some(Hint { line, alone: true, ..Hint::first(words) })
}

/// Whether an error may come from the same left out `?` as another that has been told.
pub(crate) fn follows(error: &CompilationError) -> bool {
    let labels = error.spanned_messages().iter().map(|part| part.label.clone());
    matches!(error.code(), Some("E0282" | "E0283"))
        || labels.chain([error.message()]).any(|words| words.contains("Result<") || words.contains("Option<"))
}

/// What a type holds its value in.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Holder {
    Result,
    Option,
}

fn holder(kind: &str) -> Option<Holder> {
    match kind.trim_start_matches('&').split('<').next()? {
        "Result" => Some(Holder::Result),
        "Option" => Some(Holder::Option),
        _ => None,
    }
}

/// What to write, and the line of the cell where, if that is elsewhere.
fn words(holder: Holder, value: &str, known: &Known<'_>) -> (String, Option<usize>) {
    let (may, write) = match holder {
        Holder::Result => ("be refused", "?"),
        Holder::Option => ("be absent", ".ok_or(\"why it must be there\")?"),
    };
    let bindings = syntax::outline(known.cell).bindings;
    if let Some(made) = bindings.iter().find(|binding| binding.name == value) {
        let line = syntax::line_of(known.cell, made.end.saturating_sub(1));
        return (format!("`{value}` may {may}; write `{write}` at the end of line {line}, which makes it"), Some(line));
    }
    if let Some(cell) = known.ledger.cell_of(value) {
        let words = format!(
            "`{value}` may {may}; write `{write}` at the end of what makes it in cell {cell}, and run that cell again"
        );
        return (words, None);
    }
    let value = abridged(value);
    (format!("`{value}` may {may}; write `{value}{write}` to go on with what it gives"), None)
}

/// A long piece of code without what stands between its last brackets, and without its beginning.
fn abridged(code: &str) -> String {
    let mut code = code.split_whitespace().collect::<Vec<_>>().join(" ");
    if code.chars().count() > LONGEST
        && code.ends_with(')')
        && let Some(open) = open_of_last(&code)
    {
        code.replace_range(open + 1..code.len() - 1, "…");
    }
    match code.char_indices().rev().nth(LONGEST - 1) {
        Some((at, _)) if at > 0 => format!("…{}", &code[at..]),
        _ => code,
    }
}

/// Where the bracket opens that the last one closes.
fn open_of_last(code: &str) -> Option<usize> {
    let mut depth = 0_i32;
    code.char_indices().rev().find_map(|(at, c)| {
        depth += i32::from(matches!(c, ')' | ']' | '}')) - i32::from(matches!(c, '(' | '[' | '{'));
        (depth == 0).then_some(at)
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::hints::tests::known;

    #[test]
    fn what_may_fail_or_be_absent_is_told_so() {
        let mut complete = |_: &str, _: usize| Vec::new();
        let cell = "let a = 1;\nlet pf = sheet.data(\n  \"x\", \"y\");\nf(&pf)";
        let said = |holder, value: &str, known: &Known<'_>| words(holder, value, known);
        let known = known(cell, &mut complete);
        let (refused, line) = said(Holder::Result, "s.effective(p)", &known);
        assert!(refused.contains("write `s.effective(p)?`") && line.is_none(), "{refused}");
        let (absent, _) = said(Holder::Option, "limit.pressure()", &known);
        assert!(absent.contains("`limit.pressure().ok_or(\"why it must be there\")?`"), "{absent}");
        let (made, line) = said(Holder::Result, "pf", &known);
        assert_eq!(made, "`pf` may be refused; write `?` at the end of line 3, which makes it");
        assert_eq!(line, Some(3));
    }

    #[test]
    fn a_long_piece_of_code_is_abridged() {
        let long = "Survey::read_csv(sheet.data(\"data/survey.csv\", \"planned path of OR-9, plan 3\")?)";
        assert_eq!(abridged(long), "Survey::read_csv(…)");
        assert_eq!(abridged("s.on(plane)"), "s.on(plane)");
        assert!(abridged(&format!("{}.x", "a".repeat(99))).starts_with("…a"));
    }

    #[test]
    fn types_that_hold_another_are_told_apart() {
        assert_eq!(holder("Result<Survey, Error>"), Some(Holder::Result));
        assert_eq!(holder("&Option<Pressure>"), Some(Holder::Option));
        assert_eq!(holder("Vec<Option<Pressure>>"), None);
    }
}
