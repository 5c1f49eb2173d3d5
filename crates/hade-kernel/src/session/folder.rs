//! The folder a session works in, and the left-overs of those that were killed.

use std::fs::{self, File};
use std::path::Path;
use std::{env, process};

use crate::error::{Error, Result};

/// One session's folder, held by a lock so that a later session can tell it from a left-over.
pub(super) struct SessionFolder {
    folder: tempfile::TempDir,
    _lock: File,
}

/// Begins the name; after it comes the number of the process.
const FOLDER_PREFIX: &str = "hade-session-";
const FOLDER_LOCK: &str = "lock";

impl SessionFolder {
    pub(super) fn new() -> Result<SessionFolder> {
        let place = env::temp_dir();
        let folder =
            tempfile::Builder::new().prefix(&own_prefix()).tempdir().map_err(Error::file("make a folder in", place))?;
        let path = folder.path().join(FOLDER_LOCK);
        let lock = File::create(&path).map_err(Error::file("write", &path))?;
        lock.lock().map_err(Error::file("lock", &path))?;
        Ok(SessionFolder { folder, _lock: lock })
    }

    pub(super) fn path(&self) -> &Path {
        self.folder.path()
    }
}

fn own_prefix() -> String {
    format!("{FOLDER_PREFIX}{}-", process::id())
}

/// Removes the folders of this process's sessions, when it ends before they do.
pub(crate) fn remove_folders() {
    for entry in fs::read_dir(env::temp_dir()).into_iter().flatten().flatten() {
        if entry.file_name().to_string_lossy().starts_with(&own_prefix()) {
            let _ = fs::remove_dir_all(entry.path());
        }
    }
}

/// Removes the folders of sessions that were killed.
pub(super) fn sweep() {
    for entry in fs::read_dir(env::temp_dir()).into_iter().flatten().flatten() {
        if !entry.file_name().to_string_lossy().starts_with(FOLDER_PREFIX) {
            continue;
        }
        let path = entry.path();
        if let Ok(lock) = File::open(path.join(FOLDER_LOCK))
            && lock.try_lock().is_ok()
        {
            let _ = fs::remove_dir_all(path);
        }
    }
}
