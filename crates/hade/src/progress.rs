//! Long work that shows how far it is, and stops when it is asked to.
//!
//! In a notebook session a bar appears under the cell once the work has lasted two seconds, and goes when it ends. It
//! is no output that stays: a notebook that runs without Jupyter and a memo do not have it. Elsewhere nothing is shown.

use std::io::Write as _;
use std::sync::atomic::{AtomicUsize, Ordering::Relaxed};
use std::sync::{Mutex, PoisonError};
use std::time::{Duration, Instant};

use crate::interrupt;

/// Shorter work shows nothing.
const PATIENCE: Duration = Duration::from_secs(2);

/// Two pictures of the bar lie at least so far apart.
const REST: Duration = Duration::from_millis(250);

/// The bar is so many characters long.
const LENGTH: usize = 24;

/// How far a piece of work is. Threads may share it.
///
/// ```
/// let progress = hade::progress::Progress::new("stress of 1000 places", 1000);
/// for _ in 0..1000 {
///     progress.advance(1);
/// }
/// ```
#[derive(Debug)]
pub struct Progress {
    what: String,
    total: usize,
    done: AtomicUsize,
    begun: Instant,
    /// When the bar was drawn last.
    drawn: Mutex<Option<Instant>>,
    in_session: bool,
}

impl Progress {
    /// Work of `total` equal parts; `what` names it, such as "limits of 32 760 directions".
    pub fn new(what: &str, total: usize) -> Progress {
        Progress {
            what: what.to_owned(),
            total,
            done: AtomicUsize::new(0),
            begun: Instant::now(),
            drawn: Mutex::new(None),
            in_session: std::env::var_os(interrupt::FLAG_VAR).is_some(),
        }
    }

    /// So many parts more are done, or begin. Ends the cell if it was asked to stop, see [`interrupt::check`]; where
    /// threads share the work it is called before a part, because each of those that wait still begins.
    pub fn advance(&self, parts: usize) {
        interrupt::check();
        let done = self.done.fetch_add(parts, Relaxed) + parts;
        if self.in_session && self.begun.elapsed() >= PATIENCE {
            // While one thread draws, the others work on.
            if let Ok(mut drawn) = self.drawn.try_lock()
                && drawn.is_none_or(|when| when.elapsed() >= REST)
            {
                self.put(&bar(&self.what, done, self.total, self.begun.elapsed()));
                *drawn = Some(Instant::now());
            }
        }
    }

    /// Puts a text in the bar's place.
    fn put(&self, text: &str) {
        // The kernel replaces what has the same name. The place in memory tells two bars of one cell apart.
        let name = format!("progress-{}-{:p}", std::process::id(), self);
        let block = |kind: &str, text: &str| format!("EVCXR_BEGIN_CONTENT {kind}\n{text}\nEVCXR_END_CONTENT\n");
        let both = block("text/plain", text) + &block("application/vnd.hade.display-id", &name);
        // A notebook that has gone away is no reason to stop.
        let _ = std::io::stdout().lock().write_all(both.as_bytes());
    }
}

impl Drop for Progress {
    fn drop(&mut self) {
        if self.drawn.get_mut().unwrap_or_else(PoisonError::into_inner).is_some() {
            let took = self.begun.elapsed().as_secs_f64();
            let ended = if *self.done.get_mut() >= self.total { "done" } else { "stopped" };
            self.put(&format!("{}: {ended} after {took:.1} s", self.what));
        }
    }
}

/// `limits of 32 760 directions ▰▰▰▰▱▱▱▱ 50 %, about 3 s left`
fn bar(what: &str, done: usize, total: usize, took: Duration) -> String {
    let part = if total == 0 { 1.0 } else { (done as f64 / total as f64).min(1.0) };
    let full = (part * LENGTH as f64).round() as usize;
    let left = if part > 0.0 { took.as_secs_f64() * (1.0 - part) / part } else { f64::INFINITY };
    let left = if left.is_finite() { format!(", about {left:.0} s left") } else { String::new() };
    format!("{what} {}{} {:.0} %{left}", "▰".repeat(full), "▱".repeat(LENGTH - full), part * 100.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_bar_says_how_long_it_takes() {
        let half = bar("limits", 50, 100, Duration::from_secs(3));
        assert_eq!(half, format!("limits {}{} 50 %, about 3 s left", "▰".repeat(12), "▱".repeat(12)));
        assert!(bar("limits", 0, 100, Duration::from_secs(3)).ends_with("0 %"));
        assert!(bar("limits", 120, 100, Duration::from_secs(3)).contains("100 %"));
        assert!(bar("nothing", 0, 0, Duration::from_secs(3)).contains("100 %"));
    }

    #[test]
    fn nothing_is_shown_outside_a_session() {
        let mut progress = Progress::new("work", 2);
        progress.begun -= 2 * PATIENCE;
        progress.advance(1);
        assert!(progress.drawn.lock().unwrap_or_else(PoisonError::into_inner).is_none());
    }
}
