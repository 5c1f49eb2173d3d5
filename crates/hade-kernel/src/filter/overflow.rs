//! Keeps the whole text of a cell that prints more than is shown.

use std::fs::{self, File, OpenOptions};
use std::io::{self, BufWriter, Write as _};
use std::os::unix::fs::{DirBuilderExt as _, OpenOptionsExt as _};
use std::path::{Path, PathBuf};
use std::time::SystemTime;

/// What all kept files together may hold.
const ROOM: u64 = 1 << 30;

/// A new file has at least so much of it; older ones make way.
const SHARE: u64 = ROOM / 2;

/// The text of a cell: in memory while it is short, then in a file of its own.
#[derive(Debug, Default)]
pub(super) struct Overflow {
    folder: Option<PathBuf>,
    files: u32,
    head: Vec<u8>,
    spilled: Option<Spilled>,
}

#[derive(Debug)]
struct Spilled {
    path: PathBuf,
    /// `None` once it could not be written.
    file: Option<BufWriter<File>>,
    room: u64,
    whole: bool,
}

impl Overflow {
    pub(super) fn new(folder: Option<PathBuf>) -> Overflow {
        Overflow { folder, ..Overflow::default() }
    }

    /// Takes text, in the order it was printed.
    pub(super) fn keep(&mut self, text: &[u8]) {
        match &mut self.spilled {
            Some(spilled) => spilled.write(text),
            None if self.folder.is_some() => self.head.extend_from_slice(text),
            None => {}
        }
    }

    /// From now on the cell's text goes to a file: more was printed than is shown.
    pub(super) fn spill(&mut self) {
        if self.spilled.is_some() {
            return;
        }
        let Some(folder) = &self.folder else {
            return;
        };
        self.files += 1;
        let path = folder.join(format!("output-{}-{}.txt", std::process::id(), self.files));
        let (file, room) = match begin(folder, &path) {
            Ok((file, room)) => (Some(BufWriter::new(file)), room),
            Err(_) => (None, 0),
        };
        let mut spilled = Spilled { path, file, room, whole: true };
        spilled.write(&std::mem::take(&mut self.head));
        self.spilled = Some(spilled);
    }

    /// The cell ended: where its whole text is, and whether it is all there.
    pub(super) fn end(&mut self) -> Option<(String, bool)> {
        self.head.clear();
        let mut spilled = self.spilled.take()?;
        spilled.file.as_mut()?.flush().ok()?;
        Some((spilled.path.to_string_lossy().into_owned(), spilled.whole))
    }
}

impl Spilled {
    fn write(&mut self, text: &[u8]) {
        let Some(file) = &mut self.file else {
            return;
        };
        if text.len() as u64 > self.room {
            self.whole = false;
            self.room = 0;
            return;
        }
        self.room -= text.len() as u64;
        if file.write_all(text).is_err() {
            // A full disk: what is there stays, and is not said to be all.
            self.file = None;
        }
    }
}

/// Makes room and a file that only its owner can read.
fn begin(folder: &Path, path: &Path) -> io::Result<(File, u64)> {
    fs::DirBuilder::new().recursive(true).mode(0o700).create(folder)?;
    let mut others: Vec<(SystemTime, u64, PathBuf)> = fs::read_dir(folder)?
        .flatten()
        .filter_map(|entry| {
            let meta = entry.metadata().ok()?;
            Some((meta.modified().ok()?, meta.len(), entry.path()))
        })
        .collect();
    others.sort();
    let mut held: u64 = others.iter().map(|(_, bytes, _)| bytes).sum();
    for (_, bytes, other) in others {
        if held <= ROOM - SHARE {
            break;
        }
        fs::remove_file(other)?;
        held -= bytes;
    }
    let file = OpenOptions::new().write(true).create(true).truncate(true).mode(0o600).open(path)?;
    Ok((file, ROOM - held))
}

#[cfg(test)]
mod tests {
    use std::os::unix::fs::PermissionsExt as _;

    use super::*;

    #[test]
    fn the_whole_text_is_in_a_private_file() -> io::Result<()> {
        let dir = tempfile::tempdir()?;
        let mut overflow = Overflow::new(Some(dir.path().join("outputs")));
        overflow.keep(b"one ");
        overflow.spill();
        overflow.keep(b"two");
        let (path, whole) = overflow.end().unwrap_or_default();
        assert!(whole);
        assert_eq!(fs::read(&path)?, b"one two");
        assert_eq!(fs::metadata(&path)?.permissions().mode() & 0o777, 0o600);
        overflow.keep(b"next cell");
        assert_eq!(overflow.end(), None);
        Ok(())
    }

    #[test]
    fn old_files_make_way() -> io::Result<()> {
        let dir = tempfile::tempdir()?;
        let old = dir.path().join("output-1-1.txt");
        File::create(&old)?.set_len(ROOM)?;
        let mut overflow = Overflow::new(Some(dir.path().to_owned()));
        overflow.spill();
        assert!(!old.exists());
        assert!(overflow.end().is_some());
        Ok(())
    }
}
