//! The lowest pressure at which no failing arc is wider than an allowed width.

use std::f64::consts::PI;

use super::shear_wall::{ShearWall, Window};
use crate::well::wall::round::{CIRCLE, OnCircle};

/// What the search found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum AtWidth {
    At(f64),
    /// No pressure keeps every failing arc within the width.
    Never,
    /// Every pressure down to the edge of the search does.
    Unbounded,
}

/// The edge is found within this share of the scale, and its safe side given.
const CLOSE: f64 = 1e-13;

impl ShearWall {
    /// The lowest pressure at which the widest failing arc is at most `width` (tool face, radians,
    /// more than zero), by the [`window`](ShearWall::window) of this wall. A wall that fails all round is wider than
    /// any width.
    ///
    /// Where the whole wall holds between two pressures, everything that fails below the lower of
    /// them fails there for want of pressure, and the arcs only grow as the pressure falls. Where the
    /// whole wall holds at no pressure, arcs of two kinds grow in opposite senses, so the pressures
    /// between which any place holds are looked through from below.
    pub fn lower_at_width(&self, window: Window, width: f64) -> AtWidth {
        match window {
            Window::Open { lower: None, .. } => AtWidth::Unbounded,
            Window::Open { lower: Some(lower), .. } => {
                let over = |p: f64| self.over(p, width);
                if let Some((bad, good)) = self.by_ends(lower.phi, width) {
                    return AtWidth::At(self.boundary(bad, good, over));
                }
                let (mut step, mut good) = (1e-3 * self.scale(), (lower.value, over(lower.value)));
                let mut bad = (good.0 - step, over(good.0 - step));
                while bad.1 <= 0.0 {
                    if step > 64.0 * self.scale() {
                        return AtWidth::Unbounded;
                    }
                    good = bad;
                    step *= 2.0;
                    bad = (good.0 - step, over(good.0 - step));
                }
                AtWidth::At(self.boundary(bad, good, over))
            }
            Window::Closed { .. } => self.lower_of_closed(width),
        }
    }

    /// By how much the widest failing arc is wider than a width; a wall that fails all round, by half a turn.
    fn over(&self, pressure: f64, width: f64) -> f64 {
        self.failing(pressure).widest().min(PI + width) - width
    }

    /// Where each place has its ends in closed form: the arc between two places of equal lower ends, as wide
    /// as allowed, about the highest of all; as pressures just below and just above, where looking all round
    /// confirms them. Mostly they are confirmed as close together as the edge is asked for, and the one above is it;
    /// else farther apart, and the edge is searched for between them.
    fn by_ends(&self, crest: f64, width: f64) -> Option<((f64, f64), (f64, f64))> {
        let ends = self.closed_form()?.lower_end();
        let lower = |phi: f64| {
            let (s, c) = phi.sin_cos();
            ends.value(c, s)
        };
        let gap = |phi: f64| lower(phi) - lower(phi + 2.0 * width);
        // From the crest at its end to the crest at its beginning, the arc passes from too high an end to
        // too high a beginning.
        let (mut low, mut high) = (crest - 2.0 * width, crest);
        let (mut below, mut above) = (gap(low), gap(high));
        let mut phi = 0.5 * (low + high);
        for _ in 0..60 {
            let step = (high * below - low * above) / (below - above);
            let next = if step > low && step < high { step } else { 0.5 * (low + high) };
            let moved = (next - phi).abs();
            phi = next;
            let here = gap(phi);
            // The end that stays counts half each time (Illinois).
            if here > 0.0 {
                (high, above, below) = (phi, here, 0.5 * below);
            } else {
                (low, below, above) = (phi, here, 0.5 * above);
            }
            if moved < 1e-13 || here.abs() < 0.1 * CLOSE * self.scale() {
                break;
            }
        }
        let at = lower(phi);
        [0.5 * CLOSE, 100.0 * CLOSE].into_iter().find_map(|nudge| {
            let [bad, good] = [at - nudge * self.scale(), at + nudge * self.scale()].map(|p| (p, self.over(p, width)));
            (bad.1 > 0.0 && good.1 <= 0.0).then_some((bad, good))
        })
    }

    fn lower_of_closed(&self, width: f64) -> AtWidth {
        const PIECES: u32 = 512;
        let scale = self.scale();
        let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
        for (from, to) in CIRCLE.cos.iter().zip(&CIRCLE.sin).filter_map(|(c, s)| self.interval_at(*c, *s)) {
            low = low.min(from);
            high = high.max(to);
        }
        let (mut low, high) = (low - 1e-3 * scale, high + 1e-3 * scale);
        let over = |p: f64| self.over(p, width);
        let fine = |p: f64| over(p) <= 0.0;
        // A place between those that were looked at may hold at a lower pressure still.
        let (least, mut step) = (self.pore - 64.0 * scale, 1e-3 * scale);
        while low > least && fine(low) {
            low -= step;
            step *= 2.0;
        }
        let low = low.max(least);
        let valued = |p: f64| (p, over(p));
        let place = |k: u32| low + (high - low) * f64::from(k) / f64::from(PIECES);
        match (1..=PIECES).find(|k| low < high && fine(place(*k))) {
            Some(k) => AtWidth::At(self.boundary(valued(place(k - 1)), valued(place(k)), over)),
            None => {
                let middle = self.least_bad().pressure;
                if low < middle && fine(middle) {
                    let below = (0..PIECES).rev().map(place).find(|p| *p < middle).unwrap_or(low);
                    return AtWidth::At(self.boundary(valued(below), valued(middle), over));
                }
                AtWidth::Never
            }
        }
    }

    /// The edge between a pressure at which arcs are too wide and a higher one at which they are not, on the
    /// side where they are not, each with by how much. The chord's zero, moved towards the middle and kept
    /// within what halving would need (Oliveira and Takahashi 2020, ACM Trans. Math. Softw. 47(1), from
    /// memory).
    fn boundary(&self, bad: (f64, f64), good: (f64, f64), over: impl Fn(f64) -> f64) -> f64 {
        let ((mut bad, mut over_bad), (mut good, mut over_good)) = (bad, good);
        let (whole, close) = (good - bad, CLOSE * self.scale());
        // Of the widest interval that halving would have left one step later.
        let mut allowed = close * 2.0_f64.powf((whole / close).log2().ceil().max(0.0) + 1.0);
        for _ in 0..200 {
            let span = good - bad;
            if span <= close {
                break;
            }
            let middle = 0.5 * (bad + good);
            let chord = (over_good * bad - over_bad * good) / (over_good - over_bad);
            let towards = (middle - chord).signum();
            let moved = 0.2 * span * span / whole;
            let truncated = if moved <= (middle - chord).abs() { chord + towards * moved } else { middle };
            let room = (0.5 * (allowed - span)).max(0.0);
            let here = if (truncated - middle).abs() <= room { truncated } else { middle - towards * room };
            allowed *= 0.5;
            let here = if here > bad && here < good { here } else { middle };
            let value = over(here);
            if value <= 0.0 {
                (good, over_good) = (here, value);
            } else {
                (bad, over_bad) = (here, value);
            }
        }
        good
    }
}
