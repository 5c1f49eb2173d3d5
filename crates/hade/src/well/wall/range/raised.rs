//! A top of the range that the engineer raised above the computed one, with the reason that is printed.

use serde::{Deserialize, Serialize};

use super::ends::{Governs, RangeEnd, pushed_out_above};
use super::recommended::RecommendedRange;
use crate::card::Check;
use crate::error::{Error, Result};
use crate::frames::Name;
use crate::units::{Pressure, Quantity, with_typed_unit};

/// The top that the engineer set, and why.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RaisedTop {
    pub(super) top: Pressure,
    pub(super) reason: Name,
}

impl RaisedTop {
    /// The pressure it was raised to.
    pub fn top(&self) -> Pressure {
        self.top
    }

    /// The reason, as it is printed.
    pub fn reason(&self) -> &'static str {
        self.reason.text()
    }
}

impl RecommendedRange {
    /// The same range with its top raised above the computed one, for a reason that the card prints:
    /// a leak-off test that held more, losses that can be borne. The card says what is given up, the
    /// margin or more than that, and warns where the top passes S3, initiation or the upper shear
    /// limit. A lower top is the margin's business.
    ///
    /// # Errors
    /// When the reason is empty, the pressure is not a finite number or not above the computed top,
    /// there is no computed top, or the pressure is above both initiation and S3: there the wall parts
    /// and the fracture runs on, which no reason makes a range.
    pub fn raised_to(&self, top: Pressure, reason: &str) -> Result<RecommendedRange> {
        top.finite("raised top of the range")?;
        let reason = reason.trim();
        if reason.is_empty() {
            return Err(Error::undeclared(
                "The top of the range was raised without a reason",
                "write the reason as a sentence; it is printed beside the range.",
            ));
        }
        let (Some(computed), Some(initiation)) = (self.computed_top, self.limits.initiation.pressure()) else {
            return Err(Error::not_physical(
                "A raised top of a range that has none",
                "at no pressure is this wall safe against parting or shear; change the hole, the wall or better the inputs.",
            ));
        };
        if top <= computed.pressure {
            return Err(Error::out_of_range(
                "raised top of the range",
                with_typed_unit(top),
                format!("above the computed top {}; to lower the top, widen its margin", computed.pressure),
            ));
        }
        let s3 = self.limits.least_stress.pressure().unwrap_or_default();
        if top > s3 && top > initiation {
            return Err(Error::not_physical(
                format!(
                    "A top raised to {} is above both initiation {initiation} and the least stress {s3}",
                    with_typed_unit(top)
                ),
                "there the wall parts and the fracture runs on, so no reason makes it a range; raise it less.",
            ));
        }
        let raised = RaisedTop { top, reason: Name::new(reason) };
        Ok(RecommendedRange {
            top: Some(RangeEnd::new(top, Governs::Engineer, &self.choices)),
            raised: Some(raised),
            ..*self
        })
    }

    /// What the engineer raised the top to, and why; `None` where the top is the computed one.
    pub fn raised(&self) -> Option<RaisedTop> {
        self.raised
    }

    /// The top as the rule sets it, also where the engineer raised it.
    pub fn computed_top(&self) -> Option<RangeEnd> {
        self.computed_top
    }

    /// Limits that a raised top is above, in sentences.
    pub(super) fn raised_past(&self) -> Vec<String> {
        let Some(raised) = self.raised else { return Vec::new() };
        let limits = [
            (
                self.limits.least_stress.pressure(),
                "the least stress S_3",
                "a fracture that is there, natural or made, runs on and mud is lost",
            ),
            (self.limits.initiation.pressure(), "initiation", "the wall parts"),
            (pushed_out_above(&self.limits.upper_shear), "the upper shear limit", "the hole is pushed out"),
        ];
        let past = limits.into_iter().filter_map(|(limit, name, what)| {
            let limit = limit.filter(|limit| raised.top > *limit)?;
            Some(format!("The raised top is {} above {name}, {limit}: between them {what}.", raised.top - limit))
        });
        past.collect()
    }

    /// What a raised top gives up, in sentences.
    pub(super) fn raised_notes(&self) -> Vec<String> {
        let (Some(raised), Some(computed)) = (self.raised, self.computed_top) else { return Vec::new() };
        let mut notes = vec![format!(
            "RAISED BY THE ENGINEER: the top is {} in place of the computed {} ({}). Reason: {}",
            raised.top,
            computed.words(),
            computed.governed_by.words(),
            raised.reason
        )];
        if self.raised_past().is_empty() {
            notes.push(format!(
                "The raised top gives up {} of the {} of margin that was chosen.",
                raised.top - computed.pressure,
                with_typed_unit(self.choices.margin_top)
            ));
        }
        notes
    }
}

/// The raised top is as stated, above the computed one, and has a reason.
pub(super) fn check(raised: &RaisedTop, top: Pressure, computed: Option<Pressure>) -> Vec<Check> {
    let below = computed.map_or(f64::NAN, |c| c.in_mpa());
    vec![
        Check::compare("raised top as stated", &[top.in_mpa()], &[raised.top.in_mpa()], 0.0, "MPa"),
        Check::holds("the raised top is above the computed one", below - top.in_mpa(), 0.0, "MPa"),
        Check::holds("the raised top has a reason", if raised.reason().trim().is_empty() { 1.0 } else { 0.0 }, 0.0, ""),
    ]
}
