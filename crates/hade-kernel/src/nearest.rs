//! Names that are spelled like another.

/// The names, those spelled most like the wanted one first; among equals in the order of the alphabet.
pub(crate) fn by_spelling(wanted: &str, names: impl IntoIterator<Item = String>) -> Vec<String> {
    let mut names: Vec<String> = names.into_iter().collect();
    names.sort_by_cached_key(|name| (distance(wanted, name).min(near(wanted) + 1), name.to_lowercase()));
    names.dedup();
    names
}

/// Whether two names differ so little that one may be meant for the other.
pub(crate) fn is_near(wanted: &str, name: &str) -> bool {
    distance(wanted, name) <= near(wanted)
}

/// So many letters may differ.
fn near(wanted: &str) -> usize {
    wanted.chars().count().div_ceil(3)
}

/// The letters to change, capital or not; where one name begins the other they count little.
fn distance(wanted: &str, name: &str) -> usize {
    let (wanted, name) = (wanted.to_lowercase(), name.to_lowercase());
    let begins = wanted.len().min(name.len()) > 2 && (wanted.starts_with(&name) || name.starts_with(&wanted));
    let steps = strsim::levenshtein(&wanted, &name);
    if begins { steps.min(near(&wanted)) } else { steps }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_nearest_name_comes_first() {
        let names = || ["sh_max", "pore", "sh_max_azimuth", "stress", "at"].map(str::to_owned);
        assert_eq!(by_spelling("sh_max_azimut", names())[..2], ["sh_max_azimuth", "sh_max"]);
        assert_eq!(by_spelling("zzz", names()), ["at", "pore", "sh_max", "sh_max_azimuth", "stress"]);
        assert_eq!(by_spelling("along_hole", ["at", "along"].map(str::to_owned)), ["along", "at"]);
    }

    #[test]
    fn some_letters_may_differ() {
        assert!(is_near("Sorce", "Source") && is_near("bars", "bar") && !is_near("at", "pore"));
    }
}
