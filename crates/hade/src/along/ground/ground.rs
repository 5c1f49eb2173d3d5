//! The ground as it is stated.

use std::path::Path;

use serde::{Deserialize, Serialize};

use super::at_place::AtPlace;
use super::in_hole::GroundInHole;
use super::layer::Layer;
use super::state::GroundState;
use super::temperatures::Temperatures;
use crate::error::{Error, Result};
use crate::field::PressureProfile;
use crate::frames::{Azimuth, Name};
use crate::units::{Length, Quantity, with_typed_unit};
use crate::well::Survey;

/// What the ground is made of. Nothing of it is defaulted.
#[derive(Clone, Debug, PartialEq)]
pub struct GroundInputs {
    /// The vertical stress against depth.
    pub sv: PressureProfile,
    /// The pore pressure against depth, before any depletion.
    pub pore: PressureProfile,
    /// The horizontal stresses against depth, before any depletion; `None` when every layer states its
    /// ratios.
    pub horizontals: Option<HorizontalProfiles>,
    /// The azimuth of the larger horizontal stress, in every layer that states none of its own.
    pub sh_max_azimuth: Azimuth,
    /// The layers, from the top down.
    pub layers: Vec<Layer>,
}

/// The horizontal stresses against depth.
#[derive(Clone, Debug, PartialEq)]
pub struct HorizontalProfiles {
    /// The smaller one.
    pub sh_min: PressureProfile,
    /// The larger one.
    pub sh_max: PressureProfile,
}

/// An interval of measured depth in which the hole is in a layer, by its place in the list.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub(crate) struct Interval {
    pub from: Length,
    pub to: Length,
    pub layer: usize,
    /// The file it was read from, and its SHA-256.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub file: Option<[Name; 2]>,
}

/// The ground along a hole: stress, pore pressure and rock, by depth and in layers.
#[derive(Clone, Debug, PartialEq)]
pub struct Ground {
    pub(super) inputs: GroundInputs,
    pub(super) intervals: Vec<Interval>,
    pub(super) temperatures: Option<Temperatures>,
}

/// More layers, or more intervals, are no list that a record can hold.
pub(super) const MOST: usize = 200;

impl Ground {
    /// The ground.
    ///
    /// # Errors
    /// When there is no layer or more than 200, two have one name, the azimuth has no true north, or a
    /// layer without ratios stands in a ground without profiles of the horizontal stresses.
    pub fn new(inputs: GroundInputs) -> Result<Self> {
        let count = inputs.layers.len();
        if count == 0 || count > MOST {
            return Err(Error::out_of_range(
                "the number of layers",
                count.to_string(),
                format!("between 1 and {MOST}"),
            ));
        }
        inputs.sh_max_azimuth.true_north()?;
        for (k, layer) in inputs.layers.iter().enumerate() {
            if inputs.layers.iter().take(k).any(|other| other.name == layer.name) {
                return Err(Error::not_physical(
                    format!("Two layers have the name {}", layer.name),
                    "give each layer its own name; where the hole enters one again, say so with .with_intervals(…)?.",
                ));
            }
            if inputs.horizontals.is_none() && layer.ratios.is_none() {
                return Err(Error::undeclared(
                    format!("Nothing says the horizontal stresses of the layer {}", layer.name),
                    "state its ratios of effective stress with .horizontal_ratios(min, max)?, or give the ground profiles of S_hmin and S_Hmax.",
                ));
            }
            if let Some(azimuth) = layer.sh_max_azimuth {
                azimuth.true_north()?;
            }
        }
        Ok(Ground { inputs, intervals: Vec::new(), temperatures: None })
    }

    /// The same with intervals of measured depth (from, to, name of the layer) in which the hole is in a
    /// stated layer, whatever the tops say: for holes that run along their layers. The interval changes the
    /// rock and what else the layer states; a table of horizontal stresses is then read straight across.
    ///
    /// `ground.with_intervals(&[(2950.m(), 3120.m(), "Tern sand")])?`
    ///
    /// # Errors
    /// When an interval names no layer, does not end below its beginning, or overlaps the one before.
    pub fn with_intervals(&self, intervals: &[(Length, Length, &str)]) -> Result<Self> {
        if intervals.len() > MOST {
            return Err(Error::out_of_range(
                "the number of intervals",
                intervals.len().to_string(),
                format!("at most {MOST}"),
            ));
        }
        let mut found: Vec<Interval> = Vec::with_capacity(intervals.len());
        for (from, to, name) in intervals.iter().copied() {
            let layer = self.inputs.layers.iter().position(|layer| layer.name.text() == name.trim());
            let Some(layer) = layer else {
                let known: Vec<&str> = self.inputs.layers.iter().map(Layer::name).collect();
                return Err(Error::undeclared(
                    format!("The interval from MD {} is in \"{name}\"", with_typed_unit(from)),
                    format!("the ground has no such layer; it has {}.", known.join(", ")),
                ));
            };
            let (from, to) = (from.finite("beginning of an interval")?, to.finite("end of an interval")?);
            if from >= to || from.si() < 0.0 {
                return Err(Error::not_physical(
                    format!("The interval from MD {} to {}", with_typed_unit(from), with_typed_unit(to)),
                    "its end must lie below its beginning, and that not above the rotary table.",
                ));
            }
            if let Some(above) = found.last().filter(|above| above.to > from) {
                return Err(Error::not_physical(
                    format!("The interval from MD {}", with_typed_unit(from)),
                    format!(
                        "the one before it ends at {}; sort the intervals, and let none overlap.",
                        with_typed_unit(above.to)
                    ),
                ));
            }
            found.push(Interval { from, to, layer, file: None });
        }
        Ok(Ground { intervals: found, ..self.clone() })
    }

    /// Layers from a CSV file, each from its top down. Lines that begin with `#` above the column names
    /// declare what a table of numbers cannot say:
    ///
    /// ```text
    /// # datum: rotary table | mean sea level | ground | mudline
    /// # depth_unit: m | ft
    /// # pressure_unit: MPa | kPa | Pa | bar | psi
    /// # angle_unit: deg
    /// # north: true | grid | magnetic       (where a column holds azimuths)
    /// # north_correction: -1.32             (degrees, east positive; for grid and magnetic)
    /// # rotary_table_above_msl: 32.4 m      (optional: tops of another hole, carried at equal elevation)
    /// layer,top,poisson,tensile_strength,ucs,friction_angle
    /// ```
    ///
    /// `cohesion` may stand in place of `ucs`; rock is Mohr–Coulomb. Further columns, each optional, their cells
    /// empty where they do not apply:
    ///
    /// - `strike`, `dip`, `north`, `east` of a dipping top; an empty top makes a layer that intervals of measured
    ///   depth reach;
    /// - `sh_max_azimuth`, and `k_min`, `k_max` (ratios of effective stress);
    /// - `drawdown`, `path_min` (A, or `uniaxial` with `biot`), `path_max` (A, or `as min`) of a depleted layer;
    /// - `wall`: `impermeable`, `permeable` (with `biot`) or `partly sealed` (with `biot` and `sealing`); empty
    ///   leaves it impermeable, as a layer is made;
    /// - `youngs_modulus`, `thermal_expansion`, with `# modulus_unit: GPa | MPa | psi` and
    ///   `# expansion_unit: 1/K | 1e-6/K`.
    ///
    /// # Errors
    /// With file, line, column and what to change: a missing declaration or column, decimal commas, tops
    /// that do not deepen, and what [`Layer::from`] refuses.
    pub fn read_layers(path: impl AsRef<Path>) -> Result<Vec<Layer>> {
        super::read::read_layers(path.as_ref())
    }

    /// Stress, pore pressure and rock where a hole is at a measured depth. At a contact it is what lies
    /// below.
    ///
    /// # Errors
    /// Where the ground says nothing of the depth, or what it says together cannot be; of a survey of more
    /// than 2000 stations, which no record holds.
    pub fn at(&self, survey: &Survey, md: Length) -> Result<GroundState> {
        GroundState::of(self, survey, md)
    }

    /// The same as the logs use it.
    pub(crate) fn at_place(&self, survey: &Survey, md: Length) -> Result<AtPlace> {
        let in_hole = GroundInHole::new(self, survey)?;
        let place = survey.place(md)?;
        in_hole.state(&place, in_hole.layer_at(&place)?)
    }

    /// What it was made of; intervals of measured depth and temperatures are not of it.
    pub fn inputs(&self) -> GroundInputs {
        self.inputs.clone()
    }

    /// The layers, from the top down.
    pub fn layers(&self) -> Vec<Layer> {
        self.inputs.layers.clone()
    }
}
