//! Why a cell failed, said so that its author can act on it.

use std::path::Path;
use std::time::Duration;

use crate::cell::{CellError, Output, Stream};
use crate::collect::Stop;
use crate::{compile_error, source_map};

/// A cell that ended early.
pub(crate) fn stopped(stop: Stop, crate_folder: &Path, cell: &str) -> CellError {
    match stop {
        Stop::Early(words) => {
            let sentence = first_line(&words, "the cell ended early with an error that says nothing");
            CellError { name: "Error".to_owned(), sentence, detail: words, line: source_map::only_question_mark(cell) }
        }
        Stop::Panic(words) => {
            let (message, line) = source_map::panic(&words, crate_folder, cell);
            let message = if message.is_empty() { "the cell panicked".to_owned() } else { message };
            CellError { name: "Panic".to_owned(), sentence: first_line(&message, ""), detail: message, line }
        }
    }
}

/// A cell the engine could not run to its end.
pub(crate) fn failed(error: &evcxr::Error, cell: &str, before: &[String], outputs: &mut Vec<Output>) -> CellError {
    match error {
        evcxr::Error::CompilationErrors(errors) => compile_error::render(errors, cell),
        evcxr::Error::SubprocessTerminated(words) => died(words, before, outputs),
        evcxr::Error::TypeRedefinedVariablesLost(names) => {
            let sentence = format!("a type was defined anew, so these variables are lost: {}", names.join(", "));
            CellError { name: "CompileError".to_owned(), detail: sentence.clone(), sentence, line: None }
        }
        evcxr::Error::Message(words) => CellError {
            name: "CompileError".to_owned(),
            sentence: first_line(words, "the cell cannot be run"),
            detail: words.clone(),
            line: None,
        },
    }
}

/// The process that ran the cells is gone.
fn died(words: &str, before: &[String], outputs: &mut Vec<Output>) -> CellError {
    let said = words.rsplit("status: ").next().unwrap_or(words).trim();
    let fault = cut_backtrace(outputs);
    let what = if words.contains("exit status: ") || words.contains("exit code: ") {
        format!(
            "the cell ended the whole program (exit status {said}); remove the call that exits, such as std::process::exit"
        )
    } else if fault {
        "the cell touched memory that is not its own (segmentation fault); look for unsafe code".to_owned()
    } else if said.starts_with("11 ") || said.starts_with("10 ") || said.contains("SIGSEGV") {
        "the cell used up its stack, as a function that calls itself without end does".to_owned()
    } else if said.contains("SIGKILL") {
        "the process of the cells was killed; the machine may be out of memory".to_owned()
    } else {
        format!("the process of the cells ended unexpectedly ({said})")
    };
    let detail = format!("{what}.{}", lost(before));
    CellError { name: "ProcessDied".to_owned(), sentence: what, detail, line: None }
}

/// Where in standard error the engine begins to tell of a fault in memory.
pub(crate) fn fault_at(text: &str) -> Option<usize> {
    ["Segmentation fault.\n", "Bus error.\n", "Illegal instruction.\n"].iter().find_map(|words| text.find(words))
}

/// Takes the engine's own backtrace away; whether there was one.
fn cut_backtrace(outputs: &mut Vec<Output>) -> bool {
    for at in 0..outputs.len() {
        if let Some(Output::Text { stream: Stream::Stderr, text }) = outputs.get_mut(at)
            && let Some(start) = fault_at(text)
        {
            text.truncate(start);
            let keep = if text.is_empty() { at } else { at + 1 };
            outputs.truncate(keep);
            return true;
        }
    }
    false
}

/// A cell that was stopped because it ran too long.
pub(crate) fn timeout(limit: Duration, before: &[String]) -> CellError {
    let sentence = format!(
        "stopped after {} s; allow more with --cell-timeout, or look for a loop without end",
        limit.as_secs_f64()
    );
    CellError { name: "Timeout".to_owned(), detail: format!("{sentence}.{}", lost(before)), sentence, line: None }
}

/// A cell that was interrupted while it ran.
pub(crate) fn interrupted(before: &[String]) -> CellError {
    let sentence = "interrupted; the cell did not run to its end";
    let detail = format!("{sentence}.{}", lost(before));
    CellError { name: "Interrupted".to_owned(), sentence: sentence.to_owned(), detail, line: None }
}

/// A cell that waits for something to be typed.
pub(crate) fn asks_for_input() -> CellError {
    let sentence = "a cell cannot read standard input (stdin); write the value in the cell";
    CellError { name: "NoInput".to_owned(), sentence: sentence.to_owned(), detail: sentence.to_owned(), line: None }
}

/// Variables whose types cannot be kept between cells.
pub(crate) fn unstorable(variables: &[(String, String)]) -> CellError {
    let names: Vec<String> = variables.iter().map(|(name, _)| format!("`{name}`")).collect();
    let sentence = format!(
        "{} cannot be kept for the next cell: {} a closure, an iterator or a borrow. Keep an owned value instead (.collect::<Vec<_>>(), .clone(), .to_vec()), use a fn for a closure, or put the code in braces",
        names.join(", "),
        if names.len() == 1 { "it is" } else { "they are" }
    );
    let types: Vec<String> = variables.iter().map(|(name, kind)| format!("  {name}: {kind}")).collect();
    CellError {
        name: "CompileError".to_owned(),
        detail: format!("{sentence}.\n{}", types.join("\n")),
        sentence,
        line: None,
    }
}

/// The engine itself failed.
pub(crate) fn engine_failed() -> CellError {
    let sentence = "the notebook engine failed on this cell; try to write it in smaller steps";
    CellError { name: "EngineError".to_owned(), sentence: sentence.to_owned(), detail: sentence.to_owned(), line: None }
}

fn lost(before: &[String]) -> String {
    if before.is_empty() { String::new() } else { format!(" All variables are lost: {}.", before.join(", ")) }
}

fn first_line(words: &str, otherwise: &str) -> String {
    words.lines().map(str::trim).find(|line| !line.is_empty()).unwrap_or(otherwise).to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_end_is_explained() {
        let error = |words: &str| died(words, &["a".to_owned()], &mut Vec::new());
        assert!(error("Subprocess terminated with status: exit status: 3").sentence.contains("exit status 3"));
        let overflow = error("Subprocess terminated with status: signal: 11 (SIGSEGV) (core dumped)");
        assert!(overflow.sentence.contains("stack"), "{}", overflow.sentence);
        assert!(overflow.detail.ends_with("All variables are lost: a."));
    }

    #[test]
    fn a_backtrace_is_cut() {
        let mut outputs =
            vec![Output::Text { stream: Stream::Stderr, text: "mine\nSegmentation fault.\n   0: frames".to_owned() }];
        assert!(cut_backtrace(&mut outputs));
        assert_eq!(outputs, [Output::Text { stream: Stream::Stderr, text: "mine\n".to_owned() }]);
    }
}
