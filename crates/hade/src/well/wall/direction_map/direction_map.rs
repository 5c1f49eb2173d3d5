//! A limit of holes in every direction.

use std::sync::Arc;

use serde::{Deserialize, Serialize};

use super::extremes::extremes;
use super::grid::{Grid, wall_at};
use super::map_of::MapOf;
use super::path::Path;
use crate::card::Explain;
use crate::error::Result;
use crate::frames::{Attitude, Azimuth};
use crate::rock::Rock;
use crate::stress::Stress;
use crate::units::{Angle, Pressure, Quantity};
use crate::well::survey::Survey;
use crate::well::wall::setup::Thermal;

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

/// A limit of impermeable walls in every direction: inclination 0–90° and azimuth 0° to below 360°, at a
/// step. It is the lower shear limit until [`of`](DirectionMap::of) says otherwise.
///
/// A hole has the wall of its line, so one that rises has the limit of the hole that goes down the same line
/// the other way.
///
/// Copies are cheap: they share the values.
#[derive(Clone, Debug, PartialEq)]
pub struct DirectionMap {
    pub(super) inputs: DirectionMapInputs,
    pub(super) grid: Grid,
    pub(super) values: Arc<Vec<Option<Pressure>>>,
}

/// The inputs of the card: those of the map, which limit it is, and the path drawn on it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct DirectionMapInputs {
    pub(super) map: MapInputs,
    pub(super) of: MapOf,
    pub(super) path: Option<Path>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(super) thermal: Option<Thermal>,
}

impl DirectionMapInputs {
    /// What the mud's temperature adds to hoop and axial stress of every hole, Pa.
    pub(super) fn thermal_stress(&self) -> f64 {
        self.thermal.map_or(0.0, |thermal| thermal.stress(self.map.rock.poisson))
    }
}

/// A direction of the map with its limit.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct MappedDirection {
    /// From vertical-down, 0–90°.
    pub inclination: Angle,
    /// From true north, 0° to below 360°.
    pub azimuth: Angle,
    /// The limit (or the width of the range); `None` where no pressure is safe.
    pub limit: Option<Pressure>,
}

/// What came out.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MapOutcome {
    /// The best of the mapped directions, the first of those that are equally good; `None` when no
    /// direction has a safe pressure.
    pub(super) best: Option<MappedDirection>,
    /// How many other lines are as good, a whole number.
    pub(super) as_good: f64,
    /// The worst that still has a safe pressure.
    pub(super) worst: Option<MappedDirection>,
    /// How many other lines are as bad, a whole number.
    pub(super) as_bad: f64,
    /// The share of the lower hemisphere (0–1, of its area) without a safe pressure; of a width also where
    /// it is not above zero.
    pub(super) share_without: f64,
    /// The limit at each direction of the path.
    pub(super) on_path: Vec<Option<Pressure>>,
}

impl DirectionMap {
    /// The map of the lower shear limit. Each limit is exact in the tool face; the directions are shared out
    /// to the cores.
    ///
    /// # Errors
    /// When the step does not divide 90° or is below 0.1°, a number is not finite, or the rock is out
    /// of its range.
    pub fn over(inputs: MapInputs) -> Result<Self> {
        DirectionMap::build(DirectionMapInputs { map: inputs, of: MapOf::LowerShear, path: None, thermal: None })
    }

    pub(super) fn build(inputs: DirectionMapInputs) -> Result<Self> {
        let grid = Grid::of(&inputs.map)?;
        inputs.thermal.map(Thermal::checked).transpose()?;
        let values = Arc::new(grid.values(&inputs, inputs.map.stress.tensor()));
        Ok(DirectionMap { inputs, grid, values })
    }

    /// The map of another limit, over the same directions and with the same path.
    ///
    /// # Errors
    /// As [`DirectionMap::over`].
    pub fn of(&self, of: MapOf) -> Result<Self> {
        if of == self.inputs.of {
            return Ok(self.clone());
        }
        DirectionMap::build(DirectionMapInputs { of, ..self.inputs.clone() })
    }

    /// The same map of walls that the mud warms or cools, every one by as much:
    /// `map.thermal(Thermal { warming, youngs_modulus, expansion })?`.
    ///
    /// # Errors
    /// When E is not above zero, α_T is outside 0–10⁻³ 1/K, or a number is not finite.
    pub fn thermal(&self, thermal: Thermal) -> Result<Self> {
        DirectionMap::build(DirectionMapInputs { thermal: Some(thermal), ..self.inputs.clone() })
    }

    /// With a planned path drawn on it, and the limit at its directions. Of the survey's stations those are
    /// kept whose directions differ; the square is at the end of the path. For the direction at a depth:
    /// `map.with_planned(survey.at(depth)?.attitude)?`.
    ///
    /// # Errors
    /// When an azimuth has no true north.
    pub fn with_path(&self, survey: &Survey) -> Result<Self> {
        Ok(self.with(Path::of_survey(survey)?))
    }

    /// With one planned direction marked on it, and its limit.
    ///
    /// # Errors
    /// When the inclination is outside 0–180° or the azimuth has no true north.
    pub fn with_planned(&self, hole: Attitude) -> Result<Self> {
        Ok(self.with(Path::of_attitude(hole)?))
    }

    fn with(&self, path: Path) -> Self {
        let inputs = DirectionMapInputs { path: Some(path), ..self.inputs.clone() };
        DirectionMap { inputs, ..self.clone() }
    }

    /// What it was made of.
    pub fn inputs(&self) -> MapInputs {
        self.inputs.map
    }

    /// Which limit it shows.
    pub fn shows(&self) -> MapOf {
        self.inputs.of
    }

    /// The limit of a hole of exactly this attitude, also between the mapped directions; `None` where no
    /// pressure is safe.
    ///
    /// # Errors
    /// When the inclination is outside 0–180° or the azimuth has no true north.
    pub fn at(&self, hole: Attitude) -> Result<Option<Pressure>> {
        Ok(self.value(hole.angles()?).map(Pressure::from_si))
    }

    /// The value of a direction (inclination and azimuth in radians), in Pa.
    pub(super) fn value(&self, direction: (f64, f64)) -> Option<f64> {
        let map = &self.inputs.map;
        let [.., least] = map.stress.tensor().eigen().values;
        self.inputs.of.of_wall(&wall_at(&self.inputs, direction), map, least)
    }

    /// Every mapped direction with its limit, row by row from the vertical.
    pub fn all(&self) -> Vec<MappedDirection> {
        (0..self.values.len()).filter_map(|number| self.mapped(number)).collect()
    }

    fn mapped(&self, number: usize) -> Option<MappedDirection> {
        let (inclination, azimuth) = self.grid.direction(number);
        let limit = *self.values.get(number)?;
        Some(MappedDirection { inclination: Angle::from_si(inclination), azimuth: Angle::from_si(azimuth), limit })
    }

    /// The best of the mapped directions, the first (least inclined, then by azimuth) where several are
    /// equally good; `None` when no direction has a safe pressure.
    pub fn best(&self) -> Option<MappedDirection> {
        self.outcome().best
    }

    /// The worst of the mapped directions that have a safe pressure.
    pub fn worst(&self) -> Option<MappedDirection> {
        self.outcome().worst
    }

    /// The share of the lower hemisphere, by area, without a safe pressure: 0 none, 1 all.
    pub fn share_without(&self) -> f64 {
        self.outcome().share_without
    }

    pub(super) fn worked_out(&self) -> MapOutcome {
        let found = extremes(&self.grid, &self.values, self.inputs.of);
        let on_path = self.inputs.path.iter().flat_map(|path| &path.directions);
        MapOutcome {
            best: found.best.first().and_then(|number| self.mapped(*number)),
            as_good: found.best.len().saturating_sub(1) as f64,
            worst: found.worst.first().and_then(|number| self.mapped(*number)),
            as_bad: found.worst.len().saturating_sub(1) as f64,
            share_without: found.share_without,
            on_path: on_path.map(|direction| self.value(*direction).map(Pressure::from_si)).collect(),
        }
    }
}

impl MappedDirection {
    /// As an attitude, from true north.
    pub fn attitude(&self) -> Attitude {
        Attitude { inclination: self.inclination, azimuth: Azimuth::from_true_north(self.azimuth) }
    }
}
