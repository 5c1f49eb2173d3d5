//! A wall with one input varied.

use super::vary::{Varied, Vary};
use crate::card::Data;
use crate::error::{Error, Result};
use crate::frames::vector::{M3, transpose};
use crate::frames::{Attitude, Axes, Borehole, Geographic};
use crate::rock::Strength;
use crate::stress::tensor::Tensor;
use crate::stress::{HorizontalStresses, Made, Stress};
use crate::units::{Angle, Pressure, Quantity};
use crate::well::wall::setup::{Seepage, WallSetup};

impl Vary {
    /// The field of a strength that it is.
    fn field(self) -> Option<&'static str> {
        match self.input {
            Varied::Cohesion => Some("/cohesion"),
            Varied::Ucs => Some("/ucs"),
            Varied::FrictionAngle => Some("/friction_angle"),
            Varied::SigmaCi => Some("/sigma_ci"),
            Varied::IntactConstant => Some("/m_i"),
            Varied::Gsi => Some("/gsi"),
            Varied::Disturbance => Some("/disturbance"),
            _ => None,
        }
    }

    /// The number of the input in a wall, in SI.
    ///
    /// # Errors
    /// When the wall has no such input.
    pub(crate) fn value(self, wall: &WallSetup) -> Result<f64> {
        let inputs = &wall.inputs;
        let horizontal = || geographic(wall).horizontal_stresses();
        let hole = inputs.stress.attitude();
        let missing = |instead: &str| {
            Error::not_physical(
                format!("Varying the {} of {}", self.name(), inputs.rock.strength.name()),
                instead.to_owned(),
            )
        };
        match self.input {
            Varied::VerticalStress => Ok(horizontal().sv.si()),
            Varied::LargerHorizontal => self.of_unequal(&horizontal()).map(|h| h.sh_max.si()),
            Varied::SmallerHorizontal => self.of_unequal(&horizontal()).map(|h| h.sh_min.si()),
            Varied::HorizontalAzimuth => {
                let azimuth = self.of_unequal(&horizontal())?.sh_max_azimuth;
                azimuth.map_or(Ok(f64::NAN), |azimuth| azimuth.true_north().map(Quantity::si))
            }
            Varied::PorePressure => Ok(inputs.pore.si()),
            Varied::Poisson => Ok(inputs.rock.poisson),
            Varied::TensileStrength => Ok(inputs.rock.tensile_strength.si()),
            Varied::Inclination => Ok(hole.map_or(f64::NAN, |hole| hole.inclination.si())),
            Varied::HoleAzimuth => hole.map_or(Ok(f64::NAN), |hole| hole.azimuth.true_north().map(Quantity::si)),
            Varied::Biot => wall.seepage.map(|s| s.biot).ok_or_else(|| {
                Error::not_physical(
                    "Varying Biot's coefficient of an impermeable wall",
                    "it has no part in it; make the wall permeable or leave it out.",
                )
            }),
            Varied::Cohesion
            | Varied::Ucs
            | Varied::FrictionAngle
            | Varied::SigmaCi
            | Varied::IntactConstant
            | Varied::Gsi
            | Varied::Disturbance => {
                let numbers = inputs.rock.strength.write().numbers();
                let found = numbers.into_iter().find(|(place, _)| Some(place.as_str()) == self.field());
                found
                    .map(|(_, number)| number)
                    .ok_or_else(|| missing("this strength was not stated by it; vary a number that it was stated by."))
            }
        }
    }

    /// The horizontal stresses, where there is a larger and a smaller one.
    fn of_unequal(self, horizontal: &HorizontalStresses) -> Result<HorizontalStresses> {
        if horizontal.sh_max_azimuth.is_some() {
            return Ok(*horizontal);
        }
        Err(Error::not_physical(
            format!("Varying the {} where all horizontal stresses are equal", self.name()),
            "there is no larger or smaller one; vary the vertical stress, or state horizontal stresses that differ.",
        ))
    }

    /// The wall with the input less (side −1) or more (+1) by the amount.
    ///
    /// # Errors
    /// When the wall has no such input, or the changed number is out of its range.
    pub(super) fn changed(self, wall: &WallSetup, side: f64) -> Result<WallSetup> {
        let value = self.value(wall)? + side * self.by();
        let mut setup = *wall;
        let inputs = &mut setup.inputs;
        match self.input {
            Varied::VerticalStress
            | Varied::LargerHorizontal
            | Varied::SmallerHorizontal
            | Varied::HorizontalAzimuth => {
                let far = self.changed_stress(wall.inputs.stress.geographic(), side);
                inputs.stress = in_hole(far, wall.inputs.stress.axes())?;
            }
            Varied::PorePressure => inputs.pore = Pressure::from_si(value),
            Varied::Poisson => inputs.rock.poisson = value,
            Varied::TensileStrength => inputs.rock.tensile_strength = Pressure::from_si(value),
            Varied::Biot => {
                setup.seepage = setup.seepage.map(|seepage| Seepage { biot: value, ..seepage });
            }
            Varied::Inclination | Varied::HoleAzimuth => {
                inputs.stress = in_hole(wall.inputs.stress.geographic(), self.turned_hole(wall, side)?)?;
            }
            Varied::Cohesion
            | Varied::Ucs
            | Varied::FrictionAngle
            | Varied::SigmaCi
            | Varied::IntactConstant
            | Varied::Gsi
            | Varied::Disturbance => {
                let field = self.field().unwrap_or_default();
                inputs.rock.strength = Strength::read(&inputs.rock.strength.write().with_number(field, value))?;
            }
        }
        setup.checked().map_err(|error| {
            Error::not_physical(
                format!("Varying the {} to {}", self.name(), self.shown(value)),
                format!("{error} Vary it by less."),
            )
        })?;
        Ok(setup)
    }

    fn changed_stress(self, far: Tensor, side: f64) -> Tensor {
        let by = side * self.by();
        let [nn, ee, _, ne, ..] = far.0;
        let azimuth = 0.5 * ne.atan2(0.5 * (nn - ee));
        let (s, c) = azimuth.sin_cos();
        let along = |n: f64, e: f64| Tensor([n * n, e * e, 0.0, n * e, 0.0, 0.0]).scale(by);
        match self.input {
            Varied::VerticalStress => far.add(Tensor([0.0, 0.0, by, 0.0, 0.0, 0.0])),
            Varied::LargerHorizontal => far.add(along(c, s)),
            Varied::SmallerHorizontal => far.add(along(-s, c)),
            Varied::HorizontalAzimuth => {
                let (s, c) = by.sin_cos();
                let turn: M3 = [[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]];
                far.turned(&transpose(&turn))
            }
            _ => far,
        }
    }

    /// The hole with another inclination or azimuth.
    fn turned_hole(self, wall: &WallSetup, side: f64) -> Result<Axes> {
        let Axes::Hole { attitude, name } = wall.inputs.stress.axes() else {
            return Ok(wall.inputs.stress.axes());
        };
        let by = Angle::from_si(side * self.by());
        if self.input == Varied::HoleAzimuth {
            return Ok(Axes::Hole { attitude: Attitude { azimuth: attitude.azimuth.turned_by(by), ..attitude }, name });
        }
        let leaning = attitude.inclination + by;
        let half = Angle::deg(180.0);
        // Past the vertical a hole leans to the other side.
        let (inclination, azimuth) = if leaning < Angle::default() {
            (-leaning, attitude.azimuth.turned_by(half))
        } else if leaning > half {
            (half + half - leaning, attitude.azimuth.turned_by(half))
        } else {
            (leaning, attitude.azimuth)
        };
        Ok(Axes::Hole { attitude: Attitude { inclination, azimuth }, name })
    }
}

/// The stress of a wall in north, east, down.
fn geographic(wall: &WallSetup) -> Stress<Geographic> {
    Stress::of(wall.inputs.stress.geographic(), Made::Combined { parts: None }, None)
}

/// A geographic tensor carried to a hole.
fn in_hole(far: Tensor, axes: Axes) -> Result<Stress<Borehole>> {
    Ok(Stress::of(far.turned(&axes.matrix()?), Made::Combined { parts: None }, Some((far, axes))))
}
