//! The templates that are part of the program. A test holds the lists against the folders.

/// A file by its name within the template.
pub(crate) type Files = &'static [(&'static str, &'static [u8])];

/// The whole calculation memo.
pub(super) const MEMO: Files = &[
    ("template.toml", include_bytes!("../../../../templates/memo/template.toml")),
    ("memo.typ", include_bytes!("../../../../templates/memo/memo.typ")),
    ("house.typ", include_bytes!("../../../../templates/memo/house.typ")),
    ("lib.typ", include_bytes!("../../../../templates/memo/lib.typ")),
    ("item.typ", include_bytes!("../../../../templates/memo/item.typ")),
];

/// Two sheets with the conclusions; the whole record is attached. House style and building blocks are the
/// memo's.
pub(super) const SUMMARY: Files = &[
    ("template.toml", include_bytes!("../../../../templates/summary/template.toml")),
    ("summary.typ", include_bytes!("../../../../templates/summary/summary.typ")),
    ("house.typ", include_bytes!("../../../../templates/memo/house.typ")),
    ("lib.typ", include_bytes!("../../../../templates/memo/lib.typ")),
];

/// All of them by name.
pub(super) const ALL: [(&str, Files); 2] = [("memo", MEMO), ("summary", SUMMARY)];

#[cfg(test)]
mod tests {
    use std::path::Path;

    use super::*;

    #[test]
    fn the_packed_lists_are_the_folders() {
        for (name, files) in ALL {
            let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../templates").join(name);
            for entry in std::fs::read_dir(folder).unwrap() {
                let file = entry.unwrap().file_name().to_string_lossy().into_owned();
                assert!(files.iter().any(|(packed, _)| *packed == file), "{name}/{file} is not packed");
            }
        }
    }
}
