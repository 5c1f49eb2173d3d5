//! The checks of tensile cracks: by the whole tensor in north, east, down, looking all round.

use std::f64::consts::{FRAC_PI_2, PI};

use super::tensile_cracks::{CrackPlace, CracksOutcome};
use crate::card::Check;
use crate::units::Quantity;
use crate::well::wall::second_route::{ByVectors, bearing_check, outside};
use crate::well::wall::setup::WallSetup;

pub(super) fn check(route: &ByVectors, setup: &WallSetup, pressure: f64, outcome: &CracksOutcome) -> Vec<Check> {
    let tensile = setup.inputs.rock.tensile_strength.si();
    let unit = (route.size() + pressure.abs() + tensile) * 1e-6;
    let small = unit * 1e-9;
    let least = |theta: f64| route.least_in_wall(theta, pressure) * 1e-6;
    let (lowest, _) = route.greatest(|theta| -least(theta));
    let mut checks = vec![Check::compare(
        "least effective principal stress in the wall by eigenvalues of the whole tensor, looking all round",
        &[outcome.least.in_mpa()],
        &[-lowest],
        small,
        "MPa",
    )];
    if let Some(first) = outcome.first {
        checks.extend(place(route, &first, pressure, outcome.least.in_mpa(), small));
    }
    if let Some(initiation) = outcome.initiation {
        let at = initiation.si();
        checks.push(Check::compare(
            "at initiation that stress is −T₀, looking all round",
            &[route.least_in_wall_round(at) * 1e-6],
            &[-tensile * 1e-6],
            small,
            "MPa",
        ));
        // Beside the place the stress in the wall is the test, also where it falls in step with the pressure.
        if let Some(first) = outcome.initiation_at {
            checks.extend(place(route, &first, at, -tensile * 1e-6, small));
        }
    }
    checks.extend(arcs(route, pressure, outcome, tensile * 1e-6, small));
    checks
}

/// A crack's place: the stress there, nothing but it on the crack's plane, and its bearing.
fn place(route: &ByVectors, place: &CrackPlace, pressure: f64, expected: f64, small: f64) -> Vec<Check> {
    let theta = place.toolface.si();
    let mut checks = vec![
        Check::compare(
            "least effective principal stress at a crack's tool face",
            &[route.least_in_wall(theta, pressure) * 1e-6],
            &[expected],
            small,
            "MPa",
        ),
        Check::holds("that tool face within 0–180°", outside(theta), 0.0, "rad"),
    ];
    if let Some(tilt) = place.tilt {
        let tilt = tilt.si();
        let (normal, shear) = route.on_crack(theta, tilt, pressure);
        checks.push(Check::compare(
            "normal and shear stress on the crack's plane, its trace turned right-handed about the outward direction: the least stress, and none",
            &[normal * 1e-6, shear * 1e-6],
            &[route.least_in_wall(theta, pressure) * 1e-6, 0.0],
            small,
            "MPa",
        ));
        let (_, far) = route.on_crack(theta + PI, -tilt, pressure);
        checks.push(Check::compare(
            "shear stress on the crack of the far side, tilted the other way",
            &[far * 1e-6],
            &[0.0],
            small,
            "MPa",
        ));
        let beyond = (tilt - FRAC_PI_2).max(-FRAC_PI_2 - tilt);
        checks.push(Check::holds("tilt within ±90°", beyond, 1e-15, "rad"));
    }
    if let Some(bearing) = place.bearing {
        checks.push(bearing_check(route.direction(theta), bearing));
    }
    checks
}

fn arcs(route: &ByVectors, pressure: f64, outcome: &CracksOutcome, tensile: f64, small: f64) -> Vec<Check> {
    let beyond = |theta: f64| -route.least_in_wall(theta, pressure) * 1e-6 - tensile;
    let mut checks = Vec::new();
    let (mut edges, mut sides) = (Vec::new(), 0.0_f64);
    for arc in outcome.list() {
        let (centre, half) = (arc.centre.si(), 0.5 * arc.width.si());
        sides = sides.max(outside(centre)).max(half - 0.5 * PI);
        if arc.whole_wall {
            checks.push(Check::compare("width of a wall parted all round", &[2.0 * half], &[PI], 1e-12, "rad"));
            let there = arc.first.map_or(0.0, |first| first.toolface.si());
            checks.push(Check::compare("its middle where the stress is least", &[centre], &[there], 1e-12, "rad"));
        } else {
            edges.extend([centre - half, centre + half].map(beyond));
            let nudge = (0.1 * half).min(1.75e-5);
            for side in [-1.0, 1.0] {
                sides = sides.max(-beyond(centre + side * (half - nudge))).max(beyond(centre + side * (half + nudge)));
            }
        }
        if let Some(first) = arc.first {
            // The least of the arc: none of its places is lower.
            let from = |k: u32| centre + half * (f64::from(k) / 20.0 - 1.0);
            let lowest = (0..=40).map(|k| beyond(from(k))).fold(f64::NEG_INFINITY, f64::max);
            let there = beyond(first.toolface.si());
            checks.push(Check::holds("no place of an arc is more parted than its first", lowest - there, small, "MPa"));
            checks.extend(place(route, &first, pressure, -there - tensile, small));
            let level = [-1.0, 1.0].map(|side| (beyond(first.toolface.si() + side * 1e-4) - there) / 1e-4);
            let slope = (level[0] - level[1]).abs() * 0.5;
            checks.push(Check::holds("and it is level there", slope, 1e5 * small, "MPa/rad"));
        }
    }
    if !edges.is_empty() {
        checks.push(Check::compare(
            "at the edges of the arcs the least stress is −T₀",
            &edges,
            &vec![0.0; edges.len()],
            small,
            "MPa",
        ));
    }
    checks.push(Check::holds("parted just inside each edge and not just outside", sides, small, "MPa"));
    let listed = |theta: f64| {
        outcome.list().any(|arc| {
            let off = (theta - arc.centre.si()).rem_euclid(PI);
            arc.whole_wall || off.min(PI - off) < 0.5 * arc.width.si()
        })
    };
    let wrong = (0..360_u32).map(|k| f64::from(k) * PI / 360.0).fold(0.0_f64, |wrong, theta| {
        let here = beyond(theta);
        if (here > 0.0) == listed(theta) { wrong } else { wrong.max(here.abs()) }
    });
    checks.push(Check::holds(
        "every half degree of the wall is parted where an arc is, and not elsewhere",
        wrong,
        small,
        "MPa",
    ));
    checks
}
