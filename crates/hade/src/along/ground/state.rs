//! What the ground says where a hole is, as a result of its own.

use serde::{Deserialize, Serialize};

use super::at_place::AtPlace;
use super::ground::Ground;
use super::in_hole::GroundInHole;
use super::record::GroundRecord;
use crate::error::Result;
use crate::frames::{Azimuth, Name};
use crate::stress::Stress;
use crate::units::{Angle, Length, Pressure, Warming, fixed};
use crate::well::{Survey, SurveyTableInputs, Wall};

/// Stress, pore pressure and rock where a hole is at a measured depth, from [`Ground::at`].
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct GroundState {
    /// The measured depth.
    pub md: Length,
    /// The true vertical depth below the rotary table.
    pub tvd: Length,
    /// The total vertical stress.
    pub sv: Pressure,
    /// The pore pressure, after any depletion.
    pub pore: Pressure,
    /// The smaller horizontal stress, after any depletion.
    pub sh_min: Pressure,
    /// The larger horizontal stress, after any depletion.
    pub sh_max: Pressure,
    /// The azimuth of the larger one.
    pub sh_max_azimuth: Azimuth,
    /// By how much the pore pressure was drawn down.
    pub drawdown: Option<Pressure>,
    /// By how much the mud warms the wall (cooling negative); `None` where nothing says it.
    pub warming: Option<Warming>,
    pub(super) there: AtPlace,
    pub(super) record: GroundStateInputs,
    pub(super) survey: Survey,
    pub(super) ground: Ground,
}

/// The inputs: the survey, the ground reduced to what the depth needs, and the measured depth.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct GroundStateInputs {
    pub(super) survey: SurveyTableInputs,
    pub(super) ground: GroundRecord,
    pub(super) md: Length,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct GroundStateOutcome {
    pub(super) layer: Name,
    pub(super) tvd: Length,
    pub(super) sv: Pressure,
    pub(super) pore: Pressure,
    pub(super) sh_min: Pressure,
    pub(super) sh_max: Pressure,
    /// From true north.
    pub(super) sh_max_azimuth: Angle,
    pub(super) drawdown: Option<Pressure>,
    pub(super) warming: Option<Warming>,
}

impl GroundState {
    pub(super) fn of(ground: &Ground, survey: &Survey, md: Length) -> Result<Self> {
        // So that the record can hold it.
        survey.table()?;
        let in_hole = GroundInHole::new(ground, survey)?;
        let place = survey.place(md)?;
        let layer = in_hole.layer_at(&place)?;
        let there = in_hole.state(&place, layer)?;
        let record = GroundStateInputs { survey: survey.record(), ground: in_hole.record(&[(place, layer)]), md };
        Ok(GroundState {
            md: there.md,
            tvd: there.tvd,
            sv: there.sv,
            pore: there.pore,
            sh_min: there.sh_min,
            sh_max: there.sh_max,
            sh_max_azimuth: there.sh_max_azimuth,
            drawdown: there.drawdown,
            warming: there.layer.thermal.map(|thermal| thermal.warming),
            there,
            record,
            survey: survey.clone(),
            ground: ground.clone(),
        })
    }

    /// The name of the layer.
    pub fn layer(&self) -> &'static str {
        self.there.layer()
    }

    /// The total stress there, the vertical being a principal direction.
    ///
    /// # Errors
    /// When S_Hmax is smaller than S_hmin.
    pub fn stress(&self) -> Result<Stress> {
        self.there.stress()
    }

    /// The wall of the hole there: this stress carried into the axes of the hole, the layer's rock, and what else is
    /// said of the layer: how its wall is sealed, warmed or cooled, a plane of weakness, that it creeps.
    ///
    /// # Errors
    /// When a number of the layer is out of its range.
    pub fn wall(&self) -> Result<Wall> {
        Wall::of(self.there.wall()?)
    }

    /// "KF-3 at MD 3455.00 m".
    pub(super) fn place_words(&self) -> String {
        let hole = self.survey.hole().map_or("the hole", |name| name.text());
        format!("{hole} at MD {} m", fixed(self.md.in_m(), 2))
    }
}
