//! The checks of a wall's limits, by the second route: the criterion is just met at a limit, exceeded
//! nowhere just inside it, and exceeded just outside.

use super::limit::{Limit, LimitKind};
use super::limits::{LimitsInputs, LimitsOutcome};
use crate::card::Check;
use crate::units::{Pressure, Quantity};
use crate::well::wall::second_route::{ByVectors, bearing_check, outside};

/// Every limit of an outcome.
pub(super) fn check(inputs: &LimitsInputs, outcome: &LimitsOutcome) -> Vec<Check> {
    let Some(route) = ByVectors::new(&inputs.wall) else { return Vec::new() };
    let tensile = inputs.wall.inputs.rock.tensile_strength.si();
    let width = inputs.width.si();
    let mut checks = Vec::new();
    if width > 0.0 && outcome.lower_shear.pressure().is_some() {
        checks.extend(check_width(&route, &outcome.lower_shear, width));
    } else {
        checks.extend(check_shear(&route, &outcome.lower_shear, &outcome.upper_shear));
    }
    checks.extend(check_shear(&route, &outcome.upper_shear, &outcome.lower_shear));
    checks.extend(check_parting(&route, &outcome.initiation, tensile));
    checks.extend(check_parting(&route, &outcome.reopening, 0.0));
    let unit = route.size() * 1e-6;
    let [.., s3] = route.far().values_by_invariants();
    let number = |limit: &Limit| limit.pressure().map_or(f64::NAN, Pressure::in_mpa);
    checks.push(Check::compare(
        "least stress against the least root of the characteristic equation of S (trigonometric solution)",
        &[number(&outcome.least_stress)],
        &[s3 * 1e-6],
        unit * 1e-7,
        "MPa",
    ));
    checks.push(Check::compare(
        "pore pressure as stated",
        &[number(&outcome.pore_pressure)],
        &[inputs.wall.inputs.pore.in_mpa()],
        0.0,
        "MPa",
    ));
    checks
}

/// The place and the stresses of a limit at a pressure, by the second route.
fn check_place(route: &ByVectors, limit: &Limit, pressure: f64) -> Vec<Check> {
    let theta = limit.toolface().unwrap_or_default().si();
    let what = limit.kind().words();
    let unit = (route.size() + pressure.abs()) * 1e-6;
    let mut checks = Vec::new();
    if let Some(effective) = limit.effective() {
        checks.push(Check::compare(
            format!("{what}: σ'_1, σ'_2, σ'_3 there by eigenvalues of the whole tensor"),
            &effective.map(Pressure::in_mpa),
            &route.effective(theta, pressure).map(|v| v * 1e-6),
            unit * 1e-9,
            "MPa",
        ));
    }
    if limit.toolface().is_some() {
        checks.push(Check::holds(format!("{what}: tool face within 0–180°"), outside(theta), 0.0, "rad"));
    }
    if let Some(bearing) = limit.bearing() {
        let mut check = bearing_check(route.direction(theta), bearing);
        check.what = format!("{what}: {}", check.what);
        checks.push(check);
    }
    checks
}

/// A shear limit: the criterion is just met at its place, exceeded nowhere at it, and exceeded there
/// just beyond it; or, where no pressure is safe, the worst excess is as stated and grows both ways. Just
/// inside is no further than half-way to the other end.
fn check_shear(route: &ByVectors, limit: &Limit, other: &Limit) -> Vec<Check> {
    let what = limit.kind().words();
    let size = route.size();
    let unit = size * 1e-6;
    let theta = limit.toolface().unwrap_or_default().si();
    let nudge = 1e-7 * size;
    if let Some(pressure) = limit.pressure().map(Quantity::si) {
        let side = if limit.kind() == LimitKind::UpperShear { 1.0 } else { -1.0 };
        let room = other.pressure().map_or(f64::INFINITY, |other| side * (pressure - other.si()));
        let inside = if room > 0.0 { nudge.min(0.5 * room) } else { nudge };
        let mut checks = vec![
            Check::compare(
                format!("{what}: the margin is zero at its tool face"),
                &[route.excess(theta, pressure) * 1e-6],
                &[0.0],
                unit * 1e-9,
                "MPa",
            ),
            Check::holds(
                format!("{what}: the criterion is exceeded nowhere just inside it"),
                route.worst(pressure - side * inside) * 1e-6,
                unit * 1e-9,
                "MPa",
            ),
            Check::holds(
                format!("{what}: the criterion is exceeded just outside it"),
                -route.worst(pressure + side * nudge) * 1e-6,
                0.0,
                "MPa",
            ),
        ];
        checks.extend(check_place(route, limit, pressure));
        return checks;
    }
    if limit.is_unbounded() {
        let side = if limit.kind() == LimitKind::UpperShear { 1.0 } else { -1.0 };
        let far = [2.0, 8.0, 32.0].map(|share| route.worst(side * share * size) / (share * size));
        return vec![Check::holds(
            format!("{what}: none, nothing fails at pressures far on that side"),
            far.into_iter().fold(f64::NEG_INFINITY, f64::max),
            0.0,
            "",
        )];
    }
    let (Some(least), Some(short)) = (limit.least_bad().map(Quantity::si), limit.short_by()) else {
        return vec![Check::holds(format!("{what}: a least bad pressure is given"), f64::NAN, 0.0, "MPa")];
    };
    let excess = |p: f64| route.worst(p) * 1e-6;
    let beside = excess(least - 100.0 * nudge).min(excess(least + 100.0 * nudge));
    let mut checks = vec![
        Check::compare(
            // The least of a worst: where two places cross it is known to 1e-6 of the stresses.
            format!("{what}: worst excess at the least bad pressure, looking all round"),
            &[short.in_mpa()],
            &[excess(least)],
            unit * 1e-6,
            "MPa",
        ),
        Check::compare(
            format!("{what}: excess at the tool face of the worst place"),
            &[short.in_mpa()],
            &[route.excess(theta, least) * 1e-6],
            unit * 1e-8,
            "MPa",
        ),
        Check::holds(
            format!("{what}: the worst excess is no smaller at pressures beside the least bad one"),
            excess(least) - beside,
            unit * 1e-9,
            "MPa",
        ),
        Check::holds(format!("{what}: the wall fails at the least bad pressure"), -short.in_mpa(), 0.0, "MPa"),
    ];
    if let Some(own) = limit.own_side().map(Quantity::si) {
        // Places that fail there fail by the other side: more (or less) pressure makes them worse.
        let sense = if limit.kind() == LimitKind::UpperShear { -1.0 } else { 1.0 };
        let [inside, outside] = [sense, -sense].map(|side| route.worst_of_side(own + side * nudge, -sense) * 1e-6);
        checks.push(Check::holds(
            format!("{what}: just inside it by itself nothing fails by that side"),
            inside,
            unit * 1e-9,
            "MPa",
        ));
        checks.push(Check::holds(format!("{what}: just outside it something does"), -outside, 0.0, "MPa"));
    }
    checks.extend(check_place(route, limit, least));
    checks
}

/// A lower limit at a width: just above it the widest arc is within the width, just below it is not.
fn check_width(route: &ByVectors, limit: &Limit, width: f64) -> Vec<Check> {
    let what = limit.kind().words();
    let Some(pressure) = limit.pressure().map(Quantity::si) else { return Vec::new() };
    let nudge = 1e-7 * route.size();
    let over = |p: f64| (route.widest(p) - width).clamp(-10.0, 10.0);
    let mut checks = vec![
        Check::holds(
            format!("{what}: the widest arc just above it is within the allowed width, looking all round"),
            over(pressure + nudge),
            1e-9,
            "rad",
        ),
        Check::holds(
            format!("{what}: the widest arc just below it is beyond the allowed width"),
            if over(pressure - nudge) > 0.0 { 0.0 } else { 1.0 },
            0.0,
            "rad",
        ),
    ];
    checks.extend(check_place(route, limit, pressure));
    checks
}

/// A parting limit: the least effective principal stress is −T₀ at its place and nowhere less; or,
/// where no pressure is safe, it is beyond −T₀ as stated and more so at pressures beside.
fn check_parting(route: &ByVectors, limit: &Limit, tensile: f64) -> Vec<Check> {
    let what = limit.kind().words();
    let unit = route.size() * 1e-6;
    let theta = limit.toolface().unwrap_or_default().si();
    if let Some(pressure) = limit.pressure().map(Quantity::si) {
        let unit = unit + pressure.abs() * 1e-6;
        let mut checks = vec![
            Check::compare(
                format!("{what}: least effective principal stress at its tool face, by eigenvalues"),
                &[route.effective(theta, pressure)[2] * 1e-6],
                &[-tensile * 1e-6],
                unit * 1e-9,
                "MPa",
            ),
            Check::compare(
                format!("{what}: the least of it round the hole"),
                &[route.least_round(pressure) * 1e-6],
                &[-tensile * 1e-6],
                unit * 1e-8,
                "MPa",
            ),
        ];
        checks.extend(check_place(route, limit, pressure));
        return checks;
    }
    let (Some(least), Some(short)) = (limit.least_bad().map(Quantity::si), limit.short_by()) else {
        return vec![Check::holds(format!("{what}: a least bad pressure is given"), f64::NAN, 0.0, "MPa")];
    };
    let nudge = 1e-4 * route.size();
    let beyond = |p: f64| (-tensile - route.least_round(p)) * 1e-6;
    let beside = beyond(least - nudge).min(beyond(least + nudge));
    let [.., there] = route.effective(theta, least);
    let mut checks = vec![
        Check::compare(
            format!("{what}: least effective principal stress beyond −T₀ at the least bad pressure, looking all round"),
            &[short.in_mpa()],
            &[beyond(least)],
            unit * 1e-8,
            "MPa",
        ),
        Check::compare(
            format!("{what}: the same at its tool face"),
            &[short.in_mpa()],
            &[(-tensile - there) * 1e-6],
            unit * 1e-8,
            "MPa",
        ),
        Check::holds(
            format!("{what}: no less beyond at pressures beside it"),
            beyond(least) - beside,
            unit * 1e-9,
            "MPa",
        ),
    ];
    if let Some(own) = limit.own_side().map(Quantity::si) {
        checks.push(Check::compare(
            format!("{what}: by itself, least effective principal stress within the wall, looking all round"),
            &[route.least_in_wall_round(own) * 1e-6],
            &[-tensile * 1e-6],
            (unit + own.abs() * 1e-6) * 1e-8,
            "MPa",
        ));
    }
    checks.extend(check_place(route, limit, least));
    checks
}
