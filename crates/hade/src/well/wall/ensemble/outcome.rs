//! What an ensemble gives: counts, quantiles and the share of stable walls against pressure.

use serde::{Deserialize, Serialize};

use super::effects::Effect;
use super::first_order::FirstOrder;
use super::stand::{Left, Stand};
use crate::spread::{Quantiles, mean_and_deviation, quantile, sorted};
use crate::units::{Pressure, Quantity};

/// Places on the curve of stable walls.
pub(super) const PLACES: usize = 25;

/// What came out, in SI. Counts are whole numbers.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct EnsembleOutcome {
    /// Draws that count.
    pub(super) counted: f64,
    /// Draws left out because an input is outside its stated bounds, input by input (the first that is).
    pub(super) outside: Vec<f64>,
    /// Draws left out because no wall can have them.
    pub(super) impossible: f64,
    /// Draws left out because S_Hmax is less than S_hmin.
    pub(super) crossed: f64,
    /// Draws left out because they are beyond the frictional limit.
    pub(super) beyond_friction: f64,
    /// Counted draws with no pressure that is safe in shear.
    pub(super) without_shear: f64,
    /// Counted draws with no pressure between bottom and top.
    pub(super) without_range: f64,
    /// Of the draws that have one.
    pub(super) bottom: Option<Quantiles>,
    pub(super) top: Option<Quantiles>,
    /// Mean and standard deviation of the bottom, of the draws that have one.
    pub(super) bottom_mean: Option<[Pressure; 2]>,
    /// P90 of the bottom, counting a draw without one as above any pressure; `None` when that is more than 10 %.
    pub(super) design_bottom: Option<Pressure>,
    /// P10 of the top, counting a draw without one as below any pressure; likewise.
    pub(super) design_top: Option<Pressure>,
    /// The share of stable walls at pressures from low to high.
    pub(super) stable: Vec<(Pressure, f64)>,
    /// What each input does, in the order of the inputs.
    pub(super) effects: Vec<Effect>,
    /// The first-order estimate of the bottom, where the wall of the means has one.
    pub(super) first_order: Option<FirstOrder>,
}

impl EnsembleOutcome {
    /// One end, of the draws that have it.
    fn ends(stands: &[Stand], end: impl Fn(&Stand) -> Option<f64>) -> Vec<f64> {
        stands.iter().filter(|stand| stand.left.is_none()).filter_map(end).collect()
    }

    pub(super) fn quantiles(stands: &[Stand], end: impl Fn(&Stand) -> Option<f64>) -> Option<Quantiles> {
        Quantiles::of(&mut EnsembleOutcome::ends(stands, end))
    }

    /// Without the effects of the inputs.
    pub(super) fn of(stands: &[Stand], inputs: usize) -> Self {
        let bottoms = sorted(EnsembleOutcome::ends(stands, |stand| stand.bottom));
        let tops = sorted(EnsembleOutcome::ends(stands, |stand| stand.top));
        let (bottom, top) = (Quantiles::of_sorted(&bottoms), Quantiles::of_sorted(&tops));
        let count = |what: &dyn Fn(&Stand) -> bool| stands.iter().filter(|stand| what(stand)).count() as f64;
        let counted = count(&|s| s.left.is_none());
        // With those that have none beyond all others.
        let design = |ends: &[f64], share: f64, none: f64| {
            let missing = vec![none; counted as usize - ends.len()];
            let all: Vec<f64> =
                if none > 0.0 { [ends, &missing].concat() } else { [missing.as_slice(), ends].concat() };
            quantile(&all, share).filter(|p| p.is_finite()).map(Pressure::from_si)
        };
        EnsembleOutcome {
            counted,
            outside: (0..inputs).map(|k| count(&|s| s.left == Some(Left::Outside(k as u8)))).collect(),
            impossible: count(&|s| s.left == Some(Left::Impossible)),
            crossed: count(&|s| s.left == Some(Left::Crossed)),
            beyond_friction: count(&|s| s.left == Some(Left::BeyondFriction)),
            without_shear: count(&|s| s.left.is_none() && s.bottom.is_none()),
            without_range: count(&|s| s.left.is_none() && s.range().is_none()),
            bottom,
            top,
            bottom_mean: (bottoms.len() > 1).then(|| {
                let (mean, deviation) = mean_and_deviation(&bottoms);
                [mean, deviation].map(Pressure::from_si)
            }),
            design_bottom: design(&bottoms, 0.9, f64::INFINITY),
            design_top: design(&tops, 0.1, f64::NEG_INFINITY),
            stable: stable(stands, &bottoms, &tops, counted),
            effects: Vec::new(),
            first_order: None,
        }
    }

    /// The draws that were left out.
    pub(super) fn left_out(&self) -> f64 {
        self.outside.iter().sum::<f64>() + self.impossible + self.crossed + self.beyond_friction
    }
}

/// The share of stable walls at pressures between the first hundredth of the bottoms and the last of the tops. A wall is
/// stable from its bottom to its top, so the share is that of the bottoms at or below less that of the tops below.
fn stable(stands: &[Stand], bottoms: &[f64], tops: &[f64], counted: f64) -> Vec<(Pressure, f64)> {
    let (Some(low), Some(high)) = (quantile(bottoms, 0.01), quantile(tops, 0.99)) else { return Vec::new() };
    let (low, high) = (low.min(high), low.max(high));
    let ranges: Vec<(f64, f64)> = stands.iter().filter(|s| s.left.is_none()).filter_map(Stand::range).collect();
    let begins = sorted(ranges.iter().map(|(bottom, _)| *bottom).collect());
    let ends = sorted(ranges.iter().map(|(_, top)| *top).collect());
    (0..PLACES)
        .map(|k| {
            let p = low + (high - low) * k as f64 / (PLACES - 1) as f64;
            let stable = begins.partition_point(|bottom| *bottom <= p) - ends.partition_point(|top| *top < p);
            (Pressure::from_si(p), stable as f64 / counted)
        })
        .collect()
}

impl EnsembleOutcome {
    /// Numbers of the inputs, the largest effect on the bottom first; equal ones as they were given.
    pub(super) fn ranked(&self) -> Vec<usize> {
        let mut order: Vec<(usize, f64)> =
            self.effects.iter().map(|effect| effect.on_bottom.abs()).enumerate().collect();
        order.sort_by(|a, b| b.1.total_cmp(&a.1));
        order.into_iter().map(|(k, _)| k).collect()
    }
}
