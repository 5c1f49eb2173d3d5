//! The lowest pressure at which no failing arc is wider than an allowed width.

use super::shear_wall::{ShearWall, Window};
use crate::well::wall::round::CIRCLE;

/// What the search found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum AtWidth {
    At(f64),
    /// No pressure keeps every failing arc within the width.
    Never,
    /// Every pressure down to the edge of the search does.
    Unbounded,
}

impl ShearWall {
    /// The lowest pressure at which the widest failing arc is at most `width` (tool face, radians,
    /// more than zero). A wall that fails all round is wider than any width.
    ///
    /// Where the whole wall holds between two pressures, everything that fails below the lower of
    /// them fails there for want of pressure, and the arcs only grow as the pressure falls. Where the
    /// whole wall holds at no pressure, arcs of two kinds grow in opposite senses, so the pressures
    /// between which any place holds are looked through from below.
    pub fn lower_at_width(&self, width: f64) -> AtWidth {
        match self.window() {
            Window::Open { lower: None, .. } => AtWidth::Unbounded,
            Window::Open { lower: Some(lower), .. } => {
                let fine = |p: f64| self.failing(p).widest() <= width;
                let (mut step, mut good) = (1e-3 * self.scale(), lower.value);
                let mut bad = good - step;
                while fine(bad) {
                    if step > 64.0 * self.scale() {
                        return AtWidth::Unbounded;
                    }
                    good = bad;
                    step *= 2.0;
                    bad -= step;
                }
                AtWidth::At(self.boundary(bad, good, fine))
            }
            Window::Closed { .. } => self.lower_of_closed(width),
        }
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
        let fine = |p: f64| self.failing(p).widest() <= width;
        // A place between those that were looked at may hold at a lower pressure still.
        let (least, mut step) = (self.pore - 64.0 * scale, 1e-3 * scale);
        while low > least && fine(low) {
            low -= step;
            step *= 2.0;
        }
        let low = low.max(least);
        let place = |k: u32| low + (high - low) * f64::from(k) / f64::from(PIECES);
        match (1..=PIECES).find(|k| low < high && fine(place(*k))) {
            Some(k) => AtWidth::At(self.boundary(place(k - 1), place(k), fine)),
            None => {
                let middle = self.least_bad().pressure;
                if low < middle && fine(middle) {
                    let below = (0..PIECES).rev().map(place).find(|p| *p < middle).unwrap_or(low);
                    return AtWidth::At(self.boundary(below, middle, fine));
                }
                AtWidth::Never
            }
        }
    }

    /// The edge between a pressure that is not fine and a higher one that is, on the fine side.
    fn boundary(&self, mut bad: f64, mut good: f64, fine: impl Fn(f64) -> bool) -> f64 {
        for _ in 0..200 {
            let middle = 0.5 * (bad + good);
            if fine(middle) {
                good = middle;
            } else {
                bad = middle;
            }
            if good - bad <= 1e-13 * self.scale() {
                break;
            }
        }
        good
    }
}
