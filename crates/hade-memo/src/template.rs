//! Templates: folders with `template.toml`, Typst files and assets. The default one is packed into
//! the program.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use serde::Deserialize;
use typst::syntax::VirtualPath;

use crate::error::{Error, Result};
use crate::fonts;
use crate::world::Root;

/// The default template. A test holds this list against the folder.
const DEFAULT: &[(&str, &[u8])] = &[
    ("template.toml", include_bytes!("../../../templates/memo/template.toml")),
    ("memo.typ", include_bytes!("../../../templates/memo/memo.typ")),
    ("house.typ", include_bytes!("../../../templates/memo/house.typ")),
    ("lib.typ", include_bytes!("../../../templates/memo/lib.typ")),
    ("item.typ", include_bytes!("../../../templates/memo/item.typ")),
];

/// The name of the manifest.
const MANIFEST: &str = "template.toml";

/// A setting of a template that a project may change.
#[derive(Clone, Debug, PartialEq, Eq, Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Parameter {
    /// What it does.
    #[allow(dead_code)] // `hade template list` will print it
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
    /// The file to begin with.
    pub entry: VirtualPath,
    /// Its settings.
    pub parameters: BTreeMap<String, Parameter>,
    folder: Option<PathBuf>,
}

impl Template {
    /// The default template.
    pub(crate) fn packed() -> Result<Self> {
        Template::open(Root::Packed(DEFAULT), None)
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
    fn the_packed_list_is_the_folder() {
        let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../templates/memo");
        let mut on_disk: Vec<String> = std::fs::read_dir(folder)
            .unwrap()
            .map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned())
            .collect();
        let mut packed: Vec<String> = DEFAULT.iter().map(|(name, _)| (*name).to_owned()).collect();
        on_disk.sort();
        packed.sort();
        assert_eq!(on_disk, packed);
    }

    #[test]
    fn settings_are_checked() {
        let template = Template::packed().unwrap();
        let set = |name: &str, value: &str| template.settings(&BTreeMap::from([(name.to_owned(), value.to_owned())]));
        assert_eq!(set("paper", "us-letter").unwrap()["paper"], "us-letter");
        assert!(set("paper", "a0").unwrap_err().to_string().contains("a4"));
        assert!(set("papr", "a4").unwrap_err().to_string().contains("papr"));
    }
}
