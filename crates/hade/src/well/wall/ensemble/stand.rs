//! Between which pressures one drawn wall stands, or why the draw is left out.

use super::numbers::{Base, Numbers};
use crate::well::wall::shear::ShearWall;
use crate::well::wall::tension::{Parting, parting};

/// Why a draw is left out.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Left {
    /// The input of this number is outside its stated bounds.
    Outside(u8),
    /// No wall has such a number: a negative strength, a Poisson's ratio above 0.5.
    Impossible,
    /// SHmax is less than Shmin.
    Crossed,
    /// Beyond the stated frictional limit.
    BeyondFriction,
}

/// What one draw gives, in Pa.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(super) struct Stand {
    pub left: Option<Left>,
    /// The lower shear limit; `None` when no pressure is safe in shear.
    pub bottom: Option<f64>,
    /// The lowest of upper shear limit, initiation and S3; `None` when no pressure is safe in shear, or the wall
    /// parts or spalls at any.
    pub top: Option<f64>,
}

impl Stand {
    pub fn left_out(left: Left) -> Self {
        Stand { left: Some(left), ..Stand::default() }
    }

    /// Both ends, where there is a pressure between them.
    pub fn range(&self) -> Option<(f64, f64)> {
        Some((self.bottom?, self.top?)).filter(|(bottom, top)| bottom <= top)
    }
}

/// The stand of the wall of some numbers.
#[inline]
pub(super) fn stand_by_numbers(base: &Base, numbers: &Numbers, friction_ratio: Option<f64>) -> Stand {
    let Some(law) = numbers.law() else { return Stand::left_out(Left::Impossible) };
    if numbers.larger < numbers.smaller {
        return Stand::left_out(Left::Crossed);
    }
    let (s1, s3) = base.extremes(numbers);
    let least = s3 - numbers.pore;
    // An S3 at or below the pore pressure is beyond any friction.
    if friction_ratio.is_some_and(|ratio| least <= 0.0 || s1 - numbers.pore > ratio * least) {
        return Stand::left_out(Left::BeyondFriction);
    }
    stand_of(&base.wall(numbers, law), numbers.tensile, s3)
}

/// The stand of one wall.
#[inline]
pub(super) fn stand_of(wall: &ShearWall, tensile: f64, least_stress: f64) -> Stand {
    // Mostly the wall surely holds at S3, so that the top is S3, and neither of the other ends is looked for.
    if let Some(closed) = wall.closed_form()
        && closed.surely_holds(least_stress, tensile)
        && let Some(bottom) = closed.lower()
    {
        return Stand { left: None, bottom: Some(bottom), top: Some(least_stress) };
    }
    let Some([lower, upper]) = wall.ends() else { return Stand::default() };
    let part = match parting(wall.effective_wall(), wall.pore, tensile, wall.scale()) {
        Parting::At(peak) => Some(peak.value),
        Parting::Always { .. } => None,
    };
    let upper = upper.map_or(f64::INFINITY, |peak| peak.value);
    Stand { left: None, bottom: lower.map(|peak| peak.value), top: part.map(|part| upper.min(part).min(least_stress)) }
}
