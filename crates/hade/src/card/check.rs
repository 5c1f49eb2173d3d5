//! A check: the outcome compared with the same thing found by another route.

use serde::{Deserialize, Serialize};

/// One comparison, with both numbers, so that a reader can judge it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Check {
    /// What is compared ("S' rebuilt from dot products of the axis vectors").
    pub what: String,
    /// The largest difference found, in `unit`; `None` when either side was not a number.
    pub difference: Option<f64>,
    /// The difference that is allowed, in `unit`.
    pub tolerance: f64,
    /// The unit of the two.
    pub unit: String,
    /// Whether the difference is within the tolerance. Not a number never passes.
    pub passed: bool,
}

impl Check {
    /// Compares numbers pairwise by their largest absolute difference. Lists of different length,
    /// and anything not finite, fail.
    pub fn compare(what: impl Into<String>, outcome: &[f64], other_route: &[f64], tolerance: f64, unit: &str) -> Self {
        let difference = (outcome.len() == other_route.len() && !outcome.is_empty())
            .then(|| outcome.iter().zip(other_route).map(|(a, b)| (a - b).abs()))
            .and_then(|gaps| gaps.map(|g| g.is_finite().then_some(g)).collect::<Option<Vec<_>>>())
            .map(|gaps| gaps.into_iter().fold(0.0, f64::max));
        Check {
            what: what.into(),
            difference,
            tolerance,
            unit: unit.to_owned(),
            passed: difference.is_some_and(|d| d <= tolerance),
        }
    }

    /// A condition that must hold, given as how far it is broken (zero or less: it holds).
    pub fn holds(what: impl Into<String>, broken_by: f64, tolerance: f64, unit: &str) -> Self {
        let difference = broken_by.is_finite().then_some(broken_by.max(0.0));
        Check {
            what: what.into(),
            difference,
            tolerance,
            unit: unit.to_owned(),
            passed: difference.is_some_and(|d| d <= tolerance),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn is_two_sided_and_never_passes_what_is_not_a_number() {
        assert!(Check::compare("x", &[1.0], &[1.0 + 1e-12], 1e-9, "MPa").passed);
        assert!(!Check::compare("x", &[1.0], &[1.1], 1e-9, "MPa").passed);
        assert!(!Check::compare("x", &[1.1], &[1.0], 1e-9, "MPa").passed);
        assert!(!Check::compare("x", &[f64::NAN], &[1.0], 1e9, "MPa").passed);
        assert!(!Check::compare("x", &[1.0, 2.0], &[1.0], 1e9, "MPa").passed);
        assert!(!Check::compare("x", &[], &[], 1e9, "MPa").passed);
        assert!(!Check::holds("x", f64::NAN, 1e9, "MPa").passed);
    }
}
