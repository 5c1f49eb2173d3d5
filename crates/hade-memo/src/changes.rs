//! What changed since an earlier record: givens, outcomes, conclusions.

use hade::card::{Card, Item};
use hade::sheet::Record;

/// Something that is not as it was; `None` where it was not there.
#[derive(Clone, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub struct Change {
    /// What: the symbol and meaning of a given, the calculation item and result of an outcome, the number of
    /// a conclusion.
    pub what: String,
    /// As it was.
    pub before: Option<String>,
    /// As it is.
    pub after: Option<String>,
}

impl Change {
    /// "conclusion 1: 30 MPa → 31 MPa"; what is new or gone is said to be.
    pub fn words(&self) -> String {
        match (&self.before, &self.after) {
            (Some(before), Some(after)) => format!("{}: {before} → {after}", self.what),
            (None, Some(after)) => format!("new: {}: {after}", self.what),
            (Some(before), None) => format!("gone: {}, which was {before}", self.what),
            (None, None) => self.what.clone(),
        }
    }
}

/// All that changed from one record to another.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
#[non_exhaustive]
pub struct Changes {
    /// Number and revision of the earlier memo.
    pub since: String,
    /// Givens, by symbol: value, uncertainty or source.
    pub givens: Vec<Change>,
    /// Outcomes, by calculation item and symbol.
    pub outcomes: Vec<Change>,
    /// Conclusions, in order.
    pub conclusions: Vec<Change>,
}

impl Changes {
    /// Whether nothing changed.
    pub fn none(&self) -> bool {
        self.givens.is_empty() && self.outcomes.is_empty() && self.conclusions.is_empty()
    }

    /// "2 givens, 14 outcomes and 1 conclusion changed since …".
    pub fn words(&self) -> String {
        let count = |n: usize, one: &str| if n == 1 { format!("1 {one}") } else { format!("{n} {one}s") };
        format!(
            "{}, {} and {} changed since {}",
            count(self.givens.len(), "given"),
            count(self.outcomes.len(), "outcome"),
            count(self.conclusions.len(), "conclusion"),
            self.since
        )
    }
}

/// Compares two records.
pub(crate) fn between(since: String, old: &Record, new: &Record) -> Changes {
    Changes { since, givens: givens(old, new), outcomes: outcomes(old, new), conclusions: conclusions(old, new) }
}

fn givens(old: &Record, new: &Record) -> Vec<Change> {
    let shown = |record: &Record| -> Vec<(String, String, String)> {
        record
            .givens
            .iter()
            .map(|g| {
                let around = if g.give_or_take.is_empty() { String::new() } else { format!(" ± {}", g.give_or_take) };
                let source = format!("{}: {}", g.source.grade.word(), g.source.words);
                (
                    g.item.symbol.clone(),
                    format!("{}, {}", g.item.symbol, g.item.name),
                    format!("{}{around}; {source}", g.item.shown),
                )
            })
            .collect()
    };
    paired(shown(old), shown(new))
}

fn outcomes(old: &Record, new: &Record) -> Vec<Change> {
    let (old, new) = (old.cards(), new.cards());
    let before: Vec<&Card> = old.iter().map(|(card, _)| *card).collect();
    let mut taken = vec![false; before.len()];
    let mut changes = Vec::new();
    for (card, _) in &new {
        // The same title first; else the next of its kind whose title is gone from the new record.
        let same = |k: &usize| !taken.get(*k).copied().unwrap_or(true);
        let alike = |k: &usize| before.get(*k).is_some_and(|b| b.kind == card.kind);
        let titled = |k: &usize| before.get(*k).is_some_and(|b| b.title() == card.title());
        let gone = |k: &usize| {
            before.get(*k).is_some_and(|b| new.iter().all(|(n, _)| n.kind != b.kind || n.title() != b.title()))
        };
        let found = (0..before.len())
            .find(|k| same(k) && alike(k) && titled(k))
            .or_else(|| (0..before.len()).find(|k| same(k) && alike(k) && gone(k)));
        let earlier = found.and_then(|k| before.get(k).copied());
        if let Some(slot) = found.and_then(|k| taken.get_mut(k)) {
            *slot = true;
        }
        changes.extend(paired(results(earlier, card.title()), results(Some(card), card.title())));
    }
    for (card, taken) in before.iter().zip(&taken) {
        if !taken {
            changes.extend(paired(results(Some(card), card.title()), Vec::new()));
        }
    }
    changes
}

/// Key, name and value of each result of a card.
fn results(card: Option<&Card>, title: &str) -> Vec<(String, String, String)> {
    let named = |item: &Item| {
        (item.symbol.clone() + &item.name, format!("{title}: {}, {}", item.symbol, item.name), item.shown.clone())
    };
    card.map(|card| card.explanation.results.iter().map(named).collect()).unwrap_or_default()
}

fn conclusions(old: &Record, new: &Record) -> Vec<Change> {
    let most = old.conclusions.len().max(new.conclusions.len());
    (0..most)
        .map(|k| Change {
            what: format!("conclusion {}", k + 1),
            before: old.conclusions.get(k).cloned(),
            after: new.conclusions.get(k).cloned(),
        })
        .filter(|change| change.before != change.after)
        .collect()
}

/// What differs between two lists of (key, name, value); the order is the new list's, what is gone last.
fn paired(old: Vec<(String, String, String)>, new: Vec<(String, String, String)>) -> Vec<Change> {
    let value = |list: &[(String, String, String)], key: &str| {
        list.iter().find(|(k, ..)| k == key).map(|(.., value)| value.clone())
    };
    let kept = new.iter().map(|(key, what, after)| Change {
        what: what.clone(),
        before: value(&old, key),
        after: Some(after.clone()),
    });
    let gone = old.iter().filter(|(key, ..)| value(&new, key).is_none()).map(|(_, what, before)| Change {
        what: what.clone(),
        before: Some(before.clone()),
        after: None,
    });
    kept.chain(gone).filter(|change| change.before != change.after).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use hade::frames::Azimuth;
    use hade::sheet::{Sheet, Source};
    use hade::stress::{Horizontals, Stress};
    use hade::units::Units as _;

    fn record(sv: f64, words: &str, more: bool) -> Record {
        let mut sheet = Sheet::new("A sheet");
        let sv = sheet.given("S_v", "vertical stress", sv.mpa(), Source::measured("a log"));
        if more {
            sheet.given("P_p", "pore pressure", 20.mpa(), Source::measured("a test"));
        }
        let s = Stress::from_horizontals(Horizontals {
            sv,
            sh_max: 55.mpa(),
            sh_min: 42.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        })
        .unwrap();
        sheet.add(&s.principals());
        sheet.conclude(words);
        sheet.record()
    }

    #[test]
    fn what_is_new_or_gone_is_said_to_be() {
        let change = |before: Option<&str>, after: Option<&str>| {
            let [before, after] = [before, after].map(|value| value.map(str::to_owned));
            Change { what: "p_b, bottom".to_owned(), before, after }.words()
        };
        assert_eq!(change(Some("30 MPa"), Some("31 MPa")), "p_b, bottom: 30 MPa → 31 MPa");
        assert_eq!(change(None, Some("31 MPa")), "new: p_b, bottom: 31 MPa");
        assert_eq!(change(Some("30 MPa"), None), "gone: p_b, bottom, which was 30 MPa");
    }

    #[test]
    fn what_changed_is_named_and_nothing_else() {
        let (old, new) = (record(60.0, "It holds.", false), record(61.0, "It just holds.", true));
        let same = between("A".to_owned(), &old, &old);
        assert!(same.none(), "{same:?}");
        let changes = between("T-1 revision A".to_owned(), &old, &new);
        assert_eq!(changes.givens.len(), 2);
        assert!(changes.givens[0].what.starts_with("S_v"));
        assert!(changes.givens[0].before.as_ref().unwrap().starts_with("60"));
        assert!(changes.givens[0].after.as_ref().unwrap().starts_with("61"));
        assert_eq!((&changes.givens[1].before, changes.givens[1].after.is_some()), (&None, true));
        assert!(changes.outcomes.iter().any(|c| c.what.contains("S_1")), "{:?}", changes.outcomes);
        assert!(changes.outcomes.iter().all(|c| !c.what.contains("S_3")), "{:?}", changes.outcomes);
        assert_eq!(changes.conclusions.len(), 1);
        assert!(changes.words().starts_with("2 givens, "), "{}", changes.words());
        let back = between("B".to_owned(), &new, &old);
        assert!(back.givens.iter().any(|c| c.what.starts_with("P_p") && c.after.is_none()));
    }
}
