//! What `run` and `memo` share: the limit on a cell's time, and the words for a cell that failed.

use std::time::Duration;

use hade_kernel::NotebookFailure;

/// Reads a time limit in seconds.
pub(crate) fn seconds(text: &str) -> Result<Duration, String> {
    text.parse::<f64>()
        .ok()
        .and_then(|seconds| Duration::try_from_secs_f64(seconds).ok())
        .filter(|limit| !limit.is_zero())
        .ok_or_else(|| "give a number of seconds above 0, such as 60".to_owned())
}

/// The cell, its sentence, and under it what the compiler or the program said beyond that.
pub(crate) fn cell_failure(failure: &NotebookFailure) -> String {
    let mut message = format!("{failure}\n");
    if failure.error.detail.trim() != failure.error.sentence {
        for line in failure.error.detail.lines() {
            message.push_str(&format!("    {line}\n"));
        }
    }
    message
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_time_limit_is_a_positive_number() {
        assert_eq!(seconds("1.5"), Ok(Duration::from_millis(1500)));
        for bad in ["0", "-1", "NaN", "inf", "a minute", "1e300"] {
            assert!(seconds(bad).is_err(), "{bad}");
        }
    }
}
