//! Which depths of a long log a record holds and a card prints: everything that the log comes to stands
//! on them.

use super::row::LogRow;
use super::section::HoleSection;
use super::summary::LogOutcome;
use crate::units::{Length, Quantity};

/// A record holds no more depths than this, besides those that govern.
const MOST: usize = 90;
/// So many depths at even distances are printed where there is room.
const EVEN: usize = 40;

/// The numbers of the rows to print, rising.
pub(super) fn printed(rows: &[LogRow], sections: &[HoleSection], friction: Option<f64>) -> Vec<usize> {
    let last = rows.len().saturating_sub(1);
    if rows.len() <= MOST {
        return (0..rows.len()).collect();
    }
    let mut kept = std::collections::BTreeSet::from([0, last]);
    let outcome = LogOutcome::of(rows.to_vec(), sections, friction);
    // What governs, whatever their number.
    let mut governing: Vec<Length> = outcome.narrowest.iter().map(|narrowest| narrowest.md).collect();
    governing.extend(outcome.friction.iter().map(|friction| friction.md));
    for section in &outcome.sections {
        governing.extend([section.from, section.to]);
        governing.extend(section.bottom.iter().chain(&section.top).map(|end| end.md));
        governing.extend(section.mud.iter().map(|mud| mud.md));
    }
    for md in governing {
        kept.extend(at(rows, md));
    }
    // Where there is no range, no common one, or stress beyond friction: the last row before, the first and the last, the next.
    let conflicts = outcome.sections.iter().flat_map(|section| &section.conflicts);
    let beyond = outcome.friction.iter().flat_map(|friction| &friction.beyond);
    let stretches = outcome.empty.iter().chain(conflicts).chain(beyond);
    let mut wanted: Vec<usize> = Vec::new();
    for [from, to] in stretches {
        let (from, to) = (at(rows, *from), at(rows, *to));
        wanted.extend(from.iter().flat_map(|k| [k.saturating_sub(1), *k]));
        wanted.extend(to.iter().flat_map(|k| [*k, (k + 1).min(last)]));
    }
    // Both sides of every contact.
    wanted.extend(
        rows.windows(2)
            .enumerate()
            .filter(|(_, pair)| matches!(pair, [a, b] if a.layer != b.layer))
            .flat_map(|(k, _)| [k, k + 1]),
    );
    for k in wanted {
        if kept.len() >= MOST {
            break;
        }
        kept.insert(k);
    }
    // The rest at even distances.
    for k in 1..EVEN {
        if kept.len() >= MOST {
            break;
        }
        kept.insert(k * last / EVEN);
    }
    kept.into_iter().collect()
}

/// The rows at a measured depth: two at a contact.
fn at(rows: &[LogRow], md: Length) -> Vec<usize> {
    let first = rows.partition_point(|row| row.md.si() < md.si());
    (first..rows.len()).take_while(|k| rows.get(*k).is_some_and(|row| row.md == md)).collect()
}
