//! The field round a hole, depth of first failure, tensile cracks and traces, against solutions found
//! another way, and bad input.
#![cfg(test)]

use std::f64::consts::PI;

use proptest::prelude::*;

use super::*;
use crate::card::Explain;
use crate::frames::vector::{cross, dot, scale};
use crate::frames::{Azimuth, Plane};
use crate::rock::{Rock, Strength};
use crate::stress::Stress;
use crate::units::{Expansion, Pressure, Quantity, Units, Warming};

fn bedded(wall: Wall, strike: f64, dip: f64) -> Wall {
    let plane = Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() };
    wall.weak_plane(WeakPlane { plane, cohesion: 2.mpa(), friction_angle: 22.deg() }).unwrap()
}

#[test]
fn every_card_of_the_field_passes_replays_and_catches_each_perturbed_number() {
    for (name, wall) in walls() {
        hold(name, &wall.field_at(31.mpa(), 77.deg(), 1.35).unwrap());
        hold(name, &wall.field_at(31.mpa(), 77.deg(), 1.0).unwrap());
        hold(name, &wall.radial_profile(27.mpa(), 100.deg()).unwrap());
        for pressure in [24.0, 40.0, 55.0] {
            hold(name, &wall.failure_depth(pressure.mpa()).unwrap());
            hold(name, &wall.tensile_cracks(pressure.mpa()).unwrap());
        }
        let bedded = bedded(wall, 70.0, 30.0);
        hold(name, &bedded.failure_depth(32.mpa()).unwrap());
        hold(name, &bedded.unrolled(50.mpa(), 0.216.m()).unwrap());
    }
}

/// Kirsch's hole in an even far field has a failing ring in closed form: with A = S − P_p and
/// B = S − p, and the axial stress between, σ1' − q σ3' = A (1 − q) + B (1 + q) u = UCS.
#[test]
fn an_even_far_field_fails_in_a_ring_of_known_depth() {
    let wall = walls().into_iter().find(|(name, _)| *name == "isotropic").unwrap().1;
    let (q, ucs): (f64, f64) = (3.0, 2.0 * 10.0 * 3.0_f64.sqrt());
    for p in [4.0, 10.0, 14.0] {
        let u = (ucs - (40.0 - 20.0) * (1.0 - q)) / ((40.0 - p) * (1.0 + q));
        let depth = wall.failure_depth(p.mpa()).unwrap();
        if u < 1.0 {
            let deepest = depth.deepest().unwrap();
            assert!((deepest.radius_ratio - u.powf(-0.5)).abs() < 1e-10, "{p}: {}", deepest.radius_ratio);
            assert!(deepest.toolface.is_none());
            for toolface in [0.0, 77.0, 200.0] {
                let stretch = depth.at(toolface.deg()).unwrap();
                assert_eq!(stretch.len(), 1);
                assert!(stretch[0].0 == 1.0 && (stretch[0].1 - u.powf(-0.5)).abs() < 1e-10);
            }
        } else {
            assert!(!depth.fails());
        }
    }
    assert!(wall.failure_depth(4.mpa()).unwrap().fails() && !wall.failure_depth(28.mpa()).unwrap().fails());
}

/// The zone begins at the wall just where arcs fail there, and every place within it fails.
#[test]
fn the_zone_stands_on_the_failing_arcs_and_grows_as_the_pressure_falls() {
    let wall = state_b(35.0, 70.0, coulomb());
    let limit = wall.limits().lower_shear.pressure().unwrap();
    assert!(!wall.failure_depth(limit + 1000.pa()).unwrap().fails());
    let just = wall.failure_depth(limit - 1000.pa()).unwrap();
    let at = wall.limits().lower_shear.toolface().unwrap();
    assert!(just.fails() && just.deepest().unwrap().radius_ratio < 1.001);
    assert!((just.deepest().unwrap().toolface.unwrap() - at).abs() < 0.1.deg());
    let mut last = 1.0;
    for below in 1..8 {
        let p = limit - (2.0 * f64::from(below)).mpa();
        let depth = wall.failure_depth(p).unwrap();
        let deepest = depth.deepest().unwrap();
        assert!(deepest.radius_ratio > last, "{p}");
        last = deepest.radius_ratio;
        let arcs = wall.failing_arcs(p).unwrap().arcs();
        for k in 0..180 {
            let theta = f64::from(k).deg();
            let stretches = depth.at(theta).unwrap();
            let on_arc = arcs.iter().any(|arc| {
                let off = (theta.in_deg() - arc.centre.in_deg()).rem_euclid(180.0);
                off.min(180.0 - off) < 0.5 * arc.width.in_deg()
            });
            assert_eq!(stretches.first().is_some_and(|s| s.0 == 1.0), on_arc, "{p} {k}");
            for (from, to) in stretches {
                assert!(to <= deepest.radius_ratio + 1e-12);
                let margin = |r: f64| wall.field_at(p, theta, r).unwrap().margin;
                assert!(margin(0.5 * (from + to)) < 0.pa() && margin(to).abs() < 1.pa());
                assert!(margin(to * 1.0001) > 0.pa());
            }
        }
    }
}

/// Bedding may slip behind a wall that holds: the zone that does not touch the wall is found.
#[test]
fn a_zone_that_does_not_touch_the_wall_is_found() {
    let mut detached = 0;
    for (i, a, strike, dip) in [(35.0, 70.0, 70.0, 30.0), (60.0, 200.0, 20.0, 50.0), (0.0, 0.0, 120.0, 45.0)] {
        let wall = bedded(state_b(i, a, Strength::mohr_coulomb(40.mpa(), 40.deg())), strike, dip);
        for p in [30.0, 33.0, 36.0, 38.0, 40.0, 42.0] {
            let depth = wall.failure_depth(p.mpa()).unwrap();
            assert!(depth.card().passed());
            // By brute force on a fine net.
            let mut deepest = 0.0_f64;
            for k in 0..180 {
                for j in 0..200 {
                    let r = 1.0 + 0.01 * f64::from(j);
                    let at = wall.field_at(p.mpa(), f64::from(k).deg(), r).unwrap();
                    if at.margin.min_of(at.weak_plane_margin.unwrap()) < 0.0 {
                        deepest = deepest.max(r);
                    }
                }
            }
            let found = depth.deepest().map_or(0.0, |d| d.radius_ratio);
            assert!(found >= deepest && found - deepest < 0.03, "{p}: {found} {deepest}");
            if (0..180).any(|k| depth.at(f64::from(k).deg()).unwrap().first().is_some_and(|s| s.0 > 1.0)) {
                detached += 1;
            }
        }
    }
    assert!(detached > 0, "no case has a zone away from the wall");
}

trait MinOf {
    fn min_of(self, other: Self) -> f64;
}
impl MinOf for Pressure {
    fn min_of(self, other: Pressure) -> f64 {
        self.in_mpa().min(other.in_mpa())
    }
}

#[test]
fn a_far_field_beyond_strength_has_a_zone_without_end() {
    let wall = state_b(35.0, 70.0, Strength::mohr_coulomb_ucs(1.mpa(), 5.deg()));
    let depth = wall.failure_depth(40.mpa()).unwrap();
    assert!(depth.far_field_fails() && depth.fails() && depth.deepest().is_none());
    let card = depth.card();
    assert!(card.passed(), "{:#?}", card.checks);
    assert!(card.explanation.notes.iter().any(|n| n.starts_with("WARNING: the far-field stress")));
    assert!(depth.at(10.deg()).unwrap().last().unwrap().1.is_infinite());
    hold("deviated", &depth);
}

/// The tilt of a crack by the eigenvectors of the wall's whole tensor in north, east, down, turned
/// right-handed about the outward direction; and what it means on the wall.
#[test]
fn the_tilt_of_a_crack_is_that_of_the_eigenvector() {
    for (i, a) in [(50.0, 110.0), (90.0, 40.0), (130.0, 200.0), (12.0, 300.0)] {
        let stress = components([50.0, 42.0, 60.0, 3.0, 9.0, -8.0], i, a);
        let wall = Wall::new(WallInputs { stress, pore: 20.mpa(), rock: rock(coulomb()) }).unwrap();
        let cracks = wall.tensile_cracks(46.mpa()).unwrap();
        let q = wall.inputs().stress.attitude().unwrap().matrix().unwrap();
        let [top, right, along] = q;
        for (pressure, place) in [(46.mpa(), cracks.first()), (cracks.initiation().unwrap(), cracks.initiation_at())] {
            let place = place.unwrap();
            let tilt = place.tilt.unwrap().si();
            for (turn, tilt) in [(0.0, tilt), (PI, -tilt)] {
                let theta = place.toolface.si() + turn;
                let (s, c) = theta.sin_cos();
                let outward = crate::frames::vector::add(scale(top, c), scale(right, s));
                let at = wall.stress_at(pressure, crate::units::Angle::from_si(theta)).unwrap();
                let eigen = at.in_geographic().tensor().eigen();
                // The least principal stress: in the wall, since the pressure is above the pore pressure.
                let [.., normal] = eigen.axes;
                assert!(dot(normal, outward).abs() < 1e-7);
                let trace = cross(outward, normal);
                let trace = if dot(trace, along) < 0.0 { scale(trace, -1.0) } else { trace };
                let by_vectors = dot(outward, cross(along, trace)).atan2(dot(along, trace));
                assert!((by_vectors - tilt).abs() < 1e-6, "{i}/{a}: {by_vectors} {tilt}");
                // Clockwise: going down along it, the tool face falls.
                let around = crate::frames::vector::add(scale(right, c), scale(top, -s));
                assert!(dot(trace, around) * tilt < 0.0 && tilt.abs() > 0.01);
            }
        }
        let init = wall.limits().initiation;
        assert_eq!(cracks.initiation(), init.pressure());
    }
}

/// A vertical hole in an Andersonian field cracks along its axis at the azimuth of SHmax; one whose
/// axial stress is the least cracks across.
#[test]
fn cracks_of_a_vertical_hole_run_along_it_and_parted_arcs_are_symmetric() {
    let wall = state_b(0.0, 0.0, coulomb());
    let cracks = wall.tensile_cracks(50.mpa()).unwrap();
    let first = cracks.first().unwrap();
    assert!((first.bearing.unwrap().in_deg() - 30.0).abs() < 1e-6 && first.tilt.unwrap().in_deg().abs() < 1e-9);
    // Initiation: 3 Shmin − SHmax − Pp + T₀.
    assert!((cracks.initiation().unwrap().in_mpa() - (120.0 - 55.0 - 20.0 + 2.0)).abs() < 1e-9);
    let arcs = cracks.arcs();
    assert_eq!(arcs.len(), 1);
    assert!((arcs[0].centre.in_deg() - 30.0).abs() < 1e-9);
    // cos 2δ at the edge from σθ' = 95 − 30 cos 2δ − p − 20 = −2.
    let half = 0.5 * ((95.0_f64 - 50.0 - 20.0 + 2.0) / 30.0).acos().to_degrees();
    assert!((arcs[0].width.in_deg() - 2.0 * half).abs() < 1e-8, "{}", arcs[0].width.in_deg());
    assert!(!wall.tensile_cracks(46.mpa()).unwrap().any());

    let across = components([60.0, 60.0, 21.0, 0.0, 0.0, 0.0], 0.0, 0.0);
    let wall = Wall::new(WallInputs { stress: across, pore: 25.mpa(), rock: rock(coulomb()) }).unwrap();
    let cracks = wall.tensile_cracks(30.mpa()).unwrap();
    assert!(cracks.any() && cracks.arcs()[0].whole_wall && cracks.initiation().is_none());
    assert!((wall.shear.tilt(0.3, 30e6).unwrap().to_degrees() - 90.0).abs() < 1e-9);
    assert!(cracks.card().passed());
}

/// Where the lowest point of a plane's trace is, reasoned by hand. In a hole that rises, down the hole is
/// up, and the top of the hole is still its upper side.
#[test]
fn traces_in_rising_and_level_holes() {
    // A level hole north, a plane that strikes across it and dips 45° north: the trace goes farthest down
    // the hole (north) where the wall is lowest, at its bottom.
    let stress = components([50.0, 42.0, 60.0, 3.0, 9.0, -8.0], 90.0, 0.0);
    let level = Wall::new(WallInputs { stress, pore: 20.mpa(), rock: rock(coulomb()) }).unwrap();
    let image = bedded(level, 270.0, 45.0).unrolled(40.mpa(), 0.2.m()).unwrap();
    let plane = image.plane().unwrap();
    assert!((plane.half_height.unwrap().si() - 0.1).abs() < 1e-12);
    assert!((plane.toolface.unwrap().in_deg() - 180.0).abs() < 1e-9 && plane.bearing.is_none());
    // A hole that rises north at 45° goes square through a plane that dips north at 45°; one that dips
    // south at 45° holds its axis.
    let stress = components([50.0, 42.0, 60.0, 3.0, 9.0, -8.0], 135.0, 0.0);
    let rising = Wall::new(WallInputs { stress, pore: 20.mpa(), rock: rock(coulomb()) }).unwrap();
    let square = bedded(rising, 270.0, 45.0).unrolled(40.mpa(), 0.2.m()).unwrap();
    assert!(square.plane().unwrap().half_height.unwrap().si() < 1e-12 && square.plane().unwrap().toolface.is_none());
    let along = bedded(rising, 90.0, 45.0).unrolled(40.mpa(), 0.2.m()).unwrap();
    assert!(along.plane().unwrap().half_height.is_none());
    assert!((along.plane().unwrap().toolface.unwrap().in_deg() - 90.0).abs() < 1e-9);
    // The lower side of the hole is the last to come up to a level plane.
    let flat = bedded(rising, 0.0, 0.0).unrolled(40.mpa(), 0.2.m()).unwrap();
    assert!((flat.plane().unwrap().toolface.unwrap().in_deg() - 180.0).abs() < 1e-9);
    for image in [image, square, along, flat] {
        let card = image.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert!((image.length().si() - 0.2 * PI).abs() < 1e-15);
    }
}

#[test]
fn bad_input_to_the_field_is_refused_by_name() {
    let wall = state_b(35.0, 70.0, coulomb());
    let text = |r: crate::error::Result<FieldStress>| r.unwrap_err().to_string();
    assert_eq!(
        text(wall.field_at(30.mpa(), 0.deg(), 0.99)),
        "distance from the hole's axis, in hole radii, is 0.99, but it must be finite and at least 1 (the wall)."
    );
    assert!(wall.field_at(30.mpa(), 0.deg(), f64::NAN).is_err());
    assert!(wall.field_at(30.mpa(), 0.deg(), f64::INFINITY).is_err());
    assert!(text(wall.field_at(f64::NAN.mpa(), 0.deg(), 2.0)).starts_with("wall pressure is NaN"));
    assert!(text(wall.field_at(30.mpa(), f64::NAN.deg(), 2.0)).starts_with("tool face is NaN"));
    assert!(
        wall.radial_profile(30.mpa(), f64::NAN.deg()).is_err() && wall.radial_profile(f64::NAN.mpa(), 0.deg()).is_err()
    );
    assert!(wall.failure_depth(f64::INFINITY.mpa()).is_err() && wall.tensile_cracks(f64::NAN.mpa()).is_err());
    assert!(wall.failure_depth(30.mpa()).unwrap().at(f64::NAN.deg()).is_err());
    let image = |d: f64| wall.unrolled(30.mpa(), d.m()).unwrap_err().to_string();
    assert_eq!(image(0.0), "hole diameter is 0 m, but it must be above zero.");
    assert!(image(-0.2).starts_with("hole diameter is -0.2 m") && image(f64::NAN).starts_with("hole diameter is NaN"));
    assert!(wall.unrolled(f64::NAN.mpa(), 0.2.m()).is_err());
}

/// What is known at the wall alone is refused away from it, and only there.
#[test]
fn the_field_off_a_permeable_or_cooled_wall_is_refused() {
    let plain = state_b(35.0, 70.0, coulomb());
    let thermal = |kelvin: f64| {
        let warming = Warming::kelvin(kelvin);
        plain
            .thermal(Thermal { warming, youngs_modulus: 20_000.mpa(), expansion: Expansion::per_kelvin(1e-5) })
            .unwrap()
    };
    for (wall, word) in [(plain.permeable(0.9).unwrap(), "fluid passes"), (thermal(-15.0), "cooled or warmed")] {
        assert!(wall.field_at(33.mpa(), 20.deg(), 1.5).unwrap_err().to_string().contains(word));
        assert!(wall.radial_profile(33.mpa(), 20.deg()).is_err() && wall.failure_depth(33.mpa()).is_err());
        let (field, at) =
            (wall.field_at(33.mpa(), 20.deg(), 1.0).unwrap(), wall.stress_at(33.mpa(), 20.deg()).unwrap());
        assert!(field.hoop == at.hoop && field.axial == at.axial && field.effective == at.effective);
        hold("deviated", &field);
        hold("deviated", &wall.tensile_cracks(44.mpa()).unwrap());
        hold("deviated", &wall.unrolled(44.mpa(), 0.216.m()).unwrap());
    }
    for wall in [plain.partly_sealed(0.9, 1.0).unwrap(), thermal(0.0)] {
        assert!(wall.field_at(33.mpa(), 20.deg(), 1.5).is_ok() && wall.failure_depth(33.mpa()).is_ok());
    }
}

#[test]
fn rock_that_creeps_is_warned_of_on_every_card() {
    let wall = state_b(35.0, 70.0, coulomb()).in_creeping_rock();
    for card in [
        wall.field_at(33.mpa(), 20.deg(), 1.5).unwrap().card(),
        wall.radial_profile(33.mpa(), 20.deg()).unwrap().card(),
        wall.failure_depth(33.mpa()).unwrap().card(),
        wall.tensile_cracks(33.mpa()).unwrap().card(),
        wall.unrolled(33.mpa(), 0.216.m()).unwrap().card(),
    ] {
        assert!(card.explanation.notes[0].starts_with("WARNING: the rock creeps"), "{}", card.title());
        assert!(card.explanation.topics.contains(&"creep".to_owned()));
    }
}

fn any_wall() -> impl Strategy<Value = Wall> {
    let stress = (20.0..80.0_f64, 20.0..80.0_f64, 20.0..80.0_f64, -6.0..6.0_f64, -6.0..6.0_f64, -6.0..6.0_f64);
    let at = (0.0..180.0_f64, 0.0..360.0_f64, 5.0..25.0_f64);
    let rock = (0.0..0.5_f64, 0.0..8.0_f64, 2.0..40.0_f64, 0.0..50.0_f64, 0..3_u8);
    let plane = prop::option::of((0.0..360.0_f64, 0.0..90.0_f64));
    (stress, at, rock, plane).prop_map(
        |((nn, ee, dd, ne, ed, nd), (i, a, pore), (poisson, tensile, c, phi, law), plane)| {
            let (c, phi) = (c.mpa(), phi.deg());
            let strength = match law {
                0 => Strength::mohr_coulomb(c, phi),
                1 => Strength::mogi_coulomb(c, phi),
                _ => Strength::drucker_prager_circumscribed(c, phi),
            };
            let rock = Rock { poisson, tensile_strength: tensile.mpa(), strength };
            let stress = components([nn, ee, dd, ne, ed, nd], i, a);
            let wall = Wall::new(WallInputs { stress, pore: pore.mpa(), rock }).unwrap();
            plane.map_or(wall, |(strike, dip)| bedded(wall, strike, dip))
        },
    )
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(32))]

    #[test]
    fn every_field_passes_its_own_checks(
        wall in any_wall(), pressure in 0.0..70.0_f64, toolface in 0.0..360.0_f64, ratio in 1.0..8.0_f64,
    ) {
        for card in [
            wall.field_at(pressure.mpa(), toolface.deg(), ratio).unwrap().card(),
            wall.radial_profile(pressure.mpa(), toolface.deg()).unwrap().card(),
            wall.failure_depth(pressure.mpa()).unwrap().card(),
            wall.unrolled(pressure.mpa(), 0.216.m()).unwrap().card(),
        ] {
            let failed: Vec<_> = card.checks.iter().filter(|c| !c.passed).collect();
            prop_assert!(card.passed(), "{}: {failed:#?}", card.title());
        }
    }
}

/// A transposed turn leaves every invariant alone; the checks of the field see it.
#[test]
fn a_transposed_turn_turns_a_check_of_the_field_red() {
    let wall = bedded(state_b(35.0, 70.0, coulomb()), 20.0, 40.0);
    let q = wall.inputs().stress.attitude().unwrap().matrix().unwrap();
    let far = wall.inputs().stress.geographic();
    let wrong = far.turned(&crate::frames::vector::transpose(&q));
    let axes = wall.inputs().stress.axes();
    let stress = Stress::of(wrong, crate::stress::Made::Combined { parts: None }, Some((far, axes)));
    let wrong = Wall::of(WallSetup { inputs: WallInputs { stress, ..wall.inputs() }, ..wall.setup }).unwrap();
    assert!(!wrong.field_at(31.mpa(), 77.deg(), 1.4).unwrap().card().passed());
    assert!(!wrong.radial_profile(31.mpa(), 77.deg()).unwrap().card().passed());
    assert!(!wrong.failure_depth(31.mpa()).unwrap().card().passed());
    assert!(!wrong.tensile_cracks(45.mpa()).unwrap().card().passed());
    assert!(!wrong.unrolled(45.mpa(), 0.216.m()).unwrap().card().passed());
}
