//! Intervals of measured depth that a file says, each in a layer.

use std::path::Path;

use super::ground::{Ground, Interval};
use super::layer::Layer;
use crate::error::Result;
use crate::frames::Name;
use crate::units::Length;

/// Intervals of measured depth with the layers they are in, from [`Ground::read_intervals`].
#[derive(Clone, Debug, PartialEq)]
pub struct LayerIntervals {
    pub(super) layers: Vec<Layer>,
    pub(super) intervals: Vec<(Length, Length, Name)>,
    pub(super) file: [Name; 2],
}

impl LayerIntervals {
    /// The layers, each once: for [`GroundInputs::layers`](super::GroundInputs::layers), alone or beside layers
    /// that have tops.
    pub fn layers(&self) -> Vec<Layer> {
        self.layers.clone()
    }

    /// From which measured depth to which the hole is in the layer of a name.
    pub fn intervals(&self) -> Vec<(Length, Length, &'static str)> {
        self.intervals.iter().map(|(from, to, name)| (*from, *to, name.text())).collect()
    }
}

impl Ground {
    /// Intervals of measured depth from a CSV file, for holes that run along their layers. What a layer is of
    /// stands in the columns of [`Ground::read_layers`]; the same layer may come again, stated alike.
    ///
    /// ```text
    /// # datum: rotary table
    /// # depth_unit: m | ft
    /// # pressure_unit: MPa | kPa | Pa | bar | psi
    /// # angle_unit: deg
    /// from,to,layer,poisson,tensile_strength,ucs,friction_angle
    /// ```
    ///
    /// `let lateral = Ground::read_intervals("data/kf3-lateral.csv")?;`, then `layers: lateral.layers()` in the
    /// inputs of the ground, and `ground.with_intervals_from(&lateral)?`.
    ///
    /// # Errors
    /// With file, line, column and what to change: as [`Ground::read_layers`], and where a row does not begin
    /// where the one before ends.
    pub fn read_intervals(path: impl AsRef<Path>) -> Result<LayerIntervals> {
        super::read::read_intervals(path.as_ref())
    }

    /// The same with the intervals of a file.
    ///
    /// # Errors
    /// When the ground lacks one of its layers.
    pub fn with_intervals_from(&self, read: &LayerIntervals) -> Result<Self> {
        let ground = self.with_intervals(&read.intervals())?;
        let intervals = ground.intervals.iter().map(|i| Interval { file: Some(read.file), ..*i }).collect();
        Ok(Ground { intervals, ..ground })
    }
}
