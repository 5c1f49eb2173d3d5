//! The picture: the share of draws that keep the section, against mud weight.

use super::outcome::MudShare;
use super::section_ensemble::SectionEnsemble;
use crate::card::{Axis, Figure, Layer, Role};
use crate::units::fixed;

pub(super) fn figure(section: &SectionEnsemble) -> Option<Figure> {
    let curve = &section.outcome.curve;
    let (first, last) = (curve.first()?.mud_weight.in_sg(), curve.last()?.mud_weight.in_sg());
    let points = |share: fn(&MudShare) -> f64| -> Vec<[f64; 2]> {
        curve.iter().map(|place| [place.mud_weight.in_sg(), 100.0 * share(place)]).collect()
    };
    let best = section.best()?;
    let highest = [5.0, 10.0, 20.0, 50.0].into_iter().find(|top| 115.0 * best.together <= *top).unwrap_or(100.0);
    let mut layers = Vec::new();
    // Where only one layer lies in the section both are one curve.
    if section.outcome.layers.len() > 1 {
        layers.push(Layer::line("each layer by itself", Role::Second, points(|place| place.by_layer)));
    }
    layers.push(Layer::line("all layers alike", Role::First, points(|place| place.together)));
    if let Some(mud) = section.section.mud() {
        let weight = mud.static_density.in_sg();
        if (first..=last).contains(&weight) {
            layers.push(Layer::line("planned, static", Role::Limit, [[weight, 0.0], [weight, highest]]));
        }
    }
    Some(Figure {
        caption: format!(
            "Share of draws in which one mud weight keeps the whole section {}, at rest, without margins.",
            section.section.name()
        ),
        alt: format!(
            "The share of draws that one mud weight keeps, from {} to {} sg; it is highest at {} sg, {} % with all layers moved alike and {} % with each by itself.",
            fixed(first, 2),
            fixed(last, 2),
            fixed(best.mud_weight.in_sg(), 3),
            fixed(100.0 * best.together, 1),
            fixed(100.0 * best.by_layer, 1)
        ),
        x: Axis::new("mud weight (sg)", first, last),
        y: Axis::new("draws that keep the section (%)", 0.0, highest),
        equal_scale: false,
        layers,
    })
}
