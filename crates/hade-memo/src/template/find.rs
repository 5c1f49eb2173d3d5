//! Where templates are looked for: the project, the user's data folder, the program.

use std::path::{Path, PathBuf};

use super::{Template, packed};
use crate::error::{Error, Result};
use crate::world::Root;

/// Where a template was found. One that is nearer goes before another of its name.
#[derive(Clone, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Place {
    /// `templates/NAME` beside the notebook.
    Project(PathBuf),
    /// `hade/templates/NAME` in the user's data folder.
    User(PathBuf),
    /// Part of the program.
    BuiltIn,
}

/// A template that can be asked for by its name.
#[derive(Clone, Debug)]
#[non_exhaustive]
pub struct FoundTemplate {
    /// The name to ask for: the folder's.
    pub name: String,
    /// Where it is.
    pub place: Place,
    /// Version and what it is for; or why it cannot be used.
    pub about: std::result::Result<(String, String), String>,
    /// Its settings: name, what it does, default.
    pub settings: Vec<[String; 3]>,
}

/// Every template that a notebook in this folder can ask for by name, the nearest of each name: in
/// `templates/` beside the notebook, in `hade/templates/` of the user's data folder, built in.
pub fn templates(folder: &Path) -> Vec<FoundTemplate> {
    let mut found: Vec<FoundTemplate> = Vec::new();
    let mut add = |name: String, place: Place, template: Result<Template>| {
        if found.iter().any(|other| other.name == name) {
            return;
        }
        let settings = template
            .as_ref()
            .map(|t| t.parameters.iter().map(|(name, p)| [name.clone(), p.about.clone(), p.default.clone()]).collect());
        found.push(FoundTemplate {
            name,
            place,
            settings: settings.unwrap_or_default(),
            about: template.map(|t| (t.version, t.about)).map_err(|error| error.to_string()),
        });
    };
    for (base, place) in bases(folder) {
        for (name, path) in folders(&base) {
            add(name, place(path.clone()), Template::in_folder(&path));
        }
    }
    for (name, files) in packed::ALL {
        add(name.to_owned(), Place::BuiltIn, Template::open(Root::Packed(files), None));
    }
    found
}

/// A template by folder or by name.
pub(super) fn named(wanted: &Path, folder: &Path) -> Result<Template> {
    if wanted.is_dir() {
        return Template::in_folder(wanted);
    }
    let name = wanted.to_string_lossy();
    let plain = !name.contains(['/', '\\']) && name != "." && name != "..";
    if plain {
        for (base, _) in bases(folder) {
            let path = base.join(wanted);
            if path.is_dir() {
                return Template::in_folder(&path);
            }
        }
        if let Some((_, files)) = packed::ALL.iter().find(|(packed, _)| *packed == name) {
            return Template::open(Root::Packed(files), None);
        }
    }
    let known: Vec<String> = templates(folder).into_iter().map(|t| t.name).collect();
    Err(Error::template(
        wanted,
        format!("there is no such folder, and no template of that name; there are: {}", known.join(", ")),
    ))
}

/// Writes what a template of your own begins with into a new folder: the manifest and the house style, over
/// a template of the program from which everything else comes; or, when that is wanted or the template is no
/// part of the program, a copy of all its files.
///
/// # Errors
/// When the template is not known, the folder is there already and not empty, or a file cannot be written.
pub fn copy_template(from: &Path, folder: &Path, to: &Path, whole: bool) -> Result<()> {
    let cannot = |path: &Path, e: &std::io::Error| Error::template(path, format!("it cannot be written: {e}"));
    if to.is_file() || std::fs::read_dir(to).is_ok_and(|mut entries| entries.next().is_some()) {
        return Err(Error::template(to, "it is there already and stays as it is; name a new folder"));
    }
    let template = named(from, folder)?;
    std::fs::create_dir_all(to).map_err(|e| cannot(to, &e))?;
    match template.root {
        Root::Packed(files) => {
            for (name, bytes) in files.iter().filter(|(name, _)| whole || BEGINNING.contains(name)) {
                let path = to.join(name);
                let extends = format!("name = \"{0}\"", template.name);
                let manifest = !whole && *name == super::MANIFEST;
                let text = String::from_utf8_lossy(bytes);
                let text = text.replace(&extends, &format!("{extends}\nextends = \"{0}\"", template.name));
                let bytes = if manifest { text.as_bytes() } else { bytes };
                std::fs::write(&path, bytes).map_err(|e| cannot(&path, &e))?;
            }
        }
        Root::Folder(source) | Root::Over(source, _) => copy_files(&source, to)?,
    }
    Ok(())
}

/// What a house style changes: the manifest, and paper, faces, header, footer and watermark.
const BEGINNING: [&str; 2] = [super::MANIFEST, "house.typ"];

fn copy_files(from: &Path, to: &Path) -> Result<()> {
    let cannot = |path: &Path, e: &std::io::Error| Error::template(path, format!("it cannot be copied: {e}"));
    for entry in std::fs::read_dir(from).map_err(|e| cannot(from, &e))? {
        let path = entry.map_err(|e| cannot(from, &e))?.path();
        let target = to.join(path.file_name().unwrap_or_default());
        if path.is_dir() {
            std::fs::create_dir_all(&target).map_err(|e| cannot(&target, &e))?;
            copy_files(&path, &target)?;
        } else {
            std::fs::copy(&path, &target).map_err(|e| cannot(&path, &e))?;
        }
    }
    Ok(())
}

/// What a folder of templates makes of a template's folder.
type In = fn(PathBuf) -> Place;

/// The folders that hold templates, the nearest first.
fn bases(folder: &Path) -> Vec<(PathBuf, In)> {
    let mut bases: Vec<(PathBuf, In)> = vec![(folder.join("templates"), Place::Project)];
    if let Some(data) = user_data() {
        bases.push((data.join("hade").join("templates"), Place::User));
    }
    bases
}

/// The user's data folder.
fn user_data() -> Option<PathBuf> {
    let variable = |name: &str| std::env::var_os(name).filter(|v| !v.is_empty()).map(PathBuf::from);
    if let Some(data) = variable("XDG_DATA_HOME") {
        return Some(data);
    }
    let home = variable("HOME")?;
    Some(if cfg!(target_os = "macos") { home.join("Library/Application Support") } else { home.join(".local/share") })
}

/// The folders below one that look like templates, by name in order.
fn folders(base: &Path) -> Vec<(String, PathBuf)> {
    let mut found: Vec<(String, PathBuf)> = std::fs::read_dir(base)
        .into_iter()
        .flatten()
        .flatten()
        .map(|entry| entry.path())
        .filter(|path| path.join(super::MANIFEST).is_file())
        .map(|path| (path.file_name().unwrap_or_default().to_string_lossy().into_owned(), path))
        .collect();
    found.sort();
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_nearest_of_a_name_is_taken_and_a_copy_can_be_used() {
        let place = tempfile::tempdir().unwrap();
        let ours = place.path().join("templates/summary");
        copy_template(Path::new("memo"), place.path(), &ours, false).unwrap();
        let mut files: Vec<_> =
            std::fs::read_dir(&ours).unwrap().map(|e| e.unwrap().file_name().into_string().unwrap()).collect();
        files.sort();
        assert_eq!(files, ["house.typ", "template.toml"]);
        let found = templates(place.path());
        let summary = found.iter().find(|t| t.name == "summary").unwrap();
        assert!(matches!(&summary.place, Place::Project(path) if *path == ours), "{summary:?}");
        assert!(summary.about.is_ok());
        assert_eq!(named(Path::new("summary"), place.path()).unwrap().entry.get_without_slash(), "memo.typ");
        assert_eq!(named(Path::new("summary"), Path::new("nowhere")).unwrap().entry.get_without_slash(), "summary.typ");
        let again = copy_template(Path::new("memo"), place.path(), &ours, true).unwrap_err().to_string();
        assert!(again.contains("stays as it is"), "{again}");
        let unknown = named(Path::new("nothing"), place.path()).unwrap_err().to_string();
        assert!(unknown.contains("memo") && unknown.contains("summary"), "{unknown}");
        assert!(named(Path::new("../memo"), place.path()).is_err());
    }
}
