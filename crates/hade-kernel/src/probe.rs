//! Asks the compiler for the types of a cell's variables.
//!
//! The engine must know the type of every variable a cell leaves behind, and asks rust-analyzer,
//! which reads our small standard library only. Where that does not reach, the compiler knows: a
//! check of the cell with one unmet requirement a variable makes it name each type.

use std::fmt::Write as _;
use std::fs;
use std::path::Path;

use evcxr::CommandContext;

use crate::syntax::{self, Outline};
use crate::wrapper::FULL_TYPES_FILE;

/// What the engine says when rust-analyzer does not know a type.
const UNKNOWN: &str = "Couldn't automatically determine type of variable";

/// Begins our messages from the compiler.
const WORD: &str = "HADE_TYPE";

/// What the compiler knew.
#[derive(Debug, PartialEq, Eq)]
pub(crate) enum Answer {
    /// The cell with the types written out.
    Rewritten(String),
    /// These variables cannot outlive their cell: name and type.
    Unstorable(Vec<(String, String)>),
    /// Nothing.
    Nothing,
}

/// Whether the compiler should be asked.
pub(crate) fn is_needed(message: &str) -> bool {
    message.starts_with(UNKNOWN)
}

/// Asks the compiler for the types in a cell.
pub(crate) fn ask(context: &mut CommandContext, crate_folder: &Path, cell: &str) -> Answer {
    let outline = syntax::outline(cell);
    if outline.bindings.is_empty() {
        return Answer::Nothing;
    }
    let flag = crate_folder.join(FULL_TYPES_FILE);
    if fs::write(&flag, "").is_err() {
        return Answer::Nothing;
    }
    let checked = context.check(&question(cell, &outline));
    let _ = fs::remove_file(&flag);
    let messages: Vec<String> = checked.unwrap_or_default().iter().map(evcxr::CompilationError::message).collect();
    answer(cell, &outline, &types(&messages))
}

/// The cell with one unmet requirement a variable.
fn question(cell: &str, outline: &Outline) -> String {
    let mut code = cell.to_owned();
    code.push('\n');
    if outline.ends_in_expression {
        code.push(';');
    }
    for (number, binding) in outline.bindings.iter().enumerate() {
        let _ = writeln!(
            code,
            "{{ #[diagnostic::on_unimplemented(message = \"{WORD} {number} {{Self}}\")] trait HadeType {{}} \
             fn hade_type<T: HadeType>(_: &T) {{}} hade_type(&{}); }};",
            binding.name
        );
    }
    code
}

/// The types by the number of the variable.
fn types(messages: &[String]) -> Vec<(usize, String)> {
    messages
        .iter()
        .filter_map(|message| {
            let (number, name) = message.strip_prefix(WORD)?.trim_start().split_once(' ')?;
            let name = name.replace("{float}", "f64").replace("{integer}", "i32");
            Some((number.parse().ok()?, name))
        })
        .collect()
}

fn answer(cell: &str, outline: &Outline, types: &[(usize, String)]) -> Answer {
    let mut insertions = Vec::new();
    let mut unstorable = Vec::new();
    for (number, name) in types {
        let Some(binding) = outline.bindings.get(*number) else {
            continue;
        };
        if !is_nameable(name) {
            unstorable.push((binding.name.clone(), name.clone()));
        } else {
            let mutable = if binding.mutable { "mut " } else { "" };
            let variable = &binding.name;
            insertions.push((binding.end, format!(" let {mutable}{variable}: {name} = {variable};")));
        }
    }
    if !unstorable.is_empty() {
        return Answer::Unstorable(unstorable);
    }
    if insertions.is_empty() {
        return Answer::Nothing;
    }
    insertions.sort_by_key(|(at, _)| std::cmp::Reverse(*at));
    let mut rewritten = cell.to_owned();
    for (at, text) in insertions {
        rewritten.insert_str(at, &text);
    }
    Answer::Rewritten(rewritten)
}

/// Whether a type can be written in the source.
fn is_nameable(name: &str) -> bool {
    !["{", "'_", "impl ", "fn(", "_>", "<_", " _", "(_"].iter().any(|part| name.contains(part))
        || (name.starts_with("fn(") && !name.contains('{'))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn types_are_written_after_their_statements() {
        let cell = "let (a, mut b) = f()?;\nlet c = a;\nc";
        let outline = syntax::outline(cell);
        let types = types(&[
            "HADE_TYPE 0 {float}".into(),
            "something else".into(),
            "HADE_TYPE 1 std::vec::Vec<{integer}>".into(),
        ]);
        assert_eq!(
            answer(cell, &outline, &types),
            Answer::Rewritten(
                "let (a, mut b) = f()?; let mut b: std::vec::Vec<i32> = b; let a: f64 = a;\nlet c = a;\nc".into()
            )
        );
    }

    #[test]
    fn a_closure_is_named_unstorable() {
        let cell = "let f = |x: f64| x;";
        let types = types(&["HADE_TYPE 0 {closure@src/lib.rs:1:1: 1:2}".into()]);
        assert!(matches!(answer(cell, &syntax::outline(cell), &types), Answer::Unstorable(_)));
    }

    #[test]
    fn the_question_keeps_the_cell_whole() {
        let cell = "let a = 1;\na";
        let question = question(cell, &syntax::outline(cell));
        assert!(question.starts_with("let a = 1;\na\n;{ #[diagnostic"));
        assert!(question.contains("HADE_TYPE 0 {Self}"));
    }
}
