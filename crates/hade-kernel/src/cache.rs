//! The cache folder: where it is, its lock, and what counts as whole.

use std::fs::{self, File, OpenOptions, TryLockError};
use std::path::{Path, PathBuf};
use std::time::{Duration, SystemTime};
use std::{env, io, thread};

use crate::error::{Error, Result};
use crate::progress::{Progress, Step};

/// Overrides the place of the cache folder.
pub(crate) const CACHE_VAR: &str = "HADE_CACHE";

/// Written last; a folder without it is not whole and is made anew. It holds the folder's own
/// path: what is compiled does not survive a move.
const STAMP: &str = "complete";

/// Held (shared) by every running session, in the cache and in the session folder it started from.
const IN_USE: &str = "in-use";

/// Where processes that stand by are found.
pub(crate) const STANDBY: &str = "standby";

/// Where the whole text of cells goes that print too much.
pub(crate) const OUTPUTS: &str = "outputs";

/// A session folder for another compiler, not used for so long, is removed.
const LONG_UNUSED: Duration = Duration::from_secs(30 * 24 * 3600);

/// The same for this compiler. Two versions of `hade` in use at a time do not take each other's away.
const UNUSED: Duration = Duration::from_secs(3600);

/// The folder with everything that is compiled once: `$HADE_CACHE`, or `hade` in the user's cache
/// folder.
///
/// # Errors
/// [`Error::Start`] if the system names no home folder and `HADE_CACHE` is not set.
pub fn cache_folder() -> Result<PathBuf> {
    let set = |name| env::var_os(name).filter(|value| !value.is_empty()).map(PathBuf::from);
    if let Some(folder) = set(CACHE_VAR) {
        return std::path::absolute(&folder).map_err(Error::file("find", &folder));
    }
    let user = match set("XDG_CACHE_HOME").filter(|path| path.is_absolute()) {
        Some(folder) => Some(folder),
        None if cfg!(target_os = "macos") => set("HOME").map(|home| home.join("Library/Caches")),
        None => set("HOME").map(|home| home.join(".cache")),
    };
    user.map(|folder| folder.join("hade")).ok_or_else(|| Error::Start {
        why: format!("the system names no home folder; set {CACHE_VAR} to a folder for compiled libraries"),
    })
}

/// What the cache folder holds, or held before [`clean`].
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct CacheReport {
    /// The cache folder.
    pub folder: PathBuf,
    /// How many bytes are in it.
    pub bytes: u64,
    /// When the last of it was finished.
    pub built: Option<SystemTime>,
}

/// What the cache folder holds.
///
/// # Errors
/// As [`cache_folder`].
pub fn cache_report() -> Result<CacheReport> {
    let folder = cache_folder()?;
    let built = fs::read_dir(&folder)
        .into_iter()
        .flatten()
        .flatten()
        .filter_map(|entry| fs::metadata(entry.path().join(STAMP)).ok()?.modified().ok())
        .max();
    Ok(CacheReport { bytes: size_of(&folder), folder, built })
}

/// Removes everything in the cache folder; the next session makes it anew.
///
/// # Errors
/// [`Error::Busy`] if a session is running, [`Error::File`] if something cannot be removed.
pub fn clean() -> Result<CacheReport> {
    let report = cache_report()?;
    let folder = &report.folder;
    if folder.is_dir() {
        let _lock = lock(folder, &mut crate::progress::Silent)?;
        let in_use = open(&folder.join(IN_USE))?;
        if in_use.try_lock().is_err() {
            return Err(Error::Busy { path: folder.clone() });
        }
        for entry in fs::read_dir(folder).map_err(Error::file("read", folder))? {
            let path = entry.map_err(Error::file("read", folder))?.path();
            // Only what this program makes: the variable may name a folder with other things.
            if path.is_dir() && name_is_ours(&path) {
                fs::remove_dir_all(&path).map_err(Error::file("remove", &path))?;
            }
        }
    }
    Ok(report)
}

fn name_is_ours(path: &Path) -> bool {
    path.file_name().is_some_and(|name| {
        let name = name.to_string_lossy();
        name.starts_with("libraries-") || name.starts_with("session-") || name == OUTPUTS || name == STANDBY
    })
}

fn size_of(path: &Path) -> u64 {
    let Ok(entries) = fs::read_dir(path) else {
        return 0;
    };
    entries
        .flatten()
        .map(|entry| match entry.metadata() {
            Ok(meta) if meta.is_dir() => size_of(&entry.path()),
            Ok(meta) => meta.len(),
            Err(_) => 0,
        })
        .sum()
}

/// Holds the cache until the returned file is dropped; a second process waits.
pub(crate) fn lock(cache: &Path, progress: &mut dyn Progress) -> Result<File> {
    fs::create_dir_all(cache).map_err(Error::file("make the folder", cache))?;
    let path = cache.join("lock");
    let file = open(&path)?;
    match file.try_lock() {
        Ok(()) => return Ok(file),
        Err(TryLockError::WouldBlock) => progress.step(Step::Waiting),
        Err(TryLockError::Error(error)) => return Err(Error::file("lock", &path)(error)),
    }
    file.lock().map_err(Error::file("lock", &path))?;
    Ok(file)
}

/// Says that a session uses a folder until the returned file is dropped.
pub(crate) fn hold(folder: &Path) -> Result<File> {
    let path = folder.join(IN_USE);
    let file = match open(&path) {
        // Somebody else's cache, which is not to be written, can be used all the same.
        Err(_) if path.exists() => File::open(&path).map_err(Error::file("open", &path))?,
        opened => opened?,
    };
    file.lock_shared().map_err(Error::file("lock", &path))?;
    // Says when it was last used.
    let _ = file.set_modified(SystemTime::now());
    Ok(file)
}

fn open(path: &Path) -> Result<File> {
    OpenOptions::new().create(true).truncate(false).write(true).open(path).map_err(Error::file("open", path))
}

/// Removes what a newer version of `hade` has left behind: session folders that nobody holds, of the same compiler
/// after an hour and of others after a month, and libraries that no session folder names. The caller holds the cache's lock.
pub(crate) fn prune(cache: &Path, session: &Path, libraries: &Path) {
    let named = |beginning: &str| -> Vec<PathBuf> {
        let entries = fs::read_dir(cache).into_iter().flatten().flatten();
        let begins =
            |path: &PathBuf| path.file_name().is_some_and(|name| name.to_string_lossy().starts_with(beginning));
        entries.map(|entry| entry.path()).filter(begins).collect()
    };
    let mut needed = vec![libraries.to_path_buf()];
    let all_libraries = named("libraries-");
    for folder in named("session-").into_iter().filter(|folder| folder != session) {
        let plan = fs::read_to_string(folder.join("plan")).unwrap_or_default();
        let own = all_libraries.iter().find(|libraries| plan.contains(&*libraries.to_string_lossy()));
        let unused = fs::metadata(folder.join(IN_USE)).and_then(|meta| meta.modified()).ok();
        let unused = unused.and_then(|used| used.elapsed().ok()).unwrap_or(LONG_UNUSED);
        let ours = own.is_none_or(|own| own == libraries);
        let old = unused >= if ours { UNUSED } else { LONG_UNUSED };
        let held = open(&folder.join(IN_USE)).map(|file| (file.try_lock().is_err(), file));
        match held {
            Ok((false, _lock)) if old => {
                let _ = fs::remove_dir_all(&folder);
            }
            _ => needed.extend(own.cloned()),
        }
    }
    for folder in all_libraries.iter().filter(|folder| !needed.contains(folder)) {
        let _ = fs::remove_dir_all(folder);
    }
}

/// Whether a folder of the cache was finished, at the place where it is.
pub(crate) fn is_whole(folder: &Path) -> bool {
    fs::read(folder.join(STAMP)).is_ok_and(|place| place == folder.as_os_str().as_encoded_bytes())
}

/// Removes what an earlier process left unfinished and makes the folder.
pub(crate) fn begin(folder: &Path) -> Result<()> {
    // A compiler left over from a process that was killed may still write for a moment.
    let mut tries = 0;
    loop {
        match fs::remove_dir_all(folder) {
            Ok(()) => break,
            Err(error) if error.kind() == io::ErrorKind::NotFound => break,
            Err(_) if tries < 20 => thread::sleep(Duration::from_millis(250)),
            Err(error) => return Err(Error::file("remove", folder)(error)),
        }
        tries += 1;
    }
    fs::create_dir_all(folder).map_err(Error::file("make the folder", folder))
}

/// Declares a folder finished, after everything in it has reached the disk.
pub(crate) fn finish(folder: &Path) -> Result<()> {
    let aside = folder.join("complete.part");
    let write = || -> io::Result<()> {
        fs::write(&aside, folder.as_os_str().as_encoded_bytes())?;
        File::open(&aside)?.sync_all()?;
        fs::rename(&aside, folder.join(STAMP))
    };
    write().map_err(Error::file("write", folder.join(STAMP)))
}

/// Copies a folder with its modification times, by which Cargo knows what is fresh.
pub(crate) fn copy_folder(from: &Path, to: &Path) -> Result<()> {
    fs::create_dir_all(to).map_err(Error::file("make the folder", to))?;
    for entry in fs::read_dir(from).map_err(Error::file("read", from))? {
        let entry = entry.map_err(Error::file("read", from))?;
        let source = entry.path();
        let target = to.join(entry.file_name());
        let meta = entry.metadata().map_err(Error::file("read", &source))?;
        if meta.is_dir() {
            copy_folder(&source, &target)?;
        } else if meta.is_file() {
            let copy = || -> io::Result<()> {
                fs::copy(&source, &target)?;
                OpenOptions::new().write(true).open(&target)?.set_modified(meta.modified()?)
            };
            copy().map_err(Error::file("copy", &source))?;
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_folder_is_whole_only_when_finished() -> Result<()> {
        let dir = tempfile::tempdir().map_err(Error::file("make", "a folder"))?;
        let folder = dir.path().join("session-x");
        begin(&folder)?;
        fs::write(folder.join("half"), "made").map_err(Error::file("write", &folder))?;
        assert!(!is_whole(&folder));
        begin(&folder)?;
        assert!(!folder.join("half").exists());
        finish(&folder)?;
        assert!(is_whole(&folder));
        let moved = dir.path().join("session-y");
        fs::rename(&folder, &moved).map_err(Error::file("move", &folder))?;
        assert!(!is_whole(&moved));
        Ok(())
    }

    #[test]
    fn older_sessions_go_unless_they_are_held() -> Result<()> {
        let dir = tempfile::tempdir().map_err(Error::file("make", "a folder"))?;
        let cache = dir.path();
        let make = |session: &str, libraries: &str| -> Result<PathBuf> {
            let (folder, libraries) = (cache.join(session), cache.join(libraries));
            for folder in [&folder, &libraries] {
                fs::create_dir_all(folder).map_err(Error::file("make", folder))?;
            }
            fs::write(folder.join("plan"), format!("cell -Ldependency={}/lib", libraries.display()))
                .map_err(Error::file("write", &folder))?;
            hold(&folder).map(|_| folder)
        };
        let (old, held, new) =
            (make("session-1", "libraries-1")?, make("session-2", "libraries-1")?, make("session-3", "libraries-1")?);
        let (recent, long) = (make("session-4", "libraries-2")?, make("session-5", "libraries-3")?);
        let in_time = make("session-6", "libraries-1")?;
        let holding = hold(&held)?;
        let back_date = |folder: &Path, by: Duration| {
            open(&folder.join(IN_USE))?.set_modified(SystemTime::now() - by).map_err(Error::file("date", folder))
        };
        for (folder, by) in [(&old, UNUSED), (&held, UNUSED), (&recent, UNUSED), (&long, LONG_UNUSED)] {
            back_date(folder, by)?;
        }
        // A process that another test starts has every lock of this one for a moment.
        let gone = |folders: &[&PathBuf]| {
            for _ in 0..100 {
                prune(cache, &new, &cache.join("libraries-1"));
                if folders.iter().all(|folder| !folder.exists()) {
                    break;
                }
                thread::sleep(Duration::from_millis(20));
            }
        };
        gone(&[&old, &long]);
        assert!(!old.exists() && held.exists() && new.exists() && recent.exists() && !long.exists());
        assert!(in_time.exists());
        assert!(cache.join("libraries-1").exists() && cache.join("libraries-2").exists());
        assert!(!cache.join("libraries-3").exists());
        drop(holding);
        gone(&[&held]);
        assert!(!held.exists());
        Ok(())
    }

    #[test]
    fn a_copy_keeps_the_times() -> io::Result<()> {
        let dir = tempfile::tempdir()?;
        let (from, to) = (dir.path().join("a"), dir.path().join("b"));
        fs::create_dir_all(from.join("deep"))?;
        fs::write(from.join("deep/file"), "x")?;
        let old = std::time::SystemTime::UNIX_EPOCH + std::time::Duration::from_secs(1_000_000);
        File::options().write(true).open(from.join("deep/file"))?.set_modified(old)?;
        assert!(copy_folder(&from, &to).is_ok());
        assert_eq!(fs::metadata(to.join("deep/file"))?.modified()?, old);
        Ok(())
    }
}
