//! What to say in plain words beside a message of the compiler.

use std::path::Path;

use evcxr::CompilationError;

use crate::ledger::{Ledger, Variable};
use crate::library::Facts;
use crate::{mismatch, refused, syntax, unknown};

/// What is known about a cell besides the compiler's messages.
pub(crate) struct Known<'a> {
    pub(crate) cell: &'a str,
    pub(crate) ledger: &'a Ledger,
    /// The variables of the session.
    pub(crate) variables: &'a [Variable],
    /// The folder of the library's source.
    pub(crate) library: &'a Path,
    /// What could be written at a byte offset of some code.
    pub(crate) complete: &'a mut dyn FnMut(&str, usize) -> Vec<String>,
}

/// Words of ours about an error.
pub(crate) struct Hint {
    pub(crate) words: String,
    /// They say what happened better than the compiler's own sentence.
    pub(crate) first: bool,
    /// Other errors may come from the same mistake.
    pub(crate) alone: bool,
    /// The line of the cell where something is to be done, if it is not that of the error.
    pub(crate) line: Option<usize>,
}

impl Hint {
    /// Words in the place of the compiler's.
    pub(crate) fn first(words: String) -> Hint {
        Hint { words, first: true, alone: false, line: None }
    }

    /// Words beside the compiler's.
    fn beside(words: String) -> Hint {
        Hint { first: false, ..Hint::first(words) }
    }
}

/// A sentence that says more than the compiler can know, or says it plainer.
pub(crate) fn hint(error: &CompilationError, known: &mut Known<'_>) -> Option<Hint> {
    let message = error.message();
    let name = message.split('`').nth(1).unwrap_or_default();
    if message.starts_with("cannot find value `")
        && let Some(story) = known.ledger.explain(name)
    {
        return Some(Hint::first(story));
    }
    if error.code() == Some("E0382") {
        let taken = error.spanned_messages().iter().find_map(|part| {
            let span = part.span.as_ref().filter(|_| part.label.contains("moved here"))?;
            Some(span.start_line)
        });
        return Some(Hint::beside(moved(name, taken)));
    }
    if error.code() == Some("E0514") || error.code() == Some("E0460") {
        return Some(Hint::first(COMPILER_CHANGED.to_owned()));
    }
    let cell = known.cell;
    let lines = error.spanned_messages().iter().filter_map(|part| part.span.as_ref()).map(|span| span.start_line);
    if let Some(words) = lines.filter_map(|line| cell.lines().nth(line.checked_sub(1)?)).find_map(decimal_comma) {
        let first = matches!(error.code(), None | Some("E0061" | "E0308"));
        return Some(Hint { first, ..Hint::first(words) });
    }
    let words = if message.starts_with("The variable `") && message.contains("contains a reference") {
        borrowed(name, syntax::initial_value(cell, name).as_deref())
    } else if message.starts_with("invalid suffix `") {
        let number = parts(error, cell).into_iter().find(|part| part.primary)?.code;
        let number = number.strip_suffix(name)?;
        format!("a unit is a call behind a point; write `{number}.{name}()`")
    } else if message.starts_with("the `?` operator can only be used on `Result`s, not `Option`s") {
        "what stands before this `?` may be absent; write `.ok_or(\"why it must be there\")?`".to_owned()
    } else if message.starts_with("the `?` operator can only be applied to values") {
        "what stands before this `?` cannot be refused; take the `?` away".to_owned()
    } else if message.contains("not declared as mutable") || error.code() == Some("E0384") {
        unchangeable(name, known)
    } else {
        return refused::hint(error, known)
            .or_else(|| mismatched(error, known))
            .or_else(|| unknown::hint(error, known));
    };
    Some(Hint::first(words))
}

/// A value of another type than is wanted.
fn mismatched(error: &CompilationError, known: &Known<'_>) -> Option<Hint> {
    let words = match error.code()? {
        "E0308" => {
            let parts = parts(error, known.cell);
            parts.iter().find_map(|part| mismatch::advice(&part.label, &part.code)).or_else(|| {
                let (wanted, found) = parts.iter().find_map(|part| mismatch::sides(&part.label))?;
                let (wanted, found) = (unknown::type_name(&wanted), unknown::type_name(&found));
                let facts = (wanted != found).then(|| Facts::of(known.library, &wanted))?;
                mismatch::made_so(&wanted, &facts.makers, &facts.fields)
            })
        }
        "E0277" => mismatch::sum(&error.message()),
        _ => None,
    };
    words.map(Hint::first)
}

/// A place in a cell with the compiler's word about it.
pub(crate) struct Part {
    pub(crate) label: String,
    pub(crate) primary: bool,
    /// The code there; to the line's end, if it goes on beyond it.
    pub(crate) code: String,
}

/// The places in the cell that an error names.
pub(crate) fn parts(error: &CompilationError, cell: &str) -> Vec<Part> {
    let named = error.spanned_messages().iter().filter_map(|part| Some((part, part.span?)));
    named
        .map(|(part, span)| {
            let to = (span.start_line == span.end_line).then_some(span.end_column);
            let code = columns(cell, span.start_line, span.start_column, to).to_owned();
            Part { label: part.label.clone(), primary: part.is_primary, code }
        })
        .collect()
}

/// The code from one column of a line to another, or to the line's end; lines and columns count from 1.
fn columns(cell: &str, line: usize, from: usize, to: Option<usize>) -> &str {
    let text = cell.lines().nth(line.saturating_sub(1)).unwrap_or_default();
    let byte = |column: usize| text.char_indices().nth(column.saturating_sub(1)).map_or(text.len(), |(at, _)| at);
    let start = byte(from);
    text.get(start..to.map_or(text.len(), byte).max(start)).unwrap_or_default()
}

/// Where an error begins, as a byte offset in the cell.
pub(crate) fn place_of(error: &CompilationError, cell: &str) -> Option<usize> {
    let span = error.primary_spanned_message()?.span?;
    let before: usize = cell.split_inclusive('\n').take(span.start_line.checked_sub(1)?).map(str::len).sum();
    let line = cell[before..].lines().next()?;
    let at = line.char_indices().nth(span.start_column.saturating_sub(1)).map_or(line.len(), |(at, _)| at);
    Some(before + at)
}

const COMPILER_CHANGED: &str =
    "the Rust compiler was replaced while this session ran; start the session again, and its libraries are made anew";

/// What a moved value is, for a reader who does not know Rust well.
fn moved(name: &str, taken: Option<usize>) -> String {
    let place = taken.map_or_else(|| "where it is given away".to_owned(), |line| format!("on line {line}"));
    format!(
        "a value has one owner, and `{name}` was given away {place}; write `&{name}` or `{name}.clone()` there to keep it"
    )
}

/// What to write in the place of a variable that would be a reference.
fn borrowed(name: &str, value: Option<&str>) -> String {
    let owned = match value.and_then(|value| value.strip_prefix('&')) {
        Some(value) if !value.trim_start().starts_with("mut ") => {
            let value = value.trim();
            format!("write `let {name} = {}.clone();`, or `&{value}` where `{name}` is used", mismatch::operand(value))
        }
        _ => "keep a value of its own (with .clone(), .to_owned() or .collect::<Vec<_>>()), or put what uses it in the same cell, all in braces".to_owned(),
    };
    format!("`{name}` is a reference, and only values are kept from one cell to the next; {owned}")
}

/// A variable that is changed and was not made so that it can be.
fn unchangeable(name: &str, known: &Known<'_>) -> String {
    let here = syntax::outline(known.cell).bindings.into_iter().find(|binding| binding.name == name);
    let place = match (here, known.ledger.cell_of(name)) {
        (Some(made), _) => format!(" on line {}", syntax::line_of(known.cell, made.start)),
        (None, Some(cell)) => format!(" in cell {cell}, and run that cell again"),
        (None, None) => " where it is made".to_owned(),
    };
    format!("`{name}` is changed here and was not made to be; write `let mut {name}`{place}")
}

/// A number with a comma in a line, such as `52,5.mpa()`.
pub(crate) fn decimal_comma(line: &str) -> Option<String> {
    let code = line.split("//").next().unwrap_or_default();
    let digits = |text: &str| text.chars().take_while(char::is_ascii_digit).collect::<String>();
    for (at, _) in code.match_indices(',') {
        let before: String = digits(&code[..at].chars().rev().collect::<String>()).chars().rev().collect();
        let led = &code[..at - before.len()];
        let after = digits(&code[at + 1..]);
        let rest = &code[at + 1 + after.len()..];
        let method = rest.starts_with('.') && rest[1..].starts_with(|c: char| c.is_ascii_alphabetic());
        // `[1,2]`, `f(1,2)` and `x.0,1` are what they look like.
        let apart = !led.ends_with(|c: char| c.is_alphanumeric() || c == '.' || c == '_' || c == '"');
        let ends = rest.trim_start().starts_with(';') && !code.contains(['[', '(', '{']);
        if !before.is_empty() && !after.is_empty() && apart && (method || ends) {
            let unit = if method { rest.split_inclusive(')').next().unwrap_or_default() } else { "" };
            let thousands = if after.len() == 3 {
                format!(" (or `{before}{after}{unit}`, if thousands are meant)")
            } else {
                String::new()
            };
            return Some(format!(
                "`{before},{after}{unit}` has a comma; write a decimal number with a point, \
                 `{before}.{after}{unit}`{thousands}"
            ));
        }
    }
    None
}

#[cfg(test)]
pub(crate) mod tests {
    use super::*;

    /// What is known in tests: one variable.
    pub(crate) fn known<'a>(cell: &'a str, complete: &'a mut dyn FnMut(&str, usize) -> Vec<String>) -> Known<'a> {
        static LEDGER: std::sync::LazyLock<Ledger> = std::sync::LazyLock::new(Ledger::default);
        static VARIABLES: std::sync::LazyLock<Vec<Variable>> =
            std::sync::LazyLock::new(|| vec![("pore".to_owned(), "hade::units::Pressure".to_owned())]);
        Known { cell, ledger: &LEDGER, variables: &VARIABLES, library: Path::new("no such folder"), complete }
    }

    #[test]
    fn a_reference_is_told_what_to_be_instead() {
        let said = borrowed("b", Some("&a"));
        assert!(said.contains("write `let b = a.clone();`, or `&a` where `b` is used"), "{said}");
        assert!(borrowed("b", Some("&(a + c)")).contains("`let b = (a + c).clone();`"));
        assert!(borrowed("b", Some("a.iter()")).contains(".collect::<Vec<_>>()"));
    }

    #[test]
    fn what_cannot_be_changed_is_told_where_to_let_it() {
        let mut complete = |_: &str, _: usize| Vec::new();
        let known = known("let a = 1;\nlet sheet = (\n  2);\nsheet.0 = 3;", &mut complete);
        let said = unchangeable("sheet", &known);
        assert!(said.ends_with("write `let mut sheet` on line 2"), "{said}");
    }

    #[test]
    fn a_decimal_comma_is_seen() {
        for (line, wanted) in [
            ("let p = 52,5.mpa();", "`52.5.mpa()`"),
            ("Components { nn: 52,5.mpa(), ee: 40.mpa() }", "`52.5.mpa()`"),
            ("let depth = 2950,5;", "`2950.5`"),
            ("f(1,000.psi())", "`1000.psi()`"),
        ] {
            let said = decimal_comma(line).unwrap_or_default();
            assert!(said.contains(wanted), "{line}: {said}");
        }
        for line in ["let a = [1,2];", "f(1,2.5)", "v.push((1,2));", "let a = x.0,1;", "// 52,5.mpa()", "f(a,5.mpa())"]
        {
            assert_eq!(decimal_comma(line), None, "{line}");
        }
    }

    #[test]
    fn a_piece_of_a_cell_counts_characters() {
        let cell = "let σ = 1;\nlet p: Pressure = 41.0;";
        assert_eq!(columns(cell, 1, 5, Some(6)), "σ");
        assert_eq!(columns(cell, 2, 19, Some(23)), "41.0");
        assert_eq!(columns(cell, 2, 19, None), "41.0;");
        assert_eq!(
            [columns(cell, 2, 99, Some(100)), columns(cell, 9, 1, Some(2)), columns(cell, 2, 9, Some(3))],
            [""; 3]
        );
    }

    #[test]
    fn a_moved_value_is_said_plainly() {
        assert!(moved("s", Some(2)).contains("`s` was given away on line 2; write `&s` or `s.clone()`"));
    }
}
