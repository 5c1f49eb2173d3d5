//! What `run` and `memo` share: the limit on a cell's time, and the words for a cell that failed and for Ctrl-C.

use std::fmt;
use std::time::Duration;

use hade_kernel::{NotebookFailure, NotebookRun};

/// Reads a time limit in seconds.
pub(crate) fn seconds(text: &str) -> Result<Duration, String> {
    text.parse::<f64>()
        .ok()
        .and_then(|seconds| Duration::try_from_secs_f64(seconds).ok())
        .filter(|limit| !limit.is_zero())
        .ok_or_else(|| "give a number of seconds above 0, such as 60".to_owned())
}

/// Ctrl-C was pressed.
#[derive(Debug)]
pub(crate) struct Interrupted {
    cell: usize,
    of: usize,
    then: &'static str,
}

impl Interrupted {
    /// In the last cell of a run; `then` says what became of the files.
    pub(crate) fn of(run: &NotebookRun, then: &'static str) -> Interrupted {
        Interrupted { cell: run.cells.len(), of: run.notebook.code_cells().len(), then }
    }
}

impl fmt::Display for Interrupted {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "interrupted in cell {} of {}; {}", self.cell, self.of, self.then)
    }
}

impl std::error::Error for Interrupted {}

/// The cell, its sentence, and under it what the compiler or the program said beyond that.
pub(crate) fn cell_failure(failure: &NotebookFailure) -> String {
    let mut message = format!("{failure}\n");
    let (sentence, detail) = (&failure.error.sentence, &failure.error.detail);
    for line in detail.strip_prefix(sentence.as_str()).unwrap_or(detail).trim_matches('\n').lines() {
        message.push_str(&format!("    {line}\n"));
    }
    message
}

#[cfg(test)]
mod tests {
    use hade_kernel::CellError;

    use super::*;

    #[test]
    fn a_sentence_is_not_said_twice() {
        let error = |detail: &str| CellError {
            name: "Error".into(),
            sentence: "no depth".into(),
            detail: detail.into(),
            line: Some(2),
        };
        let said = |detail: &str| cell_failure(&NotebookFailure { number: 4, error: error(detail) });
        assert_eq!(said("no depth"), "cell 4 (line 2): no depth\n");
        assert_eq!(said("no depth\n  line 2: f()?;"), "cell 4 (line 2): no depth\n      line 2: f()?;\n");
        assert_eq!(said("error[E0308]"), "cell 4 (line 2): no depth\n    error[E0308]\n");
    }

    #[test]
    fn a_time_limit_is_a_positive_number() {
        assert_eq!(seconds("1.5"), Ok(Duration::from_millis(1500)));
        for bad in ["0", "-1", "NaN", "inf", "a minute", "1e300"] {
            assert!(seconds(bad).is_err(), "{bad}");
        }
    }
}
