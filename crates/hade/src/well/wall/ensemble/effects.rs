//! What each uncertain input does to the bottom: its rank correlation with it, and how much narrower the spread is
//! when it alone is certain.

use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use super::stand::Stand;
use crate::spread::{Sampler, for_each_draw, quantile, rank_correlation, sorted};

/// The effect of one input.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct Effect {
    /// Spearman's rank correlation with the bottom, of the draws that have one: −1 to 1.
    pub on_bottom: f64,
    /// The same with the top.
    pub on_top: f64,
    /// By what share P90 − P10 of the bottom is narrower when this input is held at its median and the others are drawn
    /// as before; negative where it is wider.
    pub narrows: f64,
}

/// Walls with one input held are made for so many draws at most: the first ones.
pub(super) const MOST_FROZEN: u32 = 20_000;

pub(super) fn effects(
    inputs: usize,
    sampler: &Sampler,
    count: u32,
    stands: &[Stand],
    redraw: impl Fn(&Sampler, u32) -> Vec<Stand> + Sync,
) -> Vec<Effect> {
    let few = count.min(MOST_FROZEN);
    let drawn_spread = spread_of_bottom(stands.get(..few as usize).unwrap_or(stands));
    let of_input = |k: usize| {
        let values = for_each_draw(sampler, count, |draw| draw.values().get(k).copied().unwrap_or_default());
        let against = |end: &dyn Fn(&Stand) -> Option<f64>| {
            let pairs = values.iter().zip(stands).filter(|(_, stand)| stand.left.is_none());
            let (values, ends): (Vec<f64>, Vec<f64>) =
                pairs.filter_map(|(v, stand)| Some((*v, to_the_pascal(end(stand)?)))).unzip();
            rank_correlation(&values, &ends)
        };
        let (on_bottom, on_top) = (against(&|stand| stand.bottom), against(&|stand| stand.top));
        let held = spread_of_bottom(&redraw(&sampler.holding(k), few));
        let narrows = held.zip(drawn_spread.filter(|s| *s > 0.0)).map_or(0.0, |(held, all)| 1.0 - held / all);
        Effect { on_bottom, on_top, narrows }
    };
    (0..inputs).into_par_iter().map(of_input).collect()
}

/// Ends that differ by less are no order: many tops are one S3 but for rounding.
pub(super) fn to_the_pascal(p: f64) -> f64 {
    p.round()
}

/// P90 − P10 of the bottom.
pub(super) fn spread_of_bottom(stands: &[Stand]) -> Option<f64> {
    let bottoms = sorted(stands.iter().filter(|s| s.left.is_none()).filter_map(|s| s.bottom).collect());
    Some(quantile(&bottoms, 0.9)? - quantile(&bottoms, 0.1)?)
}
