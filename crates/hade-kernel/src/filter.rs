//! Stands between the process that runs the cells and the session.
//!
//! The notebook engine keeps one display a cell, shows it only at the end, swallows text before
//! it, and reports neither a panic nor an `Err` from `?`. So the process that runs the cells
//! splits in two before anything else: the parent runs the cells with its output in pipes, the
//! child reads the pipes and passes everything on as [`Record`]s in the order it happened. Being
//! a process of its own, it still passes on the last words of one that crashed.
//!
//! Until the session is open everything passes unchanged: the engine's own start-up waits for a
//! reader that does not exist yet.

mod splitter;

use std::path::PathBuf;
use std::{env, fs, io, process};

use libc::{c_int, c_void};

use self::splitter::Splitter;

/// How much is read at a time.
const CHUNK: usize = 64 * 1024;

/// After so long without output, what is held back is passed on.
const IDLE_MS: c_int = 100;

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
    let out = pipe()?;
    let err = pipe()?;
    // SAFETY: there is one thread, so the child may go on as an ordinary process.
    let runner = unsafe { libc::getpid() };
    match check(unsafe { libc::fork() })? {
        0 => {
            close(out.write);
            close(err.write);
            let code = match pass_on(out.read, err.read, runner, flag) {
                Ok(()) => 0,
                Err(_) => 1,
            };
            // SAFETY: ends this process without running what the parent registered.
            unsafe { libc::_exit(code) }
        }
        _ => {
            for (end, target) in [(out.write, libc::STDOUT_FILENO), (err.write, libc::STDERR_FILENO)] {
                // SAFETY: both are open descriptors of this process.
                check(unsafe { libc::dup2(end, target) })?;
                close(end);
            }
            close(out.read);
            close(err.read);
            Ok(())
        }
    }
}

/// Reads both pipes until the process that runs the cells is gone.
fn pass_on(out: c_int, err: c_int, runner: libc::pid_t, flag: PathBuf) -> io::Result<()> {
    // SAFETY: sets plain signal dispositions and a descriptor flag of this process.
    unsafe {
        // Ctrl-C ends the cells; what they printed before must still get through.
        libc::signal(libc::SIGINT, libc::SIG_IGN);
        libc::signal(libc::SIGPIPE, libc::SIG_IGN);
        check(libc::fcntl(err, libc::F_SETFL, libc::O_NONBLOCK))?;
    }
    let mut splitter = Splitter::new(flag.exists());
    let mut out_open = true;
    let mut err_open = true;
    let mut buffer = vec![0; CHUNK];
    while out_open || err_open {
        let mut ports = [
            port(out, out_open, libc::POLLIN),
            port(err, err_open, libc::POLLIN),
            // Errors only: the session is gone.
            port(libc::STDOUT_FILENO, true, 0),
        ];
        // SAFETY: the array lives through the call and its length is given.
        let ready = unsafe { libc::poll(ports.as_mut_ptr(), 3, IDLE_MS) };
        if ready < 0 {
            if io::Error::last_os_error().kind() == io::ErrorKind::Interrupted {
                continue;
            }
            return Err(io::Error::last_os_error());
        }
        if ports[2].revents != 0 {
            // SAFETY: at worst the process is gone already; nobody can want its output.
            unsafe { libc::kill(runner, libc::SIGKILL) };
            return Ok(());
        }
        let mut chunk = Vec::new();
        if out_open && ports[0].revents != 0 {
            match read(out, &mut buffer)? {
                Some(0) => out_open = false,
                Some(n) => chunk.extend_from_slice(&buffer[..n]),
                None => {}
            }
        }
        // What was written to standard error before the last byte just read is in its pipe now,
        // so a marker on standard output finds its message.
        let mut errors = Vec::new();
        while err_open {
            match read(err, &mut buffer)? {
                Some(0) => err_open = false,
                Some(n) => {
                    errors.extend_from_slice(&buffer[..n]);
                    if errors.len() > 64 * CHUNK {
                        break;
                    }
                }
                None => break,
            }
        }
        let mut passed = splitter.take(&chunk, &errors);
        if ready == 0 {
            passed.extend(splitter.idle());
        }
        write_all(libc::STDERR_FILENO, &passed.err)?;
        write_all(libc::STDOUT_FILENO, &passed.out)?;
    }
    let last = splitter.end();
    write_all(libc::STDERR_FILENO, &last.err)?;
    write_all(libc::STDOUT_FILENO, &last.out)
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
