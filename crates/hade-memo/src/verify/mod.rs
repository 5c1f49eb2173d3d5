//! Whether a memo is still what it was when it was made.
//!
//! [`verify`] holds the exported bytes against the digest that the memo carries, makes the revision
//! with the signature fields again and holds it against the file byte by byte, allows after it
//! nothing but signatures, and then believes nothing in the record: every attached file against its
//! hash, every item computed again, the origin of every input traced again.
//!
//! This is integrity, not authenticity: whoever can make a memo can make one with other contents
//! and a digest that fits it. Who made it is for the signatures to say, and their certificates are
//! for a program that knows whom to trust.
//!
//! The file may mean harm. It is read with bounds on memory and time, no path in it is followed,
//! and nothing in it is run.

mod cms;
mod contents;
mod permitted;
mod printed;
mod report;
mod revisions;
mod signature;
#[cfg(test)]
mod tests;

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::sync::mpsc::{RecvTimeoutError, channel};
use std::time::Duration;

use crate::pdf;
use crate::sign_off::Mark;

pub use report::{Attached, Contents, Finding, LaterRevision, Report, SignatureFound, Standing, Unreadable, Verified};

/// Longest time a file may take.
const MOST_TIME: Duration = Duration::from_secs(300);
/// Stack of the thread that reads; parsed values nest, within bounds.
const STACK: usize = 64 << 20;

/// Verifies the bytes of a memo.
///
/// # Errors
/// The bytes are no PDF that this program can read within its bounds, or no memo.
pub fn verify(bytes: Vec<u8>) -> Result<Verified, Unreadable> {
    let (send, receive) = channel();
    let work = move || {
        // A defect of a parser must cost no more than this file.
        let done = catch_unwind(AssertUnwindSafe(|| check(&bytes)));
        // Nobody listens any more when the time ran out.
        let _ = send.send(done);
    };
    std::thread::Builder::new()
        .name("verify".to_owned())
        .stack_size(STACK)
        .spawn(work)
        .map_err(|e| Unreadable::new(format!("no thread can be started: {e}")))?;
    match receive.recv_timeout(MOST_TIME) {
        Ok(Ok(done)) => done,
        Ok(Err(_)) | Err(RecvTimeoutError::Disconnected) => {
            Err(Unreadable::new("it is broken in a way that this program does not understand"))
        }
        Err(RecvTimeoutError::Timeout) => {
            Err(Unreadable::new(format!("it takes more than {} seconds, and no memo does", MOST_TIME.as_secs())))
        }
    }
}

/// A file that cannot be read: damaged, where something in it says that it was a memo.
fn unreadable(bytes: &[u8], why: String) -> Unreadable {
    match Mark::traces(bytes) {
        true => Unreadable::damaged(why),
        false => Unreadable::new(why),
    }
}

fn check(bytes: &[u8]) -> Result<Verified, Unreadable> {
    let document = pdf::load(bytes).map_err(|why| unreadable(bytes, why))?;
    let none = "it carries no digest of a memo; only memos made with `hade memo` do";
    let mark = Mark::of(&document).ok_or_else(|| unreadable(bytes, none.to_owned()))?;
    drop(document);
    let mut report = Report { bytes: bytes.len(), ..Report::default() };
    let contents = revisions::check(bytes, &mark, &mut report).and_then(|memo| contents::check(&memo, &mut report));
    report.conclude();
    Ok(Verified { contents: contents.filter(|_| report.accepted), report })
}
