//! Where cells run: a folder and an environment.

use std::fmt::Write as _;
use std::path::PathBuf;

/// A folder, and how the environment there differs from the one in which the session began.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub(crate) struct Place {
    pub(crate) folder: PathBuf,
    /// Variables with their values; those without one are not set.
    pub(crate) environment: Vec<(String, Option<String>)>,
}

impl Place {
    /// The folder, with the environment as it is.
    pub(crate) fn folder(folder: PathBuf) -> Place {
        Place { folder, environment: Vec::new() }
    }

    /// What a process that runs cells does to get there.
    pub(super) fn code(&self) -> String {
        let folder = self.folder.display().to_string();
        let mut code = format!("std::env::set_current_dir({folder:?}).map_err(|error| error.to_string())?;");
        for (name, value) in &self.environment {
            // Between two cells nothing else of the process reads the environment.
            let _ = match value {
                Some(value) => write!(code, "\nunsafe {{ std::env::set_var({name:?}, {value:?}) }};"),
                None => write!(code, "\nunsafe {{ std::env::remove_var({name:?}) }};"),
            };
        }
        code
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_and_values_are_quoted() {
        let environment = vec![("A".into(), Some("1\n2".into())), ("B".into(), None)];
        let code = Place { folder: "a \"b\"".into(), environment }.code();
        assert!(code.contains(r#"set_current_dir("a \"b\"")"#), "{code}");
        assert!(code.contains(r#"set_var("A", "1\n2")"#) && code.contains(r#"remove_var("B")"#), "{code}");
    }
}
