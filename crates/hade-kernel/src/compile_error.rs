//! The compiler's messages about a cell, in plain text.

use std::fmt::Write as _;

use evcxr::CompilationError;

use crate::cell::CellError;
use crate::hints::{self, Hint, Known};
use crate::refused;

/// Shown at most; the rest usually follows from these.
const MOST: usize = 8;

/// One error for everything the compiler said about a cell.
pub(crate) fn render(errors: &[CompilationError], known: &mut Known<'_>) -> CellError {
    let mut told: Vec<&CompilationError> = errors.iter().filter(|error| error.level() == "error").collect();
    let Some(&first) = told.first() else {
        return CellError {
            name: "CompileError".to_owned(),
            sentence: "the cell does not compile".to_owned(),
            detail: errors.iter().map(CompilationError::message).collect::<Vec<_>>().join("\n"),
            line: None,
        };
    };
    let mut hints = vec![hints::hint(first, known)];
    if hints.iter().flatten().any(|hint| hint.alone) {
        told.retain(|error| std::ptr::eq(*error, first) || !refused::follows(error));
    }
    let left = told.len().saturating_sub(MOST);
    told.truncate(MOST);
    hints.extend(told.iter().skip(1).map(|error| hints::hint(error, known)));
    let mut detail = String::new();
    for (error, hint) in told.iter().zip(&hints) {
        one(error, known.cell, hint.as_ref(), &mut detail);
    }
    if left > 0 {
        let _ = writeln!(detail, "and {left} more");
    }
    let hint = hints.into_iter().next().flatten().filter(|hint| hint.first);
    let line = first.primary_spanned_message().and_then(|message| message.span).map(|span| span.start_line);
    CellError {
        name: first.code().unwrap_or("CompileError").to_owned(),
        line: hint.as_ref().and_then(|hint| hint.line).or(line),
        sentence: hint.map_or_else(|| one_line(&first.message()), |hint| hint.words),
        detail: detail.trim_end().to_owned(),
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

fn one(error: &CompilationError, cell: &str, hint: Option<&Hint>, out: &mut String) {
    let code = error.code().map(|code| format!("[{code}]")).unwrap_or_default();
    let said = one_line(&error.message());
    let _ = writeln!(out, "error{code}: {said}");
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
        let label = if message.label.strip_prefix("error: ") == Some(said.as_str()) { "" } else { &message.label };
        let marked = format!("{}{} {label}", " ".repeat(head.chars().count() + start), mark.repeat(length.max(1)));
        let _ = writeln!(out, "{}", marked.trim_end());
    }
    if let Some(hint) = hint {
        let _ = writeln!(out, "  help: {}", hint.words);
    }
    // Where our words say it all, the compiler's are left out.
    for help in error.help().iter().filter(|_| hint.is_none_or(|hint| !hint.first)) {
        let _ = writeln!(out, "  help: {}", with_replacement(help));
    }
}

/// The compiler's advice with the code it would put in, on one line; a sign or a name alone says nothing.
fn with_replacement(help: &str) -> String {
    match help.split_once("\n\n") {
        Some((words, code)) if code.contains([' ', '(', ':']) => format!("{}: `{}`", one_line(words), one_line(code)),
        Some((words, _)) => one_line(words),
        None => one_line(help),
    }
}

fn one_line(text: &str) -> String {
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}
