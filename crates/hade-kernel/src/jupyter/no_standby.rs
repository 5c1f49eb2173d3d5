//! Where there is no private socket, nothing stands by.

use std::path::Path;
use std::time::Duration;

use crate::error::{Error, Result};

/// Nothing stands by here.
///
/// # Errors
/// Always.
pub fn stand_by(_: Duration, _: Option<Duration>) -> Result<()> {
    Err(Error::Platform)
}

/// Serves a notebook.
///
/// # Errors
/// As [`serve_kernel`](super::serve_kernel).
pub fn serve_kernel_by_standby(connection_file: impl AsRef<Path>) -> Result<()> {
    super::serve_kernel(connection_file)
}

/// Nothing stands by here.
///
/// # Errors
/// Never.
pub fn send_standby_away() -> Result<()> {
    Ok(())
}
