//! The checks of a recommended range, by the second route.

use super::range::{Governs, RangeEnd, RangeInputs, RangeOutcome, WIDTHS};
use super::second_route::ByVectors;
use crate::card::Check;
use crate::units::{Angle, Quantity};

/// Each condition that sets an end, by the second route, just inside and just outside it.
pub(super) fn check(inputs: &RangeInputs, outcome: &RangeOutcome) -> Vec<Check> {
    let Some(route) = ByVectors::new(&inputs.wall) else { return Vec::new() };
    let mut checks = Vec::new();
    if let Some(end) = outcome.bottom {
        checks.extend(check_bottom(&route, inputs, &end));
        checks.push(check_weights(inputs, "bottom", &end));
    }
    if let Some(end) = outcome.top {
        checks.extend(check_top(&route, inputs, end.pressure.si()));
        checks.push(check_weights(inputs, "top", &end));
    }
    if let (Some(bottom), Some(top), Some(breadth)) = (outcome.bottom, outcome.top, outcome.breadth) {
        checks.push(Check::compare(
            "bottom and breadth together make the top",
            &[(bottom.pressure + breadth).in_mpa()],
            &[top.pressure.in_mpa()],
            route.size() * 1e-6 * 1e-12,
            "MPa",
        ));
    }
    for (pressure, degrees) in outcome.at_widths.iter().zip(WIDTHS) {
        let Some(pressure) = pressure else { continue };
        let [inside, outside] = width_held(&route, pressure.si(), Angle::deg(degrees).si());
        checks.push(Check::holds(
            format!("lower shear limit at {degrees}°: arcs just above it are within the width, looking all round"),
            inside,
            1e-9,
            "rad",
        ));
        checks.push(Check::holds(
            format!("lower shear limit at {degrees}°: arcs just below it are not"),
            outside,
            0.0,
            "rad",
        ));
    }
    if outcome.bottom.is_none() {
        checks.push(Check::holds(
            "no pressure between zero and twice the largest stress keeps the arcs within the width",
            -tightest(&route, inputs),
            0.0,
            "rad",
        ));
        let least = outcome.least_bad.map_or(f64::NAN, Quantity::si);
        let nudge = 1e-5 * route.size();
        let beside = route.worst(least - nudge).min(route.worst(least + nudge));
        checks.push(Check::holds(
            "the worst place fails no less at pressures beside the least bad one",
            (route.worst(least) - beside) * 1e-6,
            route.size() * 1e-6 * 1e-9,
            "MPa",
        ));
    }
    checks
}

/// By how much the widest arc just above a pressure is beyond a width, and just below it within.
fn width_held(route: &ByVectors, pressure: f64, width: f64) -> [f64; 2] {
    let nudge = 1e-7 * route.size();
    // An arc too narrow for the looks still shows in the worst excess.
    let over = |p: f64| {
        let wider = (route.widest(p) - width).clamp(-10.0, 10.0);
        if width == 0.0 && wider <= 0.0 && route.worst(p) > 1e-11 * route.size() { 1e-9 } else { wider }
    };
    // What is just below must be wider, not merely no narrower.
    let below = over(pressure - nudge);
    [over(pressure + nudge), if below > 0.0 { -below } else { 1.0 - below }]
}

/// The bottom: where shear sets it, arcs are within the width just above it and not just below, and
/// the margin is kept; where the pore pressure does, it is that with its margin, and what too little
/// pressure makes fail there is within the width.
fn check_bottom(route: &ByVectors, inputs: &RangeInputs, end: &RangeEnd) -> [Check; 2] {
    let (bottom, width) = (end.pressure.si(), inputs.choices.allowed_width.si());
    let balance = inputs.wall.inputs.pore.si() + inputs.choices.margin_bottom.si();
    let unit = route.size() * 1e-6;
    if end.governed_by == Governs::PorePressure {
        return [
            Check::compare(
                "bottom: pore pressure and its margin",
                &[bottom * 1e-6],
                &[balance * 1e-6],
                unit * 1e-12,
                "MPa",
            ),
            Check::holds(
                "bottom: arcs that too little pressure makes fail are within the allowed width",
                (route.widest_closing(bottom + 1e-7 * route.size()) - width).clamp(-10.0, 10.0),
                1e-9,
                "rad",
            ),
        ];
    }
    let [inside, outside] = width_held(route, bottom, width);
    [
        Check::holds(
            "bottom: arcs within the allowed width just above it, and not just below",
            inside.max(outside),
            1e-9,
            "rad",
        ),
        Check::holds(
            "bottom: the margin over the pore pressure is kept",
            (balance - bottom) * 1e-6,
            unit * 1e-12,
            "MPa",
        ),
    ]
}

/// The top with its margin holds the three upper conditions just below, and breaks one just above.
fn check_top(route: &ByVectors, inputs: &RangeInputs, top: f64) -> [Check; 2] {
    let size = route.size();
    let nudge = 1e-7 * size;
    let bare = top + inputs.choices.margin_top.si();
    let tensile = inputs.wall.inputs.rock.tensile_strength.si();
    let [.., s3] = route.far().values_by_invariants();
    let broken = |p: f64| {
        ((p - s3) / size).max((-tensile - route.least_in_wall_round(p)) / size).max(route.worst_of_side(p, 1.0) / size)
    };
    [
        Check::holds(
            "top: S3, parting and shear all kept just below it (with its margin put back)",
            broken(bare - nudge),
            1e-9,
            "",
        ),
        Check::holds("top: one of the three lost just above it", -broken(bare + nudge), 0.0, ""),
    ]
}

/// ρ g TVD and gradient · TVD give the pressure back.
fn check_weights(inputs: &RangeInputs, name: &str, end: &RangeEnd) -> Check {
    let tvd = inputs.choices.tvd_below_rotary;
    let pressure = end.pressure.in_mpa();
    Check::compare(
        format!("{name}: the column of its mud weight, and its gradient times TVD, give the pressure back"),
        &[end.mud_weight.column(tvd).in_mpa(), (end.gradient * tvd).in_mpa()],
        &[pressure, pressure],
        1e-12 * pressure.abs().max(1e-6),
        "MPa",
    )
}

/// By how much the tightest of many pressures misses the allowed width.
fn tightest(route: &ByVectors, inputs: &RangeInputs) -> f64 {
    let width = inputs.choices.allowed_width.si();
    (0..=400).map(|k| route.widest(f64::from(k) * route.size() / 200.0)).fold(f64::INFINITY, f64::min).min(10.0) - width
}
