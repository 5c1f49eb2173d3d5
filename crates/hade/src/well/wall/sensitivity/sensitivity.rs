//! How far each input by itself moves the ends of a recommended range.

use serde::{Deserialize, Serialize};

use super::vary::Vary;
use crate::error::{Error, Result};
use crate::units::{Pressure, Quantity};
use crate::well::wall::Wall;
use crate::well::wall::range::{Ends, GovernedPressure, RangeInputs, RecommendedRange};

/// The ends of the range with one input changed.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct ChangedEnds {
    /// The changed input, in SI.
    pub(super) value: f64,
    /// The bottom; `None` when no pressure keeps failing arcs within the allowed width.
    pub bottom: Option<GovernedPressure>,
    /// The top; `None` when no pressure is safe there.
    pub top: Option<GovernedPressure>,
}

/// The ends of the range with one input less and more.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct ChangedRange {
    /// With the input less by its amount.
    pub less: ChangedEnds,
    /// With the input more by its amount.
    pub more: ChangedEnds,
}

/// One-at-a-time sensitivity of a recommended range: each input is made less and more by its own
/// amount, everything else stays, and the range is worked out again.
#[derive(Clone, Debug, PartialEq)]
pub struct Sensitivity {
    pub(super) range: RecommendedRange,
    pub(super) vary: Vec<Vary>,
    /// The limits behind each changed range: less, more.
    pub(super) ends: Vec<[Ends; 2]>,
    pub(super) outcome: SensitivityOutcome,
}

/// The inputs of a sensitivity.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SensitivityInputs {
    pub(super) range: RangeInputs,
    pub(super) vary: Vec<Vary>,
}

/// What came out.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SensitivityOutcome {
    /// The ends with nothing changed.
    pub(super) bottom: Option<GovernedPressure>,
    pub(super) top: Option<GovernedPressure>,
    /// In the order of the inputs.
    pub(super) rows: Vec<ChangedRange>,
}

/// More inputs than a wall has are a mistake.
const MOST: usize = 24;

impl RecommendedRange {
    /// How far each input moves the ends of this range when it alone is less and more by a stated
    /// amount: `range.sensitivity(&[Vary::sh_max(4.mpa()), Vary::cohesion(1.2.mpa())])?`. The choices
    /// stay; a top that the engineer raised is left aside.
    ///
    /// The geographic tensor is changed for the stresses, whatever it was made of: S_v its down–down
    /// component, S_Hmax and S_hmin the normal stress along and across the azimuth of S_Hmax, the
    /// azimuth by a turn of the tensor about the vertical.
    ///
    /// # Errors
    /// When the list is empty or an input stands twice, an amount is not above zero, the wall has no
    /// such input, or the changed number is out of its range.
    pub fn sensitivity(&self, vary: &[Vary]) -> Result<Sensitivity> {
        if vary.is_empty() || vary.len() > MOST {
            return Err(Error::out_of_range(
                "number of inputs of a sensitivity",
                vary.len().to_string(),
                format!("1 to {MOST}: give each input with its amount, as Vary::sh_max(4.mpa())"),
            ));
        }
        for (k, one) in vary.iter().enumerate() {
            if !(one.by().is_finite() && one.by() > 0.0) {
                return Err(Error::out_of_range(
                    format!("change of {}", one.name()),
                    one.shown(one.by()),
                    "more than zero; it is applied both ways",
                ));
            }
            if vary.iter().take(k).any(|other| other.same_input(*one)) {
                return Err(Error::not_physical(
                    format!("The {} stands twice in a sensitivity", one.name()),
                    "give each input once.",
                ));
            }
        }
        let range = self.as_computed();
        let mut ends = Vec::with_capacity(vary.len());
        let mut rows = Vec::with_capacity(vary.len());
        for one in vary {
            let base = one.value(&range.wall.setup)?;
            let side = |side: f64| -> Result<(Ends, ChangedEnds)> {
                let ends = Wall::of(one.changed(&range.wall.setup, side)?)?.ends(&range.choices)?;
                Ok((ends, ChangedEnds { value: base + side * one.by(), bottom: ends.bottom, top: ends.top }))
            };
            let ((less_ends, less), (more_ends, more)) = (side(-1.0)?, side(1.0)?);
            ends.push([less_ends, more_ends]);
            rows.push(ChangedRange { less, more });
        }
        let Ends { bottom, top, .. } = range.wall.ends(&range.choices)?;
        Ok(Sensitivity { range, vary: vary.to_vec(), ends, outcome: SensitivityOutcome { bottom, top, rows } })
    }
}

impl Sensitivity {
    /// Every input with the ranges that it makes, the one that moves an end most first.
    pub fn ranked(&self) -> Vec<(Vary, ChangedRange)> {
        self.order().into_iter().filter_map(|k| Some((*self.vary.get(k)?, *self.outcome.rows.get(k)?))).collect()
    }

    /// The largest change of the bottom that an input makes, and of the top; `None` where it is not
    /// known because an end is missing before or after.
    pub fn largest_changes(&self, changed: &ChangedRange) -> (Option<Pressure>, Option<Pressure>) {
        let ChangedRange { less, more } = changed;
        let change = |sides: [Option<GovernedPressure>; 2], base: Option<GovernedPressure>| {
            let [a, b] = sides.map(|side| Some(side?.pressure - base?.pressure));
            let (a, b) = (a?, b?);
            Some(if b.abs() > a.abs() { b } else { a })
        };
        (change([less.bottom, more.bottom], self.outcome.bottom), change([less.top, more.top], self.outcome.top))
    }

    /// Row numbers, the largest effect first; equal ones as they were given.
    pub(super) fn order(&self) -> Vec<usize> {
        let mut order: Vec<(usize, f64)> = self.outcome.rows.iter().map(|row| self.effect(row)).enumerate().collect();
        order.sort_by(|a, b| b.1.total_cmp(&a.1));
        order.into_iter().map(|(k, _)| k).collect()
    }

    /// The largest change of either end in Pa, infinite where an end comes or goes.
    fn effect(&self, row: &ChangedRange) -> f64 {
        let one = |base: Option<GovernedPressure>, side: Option<GovernedPressure>| match (base, side) {
            // Rounding does not make an order.
            (Some(a), Some(b)) => ((b.pressure - a.pressure).si().abs() * 1e-2).round() * 1e2,
            (None, None) => 0.0,
            _ => f64::INFINITY,
        };
        let (bottom, top) = (self.outcome.bottom, self.outcome.top);
        [(bottom, row.less.bottom), (bottom, row.more.bottom), (top, row.less.top), (top, row.more.top)]
            .into_iter()
            .fold(0.0, |most, (base, side)| most.max(one(base, side)))
    }
}
