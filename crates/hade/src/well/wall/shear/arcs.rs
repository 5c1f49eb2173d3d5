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
        arcs_between(found, |phi| self.excess_at(pressure, phi) > noise)
    }
}

/// The arcs that fail among the stretches between edges.
pub(crate) fn arcs_between(mut found: Edges, fails: impl Fn(f64) -> bool) -> Arcs {
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
    // The piece that runs through φ = 0 belongs after the last cut.
    let mut open: Option<f64> = None;
    let mut all = true;
    // A stretch may touch zero in its very middle (a plane of weakness without cohesion where no
    // shear is on it), so one place in it is not enough.
    let fails = |from: f64, to: f64| [0.5, 0.31, 0.77].iter().any(|share| fails(from + share * (to - from)));
    let next = cuts.iter().skip(1).copied().chain(std::iter::once(first + TAU));
    for (from, to) in cuts.iter().copied().zip(next) {
        if to > from && fails(from, to) {
            open = open.or(Some(from));
        } else if to > from {
            all = false;
            close(&mut arcs, &mut open, from);
        }
    }
    if all {
        arcs.whole = true;
        arcs.count = 0;
        return arcs;
    }
    // What is still open at the end runs on into what began at the first cut.
    if let Some(from) = open {
        let joins = arcs.edges.first().copied().filter(|(start, _)| arcs.count > 0 && *start == first);
        match joins {
            Some((_, to)) => {
                if let Some(cell) = arcs.edges.first_mut() {
                    *cell = (from, to + TAU);
                }
            }
            None => close(&mut arcs, &mut Some(from), first + TAU),
        }
    }
    arcs
}

fn close(arcs: &mut Arcs, open: &mut Option<f64>, to: f64) {
    if let (Some(from), Some(cell)) = (open.take(), arcs.edges.get_mut(arcs.count)) {
        *cell = (from, to);
        arcs.count += 1;
    }
}
