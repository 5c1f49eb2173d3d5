//! Where a kernel that Jupyter starts finds the process that stands by for it.
//!
//! A socket in a folder of the cache that only its owner may enter. Its name says for what the process was
//! started: this program, the compiler, and whatever of the environment reaches them.

use std::fs::{self, File, TryLockError};
use std::io;
use std::os::unix::fs::{MetadataExt as _, PermissionsExt as _};
use std::os::unix::net::UnixStream;
use std::path::{Path, PathBuf};
use std::time::{Duration, UNIX_EPOCH};
use std::{env, process, thread};

use crate::cache;
use crate::error::{Error, Result};
use crate::packed;
use crate::toolchain::Toolchain;

/// The variables that say where compilers and files are.
const OF_THE_TOOLS: [&str; 8] =
    ["CARGO_HOME", "HADE_CACHE", "HOME", "PATH", "RUSTUP_HOME", "RUSTUP_TOOLCHAIN", "TMPDIR", "XDG_CACHE_HOME"];

/// What one byte asks of a process that stands by; after [`SERVE`] comes a line of JSON.
pub(super) const SERVE: u8 = b's';
pub(super) const LEAVE: u8 = b'l';

const SOCKET: &str = "socket";
const LOCK: &str = "lock";

/// A path that long is no name of a socket on some systems.
const LONGEST: usize = 100;

/// The place for this program, this compiler and this environment.
pub(super) struct Meeting {
    folder: PathBuf,
    name: String,
}

impl Meeting {
    /// # Errors
    /// If there is no compiler or no cache folder, or the folder's path is too long for a socket.
    pub(super) fn here() -> Result<Meeting> {
        let failed = |why: String| Error::Start { why };
        let program = env::current_exe().map_err(|error| failed(error.to_string()))?;
        let file = fs::metadata(&program).map_err(Error::file("read", &program))?;
        let written = file.modified().ok().and_then(|when| when.duration_since(UNIX_EPOCH).ok()).unwrap_or_default();
        let toolchain = Toolchain::find()?;
        let mut said = format!("{}\n{}\n{written:?}\n{}\n", program.display(), file.len(), toolchain.version);
        for name in OF_THE_TOOLS {
            said.push_str(&format!("{name}={:?}\n", env::var_os(name)));
        }
        let folder = cache::cache_folder()?.join(cache::STANDBY);
        let meeting = Meeting { folder, name: packed::hash([said.as_bytes()])[..12].to_owned() };
        let socket = meeting.socket();
        if socket.as_os_str().len() > LONGEST {
            return Err(failed(format!("{} is too long a path for a socket", socket.display())));
        }
        Ok(meeting)
    }

    pub(super) fn socket(&self) -> PathBuf {
        self.folder.join(format!("{}.{SOCKET}", self.name))
    }

    /// Makes the folder, for its owner only.
    pub(super) fn make_folder(&self) -> Result<()> {
        let folder = &self.folder;
        fs::create_dir_all(folder).map_err(Error::file("make the folder", folder))?;
        fs::set_permissions(folder, fs::Permissions::from_mode(0o700)).map_err(Error::file("close", folder))?;
        let owner = fs::metadata(folder).map_err(Error::file("read", folder))?.uid();
        // SAFETY: a plain system call.
        if owner != unsafe { libc::geteuid() } {
            return Err(Error::Start { why: format!("{} belongs to another user", folder.display()) });
        }
        Ok(())
    }

    /// Held by the one process that stands by here, or is about to. `None`: another does.
    pub(super) fn lock(&self) -> Result<Option<Held>> {
        let path = self.folder.join(format!("{}.{LOCK}", self.name));
        let file = File::create(&path).map_err(Error::file("write", &path))?;
        match file.try_lock() {
            Ok(()) => Ok(Some(Held { path, _file: file })),
            Err(TryLockError::WouldBlock) => Ok(None),
            Err(TryLockError::Error(error)) => Err(Error::file("lock", &path)(error)),
        }
    }

    /// Where a process that stands by writes what it has to say.
    pub(super) fn log(&self) -> io::Result<File> {
        File::create(self.folder.join("log"))
    }
}

/// The place is taken by this process.
pub(super) struct Held {
    path: PathBuf,
    _file: File,
}

impl Held {
    /// Waits until this process is sent away; without a socket yet it is by removing its lock.
    pub(super) async fn is_lost(&self) {
        while self.path.exists() {
            tokio::time::sleep(Duration::from_millis(500)).await;
        }
    }
}

/// Sends away every process that stands by, and waits until it has gone.
///
/// # Errors
/// If the system names no cache folder.
pub fn send_standby_away() -> Result<()> {
    let folder = cache::cache_folder()?.join(cache::STANDBY);
    for entry in fs::read_dir(folder).into_iter().flatten().flatten() {
        let path = entry.path();
        if path.extension().is_some_and(|kind| kind == LOCK) {
            let _ = fs::remove_file(&path);
            let _ = leave(&path.with_extension(SOCKET));
        }
    }
    Ok(())
}

fn leave(socket: &Path) -> io::Result<()> {
    use std::io::{Read as _, Write as _};
    let mut stream = UnixStream::connect(socket)?;
    stream.set_read_timeout(Some(Duration::from_secs(3)))?;
    stream.write_all(&[LEAVE])?;
    // It closes the stream as the last thing it does.
    stream.read_to_end(&mut Vec::new()).map(drop)
}

/// Starts a process that will stand by, in a session of its own.
pub(super) fn start_another(after: Duration, idle: Option<Duration>) -> Result<()> {
    use std::os::unix::process::CommandExt as _;
    let failed = |error: io::Error| Error::Start { why: error.to_string() };
    let meeting = Meeting::here()?;
    meeting.make_folder()?;
    let mut command = process::Command::new(env::current_exe().map_err(failed)?);
    command.args(["kernel", "standby", "--after", &after.as_secs().to_string()]);
    if let Some(idle) = idle {
        command.args(["--idle", &idle.as_secs().to_string()]);
    }
    command.current_dir("/").stdin(process::Stdio::null()).stdout(process::Stdio::null());
    command.stderr(meeting.log().map_err(failed)?);
    command.env_remove(super::ending::PARENT_VAR);
    // SAFETY: a plain system call, which may be made between fork and exec.
    unsafe {
        command.pre_exec(|| match libc::setsid() {
            -1 => Err(io::Error::last_os_error()),
            _ => Ok(()),
        });
    }
    let mut child = command.spawn().map_err(failed)?;
    // Lest it stay in the list of processes when it ends before this one.
    thread::spawn(move || child.wait());
    Ok(())
}
