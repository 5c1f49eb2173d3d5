//! The checks: every draw at every depth again as a whole wall, and every statistic by counting.

use super::depths::{SectionDepth, depths};
use super::outcome::{MudShare, SectionEnsembleOutcome, best, places};
use super::section_ensemble::{SectionEnsemble, SectionEnsembleInputs};
use crate::along::limit_log::{HoleSection, LimitLog};
use crate::card::{Check, Explain as _};
use crate::error::Result;
use crate::frames::Name;
use crate::units::{Density, Quantity};

/// One draw of one layer, kept as marks: bit k is set where the mud weight of place k lies between bottom and top at
/// every depth that was looked at so far, the last bit where the planned mud does.
#[derive(Clone, Copy)]
struct Marks {
    surely: u64,
    /// Also where it lies so near to an end that the last digits decide.
    perhaps: u64,
}

/// The bit of the planned mud; places are fewer.
const PLANNED: usize = 63;
/// Nearer to an end, relative to it, a mud weight may count or not.
const NEAR: f64 = 1e-8;
/// Shares that must be equal may differ by this.
const EQUAL: f64 = 1e-12;

pub(super) fn check(inputs: &SectionEnsembleInputs, outcome: &SectionEnsembleOutcome) -> Vec<Check> {
    let Ok(log) = LimitLog::compute(inputs.log.clone()) else { return Vec::new() };
    let Some(section) = log.sections().iter().find(|section| section.name() == inputs.section) else {
        return Vec::new();
    };
    checks(inputs, outcome, &log, section).unwrap_or_default()
}

fn checks(
    inputs: &SectionEnsembleInputs,
    outcome: &SectionEnsembleOutcome,
    log: &LimitLog,
    section: &HoleSection,
) -> Result<Vec<Check>> {
    let depths = depths(log, section)?;
    let again = Again::of(inputs, outcome, &depths)?;
    let counted: Vec<usize> = again.counted();
    let n = counted.len() as f64;
    let mut checks = vec![Check::compare(
        "draws that count and draws without a common mud weight, every draw at every depth again as a whole wall",
        &[outcome.counted, outcome.without],
        &[n, counted.iter().filter(|k| again.bottoms[**k] > again.tops[**k]).count() as f64],
        0.0,
        "draws",
    )];
    let shares = Shares { again: &again, counted: &counted };
    let off =
        worst(
            outcome.curve.iter().enumerate().flat_map(|(k, place)| {
                [shares.off_together(k, place.together), shares.off_by_layer(k, place.by_layer)]
            }),
        );
    checks.push(Check::holds(
        "share of draws at every mud weight by counting draws whose every depth holds; by layers as the sum of logarithms",
        off,
        EQUAL,
        "",
    ));
    let kg = |three: Option<[Density; 3]>| three.map_or([-1e9; 3], |three| three.map(Quantity::si));
    let by_selection = |ends: &[f64]| selected(ends, &counted);
    let stated: Vec<f64> = [kg(outcome.bottom), kg(outcome.top)].concat();
    let other: Vec<f64> = [by_selection(&again.bottoms), by_selection(&again.tops)].concat();
    checks.push(Check::compare(
        "P10, P50, P90 of the highest bottom and the lowest top, by selection",
        &stated,
        &other,
        1e-4,
        "kg/m³",
    ));
    let weights: Vec<f64> = outcome.curve.iter().map(|place: &MudShare| place.mud_weight.si()).collect();
    checks.push(Check::compare(
        "mud weights of the curve, a round step apart",
        &weights,
        &again.places(&counted),
        1e-9,
        "kg/m³",
    ));
    if let Some(planned) = outcome.planned {
        checks.push(Check::holds(
            "share of draws in which the planned mud keeps the section, by counting",
            worst([shares.off_together(PLANNED, planned.together), shares.off_by_layer(PLANNED, planned.by_layer)]),
            EQUAL,
            "",
        ));
    }
    checks.push(Check::holds("depths and shares of every layer, by counting", shares.off_layers(outcome), EQUAL, ""));
    Ok(checks)
}

/// Shares counted once more.
struct Shares<'a> {
    again: &'a Again,
    counted: &'a [usize],
}

impl Shares<'_> {
    fn share(&self, holds: impl Fn(usize) -> bool) -> f64 {
        self.counted.iter().filter(|k| holds(**k)).count() as f64 / self.counted.len() as f64
    }

    /// The share of a layer at a bit: the least and the most it can be.
    fn of_layer(&self, marks: &[Marks], bit: usize) -> [f64; 2] {
        [self.share(|k| marks[k].surely >> bit & 1 == 1), self.share(|k| marks[k].perhaps >> bit & 1 == 1)]
    }

    fn off_together(&self, bit: usize, stated: f64) -> f64 {
        let every = |of: fn(&Marks) -> u64| {
            self.share(|k| self.again.layers.iter().all(|(_, _, marks)| of(&marks[k]) >> bit & 1 == 1))
        };
        outside(stated, [every(|marks| marks.surely), every(|marks| marks.perhaps)])
    }

    fn off_by_layer(&self, bit: usize, stated: f64) -> f64 {
        let all: Vec<[f64; 2]> = self.again.layers.iter().map(|(_, _, marks)| self.of_layer(marks, bit)).collect();
        let product = |end: usize| all.iter().map(|ends| ends[end].ln()).sum::<f64>().exp();
        outside(stated, [product(0), product(1)])
    }

    fn off_layers(&self, outcome: &SectionEnsembleOutcome) -> f64 {
        if outcome.layers.len() != self.again.layers.len() {
            return f64::NAN;
        }
        let best = best(&outcome.curve).and_then(|best| outcome.curve.iter().position(|place| *place == best));
        let planned = outcome.planned.map(|_| PLANNED);
        worst(outcome.layers.iter().zip(&self.again.layers).flat_map(|(layer, (name, count, marks))| {
            let of = |stated: Option<f64>, bit: Option<usize>| match (stated, bit) {
                (Some(stated), Some(bit)) => outside(stated, self.of_layer(marks, bit)),
                (None, None) => 0.0,
                _ => f64::NAN,
            };
            let same = if layer.layer == *name { 0.0 } else { f64::NAN };
            [same, (layer.depths - *count as f64).abs(), of(layer.best, best), of(layer.planned, planned)]
        }))
    }
}

/// The largest; not a number where one is none.
fn worst(all: impl IntoIterator<Item = f64>) -> f64 {
    all.into_iter().fold(0.0, |worst, one| {
        if worst.is_nan() {
            worst
        } else if one.is_nan() || one > worst {
            one
        } else {
            worst
        }
    })
}

/// How far a number lies outside two ends.
fn outside(stated: f64, [least, most]: [f64; 2]) -> f64 {
    if stated.is_nan() {
        return stated;
    }
    (least - stated).max(stated - most).max(0.0)
}

/// All draws once more.
struct Again {
    /// Name, depths, and the marks of every draw.
    layers: Vec<(Name, usize, Vec<Marks>)>,
    left_out: Vec<bool>,
    bottoms: Vec<f64>,
    tops: Vec<f64>,
}

impl Again {
    fn of(inputs: &SectionEnsembleInputs, outcome: &SectionEnsembleOutcome, depths: &[SectionDepth]) -> Result<Self> {
        let count = inputs.draws.count as usize;
        let mut again = Again {
            layers: Vec::new(),
            left_out: vec![false; count],
            bottoms: vec![f64::NEG_INFINITY; count],
            tops: vec![f64::INFINITY; count],
        };
        for depth in depths {
            crate::interrupt::check();
            let name = depth.row.layer_name();
            let place = again.layers.iter().position(|(known, ..)| *known == name).unwrap_or_else(|| {
                again.layers.push((name, 0, vec![Marks { surely: u64::MAX, perhaps: u64::MAX }; count]));
                again.layers.len() - 1
            });
            let pressures: Vec<f64> = outcome.curve.iter().map(|place| depth.pressure(place.mud_weight).si()).collect();
            let planned = depth.planned.map(|both| both.map(Quantity::si));
            let ends = depth.ensemble(inputs.draws, &inputs.spreads, &inputs.correlations)?.ends_by_whole_walls()?;
            let (_, looked, marks) = &mut again.layers[place];
            *looked += 1;
            for (k, ends) in ends.iter().enumerate() {
                let Some([bottom, top]) = ends else {
                    again.left_out[k] = true;
                    continue;
                };
                let (low, high) = (bottom.unwrap_or(f64::INFINITY), top.unwrap_or(f64::NEG_INFINITY));
                again.bottoms[k] = again.bottoms[k].max(depth.weight(low));
                again.tops[k] = again.tops[k].min(depth.weight(high));
                let mut look = |bit: usize, p: f64| {
                    let near = NEAR * p.abs();
                    if !(low <= p - near && p + near <= high) {
                        marks[k].surely &= !(1 << bit);
                    }
                    if !(low <= p + near && p - near <= high) {
                        marks[k].perhaps &= !(1 << bit);
                    }
                };
                pressures.iter().enumerate().for_each(|(bit, p)| look(bit, *p));
                planned.into_iter().flatten().for_each(|p| look(PLANNED, p));
            }
        }
        Ok(again)
    }

    fn counted(&self) -> Vec<usize> {
        (0..self.left_out.len()).filter(|k| !self.left_out[*k]).collect()
    }

    fn places(&self, counted: &[usize]) -> Vec<f64> {
        let ends = |all: &[f64]| {
            let mut ends: Vec<f64> = counted.iter().map(|k| all[*k]).filter(|weight| weight.is_finite()).collect();
            ends.sort_by(f64::total_cmp);
            ends
        };
        places(&ends(&self.bottoms), &ends(&self.tops))
    }
}

/// P10, P50, P90 of the finite ones of those that count, by selection.
fn selected(ends: &[f64], counted: &[usize]) -> [f64; 3] {
    let mut list: Vec<f64> = counted.iter().map(|k| ends[*k]).filter(|weight| weight.is_finite()).collect();
    [0.1, 0.5, 0.9].map(|share| {
        let Some(last) = list.len().checked_sub(1) else { return -1e9 };
        let place = share * last as f64;
        let (_, low, above) = list.select_nth_unstable_by(place as usize, f64::total_cmp);
        let (low, next) = (*low, above.iter().copied().fold(f64::INFINITY, f64::min));
        let part = place.fract();
        if part > 0.0 { (1.0 - part) * low + part * next } else { low }
    })
}

impl SectionEnsemble {
    pub(super) fn depths(&self) -> Vec<SectionDepth> {
        depths(&self.log, &self.section).unwrap_or_default()
    }
}
