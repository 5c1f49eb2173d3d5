//! What a section's draws come to.

use serde::{Deserialize, Serialize};

use super::common::{Common, LayerDraws};
use crate::frames::Name;
use crate::spread::{quantile, sorted};
use crate::units::{Density, Quantity};

/// The share of draws in which one mud weight keeps the whole section.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct MudShare {
    /// The mud weight.
    pub mud_weight: Density,
    /// All layers moved alike by a draw, 0–1.
    pub together: f64,
    /// Each layer moved by itself: the product of the layers' shares, 0–1.
    pub by_layer: f64,
}

/// The share of draws in which the planned mud, from its lowest to its highest pressure, keeps the whole section.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct PlanShare {
    /// All layers moved alike by a draw, 0–1.
    pub together: f64,
    /// Each layer moved by itself, 0–1.
    pub by_layer: f64,
}

/// A layer of the section.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct LayerShare {
    pub(super) layer: Name,
    /// Depths that were drawn in it.
    pub depths: f64,
    /// The share of draws in which the best mud weight keeps the layer, 0–1.
    pub best: Option<f64>,
    /// The share in which the planned mud does.
    pub planned: Option<f64>,
}

impl LayerShare {
    /// The name of the layer.
    pub fn layer(&self) -> &'static str {
        self.layer.text()
    }
}

/// What came out. Counts are whole numbers.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SectionEnsembleOutcome {
    /// Draws that no depth leaves out.
    pub(super) counted: f64,
    /// Of them, those in which no mud weight is common to all depths.
    pub(super) without: f64,
    /// P10, P50, P90 of the highest bottom of the section, of the draws that have one at every depth.
    pub(super) bottom: Option<[Density; 3]>,
    /// P10, P50, P90 of the lowest top.
    pub(super) top: Option<[Density; 3]>,
    /// At mud weights a round step apart.
    pub(super) curve: Vec<MudShare>,
    pub(super) planned: Option<PlanShare>,
    pub(super) layers: Vec<LayerShare>,
}

/// A curve has at most so many places.
pub(super) const MOST_PLACES: usize = 32;
/// Steps of mud weight that people use, kg/m³.
const STEPS: [f64; 6] = [5.0, 10.0, 20.0, 50.0, 100.0, 200.0];

impl SectionEnsembleOutcome {
    pub(super) fn of(layers: &[LayerDraws], with_plan: bool) -> Self {
        let count = layers.first().map_or(0, |layer| layer.common.len());
        let whole: Vec<Common> = (0..count)
            .map(|k| layers.iter().filter_map(|l| l.common.get(k)).fold(Common::NOTHING, |all, one| all.and(*one)))
            .collect();
        let counts: Vec<bool> = whole.iter().map(|common| !common.left_out).collect();
        let counted = counts.iter().filter(|counts| **counts).count() as f64;
        let share = |draws: &[Common], holds: &dyn Fn(&Common) -> bool| {
            draws.iter().zip(&counts).filter(|(common, counts)| **counts && holds(common)).count() as f64 / counted
        };
        let both = |holds: &dyn Fn(&Common) -> bool| {
            [share(&whole, holds), layers.iter().map(|layer| share(&layer.common, holds)).product()]
        };
        let ends = |end: fn(&Common) -> f64| {
            let all = whole.iter().zip(&counts).filter(|(_, counts)| **counts).map(|(common, _)| end(common));
            sorted(all.filter(|weight| weight.is_finite()).collect())
        };
        let (bottoms, tops) = (ends(|c| c.bottom), ends(|c| c.top));
        let three = |ends: &[f64]| {
            let at = |share: f64| quantile(ends, share).map(Density::from_si);
            Some([at(0.1)?, at(0.5)?, at(0.9)?])
        };
        let curve: Vec<MudShare> = places(&bottoms, &tops)
            .into_iter()
            .map(|weight| {
                let [together, by_layer] = both(&|common| common.holds(weight));
                MudShare { mud_weight: Density::from_si(weight), together, by_layer }
            })
            .collect();
        let best = best(&curve).map(|best| best.mud_weight.si());
        let of_layer = |layer: &LayerDraws| LayerShare {
            layer: layer.layer,
            depths: layer.depths as f64,
            best: best.map(|weight| share(&layer.common, &|common| common.holds(weight))),
            planned: with_plan.then(|| share(&layer.common, &|common| common.keeps)),
        };
        SectionEnsembleOutcome {
            counted,
            without: share(&whole, &|common| common.bottom > common.top) * counted,
            bottom: three(&bottoms),
            top: three(&tops),
            planned: with_plan.then(|| {
                let [together, by_layer] = both(&|common| common.keeps);
                PlanShare { together, by_layer }
            }),
            layers: layers.iter().map(of_layer).collect(),
            curve,
        }
    }
}

/// The mud weight of the curve with the highest share when all layers move alike; the lightest of several.
pub(super) fn best(curve: &[MudShare]) -> Option<MudShare> {
    curve.iter().copied().reduce(|a, b| if b.together > a.together { b } else { a })
}

/// Mud weights a round step apart, from the first hundredth of the bottoms to the last of the tops, kg/m³.
pub(super) fn places(bottoms: &[f64], tops: &[f64]) -> Vec<f64> {
    let (Some(one), Some(other)) = (quantile(bottoms, 0.01), quantile(tops, 0.99)) else { return Vec::new() };
    let (low, high) = (one.min(other), one.max(other));
    let fits = |step: f64| (high - low) / step < (MOST_PLACES - 2) as f64;
    let step = STEPS.into_iter().find(|step| fits(*step)).unwrap_or((high - low) / (MOST_PLACES - 2) as f64);
    let (first, last) = ((low / step).floor(), (high / step).ceil());
    (0..=(last - first) as usize).map(|k| (first + k as f64) * step).collect()
}
