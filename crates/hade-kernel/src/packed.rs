//! The source of `hade`, packed into this program.

use std::path::Path;
use std::{fs, io};

use sha2::{Digest, Sha256};

include!(concat!(env!("OUT_DIR"), "/packed.rs"));

/// The versions of those crates: the workspace's own.
pub(crate) static LOCK: &str = include_str!(concat!(env!("OUT_DIR"), "/Cargo.lock"));

/// The manifest from which the third-party crates are built.
pub(crate) static STANDALONE: &str = include_str!(concat!(env!("OUT_DIR"), "/standalone.toml"));

/// The manifest a session sees: no dependencies, a dylib.
pub(crate) static SESSION: &str = include_str!(concat!(env!("OUT_DIR"), "/session.toml"));

/// Short hash of several pieces, each with its length, as a folder name.
pub(crate) fn hash<'a>(pieces: impl IntoIterator<Item = &'a [u8]>) -> String {
    let mut hasher = Sha256::new();
    for piece in pieces {
        hasher.update((piece.len() as u64).to_le_bytes());
        hasher.update(piece);
    }
    hasher.finalize().iter().take(10).map(|byte| format!("{byte:02x}")).collect()
}

/// The pieces of a packed folder, for [`hash`].
pub(crate) fn pieces<'a>(files: &'a [(&str, &[u8])]) -> impl Iterator<Item = &'a [u8]> {
    files.iter().flat_map(|(name, content)| [name.as_bytes(), content])
}

/// Writes a packed folder out.
pub(crate) fn unpack(files: &[(&str, &[u8])], folder: &Path) -> io::Result<()> {
    for (name, content) in files {
        let path = folder.join(name);
        if let Some(parent) = path.parent() {
            fs::create_dir_all(parent)?;
        }
        fs::write(path, content)?;
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_library_is_packed() {
        assert!(LIBRARY.iter().any(|(name, _)| *name == "src/lib.rs"));
        assert!(LIBRARY.iter().all(|(name, _)| !name.ends_with("Cargo.toml")));
        let names: Vec<&str> = LOCK.lines().filter_map(|line| line.strip_prefix("name = ")).collect();
        assert!(names.contains(&"\"serde\"") && names.contains(&"\"hade\""));
        assert!(!names.contains(&"\"evcxr\"") && !names.contains(&"\"proptest\""));
    }

    #[test]
    fn the_manifests_stand_alone() {
        for manifest in [STANDALONE, SESSION] {
            assert!(manifest.contains("name = \"hade\""));
            assert!(!manifest.contains("workspace = true"));
            assert!(!manifest.contains("dev-dependencies"));
        }
        assert!(STANDALONE.contains("serde"));
        assert!(SESSION.contains("dylib"));
        assert!(!SESSION.contains("serde"));
    }

    #[test]
    fn a_hash_knows_where_pieces_end() {
        let hash = |pieces: &[&str]| super::hash(pieces.iter().map(|piece| piece.as_bytes()));
        assert_ne!(hash(&["ab", "c"]), hash(&["a", "bc"]));
        assert_eq!(hash(&["ab"]).len(), 20);
    }
}
