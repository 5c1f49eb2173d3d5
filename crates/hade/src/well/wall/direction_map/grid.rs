//! The directions of a map, and the values of all of them.

use rayon::prelude::*;

use super::direction_map::{DirectionMapInputs, MapInputs};
use super::map_of::MapOf;
use crate::error::{Error, Result};
use crate::progress::Progress;
use crate::stress::tensor::Tensor;
use crate::units::{Pressure, Quantity, with_typed_unit};
use crate::well::wall::elastic::{Kirsch, in_hole};
use crate::well::wall::shear::ShearWall;

/// Inclinations 0–90° and azimuths 0° to below 360° at one step, row by row from the vertical.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Grid {
    /// In radians.
    pub step: f64,
    pub rows: usize,
    pub azimuths: usize,
}

impl Grid {
    /// # Errors
    /// When the step does not divide 90° or is below 0.1°, or an input is out of its range.
    pub fn of(inputs: &MapInputs) -> Result<Self> {
        let degrees = inputs.step.in_deg();
        let quarter = (90.0 / degrees).round();
        let fits = (quarter * degrees - 90.0).abs() < 1e-9;
        if !(degrees >= 0.1 && fits) {
            return Err(Error::out_of_range(
                "step of the map",
                with_typed_unit(inputs.step),
                "0.1° or more, and a whole part of 90° (0.5°, 1°, 5°)",
            ));
        }
        inputs.stress.tensor().finite("stress")?;
        inputs.pore.finite("pore pressure")?;
        inputs.rock.checked()?;
        let quarter = quarter as usize;
        Ok(Grid { step: inputs.step.si(), rows: quarter + 1, azimuths: 4 * quarter })
    }

    /// Inclination and azimuth of a direction by its number, radians.
    pub fn direction(&self, number: usize) -> (f64, f64) {
        let at = |k: usize| k as f64 * self.step;
        (at(number / self.azimuths), at(number % self.azimuths))
    }

    /// The share of the lower hemisphere that a direction of a row stands for: its part of the band
    /// between the inclinations half a step off.
    pub fn share(&self, row: usize) -> f64 {
        let middle = row as f64 * self.step;
        let above = (middle - 0.5 * self.step).max(0.0);
        let below = (middle + 0.5 * self.step).min(std::f64::consts::FRAC_PI_2);
        (above.cos() - below.cos()) / self.azimuths as f64
    }

    /// The values of all directions under a stress in north, east, down. They are shared out to the cores.
    pub fn values(&self, inputs: &DirectionMapInputs, far: Tensor) -> Vec<Option<Pressure>> {
        match inputs.of {
            // By itself, so that the loop is as tight as can be.
            MapOf::LowerShear => self.filled(inputs, far, |wall| wall.lower()),
            of => {
                let [.., least] = far.eigen().values;
                self.filled(inputs, far, |wall| of.of_wall(wall, &inputs.map, least))
            }
        }
    }

    fn filled(
        &self,
        inputs: &DirectionMapInputs,
        far: Tensor,
        value: impl Fn(&ShearWall) -> Option<f64> + Sync,
    ) -> Vec<Option<Pressure>> {
        let MapInputs { pore, rock, .. } = inputs.map;
        let (law, pore, poisson) = (rock.strength.law(), pore.si(), rock.poisson);
        let warmed = inputs.thermal_stress();
        let turns: Vec<(f64, f64)> = (0..self.azimuths).map(|k| (k as f64 * self.step).sin_cos()).collect();
        let mut values = vec![None; self.rows * self.azimuths];
        let progress = Progress::new(&format!("limits of {} directions", values.len()), values.len());
        values.par_chunks_mut(self.azimuths).enumerate().for_each(|(row, cells)| {
            progress.advance(cells.len());
            let inclined = (row as f64 * self.step).sin_cos();
            for (cell, turned) in cells.iter_mut().zip(&turns) {
                let kirsch = Kirsch::of(in_hole(far.0, inclined, *turned), poisson).warmed(warmed);
                let wall = ShearWall::new(kirsch, law, None, pore, 0.0, 0.0);
                *cell = value(&wall).map(Pressure::from_si);
            }
        });
        values
    }
}

/// The wall of a hole of any direction (inclination and azimuth in radians).
pub(super) fn wall_at(inputs: &DirectionMapInputs, (inclination, azimuth): (f64, f64)) -> ShearWall {
    let MapInputs { stress, pore, rock, .. } = inputs.map;
    let local = in_hole(stress.tensor().0, inclination.sin_cos(), azimuth.sin_cos());
    let kirsch = Kirsch::of(local, rock.poisson).warmed(inputs.thermal_stress());
    ShearWall::new(kirsch, rock.strength.law(), None, pore.si(), 0.0, 0.0)
}
