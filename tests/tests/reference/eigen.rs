//! Ten thousand tensors against numpy 2.4.6 (`numpy.linalg.eigh`, LAPACK), made by
//! `tests/scripts/tensors.py`: random ones, nearly and exactly equal values, tiny, huge and tensile.

use hade::prelude::*;
use hade_tests::splitmix::{SplitMix64, tensor};
use hade_tests::{agree, reference_rows};

/// What a principal stress may differ by, as a share of the largest.
const VALUE: f64 = 1e-14;
/// What S v may differ from S_k v by, as a share of the largest.
const RESIDUAL: f64 = 1e-14;
/// An axis turns by about the rounding of the tensor over the gap to its neighbour.
const AXIS: f64 = 1e-14;

type V3 = [f64; 3];

fn dot(a: V3, b: V3) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}
fn norm(a: V3) -> f64 {
    dot(a, a).sqrt()
}
fn cross(a: V3, b: V3) -> V3 {
    [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
}

/// The unit vector of a line, north, east, down.
fn vector(line: Line) -> V3 {
    let (trend, plunge) = (line.trend.true_north().unwrap().in_rad(), line.plunge.in_rad());
    [plunge.cos() * trend.cos(), plunge.cos() * trend.sin(), plunge.sin()]
}

#[test]
fn principal_stresses_and_axes_agree_with_lapack() {
    let mut g = SplitMix64::new(1);
    // How many tensors had three axes, a plane of them, and none.
    let mut kinds = [0; 3];
    for (k, row) in reference_rows::<9>("eigen.npy").into_iter().enumerate() {
        let six = tensor(&mut g, k);
        let [xx, yy, zz, xy, yz, xz] = six;
        let rows = [[xx, xy, xz], [xy, yy, yz], [xz, yz, zz]];
        let [nn, ee, dd, ne, ed, nd] = six.map(|c| c.pa());
        let p = Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).unwrap().principals();
        let values = [row[0], row[1], row[2]];
        let scale = values.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
        let ours = p.magnitudes().map(|m| m.in_pa());
        for (a, b) in ours.iter().zip(values) {
            assert!(agree(*a, b, VALUE * scale), "tensor {k}: {a} is not {b}");
        }
        assert!(ours[0] >= ours[1] && ours[1] >= ours[2], "tensor {k}: {ours:?}");

        // The axes of the first and third; the second's is at right angles to both.
        let [first, third] = [[row[3], row[4], row[5]], [row[6], row[7], row[8]]];
        let defined = [!first[0].is_nan(), !third[0].is_nan()];
        let theirs = [first, cross(third, first), third];
        let lines = p.lines();
        assert_eq!(
            lines.map(|l| l.is_some()),
            [defined[0], defined[0] && defined[1], defined[1]],
            "tensor {k}: which axes exist"
        );
        kinds[2 - usize::from(defined[0]) - usize::from(defined[1])] += 1;
        for (i, line) in lines.into_iter().enumerate() {
            let Some(line) = line else { continue };
            assert!(line.plunge >= 0.deg(), "tensor {k}: axis {i} by its upper end");
            let v = vector(line);
            let left = rows.map(|r| dot(r, v));
            let residual = [0, 1, 2].map(|j| left[j] - ours[i] * v[j]);
            assert!(norm(residual) <= RESIDUAL * scale, "tensor {k}: S v is off by {:e}", norm(residual) / scale);
            // As lines: the sine of the angle between. The plane of two equal values is the one
            // across the third axis, so this compares planes as well.
            let gap = (0..3).filter(|j| *j != i).map(|j| (values[j] - values[i]).abs()).fold(f64::INFINITY, f64::min);
            let off = norm(cross(v, theirs[i]));
            assert!(off <= 1e-15 + AXIS * scale / gap, "tensor {k}: axis {i} is {off:e} off, gap {:e}", gap / scale);
        }
        // Projectors: a plane of equal values, in full, against numpy's I − v vᵀ.
        if let ([Some(own), None, _] | [_, None, Some(own)], false) = (lines, defined[0] && defined[1]) {
            let (own, other) = (vector(own), if defined[0] { first } else { third });
            for i in 0..3 {
                for j in 0..3 {
                    let unit = f64::from(u8::from(i == j));
                    let (a, b) = (unit - own[i] * own[j], unit - other[i] * other[j]);
                    assert!(agree(a, b, 1e-12), "tensor {k}: projector {i}{j} {a} is not {b}");
                }
            }
        }
    }
    assert_eq!(kinds, [8000, 1168, 832], "three axes, a plane, none");
}
