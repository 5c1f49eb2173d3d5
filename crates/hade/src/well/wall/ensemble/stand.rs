//! Between which pressures one drawn wall stands, or why the draw is left out.

use wide::f64x4;

use super::numbers::{Base, Numbers};
use crate::rock::{Law, MohrCoulomb};
use crate::well::wall::shear::{ClosedForm, ShearWall};
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

/// The stands of the walls of four draws, side by side as far as that tells, one by one where it does not.
pub(super) fn stands_by_numbers(base: &Base, numbers: &[Numbers; 4], friction_ratio: Option<f64>) -> [Stand; 4] {
    let counted = numbers.each_ref().map(|numbers| counted(base, numbers, friction_ratio));
    let told = side_by_side(base, numbers, &counted);
    let mut stands = [Stand::default(); 4];
    for (((stand, numbers), counted), told) in stands.iter_mut().zip(numbers).zip(counted).zip(told) {
        *stand = match (counted, told) {
            (Err(left), _) => Stand::left_out(left),
            (Ok(Counted { least, .. }), Some(bottom)) => Stand { left: None, bottom: Some(bottom), top: Some(least) },
            (Ok(Counted { law, least }), None) => stand_of(&base.wall(numbers, law), numbers.tensile, least),
        };
    }
    stands
}

/// A draw that counts.
#[derive(Clone, Copy)]
struct Counted {
    law: Law,
    /// S3.
    least: f64,
}

#[inline]
fn counted(base: &Base, numbers: &Numbers, friction_ratio: Option<f64>) -> Result<Counted, Left> {
    let law = numbers.law().ok_or(Left::Impossible)?;
    if numbers.larger < numbers.smaller {
        return Err(Left::Crossed);
    }
    let (s1, s3) = base.extremes(numbers);
    let least = s3 - numbers.pore;
    // An S3 at or below the pore pressure is beyond any friction.
    if friction_ratio.is_some_and(|ratio| least <= 0.0 || s1 - numbers.pore > ratio * least) {
        return Err(Left::BeyondFriction);
    }
    Ok(Counted { law, least: s3 })
}

/// The bottoms of those of four walls that surely hold at S3, so that this is their top, and whose lower end is found
/// by one climb: mostly all of them.
#[inline]
fn side_by_side(base: &Base, numbers: &[Numbers; 4], counted: &[Result<Counted, Left>; 4]) -> [Option<f64>; 4] {
    if !base.plain {
        return [None; 4];
    }
    // A draw that is left out asks nothing, whatever is worked out for it.
    let line = counted.map(|counted| match counted {
        Ok(Counted { law: Law::MohrCoulomb(line), .. }) => line,
        _ => MohrCoulomb { ucs: 0.0, q: 1.0 },
    });
    let line = MohrCoulomb { ucs: f64x4::new(line.map(|line| line.ucs)), q: f64x4::new(line.map(|line| line.q)) };
    let least = f64x4::new(counted.map(|counted| counted.map_or(0.0, |counted| counted.least)));
    let each = |of: fn(&Numbers) -> f64| f64x4::new(numbers.each_ref().map(of));
    let inclined = numbers.each_ref().map(|numbers| base.inclined(numbers));
    let inclined = (f64x4::new(inclined.map(|(sin, _)| sin)), f64x4::new(inclined.map(|(_, cos)| cos)));
    let towards = f64x4::new(numbers.each_ref().map(|numbers| base.towards(numbers))).sin_cos();
    let stresses = [each(|n| n.sv), each(|n| n.larger), each(|n| n.smaller)];
    let (pore, tensile) = (each(|n| n.pore), each(|n| n.tensile));
    let kirsch = base.kirsch(stresses, inclined, towards, each(|n| n.poisson));
    let closed = ClosedForm::new(kirsch, line, pore, kirsch.scale() + line.ucs + pore.abs());
    let (bottom, is_bottom) = closed.climbed_lower();
    let told = (is_bottom & closed.surely_holds(least, tensile)).to_bitmask();
    let mut bottoms = bottom.to_array().map(Some);
    for (k, bottom) in bottoms.iter_mut().enumerate() {
        *bottom = bottom.filter(|_| told >> k & 1 == 1);
    }
    bottoms
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
