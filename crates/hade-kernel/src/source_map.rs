//! From a place in the code that was compiled back to the line of the cell.

use std::fs;
use std::path::Path;

/// Splits the message of a panic from its place: `(message, line of the cell)`.
///
/// The standard library prints `thread 'main' panicked at src/lib.rs:117:5:` and then the message.
/// The line counts in the code the engine made of the cell, which holds the cell's own lines.
pub(crate) fn panic(words: &str, crate_folder: &Path, cell: &str) -> (String, Option<usize>) {
    let Some(start) = words.find("panicked at ") else {
        return (words.trim().to_owned(), None);
    };
    let after = &words[start + "panicked at ".len()..];
    let (place, message) = after.split_once('\n').unwrap_or((after, ""));
    let message: String = message
        .lines()
        .take_while(|line| !line.starts_with("note: run with `RUST_BACKTRACE") && *line != "stack backtrace:")
        .collect::<Vec<_>>()
        .join("\n");
    let line = place
        .strip_prefix("src/lib.rs:")
        .and_then(|rest| rest.split(':').next())
        .and_then(|number| number.parse::<usize>().ok())
        .and_then(|number| {
            let made = fs::read_to_string(crate_folder.join("src/lib.rs")).ok()?;
            cell_line(made.lines().nth(number.checked_sub(1)?)?, cell)
        });
    (message.trim().to_owned(), line)
}

/// The only line of the cell that holds, or is held in, the given line of compiled code.
fn cell_line(made: &str, cell: &str) -> Option<usize> {
    let made = made.trim();
    let mut found = cell.lines().enumerate().filter(|(_, line)| {
        let line = line.trim();
        !line.is_empty() && (made == line || made.contains(line) || (made.len() > 8 && line.contains(made)))
    });
    let (first, _) = found.next()?;
    found.next().is_none().then_some(first + 1)
}

/// The line of the cell that holds its only `?`.
pub(crate) fn only_question_mark(cell: &str) -> Option<usize> {
    let mut found = cell.lines().enumerate().filter(|(_, line)| {
        let code = line.split("//").next().unwrap_or_default();
        code.match_indices('?').any(|(at, _)| {
            let next = code[at + 1..].trim_start().chars().next();
            at > 0 && matches!(next, None | Some(';' | '.' | ')' | ',' | ']' | '}' | '?'))
        })
    });
    let (first, _) = found.next()?;
    found.next().is_none().then_some(first + 1)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_panic_gives_its_message_without_noise() {
        let words = "\nthread 'main' (12) panicked at src/lib.rs:117:5:\nno rock\nat all\nnote: run with `RUST_BACKTRACE=1` environment variable to display a backtrace";
        assert_eq!(panic(words, Path::new("/nowhere"), ""), ("no rock\nat all".to_owned(), None));
    }

    #[test]
    fn a_line_is_found_only_where_it_is_one() {
        let cell = "let a = 1;\nlet b = v[7];\na + 1";
        assert_eq!(cell_line("    let b = v[7];", cell), Some(2));
        assert_eq!(cell_line("x", "x\nx"), None);
    }

    #[test]
    fn a_question_mark_is_named_only_alone() {
        assert_eq!(only_question_mark("let a = 1;\nlet b = f()?;\n// why?"), Some(2));
        assert_eq!(only_question_mark("f()?;\ng()?;"), None);
    }
}
