//! Why a cell failed, said so that its author can act on it.

use std::path::Path;

use crate::cell::{CellError, CellOutcome, Output, Stream};
use crate::collect::Stop;
use crate::error::says_full;
use crate::hints::Known;
use crate::interrupt::{Stopped, Why};
use crate::{commands, compile_error, early, source_map};

/// The sentence for a panic that says nothing, as the one by which the library stops a cell.
const SILENT: &str = "the cell panicked";

/// A sentence, and the whole story, are not longer than so many bytes.
const SENTENCE_LIMIT: usize = 600;
const DETAIL_LIMIT: usize = 20_000;

/// A cell that ended early.
pub(crate) fn stopped(stop: Stop, crate_folder: &Path, cell: &str) -> CellError {
    match stop {
        Stop::Early(words) => {
            let (words, place) = early::words_and_place(&words);
            let line = place.and_then(|place| source_map::line(place, crate_folder, cell));
            let sentence = first_line(words, "the cell ended early with an error that says nothing");
            CellError { name: "Error".to_owned(), sentence, detail: with_line(words, line, cell), line }
        }
        Stop::Panic(words) => {
            let (message, line) = source_map::panic(&words, crate_folder, cell);
            let message = if message.is_empty() { SILENT.to_owned() } else { message };
            let detail = with_line(&message, line, cell);
            CellError { name: "Panic".to_owned(), sentence: first_line(&message, ""), detail, line }
        }
    }
}

/// Words with the line of the cell they are about.
fn with_line(words: &str, line: Option<usize>, cell: &str) -> String {
    match line.and_then(|line| Some((line, cell.lines().nth(line.checked_sub(1)?)?))) {
        Some((line, text)) => format!("{}\n  line {line}: {}", words.trim_end(), text.trim()),
        None => words.to_owned(),
    }
}

/// A cell the engine could not run to its end. `loss` says what was lost if its process died.
pub(crate) fn failed(error: &evcxr::Error, known: &mut Known<'_>, loss: &str, outputs: &mut Vec<Output>) -> CellError {
    match error {
        evcxr::Error::CompilationErrors(errors) => {
            let error = compile_error::render(errors, known);
            match commands::dependency_failure(&error.detail).filter(|_| known.cell.contains(":dep")) {
                Some(sentence) => CellError {
                    name: "DependencyError".to_owned(),
                    detail: format!("{sentence}\n{}", error.detail),
                    sentence,
                    line: error.line,
                },
                None => error,
            }
        }
        evcxr::Error::SubprocessTerminated(words) => died(words, loss, outputs),
        evcxr::Error::TypeRedefinedVariablesLost(names) => {
            plain("CompileError", format!("a type was defined anew, so these variables are lost: {}", names.join(", ")))
        }
        evcxr::Error::Message(words) if says_full(words) => {
            plain("DiskFull", "the disk is full, so the cell could not be compiled; free some space and run it again")
        }
        evcxr::Error::Message(words) if not_persisted(words).is_some() => {
            unstorable(&not_persisted(words).into_iter().collect::<Vec<_>>())
        }
        evcxr::Error::Message(words) => {
            // What Cargo said when it did not come to compiling.
            let said = words.split_once("STDERR:\n").map_or(words.as_str(), |(_, rest)| rest);
            let said = said.split("\nSTDOUT:").next().unwrap_or(said).trim();
            let sentence = commands::dependency_gone(said).unwrap_or_else(|| {
                let first = said.lines().find_map(|line| line.strip_prefix("error: "));
                first.map_or_else(|| first_line(said, "the cell cannot be run"), str::to_owned)
            });
            CellError { name: "CompileError".to_owned(), sentence, detail: said.to_owned(), line: None }
        }
    }
}

/// An error that is one sentence.
pub(crate) fn plain(name: &str, sentence: impl Into<String>) -> CellError {
    let sentence = sentence.into();
    CellError { name: name.to_owned(), detail: sentence.clone(), sentence, line: None }
}

/// The variables whose type a cell defined anew, by what the engine printed of them.
pub(crate) fn retyped(outcome: &CellOutcome) -> Vec<String> {
    let printed = outcome.text(Stream::Stderr);
    let lines = printed.lines().filter_map(|line| {
        line.strip_prefix("The type of the variable ")?.strip_suffix(" was redefined, so was lost.").map(str::to_owned)
    });
    lines.collect()
}

/// The process that ran the cells is gone.
fn died(words: &str, loss: &str, outputs: &mut Vec<Output>) -> CellError {
    let said = words.rsplit("status: ").next().unwrap_or(words).trim();
    let fault = cut_backtrace(outputs);
    let what = if words.contains("exit status: ") || words.contains("exit code: ") {
        format!(
            "the cell ended the whole program (exit status {said}); remove the call that exits, such as std::process::exit"
        )
    } else if fault {
        "the cell touched memory that is not its own (segmentation fault); look for unsafe code".to_owned()
    } else if let Some(wanted) = memory_wanted(outputs) {
        format!(
            "the cell asked for {wanted} of memory at once, and the machine has no more; look for a size that is too large"
        )
    } else if said.starts_with("11 ") || said.starts_with("10 ") || said.contains("SIGSEGV") {
        "the cell used up its stack, as a function that calls itself without end does".to_owned()
    } else if said.contains("SIGKILL") {
        "the process of the cells was killed; the machine may be out of memory".to_owned()
    } else if said.contains("SIGABRT") {
        "the cell aborted the whole program, as a panic while another is handled does".to_owned()
    } else {
        format!("the process of the cells ended unexpectedly ({said})")
    };
    CellError { name: "ProcessDied".to_owned(), detail: format!("{what}.{loss}"), sentence: what, line: None }
}

/// The size in the last words of a program that got no memory, which are taken away.
fn memory_wanted(outputs: &mut Vec<Output>) -> Option<String> {
    let Some(Output::Text { stream: Stream::Stderr, text }) = outputs.last_mut() else {
        return None;
    };
    let start = text.rfind("memory allocation of ")?;
    let bytes: f64 = text[start..].split(' ').nth(3)?.parse().ok()?;
    text.truncate(start);
    if text.trim().is_empty() {
        outputs.pop();
    }
    Some(if bytes >= 1e9 { format!("{:.0} GB", bytes / 1e9) } else { format!("{:.0} MB", (bytes / 1e6).ceil()) })
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

/// What to say of a cell that was stopped; `None` if its own error says more. `loss` says what was lost with its
/// process.
pub(crate) fn interrupted(stopped: Stopped, error: Option<&CellError>, loss: &str) -> Option<CellError> {
    let Stopped { why, killed, compiling } = stopped;
    let how = match error {
        _ if killed => "it did not stop when it was asked, so its process was ended",
        None => "it had just run to its end, and what it defines is kept",
        Some(error) if error.name == "Panic" && error.sentence == SILENT => "variables of earlier cells are kept",
        Some(error) if error.name == "CompileError" && compiling => {
            "it was still being compiled, so nothing of it ran, and all variables are kept"
        }
        Some(_) => return None,
    };
    let (name, sentence) = match why {
        Why::Asked => ("Interrupted", format!("the cell was interrupted: {how}")),
        Why::TooLong(limit) => (
            "Timeout",
            format!(
                "the cell was stopped after {} s: {how}; allow more with --cell-timeout, or look for a loop without end",
                limit.as_secs_f64()
            ),
        ),
    };
    let detail = if killed {
        format!(
            "{sentence}.{loss} A long loop of your own stops at once, and loses nothing, if it calls \
             hade::interrupt::check()."
        )
    } else {
        sentence.clone()
    };
    Some(CellError { name: name.to_owned(), sentence, detail, line: None })
}

/// An error of a length that can be shown.
pub(crate) fn bounded(mut error: CellError) -> CellError {
    for (text, limit) in [(&mut error.sentence, SENTENCE_LIMIT), (&mut error.detail, DETAIL_LIMIT)] {
        if text.len() > limit {
            let left = text.len() - limit;
            text.truncate(text.floor_char_boundary(limit));
            text.push_str(&format!("… [{left} bytes more]"));
        }
    }
    error
}

/// A cell that waits for something to be typed.
pub(crate) fn asks_for_input() -> CellError {
    let sentence = "a cell cannot read standard input (stdin); write the value in the cell";
    CellError { name: "NoInput".to_owned(), sentence: sentence.to_owned(), detail: sentence.to_owned(), line: None }
}

/// The variable that the engine says it cannot keep, with its type.
fn not_persisted(words: &str) -> Option<(String, String)> {
    let parts: Vec<&str> = words.lines().next()?.split('`').collect();
    match parts.as_slice() {
        ["The variable ", name, " is a closure, which cannot be persisted."] => {
            Some(((*name).to_owned(), "closure".to_owned()))
        }
        ["The variable ", name, " has type ", kind, " which cannot be persisted."] => {
            Some(((*name).to_owned(), (*kind).to_owned()))
        }
        _ => None,
    }
}

/// Variables whose types cannot be kept between cells.
pub(crate) fn unstorable(variables: &[(String, String)]) -> CellError {
    let names: Vec<String> = variables.iter().map(|(name, _)| format!("`{name}`")).collect();
    let (names, one) = (names.join(", "), variables.len() == 1);
    let sentence = if variables.iter().all(|(_, kind)| kind.contains("closure")) {
        format!(
            "{names} cannot be kept for the next cell: {}. Write a `fn` instead, `fn name(x: f64) -> f64 {{ … }}`, that takes \
             as arguments what the closure took from around it, or put the code in braces",
            if one { "it is a closure" } else { "they are closures" }
        )
    } else {
        format!(
            "{names} cannot be kept for the next cell: {} a closure, an iterator or a borrow. Keep an owned value instead (.collect::<Vec<_>>(), .clone(), .to_vec()), use a fn for a closure, or put the code in braces",
            if one { "it is" } else { "they are" }
        )
    };
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
    plain("EngineError", "the notebook engine failed on this cell; try to write it in smaller steps")
}

/// What a session needs was removed while it ran.
pub(crate) fn gone(folder: &Path) -> CellError {
    plain(
        "SessionError",
        format!(
            "{} was removed while the session ran, so nothing can be compiled; restart the kernel, and it is made anew",
            folder.display()
        ),
    )
}

fn first_line(words: &str, otherwise: &str) -> String {
    words.lines().map(str::trim).find(|line| !line.is_empty()).unwrap_or(otherwise).to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_end_is_explained() {
        let error = |words: &str| died(words, " All is lost.", &mut Vec::new());
        assert!(error("Subprocess terminated with status: exit status: 3").sentence.contains("exit status 3"));
        let overflow = error("Subprocess terminated with status: signal: 11 (SIGSEGV) (core dumped)");
        assert!(overflow.sentence.contains("stack"), "{}", overflow.sentence);
        assert!(overflow.detail.ends_with(". All is lost."));
    }

    #[test]
    fn what_cannot_be_kept_is_told_what_to_be_instead() {
        let said = |words: &str| not_persisted(words).map(|variable| unstorable(&[variable]).sentence);
        let closure = "The variable `double` is a closure, which cannot be persisted.\nYou can however persist closures if you box them. e.g.:";
        let closure = said(closure).unwrap_or_default();
        assert!(
            closure.starts_with("`double` cannot be kept") && closure.contains("Write a `fn` instead"),
            "{closure}"
        );
        assert!(!closure.contains("Box"), "{closure}");
        let borrow =
            "The variable `parts` has type `std::slice::Iter<'_, i32>` which cannot be persisted.\nYou might be able";
        assert!(said(borrow).is_some_and(|said| said.contains("a closure, an iterator or a borrow")));
        assert_eq!(said("Couldn't automatically determine type of variable `a`."), None);
    }

    #[test]
    fn want_of_memory_is_named() {
        let words = "mine\nmemory allocation of 70368744177664 bytes failed\n";
        let mut outputs = vec![Output::Text { stream: Stream::Stderr, text: words.to_owned() }];
        let error = died("Subprocess terminated with status: signal: 6 (SIGABRT)", "", &mut outputs);
        assert!(error.sentence.contains("70369 GB"), "{}", error.sentence);
        assert_eq!(outputs, [Output::Text { stream: Stream::Stderr, text: "mine\n".to_owned() }]);
    }

    #[test]
    fn an_interrupt_does_not_hide_a_real_error() {
        let asked = |killed| Stopped { why: Why::Asked, killed, compiling: false };
        let silent = plain("Panic", SILENT);
        let stopped = interrupted(asked(false), Some(&silent), "").map(|error| (error.name, error.sentence));
        assert_eq!(
            stopped,
            Some(("Interrupted".into(), "the cell was interrupted: variables of earlier cells are kept".into()))
        );
        assert_eq!(interrupted(asked(false), Some(&plain("Error", "no depth datum")), ""), None);
        let killed = interrupted(asked(true), Some(&plain("ProcessDied", "signal 9")), " Gone: a.").map(|e| e.detail);
        assert!(killed.unwrap_or_default().contains("its process was ended. Gone: a."));
    }

    #[test]
    fn a_long_message_is_cut() {
        let error = bounded(plain("Panic", "é".repeat(1_000_000)));
        assert!(error.sentence.len() < 1000 && error.detail.len() < 30_000);
    }

    #[test]
    fn a_backtrace_is_cut() {
        let mut outputs =
            vec![Output::Text { stream: Stream::Stderr, text: "mine\nSegmentation fault.\n   0: frames".to_owned() }];
        assert!(cut_backtrace(&mut outputs));
        assert_eq!(outputs, [Output::Text { stream: Stream::Stderr, text: "mine\n".to_owned() }]);
    }
}
