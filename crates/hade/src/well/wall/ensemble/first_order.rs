//! The first-order second-moment estimate of the bottom: the wall of the means, and the derivatives there.

use serde::{Deserialize, Serialize};

use super::ensemble::EnsembleInputs;
use super::numbers::Numbers;
use crate::spread::normal_scores_correlation;
use crate::units::{Pressure, Quantity};

/// Mean and standard deviation of the bottom by first order.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct FirstOrder {
    /// The bottom of the wall whose inputs are all at their means.
    pub mean: Pressure,
    /// √(Σ Σ r s_i s_j), with s the change of the bottom by one standard deviation of an input.
    pub deviation: Pressure,
    /// That change, input by input, from the derivative at the means.
    pub by_one_deviation: Vec<Pressure>,
}

/// Derivatives are taken over this share of a standard deviation to each side.
const STEP: f64 = 0.05;

/// `None` where the wall of the means, or one beside it, has no bottom.
pub(super) fn first_order(
    inputs: &EnsembleInputs,
    base: &Numbers,
    bottom: impl Fn(&Numbers) -> Option<f64>,
) -> Option<FirstOrder> {
    let mut means = *base;
    for one in &inputs.drawn {
        means.set(one.input, one.spread.moments().0);
    }
    // None where no wall can have them.
    means.law()?;
    let mean = bottom(&means)?;
    let mut changes = Vec::with_capacity(inputs.drawn.len());
    for one in &inputs.drawn {
        let (centre, deviation) = one.spread.moments();
        let side = |side: f64| {
            let mut numbers = means;
            numbers.set(one.input, centre + side * STEP * deviation);
            bottom(&numbers)
        };
        changes.push((side(1.0)? - side(-1.0)?) / (2.0 * STEP));
    }
    let mut variance = 0.0;
    for (one, a) in inputs.drawn.iter().zip(&changes) {
        for (other, b) in inputs.drawn.iter().zip(&changes) {
            let pair = inputs.correlations.iter().find(|pair| {
                [(one, other), (other, one)].iter().any(|(x, y)| pair.one == x.symbol() && pair.other == y.symbol())
            });
            let r = match pair {
                _ if one.input == other.input => 1.0,
                Some(pair) => normal_scores_correlation(pair.rank),
                None => 0.0,
            };
            variance += r * a * b;
        }
    }
    Some(FirstOrder {
        mean: Pressure::from_si(mean),
        deviation: Pressure::from_si(variance.max(0.0).sqrt()),
        by_one_deviation: changes.into_iter().map(Pressure::from_si).collect(),
    })
}
