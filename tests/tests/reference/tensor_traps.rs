//! Where lines, planes and tensors go wrong, each with a number from an independent numpy/scipy
//! implementation (compression positive, MPa, degrees).

use super::stress::{six_of, stress_of, true_azimuth};
use hade::card::Explain;
use hade::prelude::*;
use hade_tests::{agree, assert_printed};

fn line(trend: f64, plunge: f64) -> Line {
    Line { trend: true_azimuth(trend), plunge: plunge.deg() }
}
fn other_end(l: Line) -> Line {
    Line { trend: l.trend.turned_by(180.deg()), plunge: -l.plunge }
}
fn unit(l: Line) -> [f64; 3] {
    let (t, p) = (l.trend.true_north().unwrap().in_rad(), l.plunge.in_rad());
    [p.cos() * t.cos(), p.cos() * t.sin(), p.sin()]
}
fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

/// Lines have no sign. Three measured lines that happen to form a left-handed set must be turned
/// round, not "corrected" to a right-handed set of directions, which is off by up to 19.7 MPa here.
#[test]
fn lines_of_a_left_handed_set_are_turned_round() {
    let magnitudes = [60.0, 40.0, 20.0];
    let lines = [line(35.0, 12.0), line(127.0, 8.0), line(200.0, 72.0)];
    let with = |lines: [Line; 3]| Stress::from_principals([0, 1, 2].map(|k| (magnitudes[k].mpa(), lines[k]))).unwrap();
    let right = with(lines);
    let reversed = [lines[0], lines[1], other_end(lines[2])];
    assert!(with(reversed).is_close(&right, 1e-6.mpa()));
    let misfits = |l: [Line; 3]| MeasuredAxes { lines: l }.fitted().unwrap().misfits().map(|m| m.in_deg());
    assert!(misfits(lines).iter().zip(misfits(reversed)).all(|(a, b)| agree(*a, b, 1e-9)));

    // As directions, with a sense, the two sets differ: one of them fits a reflection better, and
    // the best rotation of that one gives the wrong tensor.
    let axes = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
    let as_directions = |l: [Line; 3]| {
        let pairs = [0, 1, 2].map(|k| DirectionPair { reference: axes[k], measured: unit(l[k]), weight: 1.0 });
        BestRotation::of(&pairs).unwrap()
    };
    let fits = [lines, reversed].map(as_directions);
    assert_ne!(fits[0].favours_reflection(), fits[1].favours_reflection());
    for fit in fits {
        let columns = axes.map(|axis| fit.turn(axis));
        let component = |i: usize, j: usize| (0..3).map(|k| magnitudes[k] * columns[k][i] * columns[k][j]).sum::<f64>();
        let six =
            [component(0, 0), component(1, 1), component(2, 2), component(0, 1), component(1, 2), component(0, 2)];
        let off = six.iter().zip(six_of(&right)).map(|(a, b)| (a - b).abs()).fold(0.0, f64::max);
        if fit.favours_reflection() {
            assert_printed("largest error of a component", off, "19.7");
            assert!(fit.card().explanation.notes[0].contains("reflection"));
        } else {
            assert!(off < 1e-9, "{off}");
        }
    }
}

/// The sign of an eigenvector is arbitrary: axes are given by their lower end, as a right-handed
/// set, and a horizontal one has two equal trends.
#[test]
fn principal_axes_are_lines_by_their_lower_ends() {
    for six in
        [[52.0, 66.0, 41.0, -5.4, -2.3, -1.9], [50.0, 42.0, 60.0, 3.0, 9.0, -8.0], [50.0, 40.0, 60.0, 5.0, 0.0, 0.0]]
    {
        let s = stress_of(&six);
        let lines = s.principals().lines().map(|l| l.expect("three different magnitudes"));
        for l in lines {
            assert!(l.plunge.in_deg() >= 0.0, "{l:?}");
            // The axis carries its own stress and no shear, by either end.
            for end in [l, other_end(l)] {
                assert!(end.angle_to(&l).unwrap().in_deg() < 1e-12);
                let across = Plane::across(end).unwrap();
                assert!(s.on(across).unwrap().shear.in_mpa() < 1e-12 * 66.0, "{six:?}");
            }
        }
        let magnitudes = s.principals().magnitudes();
        let back = |ends: [Line; 3]| Stress::from_principals([0, 1, 2].map(|k| (magnitudes[k], ends[k]))).unwrap();
        assert!(back(lines).is_close(&s, 1e-9.mpa()));
        assert!(back([other_end(lines[0]), lines[1], other_end(lines[2])]).is_close(&s, 1e-9.mpa()));
    }
    assert!(line(215.0, 0.0).angle_to(&line(35.0, 0.0)).unwrap().in_deg() < 1e-12);
}

/// Of equal magnitudes the axes are undefined: a shear of 1e-13 MPa would turn them by 45°. What is
/// defined is the plane they lie in.
#[test]
fn axes_of_equal_magnitudes_are_not_reported() {
    let [exact, touched] = [0.0, 1e-13].map(|shear| stress_of(&[30.0, 30.0, 55.0, shear, 0.0, 0.0]));
    for s in [exact, touched] {
        let lines = s.principals().lines();
        assert_eq!([lines[1], lines[2]], [None, None]);
        let s1 = lines[0].expect("the axis of S1");
        assert!(s1.plunge.in_deg() > 89.999_999);
        assert_eq!(s.horizontal_stresses().sh_max_azimuth, None);
        // The projector on their plane: any vertical plane bears 30 MPa and no shear.
        for strike in [0.0, 45.0, 77.0, 160.0] {
            let t = s.on(Plane { strike: true_azimuth(strike), dip: 90.deg() }).unwrap();
            assert!(agree(t.normal.in_mpa(), 30.0, 1e-12) && t.shear.in_mpa() < 1e-12, "{strike}");
        }
        let a_phi = s.a_phi();
        assert!(agree(a_phi.a_phi.unwrap(), 0.0, 1e-12) && agree(a_phi.tilt.unwrap().in_deg(), 0.0, 1e-6));
    }
}

/// Where the axes tilt, the azimuth of SHmax is not the trend of S1. Magnitudes 60, 50, 25 MPa along axes at
/// 023/26, 122/17 and 241/58: S1 trends 23.0, SHmax points to 179.15 and is 55.11 MPa.
#[test]
fn azimuth_of_sh_max_is_not_the_trend_of_s1() {
    let s = stress_of(&[
        55.11260190779539,
        45.76942600836997,
        34.117972083834665,
        -0.13849376495871235,
        11.4347729767146,
        9.14271041868944,
    ]);
    let magnitudes = s.principals().magnitudes().map(|m| m.in_mpa());
    assert!(magnitudes.iter().zip([60.0, 50.0, 25.0]).all(|(a, b)| agree(*a, b, 1e-10)), "{magnitudes:?}");
    let h = s.horizontal_stresses();
    assert_printed("SHmax", h.sh_max.in_mpa(), "55.11");
    assert_printed("azimuth of SHmax", h.sh_max_azimuth.unwrap().true_north().unwrap().in_deg(), "179.15");
    assert_printed("trend of S1", s.principals().lines()[0].unwrap().trend.true_north().unwrap().in_deg(), "23.0");
    // The card says both.
    let notes = h.card().explanation.notes.join(" ");
    assert!(notes.contains("azimuth of S_Hmax, 179.2°"), "{notes}");
    assert!(notes.contains("not the trend of S_1, 023.0°"), "{notes}");
}

/// The Lode angle by the arc cosine of J3 is 0 for diag(50, 30 + 1e-9, 30); by the arc tangent it is
/// 2.5e-9 degrees. Where J2 is zero there is none, and an argument above 1 never makes it NaN.
#[test]
fn lode_angle_keeps_its_figures_near_nought() {
    let lode = |six: [f64; 6]| stress_of(&six).invariants().lode();
    let tiny = lode([50.0, 30.0 + 1e-9, 30.0, 0.0, 0.0, 0.0]).unwrap().in_deg();
    assert_printed("Lode angle in 1e-9 degrees", tiny * 1e9, "2.5");
    assert_eq!(lode([40.0, 40.0, 40.0, 0.0, 0.0, 0.0]), None);
    // States of triaxial compression and extension in turned axes, where rounding may push the
    // arc cosine's argument beyond 1.
    let mut beyond = 0;
    for k in 0..360 {
        let (s, c) = f64::from(k).to_radians().sin_cos();
        for (uniaxial, want) in [(25.0, 0.0), (-25.0, 60.0)] {
            let axis = [c * 0.6, s * 0.6, 0.8];
            let part = |i: usize, j: usize| uniaxial * axis[i] * axis[j];
            let i = stress_of(&[
                30.0 + part(0, 0),
                30.0 + part(1, 1),
                30.0 + part(2, 2),
                part(0, 1),
                part(1, 2),
                part(0, 2),
            ])
            .invariants();
            let got = i.lode().unwrap().in_deg();
            assert!(agree(got, want, 1e-11), "{k}: {got}");
            let cosine = 1.5 * 3.0_f64.sqrt() * i.j3_in_mpa3() / i.j2_in_mpa2().powf(1.5);
            beyond += u32::from(cosine.abs() > 1.0);
        }
    }
    assert!(beyond > 0, "no argument beyond 1 was met");
}

/// Where the vertical stress equals a horizontal one, either name of the regime gives the same
/// A_φ; the value is what counts. Of three equal stresses there is none.
#[test]
fn a_phi_on_the_boundaries_of_regimes() {
    let of = |sv: f64, sh_max: f64, sh_min: f64| {
        Stress::from_horizontals(Horizontals {
            sv: sv.mpa(),
            sh_max: sh_max.mpa(),
            sh_min: sh_min.mpa(),
            sh_max_azimuth: true_azimuth(30.0),
        })
        .unwrap()
        .a_phi()
    };
    for (sv, want) in [(55.0, 1.0), (40.0, 2.0)] {
        let at = of(sv, 55.0, 40.0);
        assert!(agree(at.a_phi.unwrap(), want, 1e-12));
        for step in [1e-9, -1e-9] {
            let near = of(sv + step, 55.0, 40.0);
            assert!(agree(near.a_phi.unwrap(), want, 1e-9), "{near:?}");
        }
        assert!(at.card().explanation.notes[0].contains("on the boundary"));
    }
    let none = of(40.0, 40.0, 40.0);
    assert_eq!((none.regime, none.a_phi, none.shape_ratio), (Regime::Isotropic, None, None));
}

/// Gram–Schmidt keeps the first axis and loads all error on the others, so its answer depends on
/// the order; the polar factor shares the error and does not.
#[test]
fn nearest_axes_do_not_depend_on_the_order_of_the_lines() {
    let lines = [line(35.0, 12.0), line(127.0, 8.0), line(200.0, 72.0)];
    let fitted = |order: [usize; 3]| MeasuredAxes { lines: order.map(|k| lines[k]) }.fitted().unwrap();
    let first = fitted([0, 1, 2]);
    for order in [[0, 2, 1], [1, 0, 2], [1, 2, 0], [2, 0, 1], [2, 1, 0]] {
        let other = fitted(order);
        for (place, k) in order.into_iter().enumerate() {
            assert!(other.lines()[place].angle_to(&first.lines()[k]).unwrap().in_deg() < 1e-11, "{order:?}");
        }
    }
    assert!(first.misfits().iter().all(|m| m.in_deg() > 0.5), "every line bears a part: {:?}", first.misfits());
    // Gram–Schmidt from the first line and from the second: their third axes differ by degrees.
    let (a, b, c) = (unit(lines[0]), unit(lines[1]), unit(lines[2]));
    let reject = |v: [f64; 3], n: [f64; 3]| [0, 1, 2].map(|i| v[i] - dot(v, n) / dot(n, n) * n[i]);
    let kept = |first: [f64; 3], second: [f64; 3]| reject(second, first);
    let seconds = [kept(a, c), kept(b, c)].map(|v| v.map(|x| x / dot(v, v).sqrt()));
    assert!(dot(seconds[0], seconds[1]).abs().acos().to_degrees() > 5.0);
    // The sum of the squared differences is the least: Gram–Schmidt's is larger.
    let misfit =
        |axes: [[f64; 3]; 3]| axes.iter().zip([a, b, c]).map(|(x, y)| 2.0 - 2.0 * dot(*x, y).abs()).sum::<f64>();
    let second = reject(b, a);
    let third = reject(reject(c, a), second);
    let normal = |v: [f64; 3]| v.map(|x| x / dot(v, v).sqrt());
    assert!(misfit(first.matrix()) < 0.9 * misfit([a, normal(second), normal(third)]));
}
