//! Effective stress round the wall, and how it moves with the pressure in the hole.
//!
//! With x the pressure in the hole above the pore pressure, every effective stress at a wall is a
//! straight line in x, whatever the wall lets through: across the wall r x, around it H − h x, along
//! it Z − k x. An impermeable wall has r = 1, h = 1, k = 0. Where a share w of x comes to stand in
//! the pores behind the wall, r = 1 − w, k = w (1 − 2η) and h = 1 + k, with
//! 2η = α (1 − 2ν) / (1 − ν).

use super::kirsch::Kirsch;
use crate::rock::{Jet, Number};
use crate::well::wall::round::Wave;

/// Effective stresses round a wall; Pa.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct EffectiveWall {
    /// Around the wall, where the pressure in the hole is the pore pressure.
    pub hoop: Wave,
    /// Along the hole, likewise.
    pub axial: Wave,
    /// τθz².
    pub shear_squared: Wave,
    /// What the effective stress across the wall gains with the pressure.
    pub across: f64,
    /// What the hoop stress loses with it.
    pub hoop_falls: f64,
    /// What the axial stress loses with it.
    pub axial_falls: f64,
}

/// The effective stresses of one place.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Place<N> {
    pub across: N,
    pub hoop: N,
    pub axial: N,
    pub shear_squared: N,
}

impl EffectiveWall {
    /// From the total stresses, the pore pressure of the formation, the share of the pressure that
    /// passes the wall, and 2η.
    pub fn new(kirsch: &Kirsch, pore: f64, passes: f64, eta2: f64) -> Self {
        let axial_falls = passes * (1.0 - eta2);
        EffectiveWall {
            hoop: kirsch.hoop.scaled(1.0, -2.0 * pore),
            axial: kirsch.axial.scaled(1.0, -pore),
            shear_squared: kirsch.shear_squared,
            across: 1.0 - passes,
            hoop_falls: 1.0 + axial_falls,
            axial_falls,
        }
    }

    /// At one place, x above the pore pressure.
    #[inline(always)]
    pub fn place(&self, c: f64, s: f64, x: f64) -> Place<f64> {
        Place {
            across: self.across * x,
            hoop: self.hoop.at(c, s) - self.hoop_falls * x,
            axial: self.axial.at(c, s) - self.axial_falls * x,
            shear_squared: self.shear_squared.at(c, s),
        }
    }

    /// The same with its derivatives by φ.
    #[inline(always)]
    pub fn round(&self, c: f64, s: f64, x: f64) -> Place<Jet> {
        Place {
            across: Jet { value: self.across * x, slope: 0.0, bend: 0.0 },
            hoop: self.hoop.jet(c, s) - self.hoop_falls * x,
            axial: self.axial.jet(c, s) - self.axial_falls * x,
            shear_squared: self.shear_squared.jet(c, s),
        }
    }

    /// The same with its derivatives by x.
    #[inline(always)]
    pub fn pressed(&self, c: f64, s: f64, x: f64) -> Place<Jet> {
        let at = self.place(c, s, x);
        let line = |value: f64, slope: f64| Jet { value, slope, bend: 0.0 };
        Place {
            across: line(at.across, self.across),
            hoop: line(at.hoop, -self.hoop_falls),
            axial: line(at.axial, -self.axial_falls),
            shear_squared: line(at.shear_squared, 0.0),
        }
    }
}

impl<N: Number> Place<N> {
    /// The principal stresses in the wall's tangent plane, larger first.
    #[inline(always)]
    pub fn in_the_wall(&self) -> (N, N) {
        let mean = (self.hoop + self.axial) * 0.5;
        let half = (self.hoop - self.axial) * 0.5;
        // The square of a shear is not negative; its wave may be by a last bit.
        let squared = if self.shear_squared.value() > 0.0 { half * half + self.shear_squared } else { half * half };
        let radius = squared.sqrt();
        (mean + radius, mean - radius)
    }
}
