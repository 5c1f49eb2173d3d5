//! What Typst can see: the files of one template, the files that exist only for this memo, and the
//! packed fonts. No other file, no package, no clock.

use std::collections::BTreeMap;
use std::path::PathBuf;
use std::sync::OnceLock;

use typst::diag::{FileError, FileResult, PackageError};
use typst::foundations::{Bytes, Datetime, Duration};
use typst::syntax::{FileId, RootedPath, Source, VirtualPath, VirtualRoot};
use typst::text::{Font, FontBook};
use typst::utils::LazyHash;
use typst::{Feature, Library, LibraryExt, World};
use typst_kit::diagnostics::DiagnosticWorld;
use typst_kit::files::{FileLoader, FileStore};

use crate::fonts;

/// Largest file of a template.
const MOST_BYTES: u64 = 32 << 20;

/// Typst's library, the same for every memo.
pub(crate) fn library() -> &'static LazyHash<Library> {
    static LIBRARY: OnceLock<LazyHash<Library>> = OnceLock::new();
    LIBRARY.get_or_init(|| {
        let features = [Feature::A11yExtras].into_iter().collect();
        LazyHash::new(Library::builder().with_features(features).build())
    })
}

/// Where the template's files are.
#[derive(Clone, Debug)]
pub(crate) enum Root {
    /// Packed into the program.
    Packed(&'static [(&'static str, &'static [u8])]),
    /// A folder, canonical.
    Folder(PathBuf),
    /// A folder, canonical, and the packed template whose files it has where it has none of its own.
    Over(PathBuf, &'static [(&'static str, &'static [u8])]),
}

impl Root {
    /// The bytes of a file of the template. A path that leaves the folder, by dots or by a symbolic
    /// link, is refused.
    pub(crate) fn read(&self, path: &VirtualPath) -> FileResult<Bytes> {
        let name = path.get_without_slash();
        match self {
            Root::Packed(files) => files
                .iter()
                .find(|(file, _)| *file == name)
                .map(|(_, bytes)| Bytes::new(*bytes))
                .ok_or_else(|| FileError::NotFound(name.into())),
            Root::Over(folder, files) => match Root::Folder(folder.clone()).read(path) {
                Err(FileError::NotFound(_)) => Root::Packed(files).read(path),
                read => read,
            },
            Root::Folder(folder) => {
                // Messages show the path within the folder, never the machine's.
                let io = |e| FileError::from_io(e, name.as_ref());
                let real = path.realize(folder)?.canonicalize().map_err(io)?;
                if !real.starts_with(folder) {
                    return Err(FileError::Other(Some("it is outside the template's folder".into())));
                }
                let about = std::fs::metadata(&real).map_err(io)?;
                if about.is_dir() {
                    return Err(FileError::IsDirectory);
                }
                if !about.is_file() || about.len() > MOST_BYTES {
                    return Err(FileError::Other(Some("it is not a file of at most 32 MB".into())));
                }
                std::fs::read(&real).map(Bytes::new).map_err(io)
            }
        }
    }
}

/// Loads the memo's own files first, then the template's.
pub(crate) struct Loader {
    root: Root,
    own: BTreeMap<String, Bytes>,
}

impl FileLoader for Loader {
    fn load(&self, id: FileId) -> FileResult<Bytes> {
        let path = id.get();
        if let VirtualRoot::Package(package) = path.root() {
            let why = format!("a template uses no packages, and this one asks for {package}");
            return Err(FileError::Package(PackageError::Other(Some(why.into()))));
        }
        match self.own.get(path.vpath().get_without_slash()) {
            Some(bytes) => Ok(bytes.clone()),
            None => self.root.read(path.vpath()),
        }
    }
}

/// One memo's world.
pub(crate) struct MemoWorld {
    files: FileStore<Loader>,
    main: FileId,
    shown_as: String,
}

impl MemoWorld {
    /// A template's files, the memo's own files by name, and the file to begin with. `shown_as` is
    /// put before file names in messages.
    pub(crate) fn new(root: Root, own: BTreeMap<String, Bytes>, entry: &VirtualPath, shown_as: String) -> Self {
        let main = RootedPath::new(VirtualRoot::Project, entry.clone()).intern();
        MemoWorld { files: FileStore::new(Loader { root, own }), main, shown_as }
    }
}

impl World for MemoWorld {
    fn library(&self) -> &LazyHash<Library> {
        library()
    }
    fn book(&self) -> &LazyHash<FontBook> {
        fonts::store().book()
    }
    fn main(&self) -> FileId {
        self.main
    }
    fn source(&self, id: FileId) -> FileResult<Source> {
        self.files.source(id)
    }
    fn file(&self, id: FileId) -> FileResult<Bytes> {
        self.files.file(id)
    }
    fn font(&self, index: usize) -> Option<Font> {
        fonts::store().font(index)
    }
    fn today(&self, _: Option<Duration>) -> Option<Datetime> {
        None
    }
}

impl DiagnosticWorld for MemoWorld {
    fn name(&self, id: FileId) -> String {
        format!("{}{}", self.shown_as, id.get().vpath().get_without_slash())
    }
}
