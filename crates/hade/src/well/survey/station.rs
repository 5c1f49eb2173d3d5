//! What a survey tool measured at one depth, and where the first station lies.

use serde::{Deserialize, Serialize};

use super::arc::{direction, dogleg};
use crate::error::{Error, Result};
use crate::frames::vector::V3;
use crate::frames::{Attitude, Azimuth};
use crate::units::{Angle, Length, Quantity, require_between, with_typed_unit};

/// One survey station.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Station {
    /// The measured depth: along the hole, from the rotary table.
    pub md: Length,
    /// The inclination from vertical-down, 0–180°; above 90° the hole rises.
    pub inclination: Angle,
    /// The azimuth the hole goes towards, with the north it was measured from.
    pub azimuth: Azimuth,
}

/// Where the first station of a survey lies, when it is not at the rotary table itself.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct TieIn {
    /// North of the wellhead, true north.
    pub north: Length,
    /// East of the wellhead.
    pub east: Length,
    /// The true vertical depth below the rotary table.
    pub tvd: Length,
}

impl TieIn {
    pub(super) fn checked(self) -> Result<Self> {
        self.north.finite("north of the tie-in")?;
        self.east.finite("east of the tie-in")?;
        self.tvd.finite("true vertical depth of the tie-in")?;
        Ok(self)
    }
}

/// A station brought to true north, in radians and metres.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Direct {
    pub md: f64,
    pub i: f64,
    pub a: f64,
    pub t: V3,
}

impl Station {
    /// Its direction, checked.
    pub(super) fn direct(&self) -> Result<Direct> {
        self.md.finite("measured depth")?;
        if self.md.si() < 0.0 {
            return Err(Error::out_of_range(
                "measured depth",
                with_typed_unit(self.md),
                "zero or more: it counts along the hole from the rotary table",
            ));
        }
        require_between("inclination", self.inclination, Angle::deg(0.0), Angle::deg(180.0))?;
        let (i, a) = (self.inclination.si(), self.azimuth.true_north()?.si());
        Ok(Direct { md: self.md.si(), i, a, t: direction(i, a) })
    }

    /// The attitude of the hole here, its azimuth with the north it was measured from.
    pub fn attitude(&self) -> Attitude {
        Attitude { inclination: self.inclination, azimuth: self.azimuth }
    }
}

/// The largest dogleg between two stations: at half a turn the arc has no definite plane.
const LARGEST_DOGLEG: f64 = 179.0;

/// What is wrong with a station after the one above it, in the words of a message: what and fix.
pub(super) fn follows(above: &Direct, below: &Direct) -> std::result::Result<f64, (String, String)> {
    let (top, md) = (with_typed_unit(Length::m(above.md)), with_typed_unit(Length::m(below.md)));
    if below.md == above.md {
        return Err((format!("measured depth {md} stands twice"), "keep one station for each depth".to_owned()));
    }
    if below.md < above.md {
        return Err((
            format!("measured depth {md} comes after {top}, so the stations are not sorted"),
            "sort the stations by measured depth".to_owned(),
        ));
    }
    let beta = dogleg([above.i, above.a], [below.i, below.a]);
    if beta.to_degrees() > LARGEST_DOGLEG {
        return Err((
            format!("the hole would turn back on itself between {top} and {md} (dogleg {:.1}°)", beta.to_degrees()),
            "check inclination and azimuth of both stations".to_owned(),
        ));
    }
    Ok(beta)
}
