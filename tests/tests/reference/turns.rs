//! Ten thousand attitudes and tensors against scipy 1.17.1 (`scipy.spatial.transform.Rotation`), made
//! by `tests/scripts/tensors.py`: the matrix by intrinsic Euler angles, the tensor by turns about
//! fixed axes.

use hade::frames::Frame;
use hade::prelude::*;
use hade_tests::splitmix::{SplitMix64, attitude, components};
use hade_tests::{agree, reference_rows};

use crate::stress::true_azimuth;

/// What an entry of the matrix may differ by: a few last bits of one, on both sides.
const MATRIX: f64 = 2e-15;
/// What a component may differ by, as a share of the largest of the tensor. With a transposed matrix
/// 9595 of the ten thousand are off by more than 1e-3 (the others are vertical or nearly symmetric).
const COMPONENT: f64 = 1e-14;

fn stress(six: [f64; 6]) -> Stress {
    let [nn, ee, dd, ne, ed, nd] = six.map(|c| c.pa());
    Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).expect("finite components")
}

fn in_pascals<F: Frame>(s: &Stress<F>) -> [f64; 6] {
    use Axis::{X, Y, Z};
    [(X, X), (Y, Y), (Z, Z), (X, Y), (Y, Z), (X, Z)].map(|(a, b)| s.component(a, b).in_pa())
}

#[test]
fn turns_agree_with_scipy() {
    let mut g = SplitMix64::new(2);
    let mut rising = 0;
    for (k, row) in reference_rows::<15>("turns.npy").into_iter().enumerate() {
        let (azimuth, inclination) = attitude(&mut g, k);
        let six = components(&mut g, 1e8);
        rising += usize::from(inclination > 90.0);
        let chain = Attitude { inclination: inclination.deg(), azimuth: true_azimuth(azimuth) }.chain().unwrap();
        let (matrix, tensor) = row.split_at(9);
        for (ours, theirs) in chain.matrix().as_flattened().iter().zip(matrix) {
            assert!(agree(*ours, *theirs, MATRIX), "attitude {k}: {ours} is not {theirs}");
        }
        let s = stress(six);
        let carried = chain.carry(&s);
        let largest = six.iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        for (ours, theirs) in in_pascals(&carried).iter().zip(tensor) {
            assert!(agree(*ours, *theirs, COMPONENT * largest), "attitude {k}: {ours} Pa is not {theirs}");
        }
        for (back, given) in in_pascals(&chain.back().carry(&carried)).iter().zip(six) {
            assert!(agree(*back, given, COMPONENT * largest), "attitude {k}: {back} Pa back from {given}");
        }
    }
    assert!(rising > 4000, "only {rising} rising holes");
}
