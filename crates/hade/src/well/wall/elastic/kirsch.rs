//! Stress at the wall of a round hole in elastic rock, as plain numbers.
//!
//! Isotropic and linear elastic rock, plane strain along the hole, an impermeable wall (Kirsch
//! 1898; Hiramatsu and Oka 1962; Fairhurst 1968). Pa and radians; compression positive; far-field
//! stress in the hole's axes x (top), y (right), z (along); θ clockwise from the top looking down
//! the hole. In φ = 2θ the hoop and axial stresses and the *square* of the shear are each one wave
//! round the hole, and every limit of the wall is found on that circle.

use crate::lanes::Lanes;
use crate::stress::tensor::Tensor;
use crate::well::wall::round::Wave;

/// What acts at one place of the wall, total stresses.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct AtWall {
    pub radial: f64,
    pub hoop: f64,
    pub axial: f64,
    /// τθz.
    pub shear: f64,
}

/// The wall stresses of one far field.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Kirsch<N = f64> {
    /// Hoop stress without its −p.
    pub hoop: Wave<N>,
    /// Axial stress.
    pub axial: Wave<N>,
    /// τθz².
    pub shear_squared: Wave<N>,
    /// The far field's.
    pub yz: N,
    pub xz: N,
}

impl<N: Lanes> Kirsch<N> {
    /// From the far field in the hole's axes (xx, yy, zz, xy, yz, xz) and Poisson's ratio.
    #[inline(always)]
    pub fn of([x, y, z, xy, yz, xz]: [N; 6], poisson: N) -> Self {
        let (two, four) = (N::of(2.0), N::of(4.0));
        let difference = two * (x - y);
        Kirsch {
            hoop: Wave { mean: x + y, cos: -difference, sin: -four * xy },
            axial: Wave { mean: z, cos: -poisson * difference, sin: -poisson * four * xy },
            // 4 (τyz cos θ − τxz sin θ)², written in 2θ.
            shear_squared: Wave {
                mean: two * (yz * yz + xz * xz),
                cos: two * (yz * yz - xz * xz),
                sin: -four * yz * xz,
            },
            yz,
            xz,
        }
    }

    /// With a thermal stress on hoop and axial stress.
    #[inline(always)]
    pub fn warmed(self, thermal: N) -> Self {
        Kirsch { hoop: self.hoop.scaled(N::of(1.0), thermal), axial: self.axial.scaled(N::of(1.0), thermal), ..self }
    }

    /// The size of the numbers at hand, for tolerances.
    #[inline(always)]
    pub fn scale(&self) -> N {
        self.hoop.mean.abs()
            + self.hoop.amplitude()
            + self.axial.mean.abs()
            + self.axial.amplitude()
            + self.shear_squared.mean.abs().sqrt()
    }
}

impl Kirsch {
    /// From the far field in the hole's axes and Poisson's ratio.
    pub fn new(far: Tensor, poisson: f64) -> Self {
        Kirsch::of(far.0, poisson)
    }

    /// At tool face θ and wall pressure p.
    pub fn at(&self, theta: f64, pressure: f64) -> AtWall {
        let (s2, c2) = (2.0 * theta).sin_cos();
        let (s, c) = theta.sin_cos();
        AtWall {
            radial: pressure,
            hoop: self.hoop.at(c2, s2) - pressure,
            axial: self.axial.at(c2, s2),
            shear: 2.0 * (self.yz * c - self.xz * s),
        }
    }
}

impl AtWall {
    /// The tensor in wall axes: radial, around, along.
    pub fn tensor(self) -> Tensor {
        Tensor([self.radial, self.hoop, self.axial, 0.0, self.shear, 0.0])
    }

    /// Principal values in the wall's tangent plane, larger first, and the share of the hoop
    /// direction in the larger one's axis (its squared cosine).
    pub fn in_the_wall(self) -> (f64, f64, f64) {
        let mean = 0.5 * (self.hoop + self.axial);
        let half = 0.5 * (self.hoop - self.axial);
        let r = half.hypot(self.shear);
        let share = if r == 0.0 { 0.5 } else { 0.5 * (1.0 + half / r) };
        (mean + r, mean - r, share)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Kirsch's numbers as a textbook figure has them: effective S_Hmax 22, S_hmin 13, wall pressure
    /// equal to the pore pressure of 10 MPa; hoop 3·12 − 3 and 3·3 − 12.
    #[test]
    fn a_vertical_hole_has_kirschs_extremes() {
        let k = Kirsch::new(Tensor([22.0, 13.0, 30.0, 0.0, 0.0, 0.0]), 0.25);
        assert!((k.at(std::f64::consts::FRAC_PI_2, 10.0).hoop - 10.0 - 33.0).abs() < 1e-12);
        assert!((k.at(0.0, 10.0).hoop - 10.0 + 3.0).abs() < 1e-12);
    }

    #[test]
    fn waves_are_the_formulas_and_the_far_side_mirrors_the_shear() {
        let (x, y, z, xy, yz, xz) = (50.0, 42.0, 60.0, 3.0, 9.0, -8.0);
        let (nu, p) = (0.3, 27.0);
        let k = Kirsch::new(Tensor([x, y, z, xy, yz, xz]), nu);
        for i in 0..36 {
            let t = f64::from(i) * 0.17;
            let (s2, c2) = (2.0 * t).sin_cos();
            let a = k.at(t, p);
            assert!((a.hoop - (x + y - 2.0 * (x - y) * c2 - 4.0 * xy * s2 - p)).abs() < 1e-12);
            assert!((a.axial - (z - nu * (2.0 * (x - y) * c2 + 4.0 * xy * s2))).abs() < 1e-12);
            assert!((a.shear - 2.0 * (-xz * t.sin() + yz * t.cos())).abs() < 1e-12);
            assert!((a.shear * a.shear - k.shear_squared.at(c2, s2)).abs() < 1e-10);
            let far = k.at(t + std::f64::consts::PI, p);
            assert!((far.hoop - a.hoop).abs() < 1e-11 && (far.axial - a.axial).abs() < 1e-11);
            assert!((far.shear + a.shear).abs() < 1e-12);
        }
    }
}
