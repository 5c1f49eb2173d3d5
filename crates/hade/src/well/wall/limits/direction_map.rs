//! The lower shear limit of holes in every direction.

use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
use crate::frames::Attitude;
use crate::interrupt;
use crate::rock::Rock;
use crate::stress::Stress;
use crate::stress::tensor::Tensor;
use crate::units::{Angle, Pressure, Quantity, with_typed_unit};
use crate::well::wall::elastic::Kirsch;
use crate::well::wall::shear::ShearWall;

/// What a map over hole directions is made of. Nothing of it is defaulted.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct MapInputs {
    /// The total stress, north, east, down.
    pub stress: Stress,
    /// The pore pressure of the formation.
    pub pore: Pressure,
    /// The rock.
    pub rock: Rock,
    /// The distance of two directions in inclination and in azimuth; it must divide 90°.
    pub step: Angle,
}

/// The lower shear limits of impermeable walls in every direction: inclination 0–90° and azimuth 0°
/// to below 360°, at a step.
#[derive(Clone, Debug, PartialEq)]
pub struct DirectionMap {
    inputs: MapInputs,
    azimuths: usize,
    lower: Vec<Option<Pressure>>,
}

impl DirectionMap {
    /// The map. Each limit is exact in the tool face; the directions are shared out to the cores.
    ///
    /// # Errors
    /// When the step does not divide 90° or is below 0.1°, a number is not finite, or the rock is out
    /// of its range.
    pub fn over(inputs: MapInputs) -> Result<Self> {
        let degrees = inputs.step.in_deg();
        let rows = (90.0 / degrees).round();
        let fits = (rows * degrees - 90.0).abs() < 1e-9;
        if !(degrees >= 0.1 && fits) {
            return Err(Error::out_of_range(
                "step of the map",
                with_typed_unit(inputs.step),
                "0.1° or more, and a whole part of 90° (0.5°, 1°, 5°)",
            ));
        }
        let far = inputs.stress.tensor().finite("stress")?;
        inputs.pore.finite("pore pressure")?;
        let rock = inputs.rock.checked()?;
        let (law, pore) = (rock.strength.law(), inputs.pore.si());
        let rows = rows as usize;
        let azimuths = 4 * rows;
        let turns: Vec<(f64, f64)> = (0..azimuths).map(|k| (k as f64 * inputs.step.si()).sin_cos()).collect();
        let mut lower = vec![None; (rows + 1) * azimuths];
        lower.par_chunks_mut(azimuths).enumerate().for_each(|(row, cells)| {
            interrupt::check();
            let inclined = (row as f64 * inputs.step.si()).sin_cos();
            for (cell, turned) in cells.iter_mut().zip(&turns) {
                let kirsch = Kirsch::new(in_hole(far, inclined, *turned), rock.poisson);
                let wall = ShearWall::new(kirsch, law, None, pore, 0.0, 0.0);
                *cell = wall.lower().map(Pressure::from_si);
            }
        });
        Ok(DirectionMap { inputs, azimuths, lower })
    }

    /// What it was made of.
    pub fn inputs(&self) -> MapInputs {
        self.inputs
    }

    /// The limit of the direction of the map nearest to a hole's attitude; `None` where no pressure is
    /// safe.
    ///
    /// # Errors
    /// When the inclination is outside 0–90° or the azimuth has no true north.
    pub fn lower_shear(&self, hole: Attitude) -> Result<Option<Pressure>> {
        let (inclination, azimuth) = hole.angles()?;
        crate::units::require_between(
            "inclination of a mapped hole",
            hole.inclination,
            Angle::deg(0.0),
            Angle::deg(90.0),
        )?;
        let step = self.inputs.step.si();
        let row = (inclination / step).round() as usize;
        let column = (azimuth / step).round() as usize % self.azimuths;
        Ok(self.lower.get(row * self.azimuths + column).copied().flatten())
    }

    /// Every direction with its limit: inclination, azimuth, pressure.
    pub fn all(&self) -> impl Iterator<Item = (Angle, Angle, Option<Pressure>)> {
        let (step, azimuths) = (self.inputs.step.si(), self.azimuths);
        self.lower.iter().enumerate().map(move |(k, limit)| {
            let at = |k: usize| Angle::from_si(k as f64 * step);
            (at(k / azimuths), at(k % azimuths), *limit)
        })
    }
}

/// A stress in north, east, down in the axes of a hole, by the sines and cosines of its inclination and
/// azimuth.
#[inline(always)]
fn in_hole(far: Tensor, (si, ci): (f64, f64), (sa, ca): (f64, f64)) -> Tensor {
    let [nn, ee, dd, ne, ed, nd] = far.0;
    // About down to the azimuth, then about the right axis by the inclination.
    let uu = nn * ca * ca + ee * sa * sa + 2.0 * ne * sa * ca;
    let vv = nn * sa * sa + ee * ca * ca - 2.0 * ne * sa * ca;
    let uv = (ee - nn) * sa * ca + ne * (ca * ca - sa * sa);
    let (ud, vd) = (nd * ca + ed * sa, ed * ca - nd * sa);
    Tensor([
        ci * ci * uu + si * si * dd - 2.0 * si * ci * ud,
        vv,
        si * si * uu + ci * ci * dd + 2.0 * si * ci * ud,
        ci * uv - si * vd,
        si * uv + ci * vd,
        si * ci * (uu - dd) + (ci * ci - si * si) * ud,
    ])
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Azimuth;
    use crate::rock::Strength;
    use crate::stress::Components;
    use crate::units::Units;
    use crate::well::{Wall, WallInputs};

    fn inputs(strength: Strength) -> MapInputs {
        let stress = Stress::from_components(Components {
            nn: 50.mpa(),
            ee: 42.mpa(),
            dd: 60.mpa(),
            ne: 3.mpa(),
            nd: (-4).mpa(),
            ed: 5.mpa(),
        })
        .unwrap();
        let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
        MapInputs { stress, pore: 20.mpa(), rock, step: 15.deg() }
    }

    #[test]
    fn each_direction_is_the_limit_of_its_wall() {
        for strength in [Strength::mohr_coulomb(10.mpa(), 30.deg()), Strength::mogi_coulomb(10.mpa(), 30.deg())] {
            let inputs = inputs(strength);
            let map = DirectionMap::over(inputs).unwrap();
            assert_eq!(map.all().count(), 7 * 24);
            for (inclination, azimuth, limit) in map.all() {
                let hole = Attitude { inclination, azimuth: Azimuth::from_true_north(azimuth) };
                let stress = hole.chain().unwrap().carry(&inputs.stress);
                let wall = Wall::new(WallInputs { stress, pore: inputs.pore, rock: inputs.rock }).unwrap();
                match (limit, wall.lower_shear_limit()) {
                    (Some(a), Some(b)) => assert!((a - b).abs() < 1e-3.pa(), "{inclination} {azimuth}: {a} {b}"),
                    (a, b) => assert_eq!(a, b),
                }
                assert_eq!(map.lower_shear(hole).unwrap(), limit);
            }
        }
    }

    #[test]
    fn steps_that_do_not_divide_a_right_angle_are_refused() {
        let inputs = inputs(Strength::mohr_coulomb(10.mpa(), 30.deg()));
        for step in [0.0, -1.0, f64::NAN, 0.05, 7.0, 100.0] {
            let said = DirectionMap::over(MapInputs { step: step.deg(), ..inputs }).unwrap_err().to_string();
            assert!(said.starts_with("step of the map is"), "{said}");
        }
    }
}
