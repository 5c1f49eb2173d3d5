//! What many draws say.

use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use crate::interrupt;
use crate::units::{Pressure, Quantity};

/// The pressures at or below which 10, 50 and 90 % of the draws lie.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct Quantiles {
    /// 10 % of the draws lie at or below it.
    pub p10: Pressure,
    /// Half of the draws do.
    pub p50: Pressure,
    /// 90 % do.
    pub p90: Pressure,
}

impl Quantiles {
    /// Of numbers in rising order, in Pa; none of no number.
    pub(crate) fn of_sorted(sorted: &[f64]) -> Option<Self> {
        let at = |share: f64| quantile(sorted, share).map(Pressure::from_si);
        Some(Quantiles { p10: at(0.1)?, p50: at(0.5)?, p90: at(0.9)? })
    }

    /// Of numbers in any order, which it puts into another.
    pub(crate) fn of(values: &mut [f64]) -> Option<Self> {
        interrupt::check();
        let at = |share: f64, values: &mut [f64]| {
            let (below, part) = place(share, values.len())?;
            let (_, low, above) = values.select_nth_unstable_by(below, f64::total_cmp);
            let low = *low;
            let high = above.iter().copied().min_by(f64::total_cmp).unwrap_or(low);
            Some(Pressure::from_si(between(low, high, part)))
        };
        Some(Quantiles { p10: at(0.1, values)?, p50: at(0.5, values)?, p90: at(0.9, values)? })
    }

    /// The three, lowest first.
    pub fn all(&self) -> [Pressure; 3] {
        [self.p10, self.p50, self.p90]
    }
}

/// In rising order.
pub(crate) fn sorted(mut values: Vec<f64>) -> Vec<f64> {
    interrupt::check();
    values.par_sort_unstable_by(f64::total_cmp);
    values
}

/// The number at or below which a share of numbers in rising order lies: number (n − 1) p, counted from 0, between two
/// interpolated.
pub(crate) fn quantile(sorted: &[f64], share: f64) -> Option<f64> {
    let (below, part) = place(share, sorted.len())?;
    let low = *sorted.get(below)?;
    let high = sorted.get(below + 1).copied().unwrap_or(low);
    Some(between(low, high, part))
}

/// Its place among so many: the number below it and the part of the way to the next.
fn place(share: f64, count: usize) -> Option<(usize, f64)> {
    let place = share * (count.checked_sub(1)?) as f64;
    Some((place.floor() as usize, place - place.floor()))
}

/// A part of the way from one number to another, which may both be infinite.
fn between(low: f64, high: f64, part: f64) -> f64 {
    if low == high { low } else { low + part * (high - low) }
}

/// Mean and standard deviation (of a sample: with n − 1).
pub(crate) fn mean_and_deviation(values: &[f64]) -> (f64, f64) {
    let count = values.len() as f64;
    let mean = values.iter().sum::<f64>() / count;
    let squares: f64 = values.iter().map(|v| (v - mean) * (v - mean)).sum();
    (mean, (squares / (count - 1.0)).sqrt())
}

/// Spearman's rank correlation; numbers that are equal share the mean of their ranks. Zero where one side is the same
/// throughout.
pub(crate) fn rank_correlation(a: &[f64], b: &[f64]) -> f64 {
    let (a, b) = (ranks(a), ranks(b));
    let middle = 0.5 * (a.len() as f64 - 1.0);
    let (mut ab, mut aa, mut bb) = (0.0, 0.0, 0.0);
    for (x, y) in a.iter().zip(&b) {
        let (x, y) = (x - middle, y - middle);
        ab += x * y;
        aa += x * x;
        bb += y * y;
    }
    if aa > 0.0 && bb > 0.0 { ab / (aa * bb).sqrt() } else { 0.0 }
}

fn ranks(values: &[f64]) -> Vec<f64> {
    interrupt::check();
    let mut order: Vec<(f64, u32)> = values.iter().copied().zip(0..).collect();
    order.par_sort_unstable_by(|a, b| a.0.total_cmp(&b.0));
    let mut ranks = vec![0.0; values.len()];
    let mut first = 0;
    while let Some((value, _)) = order.get(first) {
        let alike = order.iter().skip(first).take_while(|(other, _)| other == value).count();
        let rank = first as f64 + 0.5 * (alike as f64 - 1.0);
        for (_, k) in order.iter().skip(first).take(alike) {
            if let Some(cell) = ranks.get_mut(*k as usize) {
                *cell = rank;
            }
        }
        first += alike;
    }
    ranks
}

#[cfg(test)]
mod tests {
    use super::*;

    /// numpy 2.4.6: numpy.percentile of [1, 2, 4, 7, 11, 16] is 1.5, 5.5 and 13.5 at 10, 50 and 90.
    #[test]
    fn quantiles_are_numpys() {
        let values = sorted(vec![7.0, 1.0, 16.0, 2.0, 11.0, 4.0]);
        for (share, want) in [(0.1, 1.5), (0.5, 5.5), (0.9, 13.5), (0.0, 1.0), (1.0, 16.0)] {
            assert!((quantile(&values, share).unwrap() - want).abs() < 1e-14);
        }
        let of = |values: &mut [f64]| Quantiles::of(values).map(|all| all.all().map(Quantity::si));
        assert_eq!(of(&mut [7.0, 1.0, 16.0, 2.0, 11.0, 4.0]), Some([1.5, 5.5, 13.5]));
        assert_eq!((of(&mut []), of(&mut [2.0])), (None, Some([2.0; 3])));
        assert_eq!(quantile(&[], 0.5), None);
        assert_eq!(quantile(&[3.0, f64::INFINITY, f64::INFINITY], 0.9), Some(f64::INFINITY));
    }

    /// scipy 1.17.1: scipy.stats.spearmanr.
    #[test]
    fn rank_correlations_are_scipys() {
        let a = [3.0, 1.0, 4.0, 1.0, 5.0, 9.0, 2.0, 6.0];
        let b = [2.0, 7.0, 1.0, 8.0, 2.0, 8.0, 1.0, 8.0];
        assert!((rank_correlation(&a, &b) - 0.19885368120992467).abs() < 1e-14, "{}", rank_correlation(&a, &b));
        assert!((rank_correlation(&a, &a.map(|v| v.powi(3))) - 1.0).abs() < 1e-14);
        assert_eq!(rank_correlation(&a, &[2.0; 8]), 0.0);
    }

    #[test]
    fn mean_and_deviation_of_a_sample() {
        let (mean, deviation) = mean_and_deviation(&[2.0, 4.0, 4.0, 4.0, 5.0, 5.0, 7.0, 9.0]);
        assert!((mean - 5.0).abs() < 1e-15 && (deviation - (32.0_f64 / 7.0).sqrt()).abs() < 1e-15);
    }
}
