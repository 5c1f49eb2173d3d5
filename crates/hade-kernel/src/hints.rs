//! What to say in plain words beside a message of the compiler.

use evcxr::CompilationError;

use crate::ledger::Ledger;
use crate::mismatch;

/// A sentence that says more than the compiler can know, or says it plainer.
pub(crate) fn hint(error: &CompilationError, cell: &str, ledger: &Ledger) -> Option<Hint> {
    let message = error.message();
    let name = message.split('`').nth(1).unwrap_or_default();
    if message.starts_with("cannot find value `")
        && let Some(story) = ledger.explain(name)
    {
        return Some(Hint { words: story, first: true });
    }
    if error.code() == Some("E0382") {
        let taken = error.spanned_messages().iter().find_map(|part| {
            let span = part.span.as_ref().filter(|_| part.label.contains("moved here"))?;
            Some(span.start_line)
        });
        return Some(Hint { words: moved(name, taken), first: false });
    }
    if error.code() == Some("E0514") || error.code() == Some("E0460") {
        return Some(Hint { words: COMPILER_CHANGED.to_owned(), first: true });
    }
    let lines = error.spanned_messages().iter().filter_map(|part| part.span.as_ref()).map(|span| span.start_line);
    if let Some(words) = lines.filter_map(|line| cell.lines().nth(line.checked_sub(1)?)).find_map(decimal_comma) {
        return Some(Hint { words, first: matches!(error.code(), None | Some("E0061" | "E0308")) });
    }
    let words = match error.code()? {
        "E0308" => error.spanned_messages().iter().find_map(|part| {
            let span = part.span.as_ref()?;
            let to = (span.start_line == span.end_line).then_some(span.end_column);
            mismatch::advice(&part.label, piece(cell, span.start_line, span.start_column, to))
        }),
        "E0277" => mismatch::sum(&message),
        _ => None,
    };
    words.map(|words| Hint { words, first: true })
}

/// The code from one column of a line to another, or to the line's end; lines and columns count from 1.
fn piece(cell: &str, line: usize, from: usize, to: Option<usize>) -> &str {
    let text = cell.lines().nth(line.saturating_sub(1)).unwrap_or_default();
    let byte = |column: usize| text.char_indices().nth(column.saturating_sub(1)).map_or(text.len(), |(at, _)| at);
    let start = byte(from);
    text.get(start..to.map_or(text.len(), byte).max(start)).unwrap_or_default()
}

/// Words of ours about an error.
pub(crate) struct Hint {
    pub(crate) words: String,
    /// They say what happened better than the compiler's own sentence.
    pub(crate) first: bool,
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
mod tests {
    use super::*;

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
        assert_eq!(piece(cell, 1, 5, Some(6)), "σ");
        assert_eq!(piece(cell, 2, 19, Some(23)), "41.0");
        assert_eq!(piece(cell, 2, 19, None), "41.0;");
        assert_eq!([piece(cell, 2, 99, Some(100)), piece(cell, 9, 1, Some(2)), piece(cell, 2, 9, Some(3))], [""; 3]);
    }

    #[test]
    fn a_moved_value_is_said_plainly() {
        assert!(moved("s", Some(2)).contains("`s` was given away on line 2; write `&s` or `s.clone()`"));
    }
}
