//! How far from the wall an elastic field is beyond what the rock bears.
//!
//! Along a radius everything is looked at in u = (R/r)², from the far field (0) to the wall (1), at
//! even steps; where the excess turns between steps of one sign, its turning point is found first, so
//! that a zone that begins away from the wall, or a narrow one, is not passed over. Each edge is
//! then a root. Round the hole the looks are even too, and the deepest and the worst of them are
//! closed in on.

use crate::well::wall::round::{highest_between, root_between};
use std::f64::consts::PI;

use crate::well::wall::stress::RockRound;

/// Looks along a radius.
const OUT: usize = 24;
/// Looks round half the hole; the other half repeats it.
const ROUND: usize = 60;
/// An excess below this share of the scale is rounding, not failure.
const NOISE: f64 = 4e-12;
/// Values closer than this share are one.
const SAME: f64 = 1e-10;

/// What fails along one radius.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Ray {
    /// Failing stretches by u, from the farthest to the nearest: far end, near end.
    pub failing: Vec<(f64, f64)>,
    /// The largest excess, and where: excess, u.
    pub worst: (f64, f64),
}

/// A place and a value.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Found {
    /// Tool face 0 ≤ θ < π; `None` where all tool faces are alike.
    pub theta: Option<f64>,
    /// (R/r)².
    pub u: f64,
    pub excess: f64,
}

/// What fails round a hole.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Depth {
    /// The farthest failing place; `None` where nothing fails, or the far field does.
    pub deepest: Option<Found>,
    /// The place of the largest excess.
    pub worst: Found,
    pub far_field_fails: bool,
}

impl RockRound {
    fn noise(&self) -> f64 {
        NOISE * self.scale()
    }

    /// What fails along the radius of a tool face.
    pub fn ray(&self, theta: f64) -> Ray {
        let excess = |u: f64| self.excess(theta, u);
        let noise = self.noise();
        let step = 1.0 / OUT as f64;
        let even: Vec<(f64, f64)> = (0..=OUT).map(|k| k as f64 * step).map(|u| (u, excess(u))).collect();
        let worst_look = even.iter().copied().fold((0.0, f64::NEG_INFINITY), |a, b| if b.1 >= a.1 { b } else { a });
        let mut looks = even.clone();
        let mut worst = worst_look;
        for (k, (u, e)) in even.iter().enumerate() {
            let beside = |k: Option<usize>| k.and_then(|k| even.get(k)).copied();
            let (before, after) = (beside(k.checked_sub(1)), beside(Some(k + 1)));
            let sides = || [before, after].into_iter().flatten();
            let hill = sides().all(|s| s.1 <= *e);
            let hollow = sides().all(|s| s.1 >= *e);
            let fails = *e > noise;
            let alike = sides().all(|s| (s.1 > noise) == fails);
            let highest = *u == worst_look.0;
            if (hill && (highest || (alike && !fails))) || (hollow && alike && fails) {
                let sign = if hill { 1.0 } else { -1.0 };
                let (low, high) = ((u - step).max(0.0), (u + step).min(1.0));
                let (at, value) = highest_between(|u| sign * excess(u), low, high);
                if value > sign * *e {
                    looks.push((at, sign * value));
                    if hill && value > worst.1 {
                        worst = (at, value);
                    }
                }
            }
        }
        looks.sort_by(|a, b| a.0.total_cmp(&b.0));
        let mut failing = Vec::new();
        let mut open = looks.first().filter(|look| look.1 > noise).map(|look| look.0);
        for (a, b) in looks.iter().zip(looks.iter().skip(1)) {
            match (a.1 > noise, b.1 > noise, open) {
                (false, true, _) => open = Some(root_between(excess, *a, *b)),
                (true, false, Some(far)) => {
                    failing.push((far, root_between(excess, *a, *b)));
                    open = None;
                }
                _ => {}
            }
        }
        failing.extend(open.map(|far| (far, 1.0)));
        Ray { failing, worst: (worst.1, worst.0) }
    }

    /// How far out it fails at a tool face, in radii; where nothing fails a number below zero that
    /// grows as the radius comes closer to failing.
    fn reach(&self, theta: f64) -> f64 {
        let ray = self.ray(theta);
        match ray.failing.first() {
            Some((far, _)) => far.max(1e-12).powf(-0.5),
            None => ray.worst.0 / self.scale().max(1.0) - 1e-9,
        }
    }

    /// What fails all round. `at_wall` is the worst place at the wall by the exact search there: its
    /// excess and tool face, `None` where all are alike.
    pub fn depth(&self, at_wall: (f64, Option<f64>)) -> Depth {
        let far_excess = self.excess(0.0, 0.0);
        let far_field_fails = far_excess > self.noise();
        let wall = Found { theta: at_wall.1, u: 1.0, excess: at_wall.0 };
        let worst = self.worst(wall, far_excess);
        if far_field_fails {
            return Depth { deepest: None, worst, far_field_fails };
        }
        let mut starts: Vec<f64> = (0..ROUND).map(|k| k as f64 * PI / ROUND as f64).collect();
        starts.extend(worst.theta.into_iter().chain(wall.theta));
        let deepest = round(&starts, 1.0, |theta| self.reach(theta)).and_then(|(theta, reach)| {
            let theta_or_first = theta.unwrap_or(0.0);
            (reach >= 1.0).then(|| {
                let u = self.ray(theta_or_first).failing.first().map_or(1.0, |(far, _)| *far);
                Found { theta, u, excess: 0.0 }
            })
        });
        Depth { deepest, worst, far_field_fails }
    }

    /// The place of the largest excess: at the wall, or between it and the far field, or far off.
    fn worst(&self, wall: Found, far_excess: f64) -> Found {
        let same = SAME * self.scale();
        let starts: Vec<f64> = (0..ROUND).map(|k| k as f64 * PI / ROUND as f64).chain(wall.theta).collect();
        let mut best = wall;
        if let Some((theta, value)) = round(&starts, self.scale(), |theta| self.ray(theta).worst.0)
            && value > best.excess + same
        {
            let (_, u) = self.ray(theta.unwrap_or(0.0)).worst;
            best = Found { theta, u, excess: value };
        }
        if far_excess > best.excess - same && best.u < 1.0 || far_excess > best.excess + same {
            best = Found { theta: None, u: 0.0, excess: far_excess };
        }
        best
    }
}

/// The greatest value of a function of the tool face, and where: closing in on every look that is
/// higher than its neighbours. Of equal ones the smallest tool face; none where all are alike.
fn round(starts: &[f64], scale: f64, f: impl Fn(f64) -> f64) -> Option<(Option<f64>, f64)> {
    let mut looks: Vec<(f64, f64)> = starts.iter().map(|theta| theta.rem_euclid(PI)).map(|t| (t, f(t))).collect();
    looks.sort_by(|a, b| a.0.total_cmp(&b.0));
    let top = looks.iter().fold(f64::NEG_INFINITY, |m, look| m.max(look.1));
    let bottom = looks.iter().fold(f64::INFINITY, |m, look| m.min(look.1));
    let same = SAME * scale;
    if top - bottom <= same {
        return Some((None, top));
    }
    let mut best: Option<(f64, f64)> = None;
    let count = looks.len();
    for (k, (theta, value)) in looks.iter().enumerate() {
        let before = looks.get((k + count - 1) % count)?;
        let after = looks.get((k + 1) % count)?;
        if *value < before.1 || *value < after.1 {
            continue;
        }
        let low = if k == 0 { before.0 - PI } else { before.0 };
        let high = if k + 1 == count { after.0 + PI } else { after.0 };
        let (at, found) = highest_between(&f, low, high);
        let (at, found) = if found >= *value { (at.rem_euclid(PI), found) } else { (*theta, *value) };
        if best.is_none_or(|(t, v)| found > v + same || (found >= v - same && at < t)) {
            best = Some((at, found));
        }
    }
    best.map(|(theta, value)| (Some(if PI - theta < 1e-9 { 0.0 } else { theta }), value))
}
