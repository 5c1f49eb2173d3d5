//! Every calculation item is computed again from its inputs, and its checks are judged again: the
//! memo believes no verdict that a record brings along.

use hade::card::{Card, Check, Data, Method};

use crate::view::number;

/// How far the printed words may differ in a number that stands in a figure or a matrix.
const WORDS_TOLERANCE: f64 = 1e-6;

/// A card computed again.
#[derive(Clone, Debug)]
pub struct Again {
    /// The card that the library makes of the same inputs.
    pub card: Card,
    /// Where its outcome differs by more than the kind's tolerance.
    pub difference: Option<String>,
    /// The checks, applied to the outcome that the record states.
    pub checks: Vec<Check>,
}

/// What computes a card again; an error when its kind is unknown or its inputs are refused.
pub type Replayer = fn(&Card) -> hade::error::Result<Again>;

/// The library's own.
pub(crate) fn by_library(card: &Card) -> hade::error::Result<Again> {
    hade::replay::replay(card).map(|r| Again { card: r.card, difference: r.difference, checks: r.checks })
}

/// One line of the table of checks.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct CheckLine {
    /// What is compared.
    pub what: String,
    /// The difference, with unit.
    pub difference: String,
    /// The difference that is allowed, with unit.
    pub allowed: String,
    /// The difference as a part of what is allowed; 0 for a verdict in words.
    pub part: f64,
    /// The verdict.
    pub passed: bool,
}

/// A calculation item, judged.
#[derive(Clone, Debug)]
pub(crate) struct Judged {
    /// Its checks, and the two lines of the replay.
    pub checks: Vec<CheckLine>,
    /// The method as the library states it; `None` when the item could not be computed again, so
    /// that its formulas are only words.
    pub method: Option<Method>,
}

/// Computes a card again and judges it.
pub(crate) fn judge(card: &Card, replayer: Replayer) -> Judged {
    let again = replayer(card);
    let mut checks: Vec<CheckLine> = card
        .checks
        .iter()
        .enumerate()
        .map(|(i, check)| line(check, again.as_ref().ok().map(|a| a.checks.get(i))))
        .collect();
    if checks.is_empty() {
        checks.push(words("the item is checked by another route", "no check was made", false));
    }
    match again {
        Err(why) => {
            checks.push(words("computed again from its inputs", &format!("not possible: {why}"), false));
            Judged { checks, method: None }
        }
        Ok(again) => {
            if card.warnings != again.card.warnings {
                checks.push(words("warnings against those of the computation", "they are not the same", false));
            }
            let printed = card.explanation.write().difference(&again.card.explanation.write(), WORDS_TOLERANCE);
            if again.difference.is_none() && printed.is_none() {
                checks.push(words("computed again from its inputs: outcome, words and printed numbers", "agree", true));
            }
            if let Some(difference) = again.difference {
                checks.push(words("outcome against the one computed again from its inputs", &difference, false));
            }
            if let Some(difference) = printed {
                checks.push(words("words and printed numbers against those of the computation", &difference, false));
            }
            Judged { checks, method: Some(again.card.explanation.method) }
        }
    }
}

fn words(what: &str, outcome: &str, passed: bool) -> CheckLine {
    CheckLine { what: what.to_owned(), difference: outcome.to_owned(), allowed: String::new(), part: 0.0, passed }
}

/// A check passes when its own numbers say so, and the same check made again passes.
fn line(check: &Check, again: Option<Option<&Check>>) -> CheckLine {
    let within = check.difference.is_some_and(|d| d.is_finite() && d <= check.tolerance);
    let alike = |c: &Check| {
        c.what == check.what
            && c.unit == check.unit
            && (c.tolerance - check.tolerance).abs() <= WORDS_TOLERANCE * c.tolerance.abs()
    };
    let again = again.is_none_or(|same| same.is_some_and(|c| c.passed && alike(c)));
    let difference = match check.difference {
        Some(d) => number::small_with_unit(d, &check.unit),
        None => "not a number".to_owned(),
    };
    CheckLine {
        what: check.what.clone(),
        difference,
        allowed: number::small_with_unit(check.tolerance, &check.unit),
        part: match check.difference {
            Some(d) if d <= 0.0 => 0.0,
            Some(d) if d.is_finite() => d / check.tolerance.max(f64::MIN_POSITIVE),
            _ => f64::INFINITY,
        },
        passed: within && check.passed && again,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use hade::card::Explanation;
    use hade::card::Json;

    fn card() -> Card {
        Card {
            kind: "k".to_owned(),
            version: 1,
            inputs: Json::parse("{}").unwrap(),
            outcome: Json::parse("[1.0]").unwrap(),
            warnings: Vec::new(),
            checks: vec![Check::compare("x by another route", &[1.0], &[1.0], 1e-9, "MPa")],
            explanation: Explanation { title: "T".to_owned(), ..Explanation::default() },
        }
    }

    fn same(card: &Card) -> hade::error::Result<Again> {
        Ok(Again { card: card.clone(), difference: None, checks: card.checks.clone() })
    }

    fn failed(judged: &Judged) -> usize {
        judged.checks.iter().filter(|c| !c.passed).count()
    }

    #[test]
    fn a_card_that_agrees_passes() {
        let judged = judge(&card(), same);
        assert_eq!(failed(&judged), 0);
        assert!(judged.method.is_some());
    }

    #[test]
    fn what_does_not_agree_fails() {
        let other = |c: &Card| same(c).map(|a| Again { difference: Some("/0: 1 is not 2".to_owned()), ..a });
        assert_eq!(failed(&judge(&card(), other)), 1);
        let unknown = judge(&card(), by_library);
        assert!(failed(&unknown) == 1 && unknown.method.is_none());
        let reworded = |c: &Card| {
            let mut card = c.clone();
            card.explanation.headline = "another".to_owned();
            same(c).map(|a| Again { card, ..a })
        };
        assert_eq!(failed(&judge(&card(), reworded)), 1);
        let silent = Card { warnings: vec!["the mud is too light".to_owned()], ..card() };
        let unwarned = |c: &Card| {
            let mut again = same(c)?;
            again.card.warnings.clear();
            Ok(again)
        };
        assert_eq!(failed(&judge(&silent, unwarned)), 1, "a warning that the computation does not give");
    }

    #[test]
    fn a_verdict_is_not_believed() {
        let mut liar = card();
        liar.checks[0].difference = Some(1.0);
        assert_eq!(failed(&judge(&liar, same)), 1, "the difference is larger than allowed");
        liar.checks[0].difference = None;
        assert_eq!(failed(&judge(&liar, same)), 1, "no difference is no pass");
        liar.checks.clear();
        assert_eq!(failed(&judge(&liar, same)), 1, "a card without a check has not passed");
    }
}
