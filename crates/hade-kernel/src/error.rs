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
