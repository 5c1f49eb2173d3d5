//! A tool face that came out, and its bearing.

use crate::card::Check;
use crate::frames::vector::wrap;
use crate::units::{Angle, Quantity};

/// A bearing against the horizontal part of a direction: the same way, and within 0–360°.
pub(crate) fn bearing_check([north, east, _]: [f64; 3], bearing: Angle) -> Check {
    let length = north.hypot(east);
    let got = [bearing.si().cos(), bearing.si().sin(), wrap(bearing.si()) - bearing.si()];
    Check::compare(
        "bearing as a unit vector against the horizontal part of the tool face's direction",
        &got,
        &[north / length, east / length, 0.0],
        1e-9,
        "",
    )
}

/// By how much a tool face is outside 0–180°.
pub(crate) fn outside(theta: f64) -> f64 {
    (-theta).max(theta - std::f64::consts::PI).max(0.0)
}
