//! Slip on a plane of weakness at the wall (Jaeger 1960), with the whole traction on it.
//!
//! The plane has the normal n = (nr, nθ, nz) in wall axes; nr², nθ² and nθ τθz are each a wave in
//! φ = 2θ, nz is the same all round, and so normal and shear stress on the plane need no tool face of
//! their own. It slips where τ > c_w + σn' tan φ_w.

use crate::frames::vector::V3;
use crate::rock::{Jet, Number};
use crate::well::wall::elastic::Place;
use crate::well::wall::round::Wave;

/// A plane at a wall, with its strength; Pa.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct PlaneAtWall {
    across: Wave,
    around: Wave,
    along: f64,
    /// nθ τθz.
    sheared: Wave,
    cohesion: f64,
    friction: f64,
}

impl PlaneAtWall {
    /// From the plane's normal in the hole's axes, the far-field τyz and τxz there, its cohesion and
    /// the tangent of its friction angle.
    pub fn new([x, y, z]: V3, yz: f64, xz: f64, cohesion: f64, friction: f64) -> Self {
        let mean = 0.5 * (x * x + y * y);
        let (cos, sin) = (0.5 * (x * x - y * y), x * y);
        PlaneAtWall {
            across: Wave { mean, cos, sin },
            around: Wave { mean, cos: -cos, sin: -sin },
            along: z,
            sheared: Wave { mean: x * xz + y * yz, cos: y * yz - x * xz, sin: -(x * yz + y * xz) },
            cohesion,
            friction,
        }
    }

    /// τ − c_w − σn' tan φ_w: positive where it slips. The shear stress is |t × n|, from differences of the
    /// stresses: the root of |t|² − σn'² would lose half of its figures where a plane bears hardly any.
    #[inline(always)]
    fn excess<N: Number>(&self, at: &Place<N>, across: N, around: N, sheared: N) -> N {
        let z = self.along;
        let normal = at.across * across + at.hoop * around + at.axial * (z * z) + sheared * (2.0 * z);
        let [hoop_axial, axial_across, across_hoop] = [at.hoop - at.axial, at.axial - at.across, at.across - at.hoop];
        let beyond = around - z * z;
        let radial = around * hoop_axial * hoop_axial * (z * z) + at.shear_squared * beyond * beyond
            - sheared * hoop_axial * beyond * (2.0 * z);
        let tangential = at.shear_squared * (around + z * z)
            + sheared * (axial_across - across_hoop) * (2.0 * z)
            + axial_across * axial_across * (z * z)
            + around * across_hoop * across_hoop;
        let shear = (radial + across * tangential).sqrt();
        shear - normal * self.friction - self.cohesion
    }

    #[inline(always)]
    pub fn slip(&self, c: f64, s: f64, at: &Place<f64>) -> f64 {
        self.excess(at, self.across.at(c, s), self.around.at(c, s), self.sheared.at(c, s))
    }

    /// With its derivatives by φ.
    #[inline(always)]
    pub fn slip_round(&self, c: f64, s: f64, at: &Place<Jet>) -> Jet {
        self.excess(at, self.across.jet(c, s), self.around.jet(c, s), self.sheared.jet(c, s))
    }

    /// With its derivatives by the pressure.
    #[inline(always)]
    pub fn slip_pressed(&self, c: f64, s: f64, at: &Place<Jet>) -> Jet {
        let still = |value: f64| Jet { value, slope: 0.0, bend: 0.0 };
        self.excess(at, still(self.across.at(c, s)), still(self.around.at(c, s)), still(self.sheared.at(c, s)))
    }

    /// Its cohesion, for tolerances.
    pub fn size(&self) -> f64 {
        self.cohesion
    }
}
