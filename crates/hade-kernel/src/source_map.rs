//! From a place in the code that was compiled back to the line of the cell.

use std::fs;
use std::path::Path;

use crate::syntax;

/// The code the engine made of a cell, in its crate.
pub(crate) const MADE: &str = "src/lib.rs";

/// Stands before the function that holds the statements of the cell.
const FUNCTION: &str = "#[unsafe(no_mangle)]";

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
    let line = line(place, crate_folder, cell);
    (message.trim().to_owned(), line)
}

/// The line of the cell, from 1, of a place in the code the engine made of it, `src/lib.rs:117:5`.
pub(crate) fn line(place: &str, crate_folder: &Path, cell: &str) -> Option<usize> {
    let number = place.strip_prefix(MADE)?.split(':').nth(1)?.parse::<usize>().ok()?;
    let made = fs::read_to_string(crate_folder.join(MADE)).ok()?;
    by_statement(&made, number, cell).or_else(|| cell_line(made.lines().nth(number.checked_sub(1)?)?, cell))
}

/// The line by the statements of the cell, which stand in the function of the cell in their order, and as they are but
/// for the `&` before variables that a list at the end names.
fn by_statement(made: &str, number: usize, cell: &str) -> Option<usize> {
    let made = &made.replace('&', "");
    let mut at = made.rfind(FUNCTION)?;
    for (start, text) in syntax::statements(cell) {
        let text = text.replace('&', "");
        let Some(found) = made[at..].find(&text).map(|found| at + found) else {
            continue;
        };
        let first = syntax::line_of(made, found);
        if let Some(down) = number.checked_sub(first).filter(|down| *down <= text.matches('\n').count()) {
            return Some(syntax::line_of(cell, start) + down);
        }
        at = found + text.len();
    }
    None
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
    fn a_line_that_stands_twice_is_known_by_its_statement() {
        let cell = ":dep x\nlet a = f()?;\nuse b::c;\nlet a = f()?;\ng(\n  1,\n  f()?,\n);\na";
        let made = "fn old() { let a = f()?;\n}\nuse b::c;\n#[unsafe(no_mangle)]\npub fn run() {\nlet a = f()?;\nlet a = \
                    f()?;\ng(\n  1,\n  f()?,\n);\n(\na).show();\n}";
        let lines: Vec<_> = (1..=14).map(|number| by_statement(made, number, cell)).collect();
        let none = None;
        assert_eq!(
            lines,
            [none, none, none, none, none, Some(2), Some(4), Some(5), Some(6), Some(7), Some(8), none, Some(9), none]
        );
        assert_eq!(by_statement("fn other() {}", 1, cell), None);
    }
}
