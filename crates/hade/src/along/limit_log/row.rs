//! One depth of a log.

use serde::{Deserialize, Serialize};

use super::choices::LogChoices;
use crate::along::ground::AtPlace;
use crate::error::{Error, Result};
use crate::frames::Name;
use crate::units::{Density, Length, Pressure, Warming, with_typed_unit};
use crate::well::{Ends, GovernedPressure, Wall, pushed_out_above};

/// The limits at one depth of a log. At a contact there are two rows, one for each layer.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct LogRow {
    /// The measured depth.
    pub md: Length,
    /// The true vertical depth below the rotary table.
    pub tvd: Length,
    pub(super) layer: Name,
    /// Whether the pore pressure was drawn down there.
    pub depleted: bool,
    /// The total vertical stress.
    pub sv: Pressure,
    /// The larger horizontal stress.
    pub sh_max: Pressure,
    /// The smaller horizontal stress.
    pub sh_min: Pressure,
    /// The pore pressure.
    pub pore: Pressure,
    /// How much the mud warms the wall, cooling negative; `None` where the wall is at the temperature of the
    /// ground.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub warming: Option<Warming>,
    /// The least principal stress.
    pub least_stress: Pressure,
    /// The lower shear limit at the allowed width; `None` when no pressure keeps failing arcs within it,
    /// or when any does.
    pub lower_shear: Option<Pressure>,
    /// Initiation; `None` when the wall is parted or spalled at any pressure.
    pub initiation: Option<Pressure>,
    /// Above it the hole is pushed out in shear; `None` when some place fails at any pressure, or none at
    /// any high one.
    pub upper_shear: Option<Pressure>,
    /// The bottom of the recommended range; `None` when no pressure keeps failing arcs within the width.
    pub bottom: Option<GovernedPressure>,
    /// The top of the recommended range.
    pub top: Option<GovernedPressure>,
}

impl LogRow {
    pub(super) fn of(state: &AtPlace, choices: &LogChoices) -> Result<Self> {
        let Ends { limits, bottom, top } = ends(state, choices)?;
        Ok(LogRow {
            md: state.md,
            tvd: state.tvd,
            layer: state.layer_name(),
            depleted: state.drawdown.is_some(),
            sv: state.sv,
            sh_max: state.sh_max,
            sh_min: state.sh_min,
            pore: state.pore,
            warming: state.layer.thermal.map(|thermal| thermal.warming),
            least_stress: limits.least_stress.pressure().unwrap_or_default(),
            lower_shear: limits.lower_shear.pressure(),
            initiation: limits.initiation.pressure(),
            upper_shear: pushed_out_above(&limits.upper_shear),
            bottom,
            top,
        })
    }

    /// The name of the layer.
    pub fn layer(&self) -> &'static str {
        self.layer.text()
    }

    pub(crate) fn layer_name(&self) -> Name {
        self.layer
    }

    /// A pressure there as the mud weight whose static column gives it.
    pub fn mud_weight(&self, pressure: Pressure) -> Density {
        pressure.mud_weight_at(self.tvd)
    }

    /// How far the top is above the bottom; negative when no pressure is recommended, `None` when an end
    /// is missing.
    pub fn breadth(&self) -> Option<Pressure> {
        Some(self.top?.pressure - self.bottom?.pressure)
    }

    /// Whether no pressure is recommended there.
    pub fn is_empty(&self) -> bool {
        self.breadth().is_none_or(|breadth| breadth <= Pressure::default())
    }
}

/// The ends of the range where the ground is in this state.
pub(super) fn ends(state: &AtPlace, choices: &LogChoices) -> Result<Ends> {
    Wall::of(state.wall()?).and_then(|wall| wall.ends(&choices.at(state.place.at[2]))).map_err(|e| {
        Error::not_physical(
            format!("The wall at MD {} in {}", with_typed_unit(state.md), state.layer()),
            crate::lines::reason(&e) + ".",
        )
    })
}
