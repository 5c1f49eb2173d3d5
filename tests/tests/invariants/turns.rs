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

fn times(a: [[f64; 3]; 3], b: [[f64; 3]; 3]) -> [[f64; 3]; 3] {
    a.map(|row| [0, 1, 2].map(|k| row[0] * b[0][k] + row[1] * b[1][k] + row[2] * b[2][k]))
}

/// Q S Qᵀ of six components.
fn turned(q: [[f64; 3]; 3], [xx, yy, zz, xy, yz, xz]: [f64; 6]) -> [f64; 6] {
    let transposed = [0, 1, 2].map(|i| [q[0][i], q[1][i], q[2][i]]);
    let t = times(q, times([[xx, xy, xz], [xy, yy, yz], [xz, yz, zz]], transposed));
    [t[0][0], t[1][1], t[2][2], t[0][1], t[1][2], t[0][2]]
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES))]

    /// The numbers in the hole's axes are stated anew, so that they know nothing of where they came
    /// from, and turned back.
    #[test]
    fn a_tensor_comes_back_as_it_went(s in stress(), attitude in attitude()) {
        let chain = attitude.chain().unwrap();
        let [xx, yy, zz, xy, yz, xz] = six(&chain.carry(&s)).map(|c| c.pa());
        let stated = Stress::from_components_in(&chain, AxisComponents { xx, yy, zz, xy, yz, xz }).unwrap();
        let back = chain.back().carry(&stated);
        let largest = six(&s).iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        for (a, b) in six(&back).iter().zip(six(&s)) {
            prop_assert!(agree(*a, b, SHARE * largest), "{} is not {}", a, b);
        }
    }

    /// Joining chains is multiplying their matrices, from a mine grid by north, east, down and a hole to
    /// its wall; and what the joined chain carries is what the parts carry one after another.
    #[test]
    fn chains_compose(
        s in stress(),
        attitude in attitude(),
        tool_face in -360.0..720.0_f64,
        north in 0.0..360.0_f64,
        trend in 0.0..360.0_f64,
        plunge in -90.0..90.0_f64,
    ) {
        let grid = LocalAxes::mine_grid_with_up("grid", Azimuth::from_true_north(north.deg())).unwrap().chain().unwrap();
        let (to_hole, to_wall) = (attitude.chain().unwrap(), attitude.wall_chain(tool_face.deg()).unwrap());
        let whole = grid.back().then(&to_hole).unwrap().then(&to_wall).unwrap();
        let product = times(to_wall.matrix(), times(to_hole.matrix(), grid.back().matrix()));
        for (row, expected) in whole.matrix().iter().zip(product) {
            for (a, b) in row.iter().zip(expected) {
                prop_assert!(agree(*a, b, 4e-15), "{} is not {}", a, b);
            }
        }
        let line = Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }.direction().unwrap();
        let in_grid = grid.carry(&line);
        let there = whole.carry(&in_grid).components();
        let v = in_grid.components();
        for (a, row) in there.iter().zip(whole.matrix()) {
            prop_assert!(agree(*a, row[0] * v[0] + row[1] * v[1] + row[2] * v[2], 4e-15));
        }
        let largest = six(&s).iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        let q = whole.matrix();
        let stated = { let [xx, yy, zz, xy, yz, xz] = six(&s).map(|c| c.pa()); AxisComponents { xx, yy, zz, xy, yz, xz } };
        let carried = six(&whole.carry(&Stress::from_components_in(&grid, stated).unwrap()));
        let expected = turned(q, six(&s));
        for (a, b) in carried.iter().zip(expected) {
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
