//! Ctrl-C while a notebook runs from a terminal.

use std::fs::File;
use std::io::{self, Read as _};
use std::os::fd::FromRawFd as _;
use std::sync::atomic::{AtomicBool, AtomicI32, Ordering};
use std::thread;

use libc::{c_int, c_void};

use crate::error::{Error, Result};
use crate::interrupt::InterruptHandle;

/// Where the signal handler writes; −1 while nobody listens.
static PIPE: AtomicI32 = AtomicI32::new(-1);

/// Whether Ctrl-C was pressed since somebody listens.
static PRESSED: AtomicBool = AtomicBool::new(false);

/// Turns Ctrl-C into an interrupt of the session, for good, until it is dropped. A second one ends the program.
pub(crate) struct Keyboard {
    /// What Ctrl-C did before; `None` if nobody listens.
    before: Option<libc::sighandler_t>,
}

impl Keyboard {
    /// Listens for Ctrl-C, if `wanted`. One notebook of a program can do so at a time.
    pub(crate) fn listen(wanted: bool, handle: InterruptHandle) -> Result<Keyboard> {
        if !wanted {
            return Ok(Keyboard { before: None });
        }
        let mut ends = [0; 2];
        // SAFETY: the array has room for the two descriptors.
        if unsafe { libc::pipe(ends.as_mut_ptr()) } < 0 {
            return Err(Error::Start { why: io::Error::last_os_error().to_string() });
        }
        for end in ends {
            // SAFETY: a flag of a descriptor just made: no program that this one starts should hold it.
            unsafe { libc::fcntl(end, libc::F_SETFD, libc::FD_CLOEXEC) };
        }
        PRESSED.store(false, Ordering::SeqCst);
        PIPE.store(ends[1], Ordering::SeqCst);
        // SAFETY: the descriptor is open and owned by nobody else.
        let mut pipe = unsafe { File::from_raw_fd(ends[0]) };
        thread::spawn(move || {
            let mut byte = [0];
            while pipe.read(&mut byte).is_ok_and(|n| n == 1) {
                // The program ends after this cell, or after the one it was about to begin.
                handle.interrupt_for_good();
            }
        });
        // SAFETY: the handler does only what a handler may.
        let before = unsafe { libc::signal(libc::SIGINT, pressed as *const () as libc::sighandler_t) };
        Ok(Keyboard { before: Some(before) })
    }

    /// Whether Ctrl-C was pressed.
    pub(crate) fn was_pressed(&self) -> bool {
        self.before.is_some() && PRESSED.load(Ordering::SeqCst)
    }
}

impl Drop for Keyboard {
    fn drop(&mut self) {
        let Some(before) = self.before else {
            return;
        };
        // SAFETY: puts back what was there.
        unsafe { libc::signal(libc::SIGINT, before) };
        let pipe = PIPE.swap(-1, Ordering::SeqCst);
        if pipe >= 0 {
            // SAFETY: the descriptor is ours and closed once; the thread that reads then ends.
            unsafe { libc::close(pipe) };
        }
    }
}

extern "C" fn pressed(_: c_int) {
    if PRESSED.swap(true, Ordering::SeqCst) {
        // SAFETY: ends the program at once, as Ctrl-C does where nobody listens.
        unsafe { libc::_exit(130) };
    }
    let pipe = PIPE.load(Ordering::SeqCst);
    if pipe >= 0 {
        // SAFETY: writes one byte to a descriptor that stays open while this handler is set.
        unsafe { libc::write(pipe, [1_u8].as_ptr().cast::<c_void>(), 1) };
    }
}
