//! What the engineer chooses for a log.

use serde::{Deserialize, Serialize};

use crate::card::Item;
use crate::error::{Error, Result};
use crate::units::{Angle, Length, Pressure, Quantity, require_between, require_not_negative, with_typed_unit};
use crate::well::RangeChoices;

/// Where a log runs, how close its depths lie, and the choices of the recommended range at each of
/// them. None of it is defaulted.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LogChoices {
    /// The measured depth it begins at.
    pub from: Length,
    /// The measured depth it ends at.
    pub to: Length,
    /// How far its depths lie apart along the hole, more than zero. Contacts are met whatever it is.
    pub step: Length,
    /// The width of failing arc that is allowed, per lobe, 0–180°.
    pub allowed_width: Angle,
    /// Kept above the pore pressure at the bottom, zero or more.
    pub margin_bottom: Pressure,
    /// Kept below the lowest upper limit at the top, zero or more.
    pub margin_top: Pressure,
}

/// A log of more depths is no log.
const MOST: f64 = 100_000.0;

impl LogChoices {
    pub(super) fn checked(&self) -> Result<()> {
        for (what, depth) in [("the beginning of the log", self.from), ("the end of the log", self.to)] {
            depth.finite(what)?;
        }
        if self.from >= self.to {
            return Err(Error::not_physical(
                format!("A log from MD {} to {}", with_typed_unit(self.from), with_typed_unit(self.to)),
                "its end must lie below its beginning.",
            ));
        }
        let least = Length::m(((self.to - self.from).si() / MOST).max(1e-3));
        if !(self.step.si().is_finite() && self.step >= least) {
            return Err(Error::out_of_range(
                "step of the log",
                with_typed_unit(self.step),
                format!("at least {}, so that the log has no more than {MOST} depths", with_typed_unit(least)),
            ));
        }
        require_between("allowed width of a failing arc", self.allowed_width, Angle::deg(0.0), Angle::deg(180.0))?;
        require_not_negative("margin at the bottom", self.margin_bottom)?;
        require_not_negative("margin at the top", self.margin_top)?;
        Ok(())
    }

    /// The choices at one depth.
    pub(crate) fn at(&self, tvd: f64) -> RangeChoices {
        RangeChoices {
            allowed_width: self.allowed_width,
            margin_bottom: self.margin_bottom,
            margin_top: self.margin_top,
            tvd_below_rotary: Length::m(tvd),
        }
    }

    pub(crate) fn items(&self) -> Vec<Item> {
        vec![
            Item::typed("", "beginning of the log, measured depth", self.from).chosen(),
            Item::typed("", "end of the log, measured depth", self.to).chosen(),
            Item::typed("", "step of the log along the hole", self.step).chosen(),
            Item::typed("w", "allowed width of a failing arc, per lobe", self.allowed_width).chosen(),
            Item::typed("m_b", "margin over the pore pressure at the bottom", self.margin_bottom).chosen(),
            Item::typed("m_t", "margin under the lowest upper limit at the top", self.margin_top).chosen(),
        ]
    }
}
