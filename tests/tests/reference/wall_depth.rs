//! Depth of first failure and tilt of tensile cracks against numpy and scipy: `tests/scripts/wall_depth.py`
//! writes the field in complex potentials and takes principal values and axes from LAPACK.

use hade::prelude::*;
use hade::rock::{Rock, Strength};
use hade::well::{Wall, WallInputs, WeakPlane};
use hade_tests::{agree, data, number, numbers};
use serde_json::Value;

/// A hole in whose axes the far field, and the normal of the plane of weakness, are the case's.
fn wall(case: &Value) -> Wall {
    let azimuth = Azimuth::from_true_north(120.deg());
    let chain = Attitude { inclination: 42.deg(), azimuth }.chain().expect("a chain");
    let q = chain.matrix();
    let [x, y, z, xy, yz, xz] = <[f64; 6]>::try_from(numbers(case, "far")).expect("six components");
    let s = [[x, xy, xz], [xy, y, yz], [xz, yz, z]];
    let at = |a: usize, b: usize| {
        (0..3).flat_map(|i| (0..3).map(move |j| (i, j))).map(|(i, j)| q[i][a] * s[i][j] * q[j][b]).sum::<f64>().mpa()
    };
    let components = Components { nn: at(0, 0), ee: at(1, 1), dd: at(2, 2), ne: at(0, 1), nd: at(0, 2), ed: at(1, 2) };
    let stress = chain.carry(&Stress::from_components(components).expect("finite components"));
    let strength = Strength::mohr_coulomb(number(case, "c").mpa(), number(case, "phi").deg());
    let rock = Rock { poisson: number(case, "poisson"), tensile_strength: 2.mpa(), strength };
    let wall = Wall::new(WallInputs { stress, pore: number(case, "pore").mpa(), rock }).expect("a wall");
    if case.get("normal").is_none() {
        return wall;
    }
    // Strike and dip of the plane, by hand from its normal taken out of the hole's axes.
    let normal = numbers(case, "normal");
    let [n, e, d] = [0, 1, 2].map(|i| (0..3).map(|k| q[k][i] * normal[k]).sum::<f64>());
    let sense = if d < 0.0 { -1.0 } else { 1.0 };
    let (n, e, d) = (sense * n, sense * e, sense * d);
    // A normal that points down leans against the dip.
    let dip_direction = (-e).atan2(-n).to_degrees();
    let strike = Azimuth::from_true_north((dip_direction - 90.0).rem_euclid(360.0).deg());
    let plane = Plane { strike, dip: n.hypot(e).atan2(d).rad() };
    let weak = WeakPlane { plane, cohesion: number(case, "c_w").mpa(), friction_angle: number(case, "phi_w").deg() };
    wall.weak_plane(weak).expect("a plane of weakness")
}

fn stored() -> Vec<Value> {
    let path = data().join("reference").join("wall_depth.json");
    let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    let all: Value = serde_json::from_str(&text).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    let cases = all["cases"].as_array().expect("cases").clone();
    assert!(cases.len() > 8);
    cases
}

/// Edges of the failing zone along five radii to 1e-9 radii, one zone of them away from the wall; the
/// deepest place to 1e-9 radii and 0.001°.
#[test]
fn depth_of_first_failure() {
    let (mut away, mut most) = (0, 0.0_f64);
    for case in stored() {
        let depth = wall(&case).failure_depth(number(&case, "pressure").mpa()).expect("a depth");
        let lists = case["stretches"].as_array().expect("stretches");
        for (toolface, wanted) in numbers(&case, "tool_faces").into_iter().zip(lists) {
            let wanted: Vec<Vec<f64>> = serde_json::from_value(wanted.clone()).expect("stretches");
            let got = depth.at(toolface.deg()).expect("stretches");
            assert_eq!(got.len(), wanted.len(), "{case}");
            for ((from, to), wanted) in got.into_iter().zip(wanted) {
                most = most.max((from - wanted[0]).abs()).max((to - wanted[1]).abs());
                assert!(agree(from, wanted[0], 1e-9) && agree(to, wanted[1], 1e-9), "{from} {to} {case}");
                away += i32::from(from > 1.0);
            }
        }
        match (depth.deepest(), case["deepest"].as_array()) {
            (Some(deepest), Some(_)) => {
                let wanted = numbers(&case, "deepest");
                most = most.max((deepest.radius_ratio - wanted[0]).abs());
                assert!(agree(deepest.radius_ratio, wanted[0], 1e-9), "{} {case}", deepest.radius_ratio);
                assert!(agree(deepest.toolface.expect("a tool face").in_deg(), wanted[1], 1e-3), "{case}");
            }
            (None, None) => {}
            other => panic!("{other:?} {case}"),
        }
    }
    eprintln!("depth: off by at most {most:.1e} radii");
    assert!(away > 0, "no zone away from the wall");
}

/// Least stress in the wall to 1e-9 MPa, its tool face and the tilt of the crack there to 0.0001°.
#[test]
fn tilt_of_tensile_cracks() {
    let (mut most, mut senses) = (0.0_f64, [false; 2]);
    for case in stored() {
        let cracks = wall(&case).tensile_cracks(number(&case, "pressure").mpa()).expect("cracks");
        let wanted = numbers(&case, "crack");
        let first = cracks.first().expect("a place");
        let tilt = first.tilt.expect("a tilt").in_deg();
        assert!(agree(cracks.least_stress().in_mpa(), wanted[0], 1e-9), "{case}");
        assert!(agree(first.toolface.in_deg(), wanted[1], 1e-4), "{} {case}", first.toolface.in_deg());
        assert!(agree(tilt, wanted[2], 1e-4), "{tilt} {case}");
        most = most.max((tilt - wanted[2]).abs());
        senses[usize::from(tilt > 0.0)] = true;
        assert_eq!(cracks.any(), wanted[0] < -2.0, "{case}");
    }
    eprintln!("tilt: off by at most {most:.1e}°");
    assert_eq!(senses, [true; 2], "both senses of tilt");
}
