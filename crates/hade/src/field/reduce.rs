//! A long log as a short table of layers with the very same weight.

use super::overburden::Layer;
use crate::units::{Density, Length};

/// A record holds no more layers than this.
pub(super) const MOST_LAYERS: usize = 40;
/// The thicknesses layers are given, metres.
const THICKNESSES: [f64; 14] = [0.1, 0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 25.0, 50.0, 100.0, 200.0, 250.0, 500.0, 1000.0];

/// The layers of a log from its first sample down to a depth, with edges at round depths, each with
/// the mean of the straight lines between samples; and the integral of density over the same
/// stretch, summed sample by sample (compensated), in kg/m².
pub(super) fn layers(depths: &[f64], densities: &[f64], to: f64) -> (Vec<Layer>, f64) {
    let first = depths.first().copied().unwrap_or(to);
    let thickness = THICKNESSES
        .into_iter()
        .find(|t| (to - first) / t <= (MOST_LAYERS - 2) as f64)
        .unwrap_or((to - first) / (MOST_LAYERS - 2) as f64);
    // Edges are counted, not added up, so that each lies below the one before whatever is rounded.
    let mut count = (first / thickness).floor();
    let mut next_edge = |above: f64| {
        count += 1.0;
        if count * thickness - above < 1e-6 * thickness {
            count += 1.0;
        }
        // No sliver of a layer at the bottom.
        if to - count * thickness < 1e-6 * thickness { to } else { count * thickness }
    };
    let mut layers = Vec::new();
    let (mut top, mut edge, mut weight) = (first, next_edge(first), 0.0);
    let mut whole = Compensated::default();
    for (z, rho) in depths.windows(2).zip(densities.windows(2)) {
        let ([z0, z1], [r0, r1]) = (z, rho) else { continue };
        if *z0 >= to {
            break;
        }
        let at = |depth: f64| r0 + (r1 - r0) * (depth - z0) / (z1 - z0);
        let end = z1.min(to);
        whole.add(0.5 * (r0 + at(end)) * (end - z0));
        let mut from = *z0;
        while from < end {
            let stop = edge.min(end);
            weight += 0.5 * (at(from) + at(stop)) * (stop - from);
            from = stop;
            if stop >= edge {
                layers.push(Layer {
                    top: Length::m(top),
                    bottom: Length::m(stop),
                    density: Density::kg_m3(weight / (stop - top)),
                });
                (top, weight) = (stop, 0.0);
                edge = next_edge(stop);
            }
        }
    }
    if to > top {
        layers.push(Layer { top: Length::m(top), bottom: Length::m(to), density: Density::kg_m3(weight / (to - top)) });
    }
    (layers, whole.sum)
}

/// A sum that carries its rounding error along (Kahan 1965).
#[derive(Default)]
struct Compensated {
    sum: f64,
    lost: f64,
}

impl Compensated {
    fn add(&mut self, value: f64) {
        let value = value - self.lost;
        let sum = self.sum + value;
        self.lost = (sum - self.sum) - value;
        self.sum = sum;
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn the_layers_weigh_what_the_log_weighs(
            first in 0.0..500.0_f64,
            steps in proptest::collection::vec((0.05..30.0_f64, 1500.0..3000.0_f64), 2..300),
            share in 0.001..1.0_f64,
        ) {
            let mut depths = Vec::new();
            let mut densities = Vec::new();
            let mut z = first;
            for (step, rho) in steps {
                depths.push(z);
                densities.push(rho);
                z += step;
            }
            let last = depths[depths.len() - 1];
            let to = first + share * (last - first);
            let (layers, whole) = layers(&depths, &densities, to);
            prop_assert!(layers.len() <= MOST_LAYERS, "{}", layers.len());
            prop_assert_eq!(layers[0].top, Length::m(first));
            prop_assert_eq!(layers[layers.len() - 1].bottom, Length::m(to));
            prop_assert!(layers.windows(2).all(|w| w[0].bottom == w[1].top));
            let sum: f64 = layers.iter().map(|l| l.density.in_kg_m3() * (l.bottom - l.top).in_m()).sum();
            prop_assert!((sum - whole).abs() <= 1e-11 * whole, "{sum} {whole}");
        }
    }
}
