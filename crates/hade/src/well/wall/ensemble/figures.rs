//! The pictures: the share of stable walls against mud weight, and what each input does.

use super::ensemble::Ensemble;
use super::outcome::EnsembleOutcome;
use crate::card::{Axis, ChartRow, Figure, Layer, Role, RowChart};
use crate::units::{Pressure, fixed};

pub(super) fn figures(ensemble: &Ensemble, outcome: &EnsembleOutcome) -> Vec<Figure> {
    stable(ensemble, outcome).into_iter().chain(effects(ensemble, outcome)).collect()
}

fn stable(ensemble: &Ensemble, outcome: &EnsembleOutcome) -> Option<Figure> {
    let of = |p: Pressure| match ensemble.inputs.tvd {
        Some(tvd) => p.mud_weight_at(tvd).in_sg(),
        None => p.in_mpa(),
    };
    let (label, unit, decimals) = match ensemble.inputs.tvd {
        Some(_) => ("mud weight (sg)", "sg", 3),
        None => ("pressure in the hole (MPa)", "MPa", 2),
    };
    let points: Vec<[f64; 2]> = outcome.stable.iter().map(|(p, share)| [of(*p), 100.0 * share]).collect();
    let best = points.iter().copied().reduce(|a, b| if b[1] > a[1] { b } else { a })?;
    let (low, high) = (points.first()?[0], points.last()?[0]);
    let room = 0.04 * (high - low).max(1e-6);
    let mut layers = Vec::new();
    if let (Some(bottom), Some(top)) = (outcome.design_bottom, outcome.design_top)
        && bottom < top
    {
        let label = "P90 of the bottom to P10 of the top".to_owned();
        layers.push(Layer::ColumnBand { label, role: Role::Range, from: of(bottom), to: of(top) });
    }
    layers.push(Layer::line("stable", Role::First, points));
    Some(Figure {
        caption: "Share of draws whose wall is stable (it neither fails in shear nor parts, and S_3 is not exceeded) at one mud weight.".to_owned(),
        alt: format!(
            "A curve of the share of stable walls from {} to {} {unit}; it is highest, {} %, near {} {unit}.",
            fixed(low, decimals),
            fixed(high, decimals),
            fixed(best[1], 1),
            fixed(best[0], decimals)
        ),
        x: Axis::new(label, low - room, high + room),
        y: Axis::new("stable walls (% of draws)", 0.0, 100.0),
        equal_scale: false,
        layers,
    })
}

/// "narrows the spread by 12 %".
fn narrowing(share: f64) -> String {
    let percent = fixed(100.0 * share.abs(), 0);
    match percent.as_str() {
        "0" => "leaves the spread as it is".to_owned(),
        _ => format!("{} the spread by {percent} %", if share < 0.0 { "widens" } else { "narrows" }),
    }
}

/// Bars of the rank correlations with the bottom, the largest first.
fn effects(ensemble: &Ensemble, outcome: &EnsembleOutcome) -> Option<Figure> {
    outcome.bottom?;
    let rows: Vec<ChartRow> = outcome
        .ranked()
        .into_iter()
        .filter_map(|k| Some((ensemble.inputs.drawn.get(k)?, outcome.effects.get(k)?)))
        .map(|(one, effect)| {
            let role = if effect.on_bottom < 0.0 { Role::Second } else { Role::First };
            ChartRow {
                words: format!(
                    "{}: {}; certain, it {}",
                    one.symbol(),
                    fixed(effect.on_bottom, 2),
                    narrowing(effect.narrows)
                ),
                bars: vec![(role, 0.0, effect.on_bottom)],
                marks: Vec::new(),
            }
        })
        .collect();
    let chart = RowChart { rows, levels: vec![(String::new(), Role::Quiet, 0.0)], band: None };
    Some(chart.figure(
        "rank correlation with the bottom",
        "What each uncertain input does to the bottom: its rank correlation with it, right of zero where more of it raises the bottom, and how much narrower P90 − P10 is when it alone is held at its median.".to_owned(),
        "Bars from zero.",
    ))
}
