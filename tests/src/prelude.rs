//! What a notebook is given without asking: the names that the prelude exports.

use crate::root;

/// The names that `hade::prelude` exports, in alphabetical order, read from its source. Panics when it cannot be read.
pub fn prelude_names() -> Vec<String> {
    let text = std::fs::read_to_string(root().join("crates/hade/src/prelude.rs")).expect("the prelude");
    names(&text)
}

fn names(text: &str) -> Vec<String> {
    let code: String = text.lines().filter(|l| !l.trim_start().starts_with("//")).collect::<Vec<_>>().join(" ");
    let mut names: Vec<String> = code
        .split(';')
        .filter(|statement| statement.contains("pub use"))
        .flat_map(|statement| {
            let (_, list) = statement.rsplit_once("::").expect("a path");
            list.trim_matches(|c| "{} ".contains(c)).split(',').map(|n| n.trim().to_owned()).collect::<Vec<_>>()
        })
        .filter(|name| !name.is_empty())
        .collect();
    names.sort();
    names
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lists_and_single_names_are_read_and_comments_are_not() {
        let text =
            "//! use x::No;\npub use crate::b::{\n    Two, Three,\n};\n// pub use a::No;\npub use crate::a::One;\n";
        assert_eq!(names(text), ["One", "Three", "Two"]);
    }
}
