//! The lowest pressure at which no failing arc is wider than an allowed width.

use super::circle::{greatest, smallest};
use super::shear::{ShearWall, Window};

/// What the search found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum AtWidth {
    At(f64),
    /// No pressure keeps every failing arc within the width.
    Never,
}

impl ShearWall {
    /// The lowest pressure at which the widest failing arc is at most `width` (tool face, radians,
    /// more than zero). A wall that fails all round is wider than any width.
    ///
    /// Where the whole wall holds between two pressures, everything that fails below the lower of
    /// them fails there by closing in, and the arcs only grow as the pressure falls: the width is
    /// bracketed by that limit and the pressure at which the last place fails. Where the whole wall
    /// holds at no pressure, arcs of two kinds grow in opposite senses, so the pressures between which
    /// any place holds are looked through from below.
    pub fn lower_at_width(&self, width: f64) -> AtWidth {
        match self.window() {
            Window::Open { lower, .. } => {
                let last = smallest(self.lower_end(), self.scale());
                let fine = |p: f64| self.failing(p).widest() <= width;
                AtWidth::At(self.boundary(last.value - 1e-9 * self.scale(), lower.value, fine))
            }
            Window::Closed { .. } => self.lower_of_closed(width),
        }
    }

    fn lower_of_closed(&self, width: f64) -> AtWidth {
        const PIECES: u32 = 512;
        let scale = self.scale();
        // Below the first every place closes in, above the second every place is pushed out.
        let low = smallest(self.lower_end().closing(), scale).value - 1e-9 * scale;
        let high = greatest(&self.upper_end().pushed(), scale).value + 1e-9 * scale;
        let fine = |p: f64| self.failing(p).widest() <= width;
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
