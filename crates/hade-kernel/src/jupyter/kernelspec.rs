//! Making the kernel known to Jupyter.

use std::path::{Path, PathBuf};
use std::{env, fs};

use serde_json::{Value, json};

use crate::cache::CACHE_VAR;
use crate::error::{Error, Result};

/// The name by which notebooks call the kernel.
const NAME: &str = "hade";

/// What Jupyter shows for it.
const LOGOS: [(&str, &[u8]); 3] = [
    ("logo-svg.svg", include_bytes!("../../assets/logo.svg")),
    ("logo-32x32.png", include_bytes!("../../assets/logo-32x32.png")),
    ("logo-64x64.png", include_bytes!("../../assets/logo-64x64.png")),
];

/// Where Jupyter looks for kernels.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub enum KernelPlace {
    /// The user's own data folder.
    #[default]
    User,
    /// A folder such as that of a Python environment; `share/jupyter` is added.
    Prefix(PathBuf),
}

impl KernelPlace {
    /// Jupyter's data folder there.
    fn data_folder(&self) -> Result<PathBuf> {
        if let KernelPlace::Prefix(prefix) = self {
            let prefix = std::path::absolute(prefix).map_err(Error::file("find", prefix))?;
            return Ok(prefix.join("share").join("jupyter"));
        }
        let set = |name| env::var_os(name).filter(|value| !value.is_empty()).map(PathBuf::from);
        let home = || set("HOME");
        set("JUPYTER_DATA_DIR")
            .or_else(|| match cfg!(target_os = "macos") {
                true => home().map(|home| home.join("Library/Jupyter")),
                false => set("XDG_DATA_HOME")
                    .or_else(|| home().map(|home| home.join(".local/share")))
                    .map(|data| data.join("jupyter")),
            })
            .ok_or_else(|| Error::Start {
                why: "the system names no home folder; say with --prefix where Jupyter is".to_owned(),
            })
    }
}

/// Makes this program known to Jupyter as the kernel `hade`, and returns the folder that says so. An
/// earlier one is replaced. With `standby` one session is kept ready for the next notebook.
///
/// # Errors
/// If the folder cannot be written.
pub fn install_kernel(place: &KernelPlace, standby: bool) -> Result<PathBuf> {
    let program = env::current_exe().map_err(|error| Error::Start { why: error.to_string() })?;
    write(&place.data_folder()?, &spec(&program, standby))
}

/// The kernel as Jupyter's file describes it.
fn spec(program: &Path, standby: bool) -> Value {
    // The kernel must find the libraries that are prepared now.
    let cache = env::var_os(CACHE_VAR)
        .filter(|value| !value.is_empty())
        .and_then(|folder| std::path::absolute(folder).ok())
        .map(|folder| json!({ CACHE_VAR: folder }));
    let program = program.to_string_lossy();
    let mut words = vec![&*program, "kernel", "start", "--connection-file", "{connection_file}"];
    if standby {
        words.push("--standby");
    }
    json!({
        "argv": words,
        "display_name": "Hade (Rust)",
        "language": "rust",
        "interrupt_mode": "message",
        "metadata": {"debugger": false},
        "env": cache.unwrap_or_else(|| json!({})),
    })
}

/// Writes the folder beside the others first, so that Jupyter never sees half of it.
fn write(data: &Path, spec: &Value) -> Result<PathBuf> {
    let kernels = data.join("kernels");
    fs::create_dir_all(&kernels).map_err(Error::file("make the folder", &kernels))?;
    let aside = tempfile::Builder::new()
        .prefix("hade-kernel-")
        .tempdir_in(data)
        .map_err(Error::file("make a folder in", data))?;
    let new = aside.path().join("new");
    fs::create_dir(&new).map_err(Error::file("make the folder", &new))?;
    let text = format!("{spec:#}\n");
    for (name, content) in LOGOS.into_iter().chain([("kernel.json", text.as_bytes())]) {
        let path = new.join(name);
        fs::write(&path, content).map_err(Error::file("write", &path))?;
    }
    let target = kernels.join(NAME);
    if target.symlink_metadata().is_ok() {
        fs::rename(&target, aside.path().join("old")).map_err(Error::file("replace", &target))?;
    }
    fs::rename(&new, &target).map_err(Error::file("write", &target))?;
    Ok(target)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_folder_is_written_and_replaced_whole() -> Result<()> {
        let folder = tempfile::tempdir().map_err(Error::file("make", "a folder"))?;
        let place = KernelPlace::Prefix(folder.path().to_path_buf());
        let data = place.data_folder()?;
        assert_eq!(data, folder.path().join("share/jupyter"));
        let target = write(&data, &spec(Path::new("/old/hade"), true))?;
        fs::write(target.join("left-over"), "x").map_err(Error::file("write", &target))?;
        assert_eq!(write(&data, &spec(Path::new("/new/hade"), false))?, target);
        let text = fs::read(target.join("kernel.json")).map_err(Error::file("read", &target))?;
        let spec: Value = serde_json::from_slice(&text).unwrap_or_default();
        assert_eq!(spec["argv"], json!(["/new/hade", "kernel", "start", "--connection-file", "{connection_file}"]));
        assert_eq!(spec["interrupt_mode"], "message");
        assert!(spec["env"].is_object());
        assert!(!target.join("left-over").exists());
        assert!(LOGOS.iter().all(|(name, _)| target.join(name).is_file()));
        assert_eq!(fs::read_dir(&data).map_err(Error::file("read", &data))?.count(), 1);
        Ok(())
    }
}
