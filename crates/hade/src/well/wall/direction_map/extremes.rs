//! The best and the worst directions of a map, all that are alike, and how much of the hemisphere has no
//! safe pressure.

use super::grid::Grid;
use super::map_of::MapOf;
use crate::units::{Pressure, Quantity};

/// Numbers of directions, the least inclined first.
pub(super) struct Extremes {
    pub best: Vec<usize>,
    pub worst: Vec<usize>,
    pub share_without: f64,
}

/// Values nearer to each other than this share of the largest are alike.
const ALIKE: f64 = 1e-7;

pub(super) fn extremes(grid: &Grid, values: &[Option<Pressure>], of: MapOf) -> Extremes {
    let (mut low, mut high, mut largest) = (f64::INFINITY, f64::NEG_INFINITY, 0.0_f64);
    let mut share_without = 0.0;
    for (number, value) in values.iter().enumerate() {
        let value = value.map(Quantity::si);
        if let Some(value) = value {
            (low, high, largest) = (low.min(value), high.max(value), largest.max(value.abs()));
        }
        if value.is_none_or(|value| of == MapOf::Width && value <= 0.0) {
            share_without += grid.share(number / grid.azimuths);
        }
    }
    let alike = |extreme: f64| -> Vec<usize> {
        (0..values.len())
            .filter(|number| grid.is_a_line_of_its_own(*number))
            .filter(|number| {
                values.get(*number).copied().flatten().is_some_and(|v| (v.si() - extreme).abs() <= ALIKE * largest)
            })
            .collect()
    };
    let (best, worst) = if of.larger_is_better() { (high, low) } else { (low, high) };
    Extremes { best: alike(best), worst: alike(worst), share_without }
}

impl Grid {
    /// Whether no earlier direction is the same line: of the vertical hole only the first azimuth is, of
    /// level holes those up to 180°.
    pub fn is_a_line_of_its_own(&self, number: usize) -> bool {
        let (row, column) = (number / self.azimuths, number % self.azimuths);
        match row {
            0 => column == 0,
            _ if row + 1 == self.rows => column < self.azimuths / 2,
            _ => true,
        }
    }
}
