//! The recommended range of pressures: never the bare limits, but with the engineer's allowed width
//! and margins.

use serde::{Deserialize, Serialize};

use super::ends::{Ends, GovernedPressure, RangeEnd};
use super::raised::RaisedTop;
use crate::error::{Error, Result};
use crate::units::{Angle, Length, Pressure, Quantity, require_between, require_not_negative, with_typed_unit};
use crate::well::wall::Wall;
use crate::well::wall::limits::Limits;
use crate::well::wall::setup::WallSetup;

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

impl RangeChoices {
    /// Refuses what is no choice.
    fn checked(&self) -> Result<()> {
        require_between("allowed width of a failing arc", self.allowed_width, Angle::deg(0.0), Angle::deg(180.0))?;
        require_not_negative("margin at the bottom", self.margin_bottom)?;
        require_not_negative("margin at the top", self.margin_top)?;
        let tvd = self.tvd_below_rotary;
        if !(tvd.si().is_finite() && tvd.si() > 0.0) {
            return Err(Error::out_of_range(
                "true vertical depth below the rotary table",
                with_typed_unit(tvd),
                "more than 0 m",
            ));
        }
        Ok(())
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
    /// The top as the rule sets it, also where the engineer raised it.
    pub(super) computed_top: Option<RangeEnd>,
    pub(super) raised: Option<RaisedTop>,
    pub(super) at_widths: [Option<Pressure>; 4],
    pub(super) limits: Limits,
    pub(crate) wall: Wall,
    pub(crate) choices: RangeChoices,
}

/// The inputs of a recommended range.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RangeInputs {
    pub(crate) wall: WallSetup,
    pub(crate) choices: RangeChoices,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(super) raised: Option<RaisedTop>,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RangeOutcome {
    pub(super) bottom: Option<RangeEnd>,
    pub(super) top: Option<RangeEnd>,
    /// The top as computed, where it was raised.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(super) computed_top: Option<RangeEnd>,
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
        choices.checked()?;
        let Ends { limits, bottom, top } = self.ends(&choices)?;
        let end = |end: Option<GovernedPressure>| end.map(|e| RangeEnd::new(e.pressure, e.governed_by, &choices));
        let mut at_widths = [None; 4];
        for (cell, degrees) in at_widths.iter_mut().zip(WIDTHS) {
            let width = Angle::deg(degrees);
            let same = width == choices.allowed_width;
            let at = if same { limits } else { self.limits_at_width(width)? };
            *cell = at.lower_shear.pressure();
        }
        Ok(RecommendedRange {
            bottom: end(bottom),
            top: end(top),
            computed_top: end(top),
            raised: None,
            at_widths,
            limits,
            wall: *self,
            choices,
        })
    }
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

    /// The same range with the top as the rule sets it, not as the engineer raised it.
    pub(crate) fn as_computed(&self) -> Self {
        RecommendedRange { top: self.computed_top, raised: None, ..*self }
    }

    pub(super) fn breadth(&self) -> Option<Pressure> {
        Some(self.top?.pressure - self.bottom?.pressure)
    }
}
