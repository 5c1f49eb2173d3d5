//! Pairs of numbers that go together.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};

/// The rank correlation (Spearman's) of two inputs, named by their symbols; −1 to 1, neither included. The two are
/// joined by a Gaussian copula.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct RankCorrelation {
    /// The symbol of one ("S_Hmax").
    pub one: String,
    /// The symbol of the other.
    pub other: String,
    /// The rank correlation.
    pub rank: f64,
}

/// The correlation of normal scores that gives a rank correlation: 2 sin(π ρ/6) (Pearson, K. (1907) On further methods
/// of determining correlation, Drapers' Company Research Memoirs, Biometric Series IV; cited from memory).
pub(crate) fn normal_scores_correlation(rank: f64) -> f64 {
    2.0 * (std::f64::consts::PI * rank / 6.0).sin()
}

/// The rows of the lower Cholesky factor of the correlations of normal scores.
///
/// # Errors
/// When a symbol is none of the inputs or the pair is one input twice, a pair is given twice, a correlation is not
/// between −1 and 1, or the correlations cannot be true together.
pub(super) fn factor(symbols: &[&str], pairs: &[RankCorrelation]) -> Result<Vec<Vec<f64>>> {
    let n = symbols.len();
    let mut matrix = vec![vec![0.0; n]; n];
    for (k, row) in matrix.iter_mut().enumerate() {
        row[k] = 1.0;
    }
    for pair in pairs {
        let find = |symbol: &str| {
            symbols.iter().position(|known| *known == symbol).ok_or_else(|| {
                Error::not_physical(
                    format!("A correlation of {symbol}"),
                    format!("it is no uncertain input; those are {}.", symbols.join(", ")),
                )
            })
        };
        let (i, j) = (find(&pair.one)?, find(&pair.other)?);
        if i == j {
            return Err(Error::not_physical(format!("A correlation of {} with itself", pair.one), "name two inputs."));
        }
        if matrix[i][j] != 0.0 {
            return Err(Error::not_physical(
                format!("The correlation of {} with {} stands twice", pair.one, pair.other),
                "give each pair once.",
            ));
        }
        if !(pair.rank > -1.0 && pair.rank < 1.0) {
            return Err(Error::out_of_range(
                format!("rank correlation of {} with {}", pair.one, pair.other),
                pair.rank.to_string(),
                "above -1 and below 1",
            ));
        }
        let r = normal_scores_correlation(pair.rank);
        (matrix[i][j], matrix[j][i]) = (r, r);
    }
    let mut lower = vec![vec![0.0; n]; n];
    for i in 0..n {
        for j in 0..=i {
            let sum: f64 = (0..j).map(|k| lower[i][k] * lower[j][k]).sum();
            let left = matrix[i][j] - sum;
            if i == j {
                if left <= 1e-12 {
                    return Err(Error::not_physical(
                        "These rank correlations",
                        format!(
                            "they cannot be true together (their matrix is not positive definite at {}); make those of {} smaller.",
                            symbols[i], symbols[i]
                        ),
                    ));
                }
                lower[i][i] = left.sqrt();
            } else {
                lower[i][j] = left / lower[j][j];
            }
        }
    }
    Ok(lower)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn pair(one: &str, other: &str, rank: f64) -> RankCorrelation {
        RankCorrelation { one: one.to_owned(), other: other.to_owned(), rank }
    }

    #[test]
    fn the_factor_times_itself_is_the_matrix() {
        let pairs = [pair("a", "b", 0.6), pair("c", "b", -0.3), pair("a", "c", 0.1)];
        let l = factor(&["a", "b", "c"], &pairs).unwrap();
        let at = |i: usize, j: usize| (0..3).map(|k| l[i][k] * l[j][k]).sum::<f64>();
        // 2 sin(π 0.6/6) = 0.618034: twice the sine of 18°, the golden ratio less 1.
        assert!((at(0, 1) - 0.618_033_988_749_895).abs() < 1e-15);
        assert!((at(1, 2) - normal_scores_correlation(-0.3)).abs() < 1e-15);
        assert!((at(2, 2) - 1.0).abs() < 1e-15 && l[0][1] == 0.0);
    }

    #[test]
    fn what_cannot_be_true_is_refused() {
        let said = |pairs: &[RankCorrelation]| factor(&["a", "b", "c"], pairs).unwrap_err().to_string();
        let cannot = [pair("a", "b", 0.9), pair("b", "c", 0.9), pair("a", "c", -0.5)];
        assert!(said(&cannot).contains("cannot be true together"));
        assert!(said(&[pair("a", "d", 0.1)]).contains("those are a, b, c"));
        assert!(said(&[pair("a", "a", 0.1)]).contains("with itself"));
        assert!(said(&[pair("a", "b", 0.1), pair("b", "a", 0.2)]).contains("twice"));
        for bad in [1.0, -1.0, f64::NAN, 2.0] {
            assert!(said(&[pair("a", "b", bad)]).contains("above -1 and below 1"), "{bad}");
        }
    }
}
