//! The checks of an ensemble: every draw again as a whole wall, the statistics by counting, and single draws by the
//! second route.

use rayon::prelude::*;

use super::drawn::Drawn;
use super::effects::{Effect, MOST_FROZEN, spread_of_bottom, to_the_pascal};
use super::ensemble::{EnsembleInputs, Prepared};
use super::first_order::{FirstOrder, first_order};
use super::outcome::{EnsembleOutcome, PLACES};
use super::stand::{Left, Stand, stand_of};
use super::whole::{stand_by_wall, wall_of};
use crate::card::{Check, Explain};
use crate::spread::{Quantiles, for_each_draw};
use crate::units::{Pressure, Quantity};
use crate::well::wall::limits::Limits;

/// So many draws are looked at one by one.
const LOOKS: usize = 3;

pub(super) fn check(inputs: &EnsembleInputs, outcome: &EnsembleOutcome) -> Vec<Check> {
    let Ok(ready) = inputs.prepared() else { return Vec::new() };
    let count = inputs.draws.count;
    let stands = for_each_draw(&ready.sampler, count, |draw| stand_by_wall(inputs, &ready, draw));
    let base = &inputs.wall.inputs;
    let unit = 1e-6 * (base.stress.tensor().largest() + base.pore.si().abs() + base.rock.strength.law().size());
    let mut checks = vec![counts(inputs, outcome, &stands)];
    checks.extend(quantiles(outcome, &stands, unit));
    checks.extend(stable(outcome, &stands, unit));
    checks.extend(effects(inputs, outcome, &ready, &stands));
    checks.push(by_first_order(inputs, outcome.first_order.as_ref(), &ready, unit));
    checks.extend(means(inputs, &ready));
    checks.extend(looks(inputs, &ready, &stands, unit));
    checks
}

fn counts(inputs: &EnsembleInputs, outcome: &EnsembleOutcome, stands: &[Stand]) -> Check {
    let mut list = vec![0.0; 6 + inputs.drawn.len()];
    for stand in stands {
        let mut add = |k: usize| list.iter_mut().skip(k).take(1).for_each(|n| *n += 1.0);
        match stand.left {
            Some(Left::Outside(k)) => add(6 + usize::from(k)),
            Some(Left::Impossible) => add(1),
            Some(Left::Crossed) => add(2),
            Some(Left::BeyondFriction) => add(3),
            None => {
                add(0);
                if stand.bottom.is_none() {
                    add(4);
                }
                if !matches!((stand.bottom, stand.top), (Some(bottom), Some(top)) if top >= bottom) {
                    add(5);
                }
            }
        }
    }
    let o = outcome;
    let mut stated = vec![o.counted, o.impossible, o.crossed, o.beyond_friction, o.without_shear, o.without_range];
    stated.extend(&o.outside);
    Check::compare("counts, every draw again as a whole wall", &stated, &list, 0.0, "draws")
}

/// The number at a share of a list by selection, without sorting it.
fn selected(list: &[f64], share: f64) -> Option<f64> {
    let mut list = list.to_vec();
    let place = share * list.len().checked_sub(1)? as f64;
    let (_, low, above) = list.select_nth_unstable_by(place as usize, f64::total_cmp);
    let (low, next) = (*low, above.iter().copied().fold(f64::INFINITY, f64::min));
    let part = place.fract();
    Some(if part > 0.0 { (1.0 - part) * low + part * next } else { low })
}

fn counted(stands: &[Stand], end: impl Fn(&Stand) -> Option<f64>) -> Vec<f64> {
    stands.iter().filter(|stand| stand.left.is_none()).filter_map(end).collect()
}

fn quantiles(outcome: &EnsembleOutcome, stands: &[Stand], unit: f64) -> Vec<Check> {
    let mpa = |p: Option<Pressure>| p.map_or(-1e9, Pressure::in_mpa);
    let three = |q: Option<Quantiles>| q.map_or([-1e9; 3], |q| q.all().map(Pressure::in_mpa)).to_vec();
    let (bottoms, tops) = (counted(stands, |s| s.bottom), counted(stands, |s| s.top));
    let by_selection = |list: &[f64]| [0.1, 0.5, 0.9].map(|p| selected(list, p).map_or(-1e9, |p| p * 1e-6)).to_vec();
    let close = unit * 1e-7;
    let mut checks = vec![
        Check::compare(
            "P10, P50, P90 of the bottom, by selection",
            &three(outcome.bottom),
            &by_selection(&bottoms),
            close,
            "MPa",
        ),
        Check::compare(
            "P10, P50, P90 of the top, by selection",
            &three(outcome.top),
            &by_selection(&tops),
            close,
            "MPa",
        ),
    ];
    let beyond = |end: fn(&Stand) -> Option<f64>, none: f64, share: f64| {
        let all = counted(stands, |s| Some(end(s).unwrap_or(none)));
        selected(&all, share).filter(|p| p.is_finite()).map_or(-1e9, |p| p * 1e-6)
    };
    let design = [beyond(|s| s.bottom, f64::INFINITY, 0.9), beyond(|s| s.top, f64::NEG_INFINITY, 0.1)];
    checks.push(Check::compare(
        "P90 of the bottom and P10 of the top with draws that have none beyond all others",
        &[mpa(outcome.design_bottom), mpa(outcome.design_top)],
        &design,
        close,
        "MPa",
    ));
    // About a number near them, so that no figures are lost.
    let near = bottoms.first().copied().unwrap_or_default();
    let (n, sum, squares) = bottoms.iter().fold((0.0, 0.0, 0.0), |(n, sum, squares), p| {
        let d = (p - near) * 1e-6;
        (n + 1.0, sum + d, squares + d * d)
    });
    let by_sums = [near * 1e-6 + sum / n, ((squares - sum * sum / n) / (n - 1.0)).max(0.0).sqrt()];
    checks.push(match outcome.bottom_mean {
        Some(stated) => Check::compare(
            "mean and standard deviation of the bottom, by sums of squares",
            &stated.map(Pressure::in_mpa),
            &by_sums,
            close,
            "MPa",
        ),
        None => Check::holds("no mean: fewer than two draws have a bottom", n - 1.0, 0.0, "draws"),
    });
    checks
}

fn stable(outcome: &EnsembleOutcome, stands: &[Stand], unit: f64) -> [Check; 2] {
    let what = "share of stable walls at each pressure, counted wall by wall (one draw may stand on the edge)";
    let (bottoms, tops) = (counted(stands, |s| s.bottom), counted(stands, |s| s.top));
    let ends = selected(&bottoms, 0.01).zip(selected(&tops, 0.99));
    let places: Vec<f64> = ends.map_or_else(Vec::new, |(a, b)| {
        (0..PLACES).map(|k| (a.min(b) + (a - b).abs() * k as f64 / (PLACES as f64 - 1.0)) * 1e-6).collect()
    });
    let all = stands.iter().filter(|s| s.left.is_none()).count() as f64;
    let close = 1e-11 * unit * 1e6;
    let shares = outcome.stable.iter().map(|(pressure, _)| {
        let p = pressure.si();
        let holds = |s: &&Stand| {
            s.left.is_none()
                && s.bottom.is_some_and(|bottom| bottom <= p + close)
                && s.top.is_some_and(|top| top >= p - close)
        };
        stands.iter().filter(holds).count() as f64 / all
    });
    let stated: Vec<f64> = outcome.stable.iter().map(|(p, _)| p.in_mpa()).collect();
    if places.is_empty() && stated.is_empty() {
        return [what, "no pressures: no draw has both ends"].map(|what| Check::holds(what, 0.0, 0.0, ""));
    }
    let by_walls: Vec<f64> = shares.collect();
    let stated_shares: Vec<f64> = outcome.stable.iter().map(|(_, share)| *share).collect();
    [
        Check::compare("pressures of the curve, from quantiles by selection", &stated, &places, unit * 1e-7, "MPa"),
        Check::compare(what, &stated_shares, &by_walls, 1.1 / all, ""),
    ]
}

/// Spearman's by the ranks as counts, and covariances.
fn rank_correlation(pairs: &[(f64, f64)]) -> f64 {
    let ranks = |of: &dyn Fn(&(f64, f64)) -> f64| -> Vec<f64> {
        let mut ordered: Vec<f64> = pairs.iter().map(of).collect();
        ordered.sort_by(f64::total_cmp);
        let rank = |value: f64| {
            let below = ordered.partition_point(|other| *other < value);
            let not_above = ordered.partition_point(|other| *other <= value);
            0.5 * (below + not_above) as f64 / pairs.len() as f64
        };
        pairs.iter().map(|pair| rank(of(pair))).collect()
    };
    let (a, b) = (ranks(&|p| p.0), ranks(&|p| p.1));
    let n = pairs.len() as f64;
    let mean = |list: &[f64]| list.iter().sum::<f64>() / n;
    let mean_of = |x: &[f64], y: &[f64]| x.iter().zip(y).map(|(x, y)| x * y).sum::<f64>() / n;
    let covariance = |x: &[f64], y: &[f64]| mean_of(x, y) - mean(x) * mean(y);
    let under = (covariance(&a, &a) * covariance(&b, &b)).sqrt();
    if under > 1e-12 { covariance(&a, &b) / under } else { 0.0 }
}

fn effects(inputs: &EnsembleInputs, outcome: &EnsembleOutcome, ready: &Prepared, stands: &[Stand]) -> Vec<Check> {
    let few = inputs.draws.count.min(MOST_FROZEN);
    let drawn = spread_of_bottom(stands.get(..few as usize).unwrap_or(stands)).filter(|s| *s > 0.0);
    let of_input = |(k, one): (usize, &Drawn)| {
        let values =
            for_each_draw(&ready.sampler, inputs.draws.count, |draw| draw.values().get(k).copied().unwrap_or_default());
        let against = |end: &dyn Fn(&Stand) -> Option<f64>| {
            let both = values.iter().zip(stands).filter(|(_, stand)| stand.left.is_none());
            let pairs: Vec<(f64, f64)> =
                both.filter_map(|(value, stand)| Some((*value, to_the_pascal(end(stand)?)))).collect();
            rank_correlation(&pairs)
        };
        let held = ready.sampler.holding(k);
        let held = spread_of_bottom(&for_each_draw(&held, few, |draw| stand_by_wall(inputs, ready, draw)));
        let narrows = held.zip(drawn).map_or(0.0, |(held, drawn)| (drawn - held) / drawn);
        let stated =
            outcome.effects.get(k).map(|Effect { on_bottom, on_top, narrows }| [*on_bottom, *on_top, *narrows]);
        Check::compare(
            format!("{}: rank correlations by counted ranks, and the spread with it held by whole walls", one.symbol()),
            &stated.unwrap_or([f64::NAN; 3]),
            &[against(&|s| s.bottom), against(&|s| s.top), narrows],
            2e-6,
            "",
        )
    };
    inputs.drawn.par_iter().enumerate().map(of_input).collect()
}

fn by_first_order(inputs: &EnsembleInputs, stated: Option<&FirstOrder>, ready: &Prepared, unit: f64) -> Check {
    let numbers = &ready.base.numbers;
    let by_walls = first_order(inputs, numbers, |drawn| {
        let wall = wall_of(&inputs.wall, numbers, drawn).ok()?;
        stand_of(&wall.shear, drawn.tensile, f64::INFINITY).bottom
    });
    let list = |estimate: Option<&FirstOrder>| {
        estimate.map_or_else(Vec::new, |e| {
            let mut list = vec![e.mean.in_mpa(), e.deviation.in_mpa()];
            list.extend(e.by_one_deviation.iter().map(|p| p.in_mpa()));
            list
        })
    };
    let what = "first-order estimate, from whole walls";
    match (stated, &by_walls) {
        (None, None) => Check::holds("no first-order estimate: the wall of the means has no bottom", 0.0, 0.0, ""),
        _ => Check::compare(what, &list(stated), &list(by_walls.as_ref()), unit * 1e-8, "MPa"),
    }
}

/// The mean of the draws of each input against that of its distribution, in standard errors.
fn means(inputs: &EnsembleInputs, ready: &Prepared) -> Vec<Check> {
    let count = inputs.draws.count;
    let mut checks = Vec::new();
    for (k, one) in inputs.drawn.iter().enumerate() {
        let values = for_each_draw(&ready.sampler, count, |draw| draw.values().get(k).copied().unwrap_or_default());
        let (mean, deviation) = one.spread.moments();
        let off = values.iter().map(|v| (v - mean) / deviation).sum::<f64>() / f64::from(count).sqrt();
        checks.push(Check::holds(
            format!("{}: mean of the draws off that of its distribution, in standard errors", one.symbol()),
            off.abs(),
            5.0,
            "",
        ));
    }
    checks
}

/// Single draws: their limits by vectors and eigenvalues of the whole tensor, looking everywhere.
fn looks(inputs: &EnsembleInputs, ready: &Prepared, stands: &[Stand], unit: f64) -> Vec<Check> {
    let with = stands.iter().enumerate().filter(|(_, s)| s.left.is_none() && s.bottom.is_some()).take(LOOKS);
    let without = stands.iter().enumerate().filter(|(_, s)| s.left.is_none() && s.bottom.is_none()).take(1);
    let mut checks = Vec::new();
    for (k, _) in with.chain(without) {
        let draw = ready.sampler.draw(k as u64);
        let fast = ready.stand(inputs, &draw);
        let numbers = inputs.numbers(&ready.base, &draw);
        let limits = wall_of(&inputs.wall, &ready.base.numbers, &numbers).map(|wall| wall.limits());
        let lower = limits.as_ref().map_or(f64::NAN, |l| l.lower_shear.pressure().map_or(-1e9, Pressure::in_mpa));
        let failed = limits.map_or(f64::NAN, |limits| {
            Limits::check(&limits.inputs(), &limits.outcome()).iter().filter(|check| !check.passed).count() as f64
        });
        checks.push(Check::compare(
            format!("draw {}: its bottom against the limits of its wall", k + 1),
            &[fast.bottom.map_or(-1e9, |p| p * 1e-6)],
            &[lower],
            unit * 1e-7,
            "MPa",
        ));
        checks.push(Check::holds(
            format!(
                "draw {}: checks of these limits, by vectors and eigenvalues of the whole tensor, that fail",
                k + 1
            ),
            failed,
            0.0,
            "",
        ));
    }
    checks
}
