//! Which `?` ended a cell early.
//!
//! The engine turns every error that a `?` of a cell meets into one of its own, and prints it. The conversion is made
//! to print its caller's place too, which is the `?`: nothing is done where no error is met, and the cell's own code
//! stays as it is.

use std::fs;
use std::path::Path;

/// How the engine's conversion begins, what it is made to begin with, and the same for what it prints.
const TYPE: &str = "for EvcxrUserCodeError {";
const CONVERSION: [&str; 2] = ["fn from(error: T) -> Self {", "#[track_caller] fn from(error: T) -> Self {"];
const PRINT: [&str; 2] =
    ["eprintln!(\"{}\", error);", "eprintln!(\"{}\\n\\u{1e}{}\", error, ::std::panic::Location::caller());"];

/// Stands between the words of an error and its place.
const MARK: &str = "\n\u{1e}";

/// Lets the compiled code of a cell, in this file, say which `?` met an error. Its lines stay where they are.
pub(crate) fn add_places(file: &Path) -> std::io::Result<()> {
    if let Some(code) = with_places(&fs::read_to_string(file)?) {
        // For Cargo the file has not changed.
        let written = fs::metadata(file)?.modified()?;
        fs::write(file, code)?;
        fs::File::options().write(true).open(file)?.set_modified(written)?;
    }
    Ok(())
}

fn with_places(code: &str) -> Option<String> {
    let (before, conversion) = code.split_at(code.find(TYPE)?);
    let placed =
        |code: String, [plain, placed]: [&str; 2]| code.contains(plain).then(|| code.replacen(plain, placed, 1));
    Some(before.to_owned() + &placed(placed(conversion.to_owned(), CONVERSION)?, PRINT)?)
}

/// The words of an error and the place of its `?` in the compiled code, `src/lib.rs:117:5`.
pub(crate) fn words_and_place(words: &str) -> (&str, Option<&str>) {
    match words.trim_end().rsplit_once(MARK) {
        Some((words, place)) => (words, Some(place)),
        None => (words, None),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_conversion_is_made_to_say_its_caller_on_the_same_lines() {
        let code = "fn from(error: T) -> Self {}\nimpl<T: std::fmt::Display> From<T> for EvcxrUserCodeError {\n  \
                    fn from(error: T) -> Self {\n    eprintln!(\"{}\", error);\n    EvcxrUserCodeError {}\n  }\n}\n";
        let placed = with_places(code).unwrap_or_default();
        assert_eq!(placed.lines().count(), code.lines().count());
        assert!(placed.starts_with("fn from") && placed.contains("\n  #[track_caller] fn from"), "{placed}");
        assert!(placed.contains("Location::caller()"), "{placed}");
        assert_eq!(with_places("fn main() {}"), None);
        assert_eq!(with_places(&placed), None);
    }

    #[test]
    fn words_come_without_their_place() {
        assert_eq!(words_and_place("no\nrock\n\u{1e}src/lib.rs:7:9\n"), ("no\nrock", Some("src/lib.rs:7:9")));
        assert_eq!(words_and_place("no rock\n"), ("no rock\n", None));
    }
}
