//! The two ends of a recommended range: the rule that sets them, and what governs each in words.

use serde::{Deserialize, Serialize};

use super::recommended::RangeChoices;
use crate::card::Step;
use crate::error::Result;
use crate::units::{Density, Gradient, Pressure, Quantity, with_unit};
use crate::well::wall::Wall;
use crate::well::wall::limits::{Limit, Limits};

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
    /// The engineer, who raised the top with a printed reason.
    Engineer,
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
            Governs::Engineer => "raised by the engineer above the computed top, for the printed reason",
        }
    }

    /// "lower shear", for a cell of a table.
    pub(crate) fn short(self) -> &'static str {
        match self {
            Governs::LowerShear => "lower shear",
            Governs::PorePressure => "pore pressure",
            Governs::LeastStress => "least stress",
            Governs::Initiation => "initiation",
            Governs::UpperShear => "upper shear",
            Governs::Engineer => "engineer",
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
    pub(super) fn new(pressure: Pressure, governed_by: Governs, choices: &RangeChoices) -> Self {
        let tvd = choices.tvd_below_rotary;
        RangeEnd {
            pressure,
            gradient: pressure.gradient_over(tvd),
            mud_weight: pressure.mud_weight_at(tvd),
            governed_by,
        }
    }

    /// A number of this end as it is printed: rounded into the range, never out of it.
    pub(super) fn inward<Q: Quantity>(self, value: Q, decimals: usize) -> String {
        let places = 10_f64.powi(decimals as i32);
        let number = value.shown() * places;
        // What is a round number up to its last bits stays that number.
        let near = 1e-6;
        let rounded = match self.governed_by {
            Governs::LowerShear | Governs::PorePressure => (number - near).ceil(),
            Governs::LeastStress | Governs::Initiation | Governs::UpperShear | Governs::Engineer => {
                (number + near).floor()
            }
        };
        with_unit(rounded / places, decimals, Q::SHOWN_IN)
    }

    /// "40.18 MPa (1.390 sg, 13.62 MPa/km)", each rounded into the range.
    pub fn words(&self) -> String {
        let (p, w, g) = (self.inward(self.pressure, 2), self.inward(self.mud_weight, 3), self.inward(self.gradient, 2));
        format!("{p} ({w}, {g})")
    }
}

/// The pressure of an end and what sets it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct GovernedPressure {
    /// The pressure.
    pub pressure: Pressure,
    /// What sets it.
    pub governed_by: Governs,
}

/// Both ends as the rule sets them, with the limits they rest on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Ends {
    pub limits: Limits,
    pub bottom: Option<GovernedPressure>,
    pub top: Option<GovernedPressure>,
}

impl Wall {
    /// Bottom = max(lower shear limit at the allowed width, pore pressure + margin), top = min(S3,
    /// initiation, upper shear limit) − margin.
    pub(crate) fn ends(&self, choices: &RangeChoices) -> Result<Ends> {
        let limits = self.limits_at_width(choices.allowed_width)?;
        let end = |(pressure, governed_by)| GovernedPressure { pressure, governed_by };
        Ok(Ends {
            limits,
            bottom: bottom(&limits, self.pore() + choices.margin_bottom).map(end),
            top: top(&limits).map(|(p, g)| end((p - choices.margin_top, g))),
        })
    }
}

impl Limits {
    /// The limits that set the ends of a range, each with its numbers put in at its place; nothing of an end that
    /// the far field, the pore pressure or the engineer sets.
    pub(super) fn worked_ends(&self, bottom: Option<Governs>, top: Option<Governs>) -> Vec<Step> {
        let of = |end: Option<Governs>| match end? {
            Governs::LowerShear => Some(self.lower_shear),
            Governs::Initiation => Some(self.initiation),
            Governs::UpperShear => Some(self.upper_shear),
            Governs::PorePressure | Governs::LeastStress | Governs::Engineer => None,
        };
        let limits = [of(bottom), of(top)].into_iter().flatten();
        limits.flat_map(|limit| self.worked(&limit)).collect()
    }
}

fn bottom(limits: &Limits, balance: Pressure) -> Option<(Pressure, Governs)> {
    let pore = (balance, Governs::PorePressure);
    match limits.lower_shear.pressure() {
        Some(shear) if shear > balance => Some((shear, Governs::LowerShear)),
        Some(_) => Some(pore),
        // Without a limit every low pressure is safe in shear.
        None => limits.lower_shear.is_unbounded().then_some(pore),
    }
}

fn top(limits: &Limits) -> Option<(Pressure, Governs)> {
    let mut least = (limits.least_stress.pressure()?, Governs::LeastStress);
    if limits.initiation.pressure()? < least.0 {
        least = (limits.initiation.pressure()?, Governs::Initiation);
    }
    match pushed_out_above(&limits.upper_shear) {
        Some(upper) if upper < least.0 => Some((upper, Governs::UpperShear)),
        Some(_) => Some(least),
        None => limits.upper_shear.is_unbounded().then_some(least),
    }
}

/// Where the shear limits have crossed, nothing is pushed out below the upper one all the same, and
/// what fails below it fails in arcs that the bottom keeps within the allowed width.
pub(crate) fn pushed_out_above(upper_shear: &Limit) -> Option<Pressure> {
    upper_shear.pressure().or(upper_shear.own_side())
}
