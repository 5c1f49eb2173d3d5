//! The numbers of a wall that can be drawn, and the wall that they make, in the shortest way.

use crate::error::Result;
use crate::frames::borehole_axes;
use crate::frames::vector::{V3, apply};
use crate::lanes::Lanes;
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
    /// Whether the wall has closed forms: impermeable, of rock by Mohr–Coulomb without a plane of weakness.
    pub plain: bool,
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
            plain: matches!(numbers.strength.law(), Law::MohrCoulomb(_)) && normal.is_none() && setup.passes() == 0.0,
        })
    }

    /// The stress in north, east, down of a vertical, a larger and a smaller horizontal stress, before the whole of it
    /// is turned to its azimuth.
    #[inline(always)]
    fn unturned<N: Lanes>(&self, [sv, larger, smaller]: [N; 3]) -> [N; 6] {
        let base = &self.numbers;
        let ([along, across], far) = (self.along, self.far.0.map(N::of));
        let (larger, smaller) = (larger - N::of(base.larger), smaller - N::of(base.smaller));
        let level = |k: usize| far[k] + N::of(along.0[k]) * larger + N::of(across.0[k]) * smaller;
        [level(0), level(1), far[2] + (sv - N::of(base.sv)), level(3), far[4], far[5]]
    }

    /// The elastic stresses of walls whose holes lean so, by sine and cosine of their inclination and of the azimuth
    /// at which they find the unturned stress.
    #[inline(always)]
    pub fn kirsch<N: Lanes>(&self, stresses: [N; 3], inclined: (N, N), towards: (N, N), poisson: N) -> Kirsch<N> {
        let kirsch = Kirsch::of(in_hole(self.unturned(stresses), inclined, towards), poisson);
        match self.setup.thermal {
            None => kirsch,
            Some(thermal) => {
                let full = thermal.youngs_modulus.si() * thermal.expansion.si() * thermal.warming.si();
                kirsch.warmed(N::of(full) / (N::of(1.0) - poisson))
            }
        }
    }

    /// Sine and cosine of the inclination.
    #[inline]
    pub fn inclined(&self, numbers: &Numbers) -> (f64, f64) {
        let drawn = numbers.inclination != self.numbers.inclination;
        if drawn { numbers.inclination.sin_cos() } else { self.inclined }
    }

    /// The azimuth at which the hole finds the unturned stress: turning the stress is turning the hole the other way.
    #[inline]
    pub fn towards(&self, numbers: &Numbers) -> f64 {
        numbers.hole_azimuth - (numbers.azimuth - self.numbers.azimuth)
    }

    /// S1 and S3.
    pub fn extremes(&self, numbers: &Numbers) -> (f64, f64) {
        let Numbers { sv, larger, smaller, .. } = *numbers;
        if self.upright {
            return (sv.max(larger).max(smaller), sv.min(larger).min(smaller));
        }
        let [s1, _, s3] = Tensor(self.unturned([sv, larger, smaller])).eigen().values;
        (s1, s3)
    }

    /// The wall, of rock by this law.
    pub fn wall(&self, numbers: &Numbers, law: Law) -> ShearWall {
        let Numbers { sv, larger, smaller, poisson: nu, .. } = *numbers;
        let towards = self.towards(numbers).sin_cos();
        let kirsch = self.kirsch([sv, larger, smaller], self.inclined(numbers), towards, nu);
        let plane = self.normal.zip(self.setup.weak_plane).map(|(normal, weak)| {
            let axes = borehole_axes(numbers.inclination, numbers.hole_azimuth);
            let (Kirsch { yz, xz, .. }, friction) = (kirsch, weak.friction_angle.si().tan());
            PlaneAtWall::new(apply(&axes, normal), yz, xz, weak.cohesion.si(), friction)
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
