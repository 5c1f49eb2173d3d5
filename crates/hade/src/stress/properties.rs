//! What holds for all stresses, in whatever axes.

#![cfg(test)]

use proptest::prelude::*;

use super::Stress;
use super::made::Made;
use super::tensor::Tensor;
use crate::frames::vector::{M3, V3, dot, norm};
use crate::frames::{Azimuth, Geographic, Plane};
use crate::prelude::{Explain, Units};

const CASES: u32 = if cfg!(debug_assertions) { 2_000 } else { 100_000 };

fn any_stress() -> impl Strategy<Value = Stress<Geographic>> {
    (proptest::array::uniform3(-20.0..80.0_f64), proptest::array::uniform3(-15.0..15.0_f64)).prop_map(|(n, s)| {
        Stress::of(Tensor([n[0], n[1], n[2], s[0], s[1], s[2]]).scale(1e6), Made::Combined { parts: None }, None)
    })
}
fn any_plane() -> impl Strategy<Value = Plane> {
    (0.0..360.0_f64, 0.0..=90.0_f64)
        .prop_map(|(s, d)| Plane { strike: Azimuth::from_true_north(s.deg()), dip: d.deg() })
}
/// A rotation by a unit quaternion.
fn any_rotation() -> impl Strategy<Value = M3> {
    proptest::array::uniform4(-1.0..1.0_f64)
        .prop_filter("a quaternion with a length", |q| q.iter().map(|c| c * c).sum::<f64>() > 1e-3)
        .prop_map(|q| {
            let length = q.iter().map(|c| c * c).sum::<f64>().sqrt();
            let [w, x, y, z] = q.map(|c| c / length);
            [
                [1.0 - 2.0 * (y * y + z * z), 2.0 * (x * y - w * z), 2.0 * (x * z + w * y)],
                [2.0 * (x * y + w * z), 1.0 - 2.0 * (x * x + z * z), 2.0 * (y * z - w * x)],
                [2.0 * (x * z - w * y), 2.0 * (y * z + w * x), 1.0 - 2.0 * (x * x + y * y)],
            ]
        })
}
fn apply(q: &M3, v: V3) -> V3 {
    [dot(q[0], v), dot(q[1], v), dot(q[2], v)]
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES))]

    #[test]
    fn invariants_stay_when_the_axes_turn(s in any_stress(), q in any_rotation()) {
        let turned = Stress::<Geographic>::of(s.tensor().turned(&q), Made::Combined { parts: None }, None);
        let size = s.tensor().largest() * 1e-6;
        let (a, b) = (s.invariants(), turned.invariants());
        let same = |a: f64, b: f64, unit: f64| (a - b).abs() <= 1e-12 * unit;
        prop_assert!(same(a.i1().in_mpa(), b.i1().in_mpa(), size));
        prop_assert!(same(a.i2_in_mpa2(), b.i2_in_mpa2(), 10.0 * size * size));
        prop_assert!(same(a.i3_in_mpa3(), b.i3_in_mpa3(), 10.0 * size.powi(3)));
        prop_assert!(same(a.j2_in_mpa2(), b.j2_in_mpa2(), 10.0 * size * size));
        prop_assert!(same(a.j3_in_mpa3(), b.j3_in_mpa3(), 10.0 * size.powi(3)));
        prop_assert!(same(a.octahedral_shear().in_mpa(), b.octahedral_shear().in_mpa(), 10.0 * size));
        prop_assert!(same(a.max_shear().in_mpa(), b.max_shear().in_mpa(), 10.0 * size));
        let radius = a.octahedral_shear().in_mpa();
        let lode = (a.lode().unwrap() - b.lode().unwrap()).abs().in_rad();
        prop_assert!(lode <= 1e-12 * size / radius, "{lode:e}");
        let shape = (s.a_phi().shape_ratio.unwrap() - turned.a_phi().shape_ratio.unwrap()).abs();
        prop_assert!(shape <= 1e-12 * size / radius, "{shape:e}");
    }

    #[test]
    fn tractions_stay_when_stress_and_plane_turn_together(s in any_stress(), plane in any_plane(), q in any_rotation()) {
        let turned = Stress::<Geographic>::of(s.tensor().turned(&q), Made::Combined { parts: None }, None);
        let with = Plane::with_normal(apply(&q, plane.axes().unwrap().normal));
        let (a, b) = (s.on(plane).unwrap(), turned.on(with).unwrap());
        let size = s.tensor().largest();
        prop_assert!((a.normal - b.normal).abs().in_pa() <= 1e-11 * size);
        prop_assert!((a.shear - b.shear).abs().in_pa() <= 1e-11 * size, "{} {}", a.shear, b.shear);
        let length = |t: [crate::units::Pressure; 3]| norm(t.map(|c| c.in_pa()));
        prop_assert!((length(a.vector()) - length(b.vector())).abs() <= 1e-11 * size);
    }

    #[test]
    fn invariants_are_those_of_the_principal_values(s in any_stress()) {
        let [a, b, c] = s.principals().magnitudes().map(|m| m.in_mpa());
        let i = s.invariants();
        let size = s.tensor().largest() * 1e-6;
        prop_assert!((i.i1().in_mpa() - (a + b + c)).abs() <= 1e-12 * size);
        prop_assert!((i.i2_in_mpa2() - (a * b + b * c + c * a)).abs() <= 1e-11 * size * size);
        prop_assert!((i.i3_in_mpa3() - a * b * c).abs() <= 1e-11 * size.powi(3));
        prop_assert!((i.max_shear().in_mpa() - 0.5 * (a - c)).abs() <= 1e-12 * size);
        // cos 3θ = (3√3/2) J3 / J2^1.5: the other formula of the Lode angle.
        let cosine = 1.5 * 3.0_f64.sqrt() * i.j3_in_mpa3() / i.j2_in_mpa2().powf(1.5);
        prop_assert!(((3.0 * i.lode().unwrap().in_rad()).cos() - cosine).abs() <= 1e-10 * size / i.octahedral_shear().in_mpa());
    }

    /// No horizontal direction has a larger or a smaller normal stress.
    #[test]
    fn horizontal_stresses_are_the_extremes(s in any_stress(), azimuth in 0.0..360.0_f64) {
        let h = s.horizontal_stresses();
        let slack = 1e-12 * s.tensor().largest();
        let (sin, cos) = azimuth.to_radians().sin_cos();
        let normal = dot([cos, sin, 0.0], s.tensor().times([cos, sin, 0.0]));
        prop_assert!(normal <= h.sh_max.in_pa() + slack && normal >= h.sh_min.in_pa() - slack);
        let (sin, cos) = h.sh_max_azimuth.unwrap().true_north().unwrap().in_rad().sin_cos();
        let along = dot([cos, sin, 0.0], s.tensor().times([cos, sin, 0.0]));
        prop_assert!((along - h.sh_max.in_pa()).abs() <= slack);
        let degrees = h.sh_max_azimuth.unwrap().true_north().unwrap().in_deg();
        prop_assert!((0.0..180.0).contains(&degrees));
    }

    #[test]
    fn a_phi_lies_within_its_regime(s in any_stress()) {
        let r = s.a_phi();
        let n = match r.regime {
            super::Regime::NormalFaulting => 0.0,
            super::Regime::StrikeSlip => 1.0,
            _ => 2.0,
        };
        prop_assert!((n..=n + 1.0).contains(&r.a_phi.unwrap()));
        prop_assert!((r.shape_ratio.unwrap() + r.gephart_forsyth_r().unwrap() - 1.0).abs() < 1e-15);
        // Three axes at right angles: one of them is within acos(1/√3) of vertical.
        prop_assert!(r.tilt.unwrap().in_deg() < 54.74);
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES / 20))]

    #[test]
    fn every_card_passes_its_checks(s in any_stress(), factor in 1e-3..1e3_f64) {
        let tensor = near_isotropic(s.tensor(), factor);
        let s = Stress::<Geographic>::of(tensor, Made::Combined { parts: None }, None);
        for card in [s.invariants().card(), s.horizontal_stresses().card(), s.a_phi().card()] {
            let failed: Vec<_> = card.checks.iter().filter(|c| !c.passed).collect();
            prop_assert!(card.passed(), "{}: {failed:#?}", card.title());
        }
    }
}

/// A stress of another size, and nearer to isotropic.
fn near_isotropic(t: Tensor, factor: f64) -> Tensor {
    let [xx, yy, zz, xy, yz, xz] = t.scale(factor.min(1.0)).0;
    let mean = 40e6 * factor;
    Tensor([xx + mean, yy + mean, zz + mean, xy, yz, xz])
}
