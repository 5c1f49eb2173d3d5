//! The numbers of a wall that can be drawn, and the wall that they make, in the shortest way.

use crate::error::Result;
use crate::frames::borehole_axes;
use crate::frames::vector::{V3, apply};
use crate::rock::{Law, Strength, StrengthNumber};
use crate::stress::tensor::Tensor;
use crate::units::Quantity;
use crate::well::wall::elastic::{Kirsch, in_hole};
use crate::well::wall::sensitivity::Varied;
use crate::well::wall::setup::WallSetup;
use crate::well::wall::shear::{PlaneAtWall, ShearWall};

/// Those numbers, in SI.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Numbers {
    pub sv: f64,
    pub larger: f64,
    pub smaller: f64,
    /// Of the larger horizontal stress.
    pub azimuth: f64,
    pub pore: f64,
    pub poisson: f64,
    pub tensile: f64,
    pub strength: Strength,
    pub inclination: f64,
    pub hole_azimuth: f64,
    pub biot: f64,
}

/// A wall as it was stated, taken apart.
#[derive(Clone, Copy, Debug)]
pub(super) struct Base {
    pub setup: WallSetup,
    pub far: Tensor,
    pub numbers: Numbers,
    /// The unit dyads of the horizontal axes.
    along: [Tensor; 2],
    /// Whether the vertical is principal, so that no eigenvalues are needed.
    upright: bool,
    /// The normal of the plane of weakness, north, east, down.
    normal: Option<V3>,
    /// Sine and cosine of the inclination.
    inclined: (f64, f64),
}

impl Base {
    pub fn of(setup: &WallSetup) -> Result<Self> {
        let inputs = &setup.inputs;
        let far = inputs.stress.geographic();
        let [nn, ee, dd, ne, ed, nd] = far.0;
        let (centre, radius) = (0.5 * (nn + ee), (0.5 * (nn - ee)).hypot(ne));
        let azimuth = 0.5 * ne.atan2(0.5 * (nn - ee));
        let (s, c) = azimuth.sin_cos();
        let dyad = |n: f64, e: f64| Tensor([n * n, e * e, 0.0, n * e, 0.0, 0.0]);
        let (inclination, hole_azimuth) = setup.checked()?.angles()?;
        let numbers = Numbers {
            sv: dd,
            larger: centre + radius,
            smaller: centre - radius,
            azimuth,
            pore: inputs.pore.si(),
            poisson: inputs.rock.poisson,
            tensile: inputs.rock.tensile_strength.si(),
            strength: inputs.rock.strength,
            inclination,
            hole_azimuth,
            biot: setup.seepage.map_or(0.0, |seepage| seepage.biot),
        };
        let normal = match setup.weak_plane {
            Some(weak) => Some(weak.plane.axes()?.normal),
            None => None,
        };
        let upright = ed.abs().max(nd.abs()) <= 1e-12 * far.largest();
        Ok(Base {
            setup: *setup,
            far,
            numbers,
            along: [dyad(c, s), dyad(-s, c)],
            upright,
            normal,
            inclined: inclination.sin_cos(),
        })
    }

    /// The stress in north, east, down, before the whole of it is turned to its azimuth.
    fn unturned(&self, numbers: &Numbers) -> Tensor {
        let base = &self.numbers;
        let [larger, smaller] = self.along;
        let down = Tensor([0.0, 0.0, numbers.sv - base.sv, 0.0, 0.0, 0.0]);
        let level = larger.scale(numbers.larger - base.larger).add(smaller.scale(numbers.smaller - base.smaller));
        self.far.add(down).add(level)
    }

    /// S1 and S3.
    pub fn extremes(&self, numbers: &Numbers) -> (f64, f64) {
        let Numbers { sv, larger, smaller, .. } = *numbers;
        if self.upright {
            return (sv.max(larger).max(smaller), sv.min(larger).min(smaller));
        }
        let [s1, _, s3] = self.unturned(numbers).eigen().values;
        (s1, s3)
    }

    /// The wall, of rock by this law. Turning the stress is turning the hole the other way.
    pub fn wall(&self, numbers: &Numbers, law: Law) -> ShearWall {
        let turned = numbers.azimuth - self.numbers.azimuth;
        let drawn = numbers.inclination != self.numbers.inclination;
        let inclined = if drawn { numbers.inclination.sin_cos() } else { self.inclined };
        let hole = (numbers.hole_azimuth - turned).sin_cos();
        let local = in_hole(self.unturned(numbers), inclined, hole);
        let nu = numbers.poisson;
        let mut kirsch = Kirsch::new(local, nu);
        if let Some(thermal) = self.setup.thermal {
            kirsch =
                kirsch.warmed(thermal.youngs_modulus.si() * thermal.expansion.si() * thermal.warming.si() / (1.0 - nu));
        }
        let plane = self.normal.zip(self.setup.weak_plane).map(|(normal, weak)| {
            let [.., yz, xz] = local.0;
            let axes = borehole_axes(numbers.inclination, numbers.hole_azimuth);
            PlaneAtWall::new(apply(&axes, normal), yz, xz, weak.cohesion.si(), weak.friction_angle.si().tan())
        });
        let eta2 = numbers.biot * (1.0 - 2.0 * nu) / (1.0 - nu);
        ShearWall::new(kirsch, law, plane, numbers.pore, self.setup.passes(), eta2)
    }
}

impl Numbers {
    /// With one in place of what it was.
    #[inline]
    pub fn set(&mut self, input: Varied, si: f64) {
        let mut strength = |number| self.strength = self.strength.with(number, si);
        match input {
            Varied::VerticalStress => self.sv = si,
            Varied::LargerHorizontal => self.larger = si,
            Varied::SmallerHorizontal => self.smaller = si,
            Varied::HorizontalAzimuth => self.azimuth = si,
            Varied::PorePressure => self.pore = si,
            Varied::Poisson => self.poisson = si,
            Varied::TensileStrength => self.tensile = si,
            Varied::Cohesion => strength(StrengthNumber::Cohesion),
            Varied::Ucs => strength(StrengthNumber::Ucs),
            Varied::FrictionAngle => strength(StrengthNumber::FrictionAngle),
            Varied::SigmaCi => strength(StrengthNumber::SigmaCi),
            Varied::IntactConstant => strength(StrengthNumber::IntactConstant),
            Varied::Gsi => strength(StrengthNumber::Gsi),
            Varied::Disturbance => strength(StrengthNumber::Disturbance),
            Varied::Inclination => self.inclination = si,
            Varied::HoleAzimuth => self.hole_azimuth = si,
            Varied::Biot => self.biot = si,
        }
    }

    /// The law of the rock; `None` where no wall can have them.
    pub fn law(&self) -> Option<Law> {
        let Numbers { poisson, tensile, biot, strength, .. } = *self;
        let possible =
            (0.0..=0.5).contains(&poisson) && tensile >= 0.0 && (0.0..=1.0).contains(&biot) && self.pore.is_finite();
        if possible { strength.checked_law().ok() } else { None }
    }
}
