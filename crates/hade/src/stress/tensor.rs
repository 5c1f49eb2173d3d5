//! A symmetric 3 × 3 tensor as six numbers, turned and solved.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};

use crate::frames::vector::{M3, V3, add, cross, multiply, norm, scale, transpose};

/// A symmetric tensor: xx, yy, zz, xy, yz, xz. For stresses, in pascals.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Tensor(pub [f64; 6]);

/// Eigenvalues in falling order with their unit axes as rows, right-handed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Eigen {
    pub values: V3,
    pub axes: M3,
}

impl Tensor {
    pub fn rows(self) -> M3 {
        let [xx, yy, zz, xy, yz, xz] = self.0;
        [[xx, xy, xz], [xy, yy, yz], [xz, yz, zz]]
    }
    pub fn from_rows(m: &M3) -> Self {
        Tensor([m[0][0], m[1][1], m[2][2], m[0][1], m[1][2], m[0][2]])
    }
    /// Σ λ v vᵀ.
    pub fn from_axes(values: V3, axes: &M3) -> Self {
        let mut m = [[0.0; 3]; 3];
        for (value, axis) in values.iter().zip(axes) {
            for (row, a) in m.iter_mut().zip(axis) {
                for (cell, b) in row.iter_mut().zip(axis) {
                    *cell += value * a * b;
                }
            }
        }
        Tensor::from_rows(&m)
    }
    pub fn add(self, o: Tensor) -> Self {
        let mut sum = self.0;
        sum.iter_mut().zip(o.0).for_each(|(a, b)| *a += b);
        Tensor(sum)
    }
    pub fn scale(self, k: f64) -> Self {
        Tensor(self.0.map(|c| c * k))
    }
    pub fn times(self, v: V3) -> V3 {
        let [xx, yy, zz, xy, yz, xz] = self.0;
        [xx * v[0] + xy * v[1] + xz * v[2], xy * v[0] + yy * v[1] + yz * v[2], xz * v[0] + yz * v[1] + zz * v[2]]
    }
    /// Q S Qᵀ, rows of Q the new axes in the old frame.
    pub fn turned(self, q: &M3) -> Self {
        Tensor::from_rows(&multiply(&multiply(q, &self.rows()), &transpose(q)))
    }
    pub fn largest(self) -> f64 {
        self.0.iter().fold(0.0, |m, c| c.abs().max(m))
    }
    /// "S_nn 51.85, … MPa" with the letters of the axes.
    pub fn words(self, [x, y, z]: [&str; 3]) -> String {
        let [xx, yy, zz, xy, yz, xz] = self.scale(1e-6).0;
        format!(
            "S_{x}{x} {xx:.2}, S_{y}{y} {yy:.2}, S_{z}{z} {zz:.2}, S_{x}{y} {xy:.2}, S_{y}{z} {yz:.2}, S_{x}{z} {xz:.2} MPa"
        )
    }
    /// Refused by name when a component is no finite number.
    pub fn finite(self, what: &str) -> Result<Self> {
        if self.is_finite() {
            return Ok(self);
        }
        Err(Error::out_of_range(what, self.words(["1", "2", "3"]), "six finite numbers"))
    }
    pub fn is_finite(self) -> bool {
        self.0.iter().all(|c| c.is_finite())
    }

    /// Cyclic Jacobi (Golub & Van Loan, Matrix Computations, 4th ed., §8.5): each turn zeroes one
    /// off-diagonal; accurate also for nearly equal roots. Ten sweeps are more than it ever needs;
    /// it stops at the first that finds nothing left to turn.
    pub fn eigen(self) -> Eigen {
        let mut a = self.rows();
        let mut v = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
        for _ in 0..10 {
            let mut turned = false;
            for (p, q) in [(0, 1), (0, 2), (1, 2)] {
                let apq = a[p][q];
                // Below half a last bit of both diagonals a turn changes nothing.
                if apq == 0.0 || apq.abs() <= f64::EPSILON * 0.25 * a[p][p].abs().min(a[q][q].abs()) {
                    continue;
                }
                turned = true;
                let tau = (a[q][q] - a[p][p]) / (2.0 * apq);
                let t = tau.signum() / (tau.abs() + (1.0 + tau * tau).sqrt());
                let t = if tau == 0.0 { 1.0 } else { t };
                let c = 1.0 / (1.0 + t * t).sqrt();
                let s = t * c;
                let r = 3 - p - q;
                let (arp, arq) = (a[r][p], a[r][q]);
                a[p][p] -= t * apq;
                a[q][q] += t * apq;
                a[p][q] = 0.0;
                a[q][p] = 0.0;
                a[r][p] = c * arp - s * arq;
                a[p][r] = a[r][p];
                a[r][q] = s * arp + c * arq;
                a[q][r] = a[r][q];
                let (vp, vq) = (v[p], v[q]);
                v[p] = add(scale(vp, c), scale(vq, -s));
                v[q] = add(scale(vp, s), scale(vq, c));
            }
            if !turned {
                break;
            }
        }
        let mut order = [0, 1, 2];
        order.sort_by(|&i, &j| a[j][j].total_cmp(&a[i][i]));
        let values = order.map(|i| a[i][i]);
        let [first, second, _] = order.map(|i| scale(v[i], 1.0 / norm(v[i])));
        Eigen { values, axes: [first, second, cross(first, second)] }
    }

    /// The same three values by the trigonometric solution of the characteristic equation, as a
    /// second route. Less accurate than [`Tensor::eigen`] for nearly equal roots.
    pub fn values_by_invariants(self) -> V3 {
        let [xx, yy, zz, xy, yz, xz] = self.0;
        let mean = (xx + yy + zz) / 3.0;
        let (dx, dy, dz) = (xx - mean, yy - mean, zz - mean);
        let j2 = 0.5 * (dx * dx + dy * dy + dz * dz) + xy * xy + yz * yz + xz * xz;
        let j3 = dx * (dy * dz - yz * yz) - xy * (xy * dz - yz * xz) + xz * (xy * yz - dy * xz);
        let r = (j2 / 3.0).sqrt();
        if r == 0.0 {
            return [mean; 3];
        }
        let angle = (j3 / (2.0 * r * r * r)).clamp(-1.0, 1.0).acos() / 3.0;
        let third = std::f64::consts::TAU / 3.0;
        [mean + 2.0 * r * angle.cos(), mean + 2.0 * r * (angle - third).cos(), mean + 2.0 * r * (angle + third).cos()]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn jacobi_agrees_with_the_trigonometric_solution() {
        let s = Tensor([52.0, 66.0, 41.0, -5.4, -2.3, -1.9]);
        let e = s.eigen();
        for (a, b) in e.values.iter().zip(s.values_by_invariants()) {
            assert!((a - b).abs() < 1e-12 * 66.0 * 10.0);
        }
        let back = Tensor::from_axes(e.values, &e.axes);
        assert!(back.0.iter().zip(s.0).all(|(a, b)| (a - b).abs() < 1e-12 * 66.0));
    }

    #[test]
    fn equal_roots_and_zero_tensors_end() {
        assert_eq!(Tensor([0.0; 6]).eigen().values, [0.0; 3]);
        assert_eq!(Tensor([40.0, 40.0, 40.0, 0.0, 0.0, 0.0]).eigen().values, [40.0; 3]);
    }
}
