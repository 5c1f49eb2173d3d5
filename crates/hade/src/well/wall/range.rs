//! The recommended range of pressures: never the bare limits, but with the engineer's allowed width
//! and margins.

use serde::{Deserialize, Serialize};

use super::limits::Limits;
use super::setup::WallSetup;
use super::wall::Wall;
use crate::error::{Error, Result};
use crate::units::{
    Angle, Density, Gradient, Length, Pressure, Quantity, require_between, require_not_negative, with_typed_unit,
    with_unit,
};

/// The widths that are always shown beside the chosen one, in degrees.
pub(super) const WIDTHS: [f64; 4] = [0.0, 30.0, 60.0, 90.0];

/// What the engineer chooses, and the depth that turns pressures into mud weights. None of it is
/// defaulted.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RangeChoices {
    /// The width of failing arc that is allowed, per lobe, 0–180°.
    pub allowed_width: Angle,
    /// Kept above the pore pressure at the bottom, zero or more.
    pub margin_bottom: Pressure,
    /// Kept below the lowest upper limit at the top, zero or more.
    pub margin_top: Pressure,
    /// True vertical depth below the rotary table, more than zero.
    pub tvd_below_rotary: Length,
}

/// What sets an end of the range.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[non_exhaustive]
pub enum Governs {
    /// The lower shear limit at the allowed width.
    LowerShear,
    /// The pore pressure with its margin.
    PorePressure,
    /// The least far-field stress S3.
    LeastStress,
    /// Fracture initiation at the wall.
    Initiation,
    /// The upper shear limit.
    UpperShear,
}

impl Governs {
    /// "pore pressure governs: …".
    pub fn words(self) -> &'static str {
        match self {
            Governs::LowerShear => "shear governs: below this, arcs wider than allowed fail",
            Governs::PorePressure => "pore pressure governs: below this, the margin over the formation's fluid is lost",
            Governs::LeastStress => "least stress governs: above S_3 a fracture runs on and mud is lost",
            Governs::Initiation => "initiation governs: above this the wall parts",
            Governs::UpperShear => "upper shear limit governs: above this the hole is pushed out",
        }
    }
}

/// One end of the range.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct RangeEnd {
    /// The pressure.
    pub pressure: Pressure,
    /// The mean gradient from the rotary table.
    pub gradient: Gradient,
    /// The mud weight whose static column gives the pressure.
    pub mud_weight: Density,
    /// What sets it.
    pub governed_by: Governs,
}

impl RangeEnd {
    /// A number of this end as it is printed: rounded into the range, never out of it.
    pub(super) fn inward<Q: Quantity>(self, value: Q, decimals: usize) -> String {
        let places = 10_f64.powi(decimals as i32);
        let number = value.shown() * places;
        // What is a round number up to its last bits stays that number.
        let near = 1e-6;
        let rounded = match self.governed_by {
            Governs::LowerShear | Governs::PorePressure => (number - near).ceil(),
            Governs::LeastStress | Governs::Initiation | Governs::UpperShear => (number + near).floor(),
        };
        with_unit(rounded / places, decimals, Q::SHOWN_IN)
    }

    /// "40.18 MPa (1.390 sg, 13.62 MPa/km)", each rounded into the range.
    pub fn words(&self) -> String {
        let (p, w, g) = (self.inward(self.pressure, 2), self.inward(self.mud_weight, 3), self.inward(self.gradient, 2));
        format!("{p} ({w}, {g})")
    }
}

/// The recommended range of wall pressures. Static density and swab are held against the bottom,
/// circulating density and surge against the top.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct RecommendedRange {
    /// The bottom; `None` when no pressure keeps failing arcs within the allowed width.
    pub bottom: Option<RangeEnd>,
    /// The top; `None` when no pressure is safe against parting, or some place of the wall fails in
    /// shear at any.
    pub top: Option<RangeEnd>,
    pub(super) at_widths: [Option<Pressure>; 4],
    pub(super) limits: Limits,
    pub(super) wall: Wall,
    pub(super) choices: RangeChoices,
}

/// The inputs of a recommended range.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RangeInputs {
    pub(super) wall: WallSetup,
    pub(super) choices: RangeChoices,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RangeOutcome {
    pub(super) bottom: Option<RangeEnd>,
    pub(super) top: Option<RangeEnd>,
    /// Lower shear limits at 0°, 30°, 60°, 90°.
    pub(super) at_widths: [Option<Pressure>; 4],
    /// The least bad pressure in shear, where no pressure keeps the arcs within the allowed width.
    pub(super) least_bad: Option<Pressure>,
    /// How far the top is above the bottom; negative: the range is empty.
    pub(super) breadth: Option<Pressure>,
}

impl Wall {
    /// The recommended range: bottom = max(lower shear limit at the allowed width, pore pressure +
    /// margin), top = min(S3, initiation, upper shear limit) − margin. An empty range is a value.
    ///
    /// # Errors
    /// When the width is outside 0–180°, a margin is negative, or the depth is not above zero.
    pub fn recommended(&self, choices: RangeChoices) -> Result<RecommendedRange> {
        require_between("allowed width of a failing arc", choices.allowed_width, Angle::deg(0.0), Angle::deg(180.0))?;
        require_not_negative("margin at the bottom", choices.margin_bottom)?;
        require_not_negative("margin at the top", choices.margin_top)?;
        let tvd = choices.tvd_below_rotary;
        if !(tvd.si().is_finite() && tvd.si() > 0.0) {
            return Err(Error::out_of_range(
                "true vertical depth below the rotary table",
                with_typed_unit(tvd),
                "more than 0 m",
            ));
        }
        let limits = self.limits_at_width(choices.allowed_width)?;
        let end = |pressure: Pressure, governed_by| RangeEnd {
            pressure,
            gradient: pressure.gradient_over(tvd),
            mud_weight: pressure.mud_weight_at(tvd),
            governed_by,
        };
        let mut at_widths = [None; 4];
        for (cell, degrees) in at_widths.iter_mut().zip(WIDTHS) {
            let width = Angle::deg(degrees);
            let same = width == choices.allowed_width;
            let at = if same { limits } else { self.limits_at_width(width)? };
            *cell = at.lower_shear.pressure();
        }
        Ok(RecommendedRange {
            bottom: bottom(&limits, self.setup.inputs.pore + choices.margin_bottom).map(|(p, g)| end(p, g)),
            top: top(&limits).map(|(p, g)| end(p - choices.margin_top, g)),
            at_widths,
            limits,
            wall: *self,
            choices,
        })
    }
}

fn bottom(limits: &Limits, balance: Pressure) -> Option<(Pressure, Governs)> {
    let shear = limits.lower_shear.pressure()?;
    Some(if shear > balance { (shear, Governs::LowerShear) } else { (balance, Governs::PorePressure) })
}

fn top(limits: &Limits) -> Option<(Pressure, Governs)> {
    let mut least = (limits.least_stress.pressure()?, Governs::LeastStress);
    for (limit, governs) in [(&limits.initiation, Governs::Initiation), (&limits.upper_shear, Governs::UpperShear)] {
        // Where the shear limits have crossed, nothing is pushed out below the upper one all the same,
        // and what fails below it fails in arcs that the bottom keeps within the allowed width.
        let crossed = limit.own_side().filter(|_| governs == Governs::UpperShear);
        let pressure = limit.pressure().or(crossed)?;
        if pressure < least.0 {
            least = (pressure, governs);
        }
    }
    Some(least)
}

impl RecommendedRange {
    /// Whether no pressure is recommended: an end is missing, or the bottom is not below the top.
    pub fn is_empty(&self) -> bool {
        match (self.bottom, self.top) {
            (Some(bottom), Some(top)) => bottom.pressure >= top.pressure,
            _ => true,
        }
    }

    /// The limits it rests on, at the allowed width.
    pub fn limits(&self) -> Limits {
        self.limits
    }

    /// The choices it rests on.
    pub fn choices(&self) -> RangeChoices {
        self.choices
    }

    /// The lower shear limit at 0°, 30°, 60° and 90° of allowed width.
    pub fn lower_shear_at_widths(&self) -> [(Angle, Option<Pressure>); 4] {
        let mut pairs = [(Angle::default(), None); 4];
        for ((pair, degrees), pressure) in pairs.iter_mut().zip(WIDTHS).zip(self.at_widths) {
            *pair = (Angle::deg(degrees), pressure);
        }
        pairs
    }

    /// The least bad pressure in shear, when no pressure keeps failing arcs within the allowed width.
    pub fn least_bad(&self) -> Option<Pressure> {
        if self.bottom.is_none() { self.limits.lower_shear.least_bad() } else { None }
    }

    pub(super) fn breadth(&self) -> Option<Pressure> {
        Some(self.top?.pressure - self.bottom?.pressure)
    }
}
