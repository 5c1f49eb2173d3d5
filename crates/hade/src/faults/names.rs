//! What to say when no plane has a name that was asked for.

use crate::error::Error;

/// So many names are told.
const TOLD: usize = 5;

/// No plane is called that: which are, the nearest names first. `of` says what they are in ("of the set").
pub(super) fn no_such<'a>(name: &str, names: impl Iterator<Item = &'a str>, of: &str) -> Error {
    let wanted: Vec<char> = folded(name);
    let mut known: Vec<(usize, &str)> = names.map(|known| (distance(&wanted, &folded(known)), known)).collect();
    // The sort keeps the order of the table among names equally near.
    known.sort_by_key(|(far, _)| *far);
    let told: Vec<String> =
        known.iter().take(TOLD).map(|(_, known)| format!("\"{}\"", crate::lines::shown(known))).collect();
    let all = if known.len() > TOLD { "the nearest by name are" } else { "their names are" };
    Error::NoSolution {
        what: format!("plane named \"{}\"", crate::lines::shown(name)),
        tried: format!("among the {} {of}; {all} {}, so ask for one of these", known.len(), told.join(", ")),
    }
}

fn folded(name: &str) -> Vec<char> {
    name.trim().chars().flat_map(char::to_lowercase).collect()
}

/// How many characters must be put in, left out or changed to make one name the other (Levenshtein 1966).
fn distance(a: &[char], b: &[char]) -> usize {
    let mut above: Vec<usize> = (0..=b.len()).collect();
    for (i, x) in a.iter().enumerate() {
        let mut row = vec![i + 1];
        for ((y, kept), changed) in b.iter().zip(above.iter().skip(1)).zip(&above) {
            let left = row.last().copied().unwrap_or_default();
            row.push((changed + usize::from(x != y)).min(kept + 1).min(left + 1));
        }
        above = row;
    }
    above.last().copied().unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The textbook pair: k → s, e → i, and a g at the end.
    #[test]
    fn the_distance_of_two_names_is_their_fewest_changes() {
        let of = |a: &str, b: &str| distance(&folded(a), &folded(b));
        assert_eq!([of("kitten", "sitting"), of("", "abc"), of("KFF-04", "kff-04 "), of("ab", "ba")], [3, 3, 0, 2]);
    }

    #[test]
    fn the_nearest_names_come_first() {
        let names: Vec<String> = (1..=20).map(|n| format!("KFF-{n:02}")).collect();
        let said = no_such("KFF-99", names.iter().map(String::as_str), "of the set").to_string();
        assert_eq!(
            said,
            "No plane named \"KFF-99\" was found among the 20 of the set; the nearest by name are \"KFF-09\", \"KFF-19\", \"KFF-01\", \"KFF-02\", \"KFF-03\", so ask for one of these."
        );
        let said = no_such("kff 2", ["Kestrel", "KFF-2"].into_iter(), "of the set").to_string();
        assert!(said.ends_with("their names are \"KFF-2\", \"Kestrel\", so ask for one of these."), "{said}");
    }
}
