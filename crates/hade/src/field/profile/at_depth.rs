//! The pressure of a profile at one depth.

use serde::{Deserialize, Serialize};

use super::about::{ProfileAbout, ProfileSource};
use super::at_depth_card::explain;
use super::law::{Law, Start};
use super::pressure_profile::PressureProfile;
use crate::card::{Check, Explain, Explanation};
use crate::error::Result;
use crate::frames::{Datum, DatumTie, Depth};
use crate::units::{Density, Gradient, Length, Pressure, Quantity};

/// The pressure or stress of a profile at one depth, from [`PressureProfile::at`].
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct PressureAtDepth {
    /// The pressure.
    pub pressure: Pressure,
    /// Its mean gradient over the depth below the rotary table; none at or above the table, or when
    /// its height is unknown.
    pub gradient: Option<Gradient>,
    /// The mud weight whose static column from the rotary table down has this pressure; none as the
    /// gradient.
    pub mud_weight: Option<Density>,
    law_depth: Length,
    below_rotary: Option<Length>,
    inputs: PressureAtDepthInputs,
}

/// The inputs as the record holds them: the law, of a long file only the points around the depth.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PressureAtDepthInputs {
    pub(super) about: ProfileAbout,
    pub(super) law: Law,
    pub(super) depth: Depth,
}

/// What came out, in SI.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct PressureAtDepthOutcome {
    pressure: Pressure,
    /// The depth below the datum of the profile.
    law_depth: Length,
    below_rotary: Option<Length>,
    gradient: Option<Gradient>,
    mud_weight: Option<Density>,
}

/// Depths that must meet may differ by this, metres.
const MEET: f64 = 1e-6;
/// The static gradient of a fluid of specific gravity 1 in psi/ft, from the definitions of both units.
const PSI_PER_FOOT: f64 = 0.433_527_504_001;

impl PressureAtDepth {
    pub(super) fn of(profile: &PressureProfile, depth: Depth) -> Result<Self> {
        let data = profile.data();
        let here = data.about.in_datum(depth, data.law.datum())?;
        let whole = data.about.source == ProfileSource::Typed;
        let inputs = PressureAtDepthInputs { about: data.about.clone(), law: data.law.near(here, whole), depth };
        PressureAtDepth::compute(inputs)
    }

    /// The depth asked for.
    pub fn depth(&self) -> Depth {
        self.inputs.depth
    }

    pub(super) fn record(&self) -> &PressureAtDepthInputs {
        &self.inputs
    }
    pub(super) fn law_depth(&self) -> Length {
        self.law_depth
    }
    pub(super) fn below_rotary(&self) -> Option<Length> {
        self.below_rotary
    }
}

impl Explain for PressureAtDepth {
    const KIND: &'static str = "pressure-at-depth";
    type Inputs = PressureAtDepthInputs;
    type Outcome = PressureAtDepthOutcome;

    fn compute(inputs: PressureAtDepthInputs) -> Result<Self> {
        inputs.law.checked()?;
        let law_depth = inputs.about.in_datum(inputs.depth, inputs.law.datum())?;
        let pressure = inputs.law.pressure(law_depth, inputs.about.tie)?;
        let below_rotary = inputs.about.below_rotary(inputs.depth);
        let column = below_rotary.filter(|z| z.si() > 0.0);
        Ok(PressureAtDepth {
            pressure,
            gradient: column.map(|z| pressure.gradient_over(z)),
            mud_weight: column.map(|z| pressure.mud_weight_at(z)),
            law_depth,
            below_rotary,
            inputs,
        })
    }
    fn inputs(&self) -> PressureAtDepthInputs {
        self.inputs.clone()
    }
    fn outcome(&self) -> PressureAtDepthOutcome {
        PressureAtDepthOutcome {
            pressure: self.pressure,
            law_depth: self.law_depth,
            below_rotary: self.below_rotary,
            gradient: self.gradient,
            mud_weight: self.mud_weight,
        }
    }

    /// Depths by elevations above mean sea level; the pressure by the shares of the two points, or
    /// of a gradient in psi and feet; the mud weight by the trade's 0.4335 psi/ft.
    fn check(inputs: &PressureAtDepthInputs, outcome: &PressureAtDepthOutcome) -> Vec<Check> {
        let (about, depth, nan) = (&inputs.about, inputs.depth, f64::NAN);
        let level = |tie: Option<DatumTie>, of: Datum| tie.and_then(|t| t.elevation(of).ok()).map_or(nan, Quantity::si);
        let same_level = |to: Datum| depth.below == to && about.other_hole.is_none();
        // The elevation of the point, and from it a depth below a level of one of the holes.
        let point = level(about.hole_tie(), depth.below) - depth.tvd.si();
        let below = |tie: Option<DatumTie>, to: Datum| {
            if to == Datum::MeanSeaLevel { -point } else { level(tie, to) - point }
        };
        let datum = inputs.law.datum();
        let in_law = if same_level(datum) { depth.tvd.si() } else { below(about.tie, datum) };
        let in_rotary = if depth.below == Datum::RotaryTable {
            depth.tvd.si()
        } else {
            below(about.hole_tie(), Datum::RotaryTable)
        };
        let psi = by_another_route(&inputs.law, about.tie, Length::m(in_law)).map_or(nan, Pressure::in_psi);
        let size = psi.abs().max(1e-3);
        let mut checks = vec![
            Check::compare(
                "depth below the datum of the profile, by elevations above mean sea level",
                &[outcome.law_depth.si()],
                &[in_law],
                MEET,
                "m",
            ),
            Check::compare(
                match inputs.law {
                    Law::Table(_) => "pressure by weighting the two points of the table with the distances to them",
                    Law::Gradient { .. } => "pressure from the gradient in psi/ft and the depths in feet",
                },
                &[outcome.pressure.in_psi()],
                &[psi],
                1e-9 * size,
                "psi",
            ),
        ];
        if outcome.below_rotary.is_some() || about.below_rotary(depth).is_some() {
            checks.push(Check::compare(
                "depth below the rotary table, by elevations above mean sea level",
                &[outcome.below_rotary.map_or(nan, Quantity::si)],
                &[in_rotary],
                MEET,
                "m",
            ));
        }
        if outcome.gradient.is_some() || outcome.mud_weight.is_some() || in_rotary > 0.0 {
            let feet = Length::m(in_rotary).in_ft();
            checks.push(Check::compare(
                "mean gradient in psi/ft times the feet below the rotary table",
                &[outcome.gradient.map_or(nan, |g| g.in_psi_per_ft() * feet)],
                &[psi],
                1e-9 * size,
                "psi",
            ));
            checks.push(Check::compare(
                "0.4335275 psi/ft · mud weight in sg · feet below the rotary table",
                &[outcome.mud_weight.map_or(nan, |d| PSI_PER_FOOT * d.in_sg() * feet)],
                &[psi],
                1e-6 * size,
                "psi",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        explain(self)
    }
}

/// The pressure at a depth below the profile's datum, by a route the computation does not take.
pub(super) fn by_another_route(law: &Law, tie: Option<DatumTie>, depth: Length) -> Option<Pressure> {
    match law {
        Law::Table(table) => table.by_distances(depth),
        Law::Gradient { from, start, gradient } => {
            let begin = match start {
                Start::Stated { pressure } => pressure.in_psi(),
                Start::Sea { density } => {
                    let sea = -tie?.elevation(Datum::Mudline).ok()?.in_ft();
                    PSI_PER_FOOT * density.in_sg() * sea
                }
            };
            let feet = depth.in_ft() - from.tvd.in_ft();
            Some(Pressure::psi(begin + gradient.in_psi_per_ft() * feet))
        }
    }
}
