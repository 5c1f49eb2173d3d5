//! The arcs of a wall that fail in shear at one pressure, with their edges as roots.
//!
//! At a fixed pressure each of the three conditions of [`super::shear`] is a polynomial of degree
//! two on the circle of φ = 2θ, so its edges are exact, whatever their number, and an arc that runs
//! through the top of the hole is one arc.

use std::f64::consts::TAU;

use super::circle::on_circle;
use super::shear::ShearWall;
use super::trigonometric::Trigonometric;

/// More arcs than three polynomials of four roots each can give.
pub(crate) const MOST: usize = 6;

/// Failing arcs by their edges in φ: from, to, with from in 0 ≤ φ < 2π and to ≥ from (it may pass
/// 2π).
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Arcs {
    edges: [(f64, f64); MOST],
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
const NOISE: f64 = 1e-12;

impl ShearWall {
    /// What fails at a pressure.
    pub fn failing(&self, pressure: f64) -> Arcs {
        let mut cuts = [0.0; 12];
        let mut count = 0;
        for polynomial in self.conditions(pressure) {
            let (roots, n) = polynomial.roots();
            for root in roots.iter().take(n) {
                if let Some(cell) = cuts.get_mut(count) {
                    *cell = on_circle(*root);
                    count += 1;
                }
            }
        }
        let cuts = cuts.get_mut(..count).unwrap_or_default();
        cuts.sort_unstable_by(f64::total_cmp);
        let noise = NOISE * (1.0 + self.line.q) * self.scale();
        let fails = |phi: f64| self.excess_at(pressure, phi) > noise;
        let mut arcs = Arcs { edges: [(0.0, 0.0); MOST], count: 0, whole: false };
        let Some(first) = cuts.first().copied() else {
            arcs.whole = fails(0.0);
            return arcs;
        };
        // The piece that runs through φ = 0 belongs after the last cut.
        let mut open: Option<f64> = None;
        let mut all = true;
        let next = cuts.iter().skip(1).copied().chain(std::iter::once(first + TAU));
        for (from, to) in cuts.iter().copied().zip(next) {
            if to > from && fails(0.5 * (from + to)) {
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

    /// The three conditions as polynomials; a sign change of one is a candidate for an edge.
    fn conditions(&self, pressure: f64) -> [Trigonometric; 3] {
        let (q, ucs, pore) = (self.line.q, self.line.ucs, self.pore);
        // In units of the scale, so that squares stay near one.
        let unit = 1.0 / self.scale().max(f64::MIN_POSITIVE);
        let hoop = self.kirsch.hoop.scaled(unit, -(pressure + pore) * unit);
        let axial = self.kirsch.axial.scaled(unit, -pore * unit);
        let shear = self.kirsch.shear_squared.scaled(unit * unit, 0.0);
        let (radial, ucs) = ((pressure - pore) * unit, ucs * unit);
        let most = ucs + q * radial;
        let least = (radial - ucs) / q;
        let closing = Trigonometric::product_plus(hoop.scaled(-1.0, most), axial.scaled(-1.0, most), shear, -1.0);
        let pushed = Trigonometric::product_plus(hoop.scaled(1.0, -least), axial.scaled(1.0, -least), shear, -1.0);
        let sum = super::kirsch::Wave {
            mean: ucs + 0.5 * (q - 1.0) * (hoop.mean + axial.mean),
            cos: 0.5 * (q - 1.0) * (hoop.cos + axial.cos),
            sin: 0.5 * (q - 1.0) * (hoop.sin + axial.sin),
        };
        let half = super::kirsch::Wave {
            mean: 0.5 * (hoop.mean - axial.mean),
            cos: 0.5 * (hoop.cos - axial.cos),
            sin: 0.5 * (hoop.sin - axial.sin),
        };
        let square = Trigonometric::product_plus(half, half, shear, 1.0);
        let within = Trigonometric::product_plus(sum, sum, shear, 0.0).plus(square, -(q + 1.0) * (q + 1.0));
        [closing, pushed, within]
    }
}

fn close(arcs: &mut Arcs, open: &mut Option<f64>, to: f64) {
    if let (Some(from), Some(cell)) = (open.take(), arcs.edges.get_mut(arcs.count)) {
        *cell = (from, to);
        arcs.count += 1;
    }
}
