//! A line in space: it has a trend and a plunge, and no sign.

use serde::{Deserialize, Serialize};

use super::Azimuth;
use super::vector::{V3, line_vector, trend_plunge};
use crate::error::Result;
use crate::units::{Angle, Quantity, require_between};

/// A line by the azimuth it plunges towards and its plunge below horizontal (positive down).
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Line {
    /// The azimuth of the end that points down.
    pub trend: Azimuth,
    /// The angle below horizontal, −90° to 90°; a negative one is the same line's other end.
    pub plunge: Angle,
}

impl Line {
    pub(crate) fn vector(self) -> Result<V3> {
        require_between("plunge", self.plunge, Angle::deg(-90.0), Angle::deg(90.0))?;
        Ok(line_vector(self.trend.true_north()?.si(), self.plunge.si()))
    }

    /// The line along a vector in north, east, down; always given by its lower end.
    pub(crate) fn along(v: V3) -> Self {
        let (trend, plunge) = trend_plunge(v);
        Line { trend: Azimuth::from_true_north(Angle::from_si(trend)), plunge: Angle::from_si(plunge) }
    }

    /// "trend 035.0°, plunge 12.0°".
    pub fn words(self) -> String {
        match self.trend.true_north() {
            Ok(trend) => format!("trend {}°, plunge {:.1}", super::azimuth::three_figures(trend), self.plunge),
            Err(_) => format!(
                "trend {:.1} from {}, plunge {:.1}",
                self.trend.measured(),
                self.trend.north().words(),
                self.plunge
            ),
        }
    }
}
