//! Principal values of a tensor by a route that Jacobi's turns do not take, and as exact.

use crate::frames::vector::{V3, cross, dot, norm, scale};
use crate::stress::tensor::Tensor;

/// The principal values in falling order. The one that stands farthest from the others comes from the
/// trigonometric solution of the characteristic equation, with Rayleigh's quotient of its axis; the
/// other two from the circle of Mohr in the plane across that axis. So none suffers where two are
/// nearly equal, where the characteristic equation alone gives half the figures (after Eberly, D., A
/// Robust Eigensolver for 3 × 3 Symmetric Matrices; cited from memory).
pub(super) fn principal_values(tensor: Tensor) -> V3 {
    let [xx, yy, zz, xy, yz, xz] = tensor.0;
    if xy == 0.0 && yz == 0.0 && xz == 0.0 {
        return falling([xx, yy, zz]);
    }
    let mean = (xx + yy + zz) / 3.0;
    let (dx, dy, dz) = (xx - mean, yy - mean, zz - mean);
    let size = ((dx * dx + dy * dy + dz * dz + 2.0 * (xy * xy + yz * yz + xz * xz)) / 6.0).sqrt();
    let [dx, dy, dz, xy, yz, xz] = [dx, dy, dz, xy, yz, xz].map(|c| c / size);
    let cosine = 0.5 * (dx * (dy * dz - yz * yz) - xy * (xy * dz - yz * xz) + xz * (xy * yz - dy * xz));
    let angle = cosine.clamp(-1.0, 1.0).acos() / 3.0;
    let apart = 2.0 * if cosine >= 0.0 { angle } else { angle + std::f64::consts::TAU / 3.0 }.cos();

    let rows = [[dx - apart, xy, xz], [xy, dy - apart, yz], [xz, yz, dz - apart]];
    let normals = [cross(rows[0], rows[1]), cross(rows[1], rows[2]), cross(rows[2], rows[0])];
    let longest = normals.into_iter().fold([0.0; 3], |a, b| if dot(b, b) > dot(a, a) { b } else { a });
    let axis = scale(longest, 1.0 / norm(longest));
    // Any two directions that make a square set with the axis.
    let beside = if axis[0].abs() > axis[1].abs() { [-axis[2], 0.0, axis[0]] } else { [0.0, axis[2], -axis[1]] };
    let u = scale(beside, 1.0 / norm(beside));
    let v = cross(axis, u);
    let deviator = Tensor([dx, dy, dz, xy, yz, xz]);
    let (tu, tv) = (deviator.times(u), deviator.times(v));
    let (uu, vv, uv) = (dot(u, tu), dot(v, tv), dot(u, tv));
    let (centre, radius) = (0.5 * (uu + vv), (0.5 * (uu - vv)).hypot(uv));
    falling([dot(axis, deviator.times(axis)), centre + radius, centre - radius].map(|w| mean + size * w))
}

fn falling(mut values: V3) -> V3 {
    values.sort_by(|a, b| b.total_cmp(a));
    values
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn agree_with_jacobi(six in proptest::array::uniform6(-1.0..1.0_f64), small in 0.0..16.0_f64) {
            // A part of any size on top of equal values, so that near-equal ones occur.
            let part = 10.0_f64.powf(-small);
            let mut six = six.map(|c| c * part);
            for (c, base) in six.iter_mut().zip([0.7, 0.7, 0.7, 0.0, 0.0, 0.0]) {
                *c += base;
            }
            for tensor in [Tensor(six), Tensor(six).scale(-3e7)] {
                let exact = tensor.eigen().values;
                for (a, b) in principal_values(tensor).iter().zip(exact) {
                    prop_assert!((a - b).abs() <= 4e-15 * tensor.largest(), "{} {}", a, b);
                }
            }
        }
    }

    #[test]
    fn equal_values_and_zero_are_no_exception() {
        assert_eq!(principal_values(Tensor([0.0; 6])), [0.0; 3]);
        assert_eq!(principal_values(Tensor([4.0, 4.0, 4.0, 0.0, 0.0, 0.0])), [4.0; 3]);
        for (xx, zz) in [(5.0, 1.0), (1.0, 5.0)] {
            let turned =
                Tensor([xx, xx, zz, 0.0, 0.0, 0.0]).turned(&[[0.6, 0.0, 0.8], [0.0, 1.0, 0.0], [-0.8, 0.0, 0.6]]);
            let want = falling([xx, xx, zz]);
            assert!(principal_values(turned).iter().zip(want).all(|(a, b)| (a - b).abs() < 1e-14));
        }
    }
}
