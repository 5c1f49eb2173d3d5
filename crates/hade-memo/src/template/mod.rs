//! Templates: folders with `template.toml`, Typst files and assets.

mod check;
mod find;
mod packed;

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

pub use check::check_template;
pub use find::{FoundTemplate, Place, copy_template, templates};

use serde::Deserialize;
use typst::syntax::VirtualPath;

use crate::error::{Error, Result};
use crate::fonts;
use crate::world::Root;

/// The name of the manifest.
const MANIFEST: &str = "template.toml";

/// A setting of a template that a project may change.
#[derive(Clone, Debug, PartialEq, Eq, Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Parameter {
    /// What it does.
    pub about: String,
    /// The value when the project says nothing.
    pub default: String,
    /// The values that are allowed; empty for any.
    #[serde(default)]
    pub allowed: Vec<String>,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
struct Manifest {
    name: String,
    version: String,
    #[serde(default)]
    about: String,
    /// A template of the program whose files this one has where it has none of its own.
    #[serde(default)]
    extends: String,
    entry: String,
    record_schema: u32,
    #[serde(default)]
    fonts: Vec<String>,
    #[serde(default)]
    parameters: BTreeMap<String, Parameter>,
}

/// A template, its manifest read and its parts found.
#[derive(Debug)]
pub(crate) struct Template {
    /// Its files.
    pub root: Root,
    /// Its name.
    pub name: String,
    /// Its version.
    pub version: String,
    /// What it is for.
    pub about: String,
    /// The file to begin with.
    pub entry: VirtualPath,
    /// Its settings.
    pub parameters: BTreeMap<String, Parameter>,
    folder: Option<PathBuf>,
}

impl Template {
    /// The template that is used when none is asked for.
    pub(crate) fn packed() -> Result<Self> {
        Template::open(Root::Packed(packed::MEMO), None)
    }

    /// A template by its folder or its name, as seen from a notebook's folder; see [`templates`] for where
    /// names are looked for.
    pub(crate) fn named(wanted: &Path, folder: &Path) -> Result<Self> {
        find::named(wanted, folder)
    }

    /// The template in a folder.
    pub(crate) fn in_folder(folder: &Path) -> Result<Self> {
        let real = folder.canonicalize().map_err(|e| {
            let why = match e.kind() {
                std::io::ErrorKind::NotFound => "there is no such folder".to_owned(),
                _ => e.to_string(),
            };
            Error::template(folder, why)
        })?;
        Template::open(Root::Folder(real), Some(folder))
    }

    fn open(root: Root, folder: Option<&Path>) -> Result<Self> {
        let bad = |why: String| Error::template(folder.unwrap_or(Path::new("memo (built in)")), why);
        let manifest_path = VirtualPath::new(MANIFEST).map_err(|e| bad(e.to_string()))?;
        let bytes = root.read(&manifest_path).map_err(|e| bad(format!("{MANIFEST}: {e}")))?;
        let text = std::str::from_utf8(&bytes).map_err(|_| bad(format!("{MANIFEST} is not UTF-8 text")))?;
        let manifest: Manifest =
            toml::from_str(text).map_err(|e| bad(format!("{MANIFEST}: {}", e.to_string().trim_end())))?;
        if manifest.record_schema != hade::sheet::RECORD_SCHEMA {
            return Err(bad(format!(
                "it is made for records of schema {}, and this version of Hade writes schema {}; use a template made for it",
                manifest.record_schema,
                hade::sheet::RECORD_SCHEMA
            )));
        }
        let root = match (root, manifest.extends.as_str()) {
            (root, "") => root,
            (Root::Folder(real), base) => match packed::ALL.iter().find(|(name, _)| *name == base) {
                Some((_, files)) => Root::Over(real, files),
                None => {
                    let known = packed::ALL.map(|(name, _)| name).join(", ");
                    return Err(bad(format!("it extends \"{base}\", which is none of the program's: {known}")));
                }
            },
            (root, _) => root,
        };
        if let Some(font) = manifest.fonts.iter().find(|f| !fonts::has_family(f)) {
            return Err(bad(format!(
                "it asks for the font \"{font}\", which is not packed; use Inter, Libertinus Serif, New Computer Modern or DejaVu Sans Mono"
            )));
        }
        let entry = VirtualPath::new(&manifest.entry).map_err(|e| bad(format!("entry \"{}\": {e}", manifest.entry)))?;
        root.read(&entry).map_err(|e| bad(format!("entry \"{}\": {e}", manifest.entry)))?;
        Ok(Template {
            root,
            name: manifest.name,
            version: manifest.version,
            about: manifest.about,
            entry,
            parameters: manifest.parameters,
            folder: folder.map(Path::to_path_buf),
        })
    }

    /// What is put before a file's name in a message.
    pub(crate) fn shown_as(&self) -> String {
        match &self.folder {
            Some(folder) => format!("{}/", folder.display()),
            None => format!("{} (built in)/", self.name),
        }
    }

    /// The settings as this project wants them. One that the template does not have, or a value it
    /// does not allow, is refused.
    pub(crate) fn settings(&self, wanted: &BTreeMap<String, String>) -> Result<BTreeMap<String, String>> {
        let bad = |why: String| Error::template(self.folder.as_deref().unwrap_or(Path::new("memo (built in)")), why);
        let mut settings: BTreeMap<String, String> =
            self.parameters.iter().map(|(name, p)| (name.clone(), p.default.clone())).collect();
        for (name, value) in wanted {
            let Some(parameter) = self.parameters.get(name) else {
                let known = self.parameters.keys().cloned().collect::<Vec<_>>().join(", ");
                return Err(bad(format!("it has no setting \"{name}\" (it has: {known})")));
            };
            if !parameter.allowed.is_empty() && !parameter.allowed.contains(value) {
                let allowed = parameter.allowed.join(", ");
                return Err(bad(format!("the setting \"{name}\" is \"{value}\", but it must be one of: {allowed}")));
            }
            settings.insert(name.clone(), value.clone());
        }
        Ok(settings)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn settings_are_checked() {
        let template = Template::packed().unwrap();
        let set = |name: &str, value: &str| template.settings(&BTreeMap::from([(name.to_owned(), value.to_owned())]));
        assert_eq!(set("paper", "us-letter").unwrap()["paper"], "us-letter");
        assert!(set("paper", "a0").unwrap_err().to_string().contains("a4"));
        assert!(set("papr", "a4").unwrap_err().to_string().contains("papr"));
    }
}
