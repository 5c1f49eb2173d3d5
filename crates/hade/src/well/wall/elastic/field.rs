//! The whole elastic field round a round hole, as plain numbers.
//!
//! Hiramatsu and Oka (1962), in the hole's cylindrical axes: across (radial), around (hoop), along
//! (axial). With u = (R/r)², 1 at the wall and 0 far from the hole, each of the six stresses is a
//! polynomial of second degree in u; whatever is looked for along a radius is looked for in u, so
//! that nothing between the wall and infinity is out of reach. Pa and radians.

use crate::stress::tensor::Tensor;

/// The far field of a hole in its own axes, and Poisson's ratio.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ElasticField {
    /// Half the sum of σx and σy.
    mean: f64,
    /// Half their difference.
    half: f64,
    z: f64,
    xy: f64,
    yz: f64,
    xz: f64,
    poisson: f64,
}

/// The total stresses at one place.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct AtPlace {
    pub radial: f64,
    pub hoop: f64,
    pub axial: f64,
    /// τrθ.
    pub radial_hoop: f64,
    /// τθz.
    pub hoop_axial: f64,
    /// τrz.
    pub radial_axial: f64,
}

impl ElasticField {
    /// From the far field in the hole's axes.
    pub fn new(far: Tensor, poisson: f64) -> Self {
        let [x, y, z, xy, yz, xz] = far.0;
        ElasticField { mean: 0.5 * (x + y), half: 0.5 * (x - y), z, xy, yz, xz, poisson }
    }

    /// At tool face θ, where (R/r)² is u, with the pressure p in the hole.
    pub fn at(&self, theta: f64, u: f64, pressure: f64) -> AtPlace {
        let (s2, c2) = (2.0 * theta).sin_cos();
        let (s, c) = theta.sin_cos();
        // Across the hole, the difference of σx and σy and their shear, turned to the place.
        let stretch = self.half * c2 + self.xy * s2;
        let twist = self.xy * c2 - self.half * s2;
        let relief = u * (pressure - self.mean);
        AtPlace {
            radial: self.mean + relief + stretch * (1.0 - 4.0 * u + 3.0 * u * u),
            hoop: self.mean - relief - stretch * (1.0 + 3.0 * u * u),
            axial: self.z - 4.0 * self.poisson * stretch * u,
            radial_hoop: twist * (1.0 + 2.0 * u - 3.0 * u * u),
            hoop_axial: (self.yz * c - self.xz * s) * (1.0 + u),
            radial_axial: (self.xz * c + self.yz * s) * (1.0 - u),
        }
    }
}

impl AtPlace {
    /// In wall axes: radial, around, along.
    pub fn tensor(self) -> Tensor {
        Tensor([self.radial, self.hoop, self.axial, self.radial_hoop, self.hoop_axial, self.radial_axial])
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::f64::consts::{PI, TAU};

    const FAR: Tensor = Tensor([52.0, 44.0, 63.0, 3.0, 5.0, -4.0]);
    const NU: f64 = 0.27;
    const P: f64 = 31.0;

    /// In x, y, z, at a place of the plane across the hole.
    fn cartesian(x: f64, y: f64) -> Tensor {
        let (theta, u) = (y.atan2(x), 1.0 / (x * x + y * y));
        let (s, c) = theta.sin_cos();
        let at = ElasticField::new(FAR, NU).at(theta, u, P).tensor();
        at.turned(&[[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]])
    }

    /// What makes a field the solution, none of which the formulas say in so many words: equilibrium
    /// of forces, compatibility (in plane strain without body forces σx + σy is harmonic, and the axial
    /// stress is ν times it but for a constant; along the hole the shears have a harmonic displacement,
    /// so that they are free of curl), the pressure and nothing else on the wall, and the far field.
    #[test]
    fn the_field_is_in_equilibrium_and_compatible_and_meets_the_wall_and_the_far_field() {
        let h = 1e-3;
        for (k, r) in [1.03, 1.2, 1.7, 2.6, 4.0].into_iter().enumerate() {
            let theta = 0.7 + 1.3 * k as f64;
            let (x, y) = (r * theta.cos(), r * theta.sin());
            let by_x = |f: &dyn Fn(Tensor) -> f64| (f(cartesian(x + h, y)) - f(cartesian(x - h, y))) / (2.0 * h);
            let by_y = |f: &dyn Fn(Tensor) -> f64| (f(cartesian(x, y + h)) - f(cartesian(x, y - h))) / (2.0 * h);
            let part = |i: usize| move |t: Tensor| t.0[i];
            let forces =
                [by_x(&part(0)) + by_y(&part(3)), by_x(&part(3)) + by_y(&part(1)), by_x(&part(5)) + by_y(&part(4))];
            let curl = by_x(&part(4)) - by_y(&part(5));
            let sum = |x, y| cartesian(x, y).0[0] + cartesian(x, y).0[1];
            let around = sum(x + h, y) + sum(x - h, y) + sum(x, y + h) + sum(x, y - h);
            let laplace = (around - 4.0 * sum(x, y)) / (h * h);
            assert!(forces.iter().all(|f| f.abs() < 2e-3), "{r}: {forces:?}");
            assert!(curl.abs() < 2e-3 && laplace.abs() < 0.02, "{r}: {curl} {laplace}");
            // What cancels is far larger.
            let size = by_x(&part(0)).abs() + by_x(&part(3)).abs() + by_y(&part(4)).abs() + by_x(&part(4)).abs();
            assert!(size > 0.1, "{r}: {size}");
            let plane_strain = cartesian(x, y).0[2] - 63.0 - NU * (sum(x, y) - 52.0 - 44.0);
            assert!(plane_strain.abs() < 1e-12, "{r}: {plane_strain}");
        }
        for k in 0..24 {
            let theta = f64::from(k) * TAU / 24.0;
            let field = ElasticField::new(FAR, NU);
            let wall = field.at(theta, 1.0, P);
            assert!((wall.radial - P).abs() < 1e-13 && wall.radial_hoop == 0.0 && wall.radial_axial == 0.0);
            let kirsch = super::super::kirsch::Kirsch::new(FAR, NU).at(theta, P);
            assert!((wall.hoop - kirsch.hoop).abs() < 1e-12 && (wall.axial - kirsch.axial).abs() < 1e-12);
            assert!((wall.hoop_axial - kirsch.shear).abs() < 1e-12);
            // The far field comes back, on its own axes: at infinity, and at 50 radii but for 1/2500.
            let (s, c) = theta.sin_cos();
            for (u, off) in [(0.0, 1e-12), (1.0 / 2500.0, 0.1)] {
                let far = field.at(theta, u, P).tensor().turned(&[[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]]);
                assert!(far.0.iter().zip(FAR.0).all(|(a, b)| (a - b).abs() < off), "{theta} {far:?}");
            }
        }
    }

    /// Lamé's solution of a round hole in an even far field: radial S − (S − p)(R/r)², hoop S + (S − p)(R/r)².
    #[test]
    fn an_even_far_field_is_lames() {
        let field = ElasticField::new(Tensor([40.0, 40.0, 55.0, 0.0, 0.0, 0.0]), 0.3);
        for r in [1.0, 1.1, 1.5, 2.0, 5.0, 30.0_f64] {
            let at = field.at(1.1, 1.0 / (r * r), 28.0);
            assert!((at.radial - (40.0 - 12.0 / (r * r))).abs() < 1e-12);
            assert!((at.hoop - (40.0 + 12.0 / (r * r))).abs() < 1e-12);
            assert!((at.axial - 55.0).abs() < 1e-12);
            assert!(at.radial_hoop.abs() + at.hoop_axial.abs() + at.radial_axial.abs() < 1e-12);
        }
    }

    #[test]
    fn the_far_side_differs_in_the_sign_of_the_shears_along_the_hole() {
        let field = ElasticField::new(FAR, NU);
        for (theta, u) in [(0.3, 1.0), (1.2, 0.4), (2.5, 0.07)] {
            let (near, far) = (field.at(theta, u, P), field.at(theta + PI, u, P));
            for (a, b) in [
                (near.radial, far.radial),
                (near.hoop, far.hoop),
                (near.axial, far.axial),
                (near.radial_hoop, far.radial_hoop),
                (near.hoop_axial, -far.hoop_axial),
                (near.radial_axial, -far.radial_axial),
            ] {
                assert!((a - b).abs() < 1e-12, "{theta} {u}");
            }
        }
    }
}
