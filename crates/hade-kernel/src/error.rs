//! What can go wrong outside the cells of a notebook.

use std::io;
use std::path::{Path, PathBuf};

/// Result of this crate.
pub type Result<T, E = Error> = std::result::Result<T, E>;

/// What can go wrong outside the cells of a notebook. (A cell that fails is a
/// [`CellError`](crate::CellError), part of the outcome.)
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum Error {
    /// A file or folder could not be read, written, copied or removed.
    #[error("cannot {doing} {}: {}", path.display(), plain(source))]
    File {
        /// What was being done, as it reads after "cannot".
        doing: &'static str,
        /// The file or folder.
        path: PathBuf,
        /// What the system said.
        source: io::Error,
    },
    /// The cache folder cannot be used.
    #[error("{why}; {}", cache_advice(path, *full))]
    Cache {
        /// The cache folder.
        path: PathBuf,
        /// What could not be done there.
        why: String,
        /// There is no room.
        full: bool,
    },
    /// The file is not a notebook.
    #[error("{} is not a Jupyter notebook: {why}", path.display())]
    NotANotebook {
        /// The file.
        path: PathBuf,
        /// What it lacks.
        why: String,
    },
    /// The notebook has a format this program does not read.
    #[error("{} is a notebook of format {found}; this program reads format 4. Open it in JupyterLab and save it, or run `jupyter nbconvert --to notebook --nbformat 4`", path.display())]
    NotebookVersion {
        /// The file.
        path: PathBuf,
        /// The format it declares.
        found: String,
    },
    /// The notebook's file was changed while its cells ran.
    #[error("{} was changed by another program while its cells ran, so nothing was written over it; run again, or write elsewhere with -o", path.display())]
    Changed {
        /// The file.
        path: PathBuf,
    },
    /// The cache is in use.
    #[error("a notebook is running with the libraries in {}; wait for it to end and try again", path.display())]
    Busy {
        /// The cache folder.
        path: PathBuf,
    },
    /// `cargo` or `rustc` is missing or does not answer.
    #[error(
        "{tool} was not found or does not run ({why}); a notebook session compiles its cells with it. Install Rust from https://rustup.rs and try again"
    )]
    Toolchain {
        /// The program.
        tool: &'static str,
        /// What happened.
        why: String,
    },
    /// The connection file asks for what is not safe or not known.
    #[error("{} cannot be used: {why}", path.display())]
    Connection {
        /// The file.
        path: PathBuf,
        /// What is wrong with it, and what to do.
        why: String,
    },
    /// The third-party crates could not be built.
    #[error("the libraries a session needs could not be built: {why}")]
    Build {
        /// The end of what Cargo said.
        why: String,
    },
    /// The session could not be started.
    #[error("the notebook session did not start: {why}")]
    Start {
        /// What happened.
        why: String,
    },
    /// Sessions do not exist on this system.
    #[error("notebook sessions run on Linux and macOS only")]
    Platform,
}

impl Error {
    /// A [`Error::File`] from an I/O error: `.map_err(Error::file("read", &path))`.
    pub(crate) fn file(doing: &'static str, path: impl AsRef<Path>) -> impl FnOnce(io::Error) -> Error {
        let path = path.as_ref().to_path_buf();
        move |source| Error::File { doing, path, source }
    }

    /// An error met while the cache was filled, with what to do about the cache.
    pub(crate) fn in_cache(self, cache: &Path) -> Error {
        let (why, full) = match &self {
            Error::File { path, source, .. } if path.starts_with(cache) => {
                (self.to_string(), says_full(&plain(source)))
            }
            Error::Build { why } | Error::Start { why } if says_full(why) => (self.to_string(), true),
            _ => return self,
        };
        let why =
            if full { "the libraries a session needs could not be stored: the disk is full".to_owned() } else { why };
        Error::Cache { path: cache.to_path_buf(), why, full }
    }

    /// An error met while a session's folder was made, with what to do about the place.
    pub(crate) fn in_temporary(self, place: &Path) -> Error {
        let (full, denied) = match &self {
            Error::File { source, .. } if says_full(&plain(source)) => (true, false),
            Error::File { path, source, .. } => {
                (false, path.starts_with(place) && source.kind() == io::ErrorKind::PermissionDenied)
            }
            Error::Start { why } => (says_full(why), false),
            _ => (false, false),
        };
        let folder = place.display();
        let why = if full {
            format!("the disk is full; free some 200 MB in {folder}, or set TMPDIR to a folder on another disk")
        } else if denied {
            format!("{self}; make {folder} a folder you can write, or set TMPDIR to another")
        } else {
            return self;
        };
        Error::Start { why }
    }
}

/// Whether the words of some program mean that the disk is full.
pub(crate) fn says_full(words: &str) -> bool {
    ["No space left on device", "os error 28", "the disk is full", "Disk quota exceeded", "File too large"]
        .iter()
        .any(|sign| words.contains(sign))
}

fn cache_advice(path: &Path, full: bool) -> String {
    let path = path.display();
    if full {
        format!("free some 700 MB in {path}, or set HADE_CACHE to a folder on another disk")
    } else {
        format!("make {path} a folder you can write, or set HADE_CACHE to another")
    }
}

/// The system's message with the cases a user meets said plainly.
fn plain(error: &io::Error) -> String {
    match error.kind() {
        io::ErrorKind::NotFound => "there is no such file or folder".to_owned(),
        io::ErrorKind::PermissionDenied => "permission denied".to_owned(),
        io::ErrorKind::StorageFull => "the disk is full".to_owned(),
        _ => error.to_string(),
    }
}
