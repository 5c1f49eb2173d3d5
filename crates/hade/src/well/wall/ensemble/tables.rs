//! The tables of an ensemble.

use super::ensemble::Ensemble;
use super::outcome::EnsembleOutcome;
use crate::card::{Column, Table};
use crate::units::{Pressure, fixed};
use crate::well::wall::range::signed;

fn mpa(p: Option<Pressure>) -> String {
    p.map_or_else(|| "none".to_owned(), |p| fixed(p.in_mpa(), 2))
}

/// Every input with its distribution and what it does, the largest effect first.
pub(super) fn inputs(ensemble: &Ensemble, outcome: &EnsembleOutcome) -> Table {
    let first = outcome.first_order.as_ref();
    let rows = outcome.ranked().into_iter().filter_map(|k| {
        let (one, effect) = (ensemble.inputs.drawn.get(k)?, outcome.effects.get(k)?);
        let change = first.and_then(|first| first.by_one_deviation.get(k));
        Some(vec![
            one.symbol().to_owned(),
            one.words(),
            fixed(outcome.outside.get(k).copied().unwrap_or_default(), 0),
            signed(effect.on_bottom, 3),
            signed(effect.on_top, 3),
            signed(100.0 * effect.narrows, 1),
            change.map_or_else(|| "–".to_owned(), |p| signed(p.in_mpa(), 3)),
        ])
    });
    Table {
        caption: "Uncertain inputs and what they do: draws outside stated bounds; rank correlation with bottom and top; by how much P90 − P10 of the bottom is narrower when it is held at its median; change of the bottom by one standard deviation, from the derivative at the means".to_owned(),
        columns: vec![
            Column::text("input"),
            Column::text("distribution"),
            Column::number("outside", "draws"),
            Column::number("r_s bottom", ""),
            Column::number("r_s top", ""),
            Column::number("narrower by", "%"),
            Column::number("Δ bottom", "MPa"),
        ],
        rows: rows.collect(),
    }
}

pub(super) fn quantiles(ensemble: &Ensemble, outcome: &EnsembleOutcome) -> Table {
    let line = |name: &str, p: Option<Pressure>| {
        let mut row = vec![name.to_owned(), mpa(p)];
        if let Some(tvd) = ensemble.inputs.tvd {
            row.push(p.map_or_else(|| "–".to_owned(), |p| fixed(p.gradient_over(tvd).in_mpa_per_km(), 2)));
            row.push(p.map_or_else(|| "–".to_owned(), |p| fixed(p.mud_weight_at(tvd).in_sg(), 3)));
        }
        row
    };
    let (bottom, top) = (outcome.bottom, outcome.top);
    let rows = vec![
        line("bottom P10", bottom.map(|q| q.p10)),
        line("bottom P50", bottom.map(|q| q.p50)),
        line("bottom P90", bottom.map(|q| q.p90)),
        line("bottom P90, draws without one above all", outcome.design_bottom),
        line("top P10, draws without one below all", outcome.design_top),
        line("top P10", top.map(|q| q.p10)),
        line("top P50", top.map(|q| q.p50)),
        line("top P90", top.map(|q| q.p90)),
    ];
    let mut columns = vec![Column::text("of the draws"), Column::number("pressure", "MPa")];
    if ensemble.inputs.tvd.is_some() {
        columns.extend([Column::number("gradient", "MPa/km"), Column::number("mud weight", "sg")]);
    }
    Table {
        caption: "Quantiles: P90 is the pressure at or below which 90 % of the draws lie; of the draws that have such an end where nothing else is said".to_owned(),
        columns,
        rows,
    }
}

pub(super) fn stable(ensemble: &Ensemble, outcome: &EnsembleOutcome) -> Table {
    let rows = outcome.stable.iter().map(|(p, share)| {
        let mut row = vec![fixed(p.in_mpa(), 2)];
        row.extend(ensemble.inputs.tvd.map(|tvd| fixed(p.mud_weight_at(tvd).in_sg(), 3)));
        row.push(fixed(100.0 * share, 1));
        row
    });
    let mut columns = vec![Column::number("pressure", "MPa")];
    columns.extend(ensemble.inputs.tvd.map(|_| Column::number("mud weight", "sg")));
    columns.push(Column::number("stable", "%"));
    Table { caption: "Share of draws with a stable wall".to_owned(), columns, rows: rows.collect() }
}
