//! Fills the cache: everything that is compiled once for a compiler and a version of `hade`.

use std::fs::{self, File};
use std::path::{Path, PathBuf};
use std::sync::Arc;

use crate::cache;
use crate::error::{Error, Result};
use crate::packed;
use crate::progress::{Progress, Step};
use crate::session;
use crate::third_party;
use crate::toolchain::Toolchain;

/// The version of what is in a session folder; raise it when the layout changes.
const LAYOUT: &[u8] = b"session 2, evcxr 0.22";

/// Everything a session starts from.
#[derive(Debug, Clone)]
pub struct Prepared {
    folder: PathBuf,
    shared: PathBuf,
    /// As long as it lives, nobody removes the folder.
    held: Option<Arc<File>>,
}

impl Prepared {
    /// The cache folder.
    pub(crate) fn cache(&self) -> &Path {
        self.folder.parent().unwrap_or(&self.folder)
    }

    /// Keeps the folder from being removed.
    fn hold(&mut self) -> Result<()> {
        self.held = Some(Arc::new(cache::hold(&self.folder)?));
        Ok(())
    }

    /// Whether everything is still there.
    pub(crate) fn is_there(&self) -> bool {
        self.plan().exists() && self.library().exists()
    }

    /// Where the whole text of cells goes that print too much.
    pub(crate) fn outputs(&self) -> PathBuf {
        self.cache().join(cache::OUTPUTS)
    }

    /// The folder of the compiler's shared standard library.
    pub(crate) fn shared(&self) -> &Path {
        &self.shared
    }

    /// The source of `hade` with the session manifest.
    pub(crate) fn library(&self) -> PathBuf {
        self.folder.join("hade")
    }

    /// The small standard library the analyser reads.
    pub(crate) fn ministd(&self) -> PathBuf {
        self.folder.join("std")
    }

    /// What the compiler wrapper adds.
    pub(crate) fn plan(&self) -> PathBuf {
        self.folder.join("plan")
    }

    /// A session's folder with `hade` compiled in it.
    pub(crate) fn template(&self) -> PathBuf {
        self.folder.join("template")
    }
}

/// Makes sure everything a session starts from is in the cache folder.
///
/// The first time for a compiler this builds the third-party crates (minutes), the first time for
/// a version of `hade` the library itself. It is safe to call from several processes at once, and
/// what an earlier call left unfinished is made anew.
///
/// # Errors
/// If there is no Rust compiler, a crate cannot be fetched or built, or the disk is full.
pub fn prepare(progress: &mut dyn Progress) -> Result<Prepared> {
    if !cfg!(unix) {
        return Err(Error::Platform);
    }
    let toolchain = Toolchain::find()?;
    let cache = cache::cache_folder()?;
    let libraries_key = third_party::key(&toolchain);
    let libraries = cache.join(format!("libraries-{libraries_key}"));
    let session_key = packed::hash(
        [LAYOUT, libraries_key.as_bytes(), packed::SESSION.as_bytes()]
            .into_iter()
            .chain(packed::pieces(packed::LIBRARY))
            .chain(packed::pieces(packed::MINISTD)),
    );
    let mut prepared =
        Prepared { folder: cache.join(format!("session-{session_key}")), shared: toolchain.shared.clone(), held: None };
    let whole = |prepared: &Prepared| cache::is_whole(&libraries) && cache::is_whole(&prepared.folder);
    if whole(&prepared) && prepared.hold().is_ok() && whole(&prepared) {
        return Ok(prepared);
    }
    prepared.held = None;
    let filled = fill(&mut prepared, &cache, &libraries, &toolchain, progress);
    filled.map_err(|error| error.in_cache(&cache))?;
    progress.step(Step::Done);
    Ok(prepared)
}

fn fill(
    prepared: &mut Prepared,
    cache: &Path,
    libraries: &Path,
    toolchain: &Toolchain,
    progress: &mut dyn Progress,
) -> Result<()> {
    let _lock = cache::lock(cache, progress)?;
    if !cache::is_whole(libraries) {
        third_party::build(libraries, toolchain, progress)?;
    }
    if !cache::is_whole(&prepared.folder) {
        progress.step(Step::Library);
        compile_library(prepared, libraries)?;
    }
    prepared.hold()?;
    cache::prune(cache, &prepared.folder, libraries);
    Ok(())
}

fn compile_library(prepared: &Prepared, libraries: &Path) -> Result<()> {
    cache::begin(&prepared.folder)?;
    let write = |path: PathBuf, content: &[u8]| fs::write(&path, content).map_err(Error::file("write", &path));
    let library = prepared.library();
    packed::unpack(packed::LIBRARY, &library).map_err(Error::file("write", &library))?;
    write(library.join("Cargo.toml"), packed::SESSION.as_bytes())?;
    let ministd = prepared.ministd();
    packed::unpack(packed::MINISTD, &ministd).map_err(Error::file("write", &ministd))?;
    write(prepared.plan(), third_party::plan(libraries)?.to_text().as_bytes())?;
    session::make_template(prepared)?;
    cache::finish(&prepared.folder)
}
