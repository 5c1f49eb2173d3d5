//! Ends long work when the person at the notebook asks for it.
//!
//! A notebook session names a file in the variable [`FLAG_VAR`]. While that file exists, the running cell is to
//! stop. Outside a session the variable is not set, and nothing is looked at.

use std::path::PathBuf;
use std::sync::OnceLock;
use std::sync::atomic::{AtomicBool, AtomicU64, Ordering::Relaxed};
use std::time::Instant;

/// Names the file that asks the running cell to stop.
pub const FLAG_VAR: &str = "HADE_INTERRUPT";

/// Two looks at the file lie at least so far apart, in milliseconds.
const REST: u64 = 10;

/// Ends the running cell if it was asked to stop; otherwise returns at once, in some 30 ns.
///
/// The long loops of this crate call it, and a long loop in a cell may. A cell that is to stop unwinds as after a
/// panic, but without a message: nothing that is half done can be kept or shown. Variables of earlier cells stay.
///
/// ```
/// let mut sum = 0.0;
/// for k in 0..1000 {
///     hade::interrupt::check();
///     sum += f64::from(k);
/// }
/// assert_eq!(sum, 499_500.0);
/// ```
pub fn check() {
    static FLAG: OnceLock<Option<Flag>> = OnceLock::new();
    let flag = FLAG.get_or_init(|| std::env::var_os(FLAG_VAR).map(|path| Flag::new(path.into())));
    if flag.as_ref().is_some_and(Flag::is_raised) {
        std::panic::resume_unwind(Box::new("interrupted"));
    }
}

/// The file, looked at now and then.
#[derive(Debug)]
struct Flag {
    file: PathBuf,
    begun: Instant,
    looked: AtomicU64,
    raised: AtomicBool,
}

impl Flag {
    fn new(file: PathBuf) -> Flag {
        Flag { file, begun: Instant::now(), looked: AtomicU64::new(0), raised: AtomicBool::new(false) }
    }

    /// Whether the file exists. Once it was seen every call looks, so that all threads end.
    fn is_raised(&self) -> bool {
        if !self.raised.load(Relaxed) {
            let now = self.begun.elapsed().as_millis() as u64;
            let looked = self.looked.load(Relaxed);
            let taken = || self.looked.compare_exchange(looked, now, Relaxed, Relaxed).is_ok();
            if now.saturating_sub(looked) < REST || !taken() {
                return false;
            }
        }
        let raised = self.file.exists();
        self.raised.store(raised, Relaxed);
        raised
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::time::Duration;

    #[test]
    fn a_flag_is_seen_at_once_and_gone_when_lowered() -> std::io::Result<()> {
        let file = std::env::temp_dir().join(format!("hade-interrupt-{}", std::process::id()));
        let flag = Flag::new(file.clone());
        let wait = || std::thread::sleep(Duration::from_millis(2 * REST));
        wait();
        assert!(!flag.is_raised());
        std::fs::write(&file, "")?;
        assert!(!flag.is_raised(), "looked again before the rest was over");
        wait();
        assert!(flag.is_raised() && flag.is_raised(), "a raised flag is seen by every call");
        std::fs::remove_file(&file)?;
        assert!(!flag.is_raised());
        Ok(())
    }

    #[test]
    fn nothing_stops_outside_a_session() {
        assert!(std::env::var_os(FLAG_VAR).is_none());
        check();
    }
}
