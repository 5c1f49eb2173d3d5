//! Tensors carried to a hole and back, holes that rise among them.

use hade::frames::Frame;
use hade::prelude::*;
use hade_tests::agree;
use proptest::prelude::*;

use crate::CASES;

/// What a number may differ by after two turns, as a share of the largest component.
const SHARE: f64 = 1e-14;

fn six<F: Frame>(s: &Stress<F>) -> [f64; 6] {
    use Axis::{X, Y, Z};
    [(X, X), (Y, Y), (Z, Z), (X, Y), (Y, Z), (X, Z)].map(|(a, b)| s.component(a, b).in_pa())
}

/// Any six components, from a few pascals to 10¹² Pa, both signs.
fn stress() -> impl Strategy<Value = Stress> {
    (proptest::array::uniform6(-1.0..1.0_f64), 0.0..12.0_f64).prop_map(|(six, power)| {
        let [nn, ee, dd, ne, nd, ed] = six.map(|c| (c * 10.0_f64.powf(power)).pa());
        Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).unwrap()
    })
}

fn attitude() -> impl Strategy<Value = Attitude> {
    let inclination = prop_oneof![4 => 0.0..=180.0_f64, 1 => Just(0.0), 1 => Just(90.0), 1 => Just(180.0)];
    (inclination, -360.0..360.0_f64).prop_map(|(inclination, azimuth)| Attitude {
        inclination: inclination.deg(),
        azimuth: Azimuth::from_true_north(azimuth.deg()),
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES))]

    #[test]
    fn a_tensor_comes_back_as_it_went(s in stress(), attitude in attitude()) {
        let chain = attitude.chain().unwrap();
        let back = chain.back().carry(&chain.carry(&s));
        let largest = six(&s).iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        for (a, b) in six(&back).iter().zip(six(&s)) {
            prop_assert!(agree(*a, b, SHARE * largest), "{} is not {}", a, b);
        }
    }

    #[test]
    fn principal_stresses_stay_when_a_tensor_is_carried(s in stress(), attitude in attitude()) {
        let carried = attitude.chain().unwrap().carry(&s);
        let there = carried.effective(0.mpa()).unwrap().principal();
        let largest = six(&s).iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        for (a, b) in there.iter().zip(s.principals().magnitudes()) {
            prop_assert!(agree(a.in_pa(), b.in_pa(), SHARE * largest), "{} is not {}", a, b);
        }
        // A hole's axes are top, right, along: the stress along it by its direction.
        let (i, a) = (attitude.inclination.in_rad(), attitude.azimuth.measured().in_rad());
        let t = [i.sin() * a.cos(), i.sin() * a.sin(), i.cos()];
        let [xx, yy, zz, xy, yz, xz] = six(&s);
        let along = xx * t[0] * t[0] + yy * t[1] * t[1] + zz * t[2] * t[2]
            + 2.0 * (xy * t[0] * t[1] + yz * t[1] * t[2] + xz * t[0] * t[2]);
        prop_assert!(agree(six(&carried)[2], along, SHARE * largest));
    }
}
