//! The arcs of a wall that fail in shear at one pressure, with their edges as roots.
//!
//! The zeros of every smooth piece of the excess cut the circle of φ = 2θ into stretches that fail
//! or hold, whatever their number; an arc that runs through the top of the hole is one arc.

use std::f64::consts::TAU;

use super::shear_wall::ShearWall;
use crate::rock::with_law;
use crate::well::wall::round::{Edges, edges, on_circle};

/// More arcs than were ever seen to fail in one half of a wall.
pub(crate) const MOST_ARCS: usize = 6;

/// Failing arcs by their edges in φ: from, to, with from in 0 ≤ φ < 2π and to ≥ from (it may pass
/// 2π).
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Arcs {
    edges: [(f64, f64); MOST_ARCS],
    count: usize,
    /// Whether the whole wall fails.
    pub whole: bool,
}

impl Arcs {
    pub fn list(&self) -> &[(f64, f64)] {
        self.edges.get(..self.count).unwrap_or_default()
    }

    /// The widest arc in tool face (radians), infinite when the whole wall fails, 0 when nothing.
    pub fn widest(&self) -> f64 {
        if self.whole {
            return f64::INFINITY;
        }
        0.5 * self.list().iter().fold(0.0_f64, |w, (from, to)| w.max(to - from))
    }
}

/// An excess below this share of the scale is rounding, not failure.
const NOISE: f64 = 4e-12;

impl ShearWall {
    /// What fails at a pressure.
    pub fn failing(&self, pressure: f64) -> Arcs {
        let found = with_law!(self.law, criterion => edges(&self.excess(criterion, pressure), self.scale()));
        let noise = NOISE * self.scale();
        let blurred = if self.plane.is_some() { BLURRED } else { 0.0 };
        arcs_between(found, blurred, |phi| self.excess_at(pressure, phi) > noise)
    }
}

/// An edge on a plane of weakness is not known more closely than this in φ where the shear on it ceases, as the
/// root of a square that is rounded.
const BLURRED: f64 = 3e-8;

/// The arcs that fail among the stretches between edges. Stretches no wider than `blurred` in φ are neither
/// arcs nor gaps.
pub(crate) fn arcs_between(mut found: Edges, blurred: f64, fails: impl Fn(f64) -> bool) -> Arcs {
    let cuts = found.places.get_mut(..found.count).unwrap_or_default();
    for cut in &mut *cuts {
        *cut = on_circle(*cut);
    }
    cuts.sort_unstable_by(f64::total_cmp);
    let mut arcs = Arcs { edges: [(0.0, 0.0); MOST_ARCS], count: 0, whole: false };
    let Some(first) = cuts.first().copied() else {
        arcs.whole = fails(0.0);
        return arcs;
    };
    // A stretch may touch zero in its very middle (a plane of weakness without cohesion where no
    // shear is on it), so one place in it is not enough.
    let fails = |from: f64, to: f64| [0.5, 0.31, 0.77].iter().any(|share| fails(from + share * (to - from)));
    let next = cuts.iter().skip(1).copied().chain(std::iter::once(first + TAU));
    let mut stretches = [(0.0, 0.0, false); Edges::MOST];
    let mut count = 0;
    for (from, to) in cuts.iter().copied().zip(next).filter(|(from, to)| to - from > blurred) {
        if let Some(cell) = stretches.get_mut(count) {
            *cell = (from, to, fails(from, to));
            count += 1;
        }
    }
    let stretches = stretches.get(..count).unwrap_or_default();
    let Some(holds) = stretches.iter().position(|(.., failing)| !failing) else {
        arcs.whole = true;
        return arcs;
    };
    // Once round from the first stretch that holds, and to it again.
    let (until, after) = stretches.split_at(holds + 1);
    let again = until.iter().map(|(from, to, failing)| (from + TAU, to + TAU, *failing));
    let mut open: Option<(f64, f64)> = None;
    for (from, to, failing) in after.iter().copied().chain(again) {
        if failing {
            open = Some((open.map_or(from, |(start, _)| start), to));
        } else if let (Some((from, to)), Some(cell)) = (open.take(), arcs.edges.get_mut(arcs.count)) {
            let turn = if from >= TAU { TAU } else { 0.0 };
            *cell = (from - turn, to - turn);
            arcs.count += 1;
        }
    }
    arcs
}
