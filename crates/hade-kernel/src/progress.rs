//! Telling the caller how far the work is.

/// Something worth telling the person who waits.
#[derive(Debug, Clone, Copy)]
#[non_exhaustive]
pub enum Step<'a> {
    /// A sentence to print once, such as why the network is needed.
    Notice(&'a str),
    /// The third-party crates are being built, once for a compiler: `done` of about `total`.
    Libraries {
        /// The crate that has just been built.
        name: &'a str,
        /// How many are built.
        done: usize,
        /// About how many there are.
        total: usize,
    },
    /// `hade` itself is being compiled for sessions, once for a version.
    Library,
    /// Another process prepares the same cache; this one waits for it.
    Waiting,
    /// The session is being started.
    Starting,
    /// A cell is about to run.
    Cell {
        /// Its number among all cells that hold code, from 1.
        number: usize,
        /// How many cells hold code.
        of: usize,
        /// Its first line that is not a comment.
        first_line: &'a str,
    },
    /// Everything announced so far is done.
    Done,
}

/// Shows [`Step`]s to the person who waits.
pub trait Progress {
    /// Called when something begins or moves on.
    fn step(&mut self, step: Step<'_>);
}

/// Shows nothing.
#[derive(Debug, Clone, Copy, Default)]
pub struct Silent;

impl Progress for Silent {
    fn step(&mut self, _: Step<'_>) {}
}
