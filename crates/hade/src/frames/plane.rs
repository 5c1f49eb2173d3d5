//! A plane in space by strike and dip.

use serde::{Deserialize, Serialize};

use super::Azimuth;
use super::azimuth::three_figures;
use super::vector::{V3, cross};
use crate::error::Result;
use crate::units::{Angle, Quantity, require_between};

/// A plane: it dips to the right of its strike (dip direction = strike + 90°).
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Plane {
    /// The azimuth of the horizontal line of the plane, the dip to its right.
    pub strike: Azimuth,
    /// The angle below horizontal, 0–90°.
    pub dip: Angle,
}

/// The axes of a plane in north, east, down: along strike, down dip, and the normal that points
/// down into the footwall.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct PlaneAxes {
    pub along_strike: V3,
    pub down_dip: V3,
    pub normal: V3,
}

impl Plane {
    pub(crate) fn axes(self) -> Result<PlaneAxes> {
        require_between("dip", self.dip, Angle::deg(0.0), Angle::deg(90.0))?;
        let (s, d) = (self.strike.true_north()?.si(), self.dip.si());
        let along_strike = [s.cos(), s.sin(), 0.0];
        let down_dip = [-s.sin() * d.cos(), s.cos() * d.cos(), d.sin()];
        Ok(PlaneAxes { along_strike, down_dip, normal: cross(along_strike, down_dip) })
    }

    /// "strike 045.0°, dip 60.0°".
    pub fn words(self) -> String {
        match self.strike.true_north() {
            Ok(strike) => format!("strike {}°, dip {:.1}", three_figures(strike), self.dip),
            Err(_) => format!(
                "strike {:.1} from {}, dip {:.1}",
                self.strike.measured(),
                self.strike.north().words(),
                self.dip
            ),
        }
    }
}
