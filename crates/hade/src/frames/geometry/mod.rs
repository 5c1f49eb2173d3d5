//! Geometry of lines and planes: the constructions that are otherwise done on a stereonet, and
//! the fits of axes and directions that were measured. Each result explains itself.

mod apparent_dip;
mod best_rotation;
mod line_at_rake;
mod nearest_axes;
mod plane_through_lines;
mod planes_intersection;
mod properties;
mod rake_of_line;

pub use apparent_dip::{ApparentDip, ApparentDipInputs};
pub use best_rotation::{BestRotation, BestRotationOutcome, DirectionPair};
pub use line_at_rake::{LineAtRake, LineAtRakeInputs, LineOutcome};
pub use nearest_axes::{FittedAxes, FittedAxesOutcome, MeasuredAxes};
pub(crate) use nearest_axes::{by_singular_values, nearest_orthonormal};
pub use plane_through_lines::{PlaneThroughLines, PlaneThroughLinesOutcome, TwoLines};
pub use planes_intersection::{PlanesIntersection, PlanesIntersectionOutcome, TwoPlanes};
pub use rake_of_line::{RakeOfLine, RakeOfLineInputs, RakeOfLineOutcome};

use super::vector::{V3, norm, scale};
use super::{Line, Plane};
use crate::card::{Item, Reference};
use crate::units::{Angle, Quantity, fixed};

/// Two lines or two planes closer than this, in degrees, are held to be parallel: neither the plane
/// of the lines nor the line of the planes can be had from them.
pub(crate) const PARALLEL: f64 = 1.0;

/// Below this angle, in degrees, a construction from two lines or planes is marked as uncertain.
const ACUTE: f64 = 15.0;

/// A line is taken as exactly horizontal or vertical within this angle, in radians.
const EXACT: f64 = 1e-12;

/// The line along a vector of any length and sign, by its lower end; a horizontal one by its trend
/// below 180°, a vertical one by trend 000°.
fn line_along(v: V3) -> Line {
    let level = v[0].hypot(v[1]);
    if level <= EXACT * v[2].abs() {
        return Line::along([0.0, 0.0, 1.0]);
    }
    if v[2].abs() > EXACT * level {
        return Line::along(v);
    }
    let flip = v[1] < 0.0 || (v[1] == 0.0 && v[0] < 0.0);
    Line::along([if flip { -v[0] } else { v[0] }, if flip { -v[1] } else { v[1] }, 0.0])
}

fn unit(v: V3) -> V3 {
    scale(v, 1.0 / norm(v))
}

/// Trend (from true north) and plunge in radians, checked.
fn trend_and_plunge(line: Line) -> Option<(f64, f64)> {
    line.vector().ok()?;
    Some((line.trend.true_north().ok()?.si(), line.plunge.si()))
}

/// Strike (from true north) and dip in radians, checked.
fn strike_and_dip(plane: Plane) -> Option<(f64, f64)> {
    plane.axes().ok()?;
    Some((plane.strike.true_north().ok()?.si(), plane.dip.si()))
}

/// The sine of the angle from a plane down to a line, by spherical trigonometry:
/// sin p cos d − cos p sin d sin(t − s). It is zero for a line in the plane, where it reads
/// tan p = tan d sin(t − s).
fn out_of_plane((t, p): (f64, f64), (s, d): (f64, f64)) -> f64 {
    p.sin() * d.cos() - p.cos() * d.sin() * (t - s).sin()
}

/// The angle between two directions given by azimuth and angle below horizontal, by the half-angle
/// formula: sin²(β/2) = sin²((p₁ − p₂)/2) + cos p₁ cos p₂ sin²((t₁ − t₂)/2).
fn angle_by_half_angles((t1, p1): (f64, f64), (t2, p2): (f64, f64)) -> f64 {
    let (u, v) = ((0.5 * (p1 - p2)).sin(), (0.5 * (t1 - t2)).sin());
    let square = u * u + p1.cos() * p2.cos() * v * v;
    2.0 * square.sqrt().min(1.0).asin()
}

/// The same between two lines, which have no sign: 0 to π/2.
fn lines_by_half_angles(a: (f64, f64), b: (f64, f64)) -> f64 {
    let direct = angle_by_half_angles(a, b);
    direct.min(angle_by_half_angles(a, (b.0 + std::f64::consts::PI, -b.1)))
}

/// A line as two inputs.
fn line_inputs(line: Line, n: &str, name: &str) -> [Item; 2] {
    [
        line.trend.item(&format!("t{n}"), &format!("trend of {name}")),
        Item::typed(&format!("p{n}"), format!("plunge of {name}, down positive"), line.plunge),
    ]
}

/// A line as two results.
fn line_results(line: Line, n: &str, name: &str) -> [Item; 2] {
    let [trend, plunge] = line_inputs(line, n, name);
    [trend, Item { shown: line.plunge.to_string(), ..plunge }]
}

/// A plane as two inputs.
fn plane_inputs(plane: Plane, n: &str, name: &str) -> [Item; 2] {
    [
        plane.strike.item(&format!("s{n}"), &format!("strike of {name}, dip to its right")),
        Item::typed(&format!("d{n}"), format!("dip of {name}"), plane.dip),
    ]
}

/// A plane as two results.
fn plane_results(plane: Plane, n: &str, name: &str) -> [Item; 2] {
    let [strike, dip] = plane_inputs(plane, n, name);
    [strike, Item { shown: plane.dip.to_string(), ..dip }]
}

/// "(0.123456, 0.234567, 0.345678)".
fn vector_words(v: V3) -> String {
    let [n, e, d] = v.map(|c| fixed(c, 6));
    format!("({n}, {e}, {d})")
}

/// An angle in degrees with four decimals, so that the next line of a step can be redone from it.
fn degrees(radians: f64) -> String {
    format!("{}°", fixed(radians.to_degrees(), 4))
}

fn angle(radians: f64) -> Angle {
    Angle::from_si(radians)
}

/// A textbook of these constructions.
fn textbook() -> Reference {
    Reference::new(
        "Priest, S.D. (1993) Discontinuity Analysis for Rock Engineering, Chapman & Hall, ch. 1 and appendix A (lines, planes and vectors; cited from memory)",
    )
}
