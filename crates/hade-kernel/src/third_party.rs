//! Builds the third-party crates `hade` uses, once for a compiler and a lock file.

use std::collections::BTreeMap;
use std::fs;
use std::io::{BufRead as _, BufReader, Read as _};
use std::path::{Path, PathBuf};
use std::process::Stdio;

use serde_json::Value;

use crate::cache;
use crate::error::{Error, Result};
use crate::packed;
use crate::progress::{Progress, Step};
use crate::toolchain::Toolchain;
use crate::wrapper::Plan;

/// Where the compiled crates lie in the folder.
const LIB: &str = "lib";

/// The list of crates `hade` names, one `name<TAB>file` a line.
const EXTERNS: &str = "externs";

/// Short hash of everything the compiled crates depend on.
pub(crate) fn key(toolchain: &Toolchain) -> String {
    packed::hash([b"libraries 1", toolchain.version.as_bytes(), packed::STANDALONE.as_bytes(), packed::LOCK.as_bytes()])
}

/// Builds into `folder`, which is finished on success. The caller holds the cache's lock.
pub(crate) fn build(folder: &Path, toolchain: &Toolchain, progress: &mut dyn Progress) -> Result<()> {
    cache::begin(folder)?;
    let work = folder.join(format!("build-{}", std::process::id()));
    let write = |name: &str, content: &[u8]| {
        let path = work.join(name);
        fs::write(&path, content).map_err(Error::file("write", &path))
    };
    let src = work.join("src");
    fs::create_dir_all(&src).map_err(Error::file("make the folder", &src))?;
    write("Cargo.toml", packed::STANDALONE.as_bytes())?;
    write("Cargo.lock", packed::LOCK.as_bytes())?;
    // An empty library with the dependencies of `hade`: Cargo builds them all the same.
    write("src/lib.rs", b"")?;

    let built = match run(&work, toolchain, true, progress) {
        Ok(built) => built,
        Err(why) if !why.contains("offline") => return Err(Error::Build { why: plain(why, folder) }),
        Err(_) => {
            progress.step(Step::Notice("some source code is not on this machine yet; fetching it from crates.io"));
            write("Cargo.lock", packed::LOCK.as_bytes())?;
            run(&work, toolchain, false, progress).map_err(|why| Error::Build { why: plain(why, folder) })?
        }
    };

    let lib = folder.join(LIB);
    fs::create_dir_all(&lib).map_err(Error::file("make the folder", &lib))?;
    for file in &built.files {
        let target = lib.join(file.file_name().unwrap_or_default());
        fs::copy(file, &target).map_err(Error::file("copy", file))?;
    }
    let direct = direct_dependencies(&work, toolchain)?;
    let mut externs = String::new();
    for (name, library) in direct {
        let Some(file) = built.by_library.get(&library) else {
            return Err(Error::Build { why: format!("cargo built no library {library}") });
        };
        externs.push_str(&format!("{name}\t{file}\n"));
    }
    let list = folder.join(EXTERNS);
    fs::write(&list, externs).map_err(Error::file("write", &list))?;
    fs::remove_dir_all(&work).map_err(Error::file("remove", &work))?;
    cache::finish(folder)
}

/// What to add to the compilation of `hade` and of the cells.
pub(crate) fn plan(folder: &Path) -> Result<Plan> {
    let list = folder.join(EXTERNS);
    let externs = fs::read_to_string(&list).map_err(Error::file("read", &list))?;
    let lib = folder.join(LIB);
    let search = format!("-Ldependency={}", lib.display());
    let mut library: Vec<String> = externs
        .lines()
        .filter_map(|line| line.split_once('\t'))
        .map(|(name, file)| format!("--extern={name}={}", lib.join(file).display()))
        .collect();
    library.push(search.clone());
    // A session compiles cells unoptimised; the library itself is compiled once and should be fast.
    for option in ["-Copt-level=3", "-Cdebug-assertions=off", "-Coverflow-checks=off"] {
        library.push(option.to_owned());
    }
    Ok(Plan { library, cell: vec![search] })
}

#[derive(Debug, Default)]
struct Built {
    /// Every compiled library and macro.
    files: Vec<PathBuf>,
    /// Cargo's id of a package to the file name of its library.
    by_library: BTreeMap<String, String>,
}

/// One run of Cargo; an error is the end of what it said.
fn run(
    work: &Path,
    toolchain: &Toolchain,
    offline: bool,
    progress: &mut dyn Progress,
) -> std::result::Result<Built, String> {
    let total = metadata(work, toolchain, offline)?["resolve"]["nodes"]
        .as_array()
        .map_or(0, |nodes| nodes.len().saturating_sub(1));
    let mut command = toolchain.cargo();
    command
        .args(["build", "--release", "--message-format=json-render-diagnostics"])
        .args(offline.then_some("--offline"))
        .env("CARGO_TARGET_DIR", "target")
        .env("CARGO_PROFILE_RELEASE_DEBUG", "false")
        .current_dir(work)
        .stdin(Stdio::null())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped());
    let mut child = command.spawn().map_err(|error| error.to_string())?;
    let stderr = child.stderr.take();
    let said = std::thread::spawn(move || {
        let mut text = Vec::new();
        if let Some(mut stderr) = stderr {
            let _ = stderr.read_to_end(&mut text);
        }
        String::from_utf8_lossy(&text).into_owned()
    });
    let mut built = Built::default();
    let mut done = 0;
    for line in BufReader::new(child.stdout.take().ok_or("no output")?).lines() {
        let Ok(message) = serde_json::from_str::<Value>(&line.map_err(|error| error.to_string())?) else {
            continue;
        };
        if message["reason"] != "compiler-artifact" {
            continue;
        }
        let kinds = message["target"]["kind"].to_string();
        let name = message["target"]["name"].as_str().unwrap_or_default();
        if kinds.contains("custom-build") || (name == "hade" && kinds.contains("lib")) {
            continue;
        }
        done += 1;
        progress.step(Step::Libraries { name, done, total: total.max(done) });
        for file in message["filenames"].as_array().into_iter().flatten() {
            let path = PathBuf::from(file.as_str().unwrap_or_default());
            let wanted =
                path.extension().is_some_and(|ending| ["rlib", "so", "dylib"].iter().any(|known| ending == *known));
            if wanted && let Some(file) = path.file_name() {
                let id = message["package_id"].as_str().unwrap_or_default();
                let file = file.to_string_lossy().into_owned();
                let known = built.by_library.entry(id.to_owned()).or_default();
                if !known.ends_with(".rlib") {
                    *known = file;
                }
                built.files.push(path);
            }
        }
    }
    let status = child.wait().map_err(|error| error.to_string())?;
    let said = said.join().unwrap_or_default();
    if status.success() { Ok(built) } else { Err(last_lines(&said, 12)) }
}

fn metadata(work: &Path, toolchain: &Toolchain, offline: bool) -> std::result::Result<Value, String> {
    let said = toolchain
        .cargo()
        .args(["metadata", "--format-version=1", "--filter-platform", &toolchain.host])
        .args(offline.then_some("--offline"))
        .current_dir(work)
        .output()
        .map_err(|error| error.to_string())?;
    if !said.status.success() {
        return Err(last_lines(&String::from_utf8_lossy(&said.stderr), 12));
    }
    serde_json::from_slice(&said.stdout).map_err(|error| error.to_string())
}

/// The crates `hade` names: the name in its source and Cargo's id of the package.
fn direct_dependencies(work: &Path, toolchain: &Toolchain) -> Result<Vec<(String, String)>> {
    let metadata = metadata(work, toolchain, true).map_err(|why| Error::Build { why })?;
    let root = &metadata["resolve"]["root"];
    let nodes = metadata["resolve"]["nodes"].as_array();
    let node = nodes
        .into_iter()
        .flatten()
        .find(|node| &node["id"] == root)
        .ok_or_else(|| Error::Build { why: "cargo did not describe the library's dependencies".to_owned() })?;
    Ok(node["deps"]
        .as_array()
        .into_iter()
        .flatten()
        .filter_map(|dep| Some((dep["name"].as_str()?.to_owned(), dep["pkg"].as_str()?.to_owned())))
        .collect())
}

/// The end of what Cargo said, without its progress.
fn last_lines(text: &str, count: usize) -> String {
    let progress = ["Compiling", "Checking", "Blocking", "Downloading", "Downloaded", "Updating", "Locking"];
    let lines: Vec<&str> = text
        .lines()
        .filter(|line| !line.trim().is_empty() && !progress.iter().any(|word| line.trim_start().starts_with(word)))
        .collect();
    lines[lines.len().saturating_sub(count)..].join("\n")
}

/// Two causes a user can act on, said plainly; anything else as Cargo says it.
fn plain(why: String, folder: &Path) -> String {
    if why.contains("No space left on device") {
        return format!("the disk is full; free some 500 MB for {}", folder.display());
    }
    if why.contains("failed to download") || why.contains("Could not resolve host") || why.contains("spurious network")
    {
        return format!(
            "their source is not on this machine and crates.io was not reached; connect once to fetch it.\n{why}"
        );
    }
    why
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn another_compiler_gets_libraries_of_its_own() {
        let toolchain = |version: &str| Toolchain {
            cargo: "cargo".into(),
            rustc: "rustc".into(),
            version: version.to_owned(),
            host: String::new(),
            shared: PathBuf::new(),
        };
        assert_eq!(key(&toolchain("rustc 1.95.0")), key(&toolchain("rustc 1.95.0")));
        assert_ne!(key(&toolchain("rustc 1.95.0")), key(&toolchain("rustc 1.96.0")));
    }

    #[test]
    fn causes_are_said_plainly() {
        let folder = Path::new("/cache/libraries-x");
        let full = plain("error: No space left on device (os error 28)".into(), folder);
        assert!(full.starts_with("the disk is full") && full.contains("/cache/libraries-x"));
        assert_eq!(plain("error: odd".into(), folder), "error: odd");
        assert_eq!(last_lines("   Compiling a v1\nerror: odd\n\n", 5), "error: odd");
    }
}
