//! The compiler's messages about a cell, in plain text.

use std::fmt::Write as _;

use evcxr::CompilationError;

use crate::cell::CellError;
use crate::hints::{self, Hint};
use crate::ledger::Ledger;

/// Shown at most; the rest usually follows from these.
const MOST: usize = 8;

/// One error for everything the compiler said about a cell.
pub(crate) fn render(errors: &[CompilationError], cell: &str, ledger: &Ledger) -> CellError {
    let shown: Vec<&CompilationError> = errors.iter().filter(|error| error.level() == "error").take(MOST).collect();
    let Some(first) = shown.first() else {
        return CellError {
            name: "CompileError".to_owned(),
            sentence: "the cell does not compile".to_owned(),
            detail: errors.iter().map(CompilationError::message).collect::<Vec<_>>().join("\n"),
            line: None,
        };
    };
    let hints: Vec<Option<Hint>> = shown.iter().map(|error| hints::hint(error, cell, ledger)).collect();
    let mut detail = String::new();
    for (error, hint) in shown.iter().zip(&hints) {
        one(error, cell, &mut detail);
        if let Some(hint) = hint {
            let _ = writeln!(detail, "  help: {}", hint.words);
        }
    }
    let left = errors.len().saturating_sub(shown.len());
    if left > 0 {
        let _ = writeln!(detail, "and {left} more");
    }
    CellError {
        name: first.code().unwrap_or("CompileError").to_owned(),
        sentence: match hints.into_iter().next().flatten().filter(|hint| hint.first) {
            Some(hint) => hint.words,
            None => one_line(&first.message()),
        },
        detail: detail.trim_end().to_owned(),
        line: first.primary_spanned_message().and_then(|message| message.span).map(|span| span.start_line),
    }
}

/// A cell that cannot be read as Rust.
pub(crate) fn unreadable(line: usize, what: &str, cell: &str) -> CellError {
    let text = cell.lines().nth(line - 1).unwrap_or_default();
    let sentence = hints::decimal_comma(text).unwrap_or_else(|| format!("the cell cannot be read: {what}"));
    CellError {
        name: "SyntaxError".to_owned(),
        detail: format!("{sentence}\n  line {line}: {text}"),
        sentence,
        line: Some(line),
    }
}

fn one(error: &CompilationError, cell: &str, out: &mut String) {
    let code = error.code().map(|code| format!("[{code}]")).unwrap_or_default();
    let _ = writeln!(out, "error{code}: {}", error.message());
    let lines: Vec<&str> = cell.lines().collect();
    for message in error.spanned_messages() {
        let Some(span) = message.span else {
            if !message.label.is_empty() {
                let _ = writeln!(out, "  {}", message.label);
            }
            continue;
        };
        let Some(text) = lines.get(span.start_line.saturating_sub(1)) else {
            continue;
        };
        let head = format!("  line {}: ", span.start_line);
        let _ = writeln!(out, "{head}{text}");
        let start = span.start_column.saturating_sub(1);
        let length = if span.start_line == span.end_line {
            span.end_column.saturating_sub(span.start_column)
        } else {
            text.chars().count().saturating_sub(start)
        };
        let mark = if message.is_primary { "^" } else { "-" };
        let _ = writeln!(
            out,
            "{}{} {}",
            " ".repeat(head.chars().count() + start),
            mark.repeat(length.max(1)),
            message.label
        );
    }
    for help in error.help() {
        let _ = writeln!(out, "  help: {}", help.replace('\n', "\n        "));
    }
    if let Some(hint) = error.evcxr_extra_hint() {
        let _ = writeln!(out, "  help: {hint}");
    }
}

fn one_line(text: &str) -> String {
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}
