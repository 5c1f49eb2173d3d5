//! A Rust notebook session with `hade` loaded, and the clean re-run of a notebook.
//!
//! The session embeds [`evcxr`]. Its Cargo graph holds nothing but the source of `hade` itself;
//! the third-party crates arrive prebuilt, so the first cell answers in seconds, every version is
//! the one of the packed lock file, and nothing needs the network.
//!
//! - [`runtime_hook`] must be the first call in `main` of every program that uses this crate: the
//!   program starts itself again as the process that runs the cells, and as the compiler wrapper.
//! - [`prepare`] fills the cache folder once for a compiler and a version of `hade`.
//! - [`Session`] runs code and gives its outputs in order.
//! - [`serve_kernel`] serves a session to Jupyter, and [`install_kernel`] makes Jupyter know it.
//! - [`run_notebook`] runs a notebook from top to bottom in a fresh session.
//!
//! Nothing here knows any physics, and nothing knows how a memo is typeset.
//!
//! # What it does not do
//! It draws no progress bar: the caller passes a [`Progress`] and shows what it is told. Only the served
//! kernel prints, what went wrong with its client, on standard error. Sessions run on Unix systems only.

mod bundle;
mod cache;
mod carry_out;
mod cell;
mod children;
mod collect;
mod commands;
mod compile_error;
mod ctrl_c;
mod early;
mod error;
#[cfg(unix)]
mod filter;
mod hints;
mod hook;
mod interrupt;
mod jupyter;
mod ledger;
mod library;
mod mismatch;
mod nearest;
mod notebook;
mod outcome;
mod packed;
mod prepare;
mod probe;
mod progress;
mod record;
mod refused;
mod run;
mod session;
mod source_map;
mod syntax;
mod third_party;
mod toolchain;
mod unknown;
mod variables;
mod wrapper;

pub use bundle::DISPLAY_ID_MIME;
pub use cache::{CacheReport, cache_folder, cache_report, clean};
pub use cell::{CellError, CellOutcome, Output, Stream};
pub use error::{Error, Result};
pub use hook::runtime_hook;
pub use interrupt::InterruptHandle;
pub use jupyter::{KernelPlace, install_kernel, send_standby_away, serve_kernel, serve_kernel_by_standby, stand_by};
pub use notebook::Notebook;
pub use prepare::{Prepared, prepare};
pub use progress::{Progress, Silent, Step};
pub use run::{CellReport, NotebookFailure, NotebookRun, RunOptions, run_notebook, run_notebooks};
pub use session::{Session, SessionOptions};

/// The mime type under which a cell hands over the record of a calculation sheet (JSON text).
pub const RECORD_MIME: &str = "application/vnd.hade.record+json";
