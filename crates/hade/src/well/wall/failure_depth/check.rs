//! The checks of a depth of failure: by complex potentials and the whole tensor, looking everywhere.

use super::failure_depth::{DepthOutcome, toolface};
use crate::card::Check;
use crate::units::Quantity;
use crate::well::wall::second_route::{ByPotentials, ByVectors, along_ray, bearing_check, outside};
use crate::well::wall::stress::field_method::far_check;
use crate::well::wall::{AtPressure, Wall};

pub(super) fn check(inputs: &AtPressure, outcome: &DepthOutcome) -> Vec<Check> {
    let (Some(vectors), Some(route)) = (ByVectors::new(&inputs.wall), ByPotentials::new(&inputs.wall)) else {
        return Vec::new();
    };
    let Ok(wall) = Wall::of(inputs.wall) else { return Vec::new() };
    let pressure = inputs.pressure.si();
    let unit = (vectors.size() + pressure.abs()) * 1e-6;
    let small = unit * 1e-9;
    let excess = |theta: f64, ratio: f64| route.excess(theta, ratio, pressure) * 1e-6;
    let margin = outcome.least_margin.in_mpa();
    let worst = (outcome.worst_toolface.unwrap_or_default().si(), outcome.worst_ratio.unwrap_or(f64::INFINITY));
    let mut checks = vec![
        Check::compare(
            "margin at the worst place by complex potentials and the whole tensor",
            &[margin],
            &[-excess(worst.0, worst.1)],
            small,
            "MPa",
        ),
        Check::holds("that place at 1 radius or more", 1.0 - worst.1, 0.0, "radii"),
        Check::holds("and its tool face within 0–180°", outside(worst.0), 0.0, "rad"),
        far_check(&wall, &vectors, worst.0, pressure),
    ];
    // Everywhere at once: no place is worse, and none fails beyond the deepest.
    let deepest = outcome.deepest.map_or(1.0, |d| d.radius_ratio);
    let (mut worse, mut beyond) = (0.0_f64, 0.0_f64);
    for (theta, ratio) in route.everywhere() {
        let here = excess(theta, ratio);
        worse = worse.max(here + margin);
        if !outcome.far_field_fails && (ratio > deepest || outcome.deepest.is_none()) {
            beyond = beyond.max(here);
        }
    }
    checks.push(Check::holds("no place from the wall to infinity is worse, looking everywhere", worse, small, "MPa"));
    checks.push(Check::holds("and nothing fails farther out than the deepest place", beyond, small, "MPa"));
    let far = excess(0.0, f64::INFINITY);
    let far_wrong = if (far > small) == outcome.far_field_fails { 0.0 } else { far.abs() };
    checks.push(Check::holds("whether the far field itself is beyond the strength", far_wrong, small, "MPa"));
    if let Some(found) = outcome.deepest {
        let theta = found.toolface.unwrap_or_default().si();
        let r = found.radius_ratio;
        // Just inside it fails; at a tool face a degree off it fails less deep.
        let mut wrong = -excess(theta, 1.0 + (r - 1.0) * (1.0 - 1e-6));
        for side in [-1.0, 1.0] {
            wrong = wrong.max(excess(theta + side * 0.01, r * (1.0 + 1e-9)));
        }
        checks.push(Check::compare("margin at the deepest place is zero", &[excess(theta, r)], &[0.0], small, "MPa"));
        checks.push(Check::holds("fails just inside it and not so deep 0.01 rad to either side", wrong, small, "MPa"));
        checks.push(Check::holds(
            "that tool face within 0–180°, at 1 radius or more",
            outside(theta).max(1.0 - r),
            0.0,
            "",
        ));
        if let (Some(_), Some(bearing)) = (found.toolface, found.bearing) {
            checks.push(bearing_check(vectors.direction(theta), bearing));
        }
    }
    checks.extend(table(outcome, &excess, small));
    checks
}

/// The table: zero margin at both ends of each row, nothing outside them.
fn table(outcome: &DepthOutcome, excess: &impl Fn(f64, f64) -> f64, small: f64) -> Vec<Check> {
    let (mut ends, mut outside_row, mut steps) = (Vec::new(), 0.0_f64, 0.0_f64);
    for (k, place) in outcome.reach.iter().enumerate() {
        let theta = toolface(k);
        let (near, far) = place.map_or((f64::INFINITY, 1.0), |(near, far)| (near, far.unwrap_or(f64::INFINITY)));
        for ratio in along_ray().filter(|ratio| place.is_none() || *ratio < near || *ratio > far) {
            outside_row = outside_row.max(excess(theta, ratio));
        }
        if place.is_some() {
            if near > 1.0 {
                ends.push(excess(theta, near));
            } else {
                steps = steps.max((1.0 - near).abs()).max(-excess(theta, 1.0));
            }
            if far.is_finite() {
                ends.push(excess(theta, far));
            }
            steps = steps.max(near - far);
        }
    }
    let mut checks = vec![
        Check::holds("no place outside the distances of the table fails", outside_row, small, "MPa"),
        Check::holds(
            "distances of the table begin at the wall or behind it, which fails where they begin at it, and rise",
            steps,
            small,
            "",
        ),
    ];
    if !ends.is_empty() {
        checks.push(Check::compare(
            "margin at the ends of the distances of the table is zero",
            &ends,
            &vec![0.0; ends.len()],
            small,
            "MPa",
        ));
    }
    checks
}
