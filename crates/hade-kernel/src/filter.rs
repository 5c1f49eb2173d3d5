//! Stands between the process that runs the cells and the session.
//!
//! The notebook engine keeps one display a cell, shows it only at the end, swallows text before
//! it, and reports neither a panic nor an `Err` from `?`. So the process that runs the cells
//! splits in two before anything else: the parent runs the cells with its output in pipes, the
//! child reads the pipes and passes everything on as [`Record`]s in the order it happened. Being
//! a process of its own, it still passes on the last words of one that crashed. What the session
//! sends goes through it too, so it knows when a cell begins to run.
//!
//! Until the session is open everything passes unchanged: the engine's own start-up waits for a
//! reader that does not exist yet.

mod overflow;
mod splitter;

use std::path::PathBuf;
use std::time::{Duration, Instant};
use std::{env, fs, io, process, thread};

use libc::{c_int, c_void};

use self::splitter::Splitter;
use crate::record::Record;

/// Set for the process that runs the cells: the folder for text that is too long to show.
pub(crate) const OUTPUTS_VAR: &str = "HADE_SESSION_OUTPUTS";

/// How the engine's order to run a cell begins.
const RUN: &[u8] = b"LOAD_AND_RUN ";

/// How much is read at a time.
const CHUNK: usize = 64 * 1024;

/// After so long without output, what is held back is passed on.
const IDLE_MS: c_int = 100;

/// A cell that prints much is read after pauses.
const PAUSE: Duration = Duration::from_millis(5);

/// For so long what is left in the pipes is passed on after the cells are gone.
const LAST_WORDS: Duration = Duration::from_secs(1);

/// Splits this process in two; the calling process goes on to run the cells.
///
/// Called first thing in `main`, while the process has one thread.
pub(crate) fn install(flag: PathBuf) {
    // SAFETY: there is one thread, so nothing reads the environment meanwhile. The engine asks for
    // backtraces of its own frames, which only hide the message.
    unsafe { env::remove_var("RUST_BACKTRACE") };
    if let Err(error) = split(flag) {
        eprintln!("cannot set up the output of the cells: {error}");
        process::exit(98);
    }
}

fn split(flag: PathBuf) -> io::Result<()> {
    let input = pipe()?;
    let out = pipe()?;
    let err = pipe()?;
    // SAFETY: there is one thread, so the child may go on as an ordinary process.
    let runner = unsafe { libc::getpid() };
    match check(unsafe { libc::fork() })? {
        0 => {
            for end in [input.read, out.write, err.write] {
                close(end);
            }
            let code = match pass_on(input.write, out.read, err.read, runner, flag) {
                Ok(()) => 0,
                Err(_) => 1,
            };
            // SAFETY: ends this process without running what the parent registered.
            unsafe { libc::_exit(code) }
        }
        _ => {
            for (end, target) in
                [(input.read, libc::STDIN_FILENO), (out.write, libc::STDOUT_FILENO), (err.write, libc::STDERR_FILENO)]
            {
                // SAFETY: both are open descriptors of this process.
                check(unsafe { libc::dup2(end, target) })?;
                close(end);
            }
            for end in [input.write, out.read, err.read] {
                close(end);
            }
            // SAFETY: a handler that does nothing. Ctrl-C reaches every process of the terminal; the session decides
            // what becomes of the cell. (An ignored signal would be ignored by every program a cell starts.)
            unsafe { libc::signal(libc::SIGINT, nothing as *const () as libc::sighandler_t) };
            Ok(())
        }
    }
}

extern "C" fn nothing(_: c_int) {}

/// Passes everything on, both ways, until the process that runs the cells is gone.
fn pass_on(input: c_int, out: c_int, err: c_int, runner: libc::pid_t, flag: PathBuf) -> io::Result<()> {
    // SAFETY: sets plain signal dispositions and descriptor flags of this process.
    unsafe {
        // Ctrl-C may end the cells; what they printed before must still get through.
        libc::signal(libc::SIGINT, libc::SIG_IGN);
        libc::signal(libc::SIGPIPE, libc::SIG_IGN);
        for fd in [out, err] {
            check(libc::fcntl(fd, libc::F_SETFL, libc::O_NONBLOCK))?;
        }
    }
    let mut splitter = Splitter::new(flag.exists(), env::var_os(OUTPUTS_VAR).map(PathBuf::from));
    let mut in_open = true;
    let mut out_open = true;
    let mut err_open = true;
    let mut alone_since = None;
    let mut buffer = vec![0; CHUNK];
    while out_open || err_open {
        // A program that a cell started may hold the pipes open long after the cells are gone.
        // SAFETY: asks for a number.
        let alone = unsafe { libc::getppid() } != runner;
        let mut ports = [
            port(out, out_open, libc::POLLIN),
            port(err, err_open, libc::POLLIN),
            port(libc::STDIN_FILENO, in_open, libc::POLLIN),
            // Errors only: the session is gone.
            port(libc::STDOUT_FILENO, true, 0),
        ];
        // SAFETY: the array lives through the call and its length is given.
        let ready = unsafe { libc::poll(ports.as_mut_ptr(), 4, if alone { 0 } else { IDLE_MS }) };
        if ready < 0 {
            if io::Error::last_os_error().kind() == io::ErrorKind::Interrupted {
                continue;
            }
            return Err(io::Error::last_os_error());
        }
        if ports[3].revents != 0 {
            // SAFETY: at worst the process is gone already; nobody can want its output.
            unsafe { libc::kill(runner, libc::SIGKILL) };
            return Ok(());
        }
        if alone {
            let quiet = ports[0].revents == 0 && ports[1].revents == 0;
            if quiet || alone_since.get_or_insert_with(Instant::now).elapsed() > LAST_WORDS {
                break;
            }
        }
        if ports[2].revents != 0 {
            match read(libc::STDIN_FILENO, &mut buffer)? {
                Some(0) => {
                    in_open = false;
                    close(input);
                }
                Some(n) => {
                    if buffer[..n].starts_with(RUN) && flag.exists() {
                        write_all(libc::STDOUT_FILENO, Record::Begin.to_line().as_bytes())?;
                    }
                    // The process may have died just now; the loop will see that.
                    let _ = write_all(input, &buffer[..n]);
                }
                None => {}
            }
        }
        let mut round = Round { out_open, err_open, ..Round::default() };
        round.read(out, err, &mut buffer)?;
        (out_open, err_open) = (round.out_open, round.err_open);
        let mut passed = splitter.take(&round.out, &round.err, round.settled);
        if ready == 0 {
            passed.extend(splitter.idle());
        }
        write_all(libc::STDERR_FILENO, &passed.err)?;
        write_all(libc::STDOUT_FILENO, &passed.out)?;
        if splitter.floods() && round.out.len() + round.err.len() < CHUNK / 4 {
            // Few large pieces are easier on everybody than many small ones.
            thread::sleep(PAUSE);
        }
    }
    let last = splitter.end();
    write_all(libc::STDERR_FILENO, &last.err)?;
    write_all(libc::STDOUT_FILENO, &last.out)
}

/// What the cells wrote since the last time.
#[derive(Default)]
struct Round {
    out: Vec<u8>,
    err: Vec<u8>,
    out_open: bool,
    err_open: bool,
    /// Nothing is left: what was read of standard error comes after all that was read of standard output before it.
    settled: bool,
}

impl Round {
    /// Reads both pipes in turn until both are empty, or much was read. The two say nothing of each other's order,
    /// so this alone makes sure of two things: the message of a marker on standard output has been read with it, and
    /// text does not fall behind a message that was written after it.
    fn read(&mut self, out: c_int, err: c_int, buffer: &mut [u8]) -> io::Result<()> {
        loop {
            let before = self.out.len() + self.err.len();
            if self.out_open {
                match read(out, buffer)? {
                    Some(0) => self.out_open = false,
                    Some(n) => self.out.extend_from_slice(&buffer[..n]),
                    None => {}
                }
            }
            while self.err_open && self.err.len() < 64 * CHUNK {
                match read(err, buffer)? {
                    Some(0) => self.err_open = false,
                    Some(n) => self.err.extend_from_slice(&buffer[..n]),
                    None => break,
                }
            }
            let after = self.out.len() + self.err.len();
            self.settled = after == before;
            if self.settled || after > 4 * CHUNK {
                return Ok(());
            }
        }
    }
}

struct Pipe {
    read: c_int,
    write: c_int,
}

fn pipe() -> io::Result<Pipe> {
    let mut ends = [0; 2];
    // SAFETY: the array has room for the two descriptors.
    check(unsafe { libc::pipe(ends.as_mut_ptr()) })?;
    Ok(Pipe { read: ends[0], write: ends[1] })
}

fn port(fd: c_int, open: bool, events: i16) -> libc::pollfd {
    libc::pollfd { fd: if open { fd } else { -1 }, events, revents: 0 }
}

fn close(fd: c_int) {
    // SAFETY: each end is closed once, by the process that does not use it.
    unsafe { libc::close(fd) };
}

fn check(result: c_int) -> io::Result<c_int> {
    if result < 0 { Err(io::Error::last_os_error()) } else { Ok(result) }
}

/// `None` if there is nothing to read now, `Some(0)` at the end.
fn read(fd: c_int, buffer: &mut [u8]) -> io::Result<Option<usize>> {
    // SAFETY: the buffer is writable for the length given.
    let n = unsafe { libc::read(fd, buffer.as_mut_ptr().cast::<c_void>(), buffer.len()) };
    if n >= 0 {
        return Ok(Some(n.unsigned_abs()));
    }
    let error = io::Error::last_os_error();
    match error.kind() {
        io::ErrorKind::WouldBlock | io::ErrorKind::Interrupted => Ok(None),
        _ => Err(error),
    }
}

fn write_all(fd: c_int, mut bytes: &[u8]) -> io::Result<()> {
    while !bytes.is_empty() {
        // SAFETY: the slice is readable for the length given.
        let n = unsafe { libc::write(fd, bytes.as_ptr().cast::<c_void>(), bytes.len()) };
        if n >= 0 {
            bytes = &bytes[n.unsigned_abs()..];
        } else if io::Error::last_os_error().kind() != io::ErrorKind::Interrupted {
            return Err(io::Error::last_os_error());
        }
    }
    Ok(())
}

/// Says that the session is open: from now on, and in every process that runs its cells, output
/// is passed on as records.
pub(crate) fn open(flag: &std::path::Path) -> io::Result<()> {
    fs::write(flag, "")
}
