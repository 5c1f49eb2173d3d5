//! A line in space: it has a trend and a plunge, and no sign.

use serde::{Deserialize, Serialize};

use super::vector::{V3, angle_between_lines, cross, dot, line_vector, norm, trend_plunge};
use super::{Azimuth, Plane};
use crate::error::Result;
use crate::units::{Angle, Quantity, require_between};

/// A line by the azimuth it plunges towards and its plunge below horizontal (positive down).
///
/// A line has no sign: trend 035°, plunge 12° and trend 215°, plunge −12° are the same line, and a
/// horizontal line has two equal trends, 180° apart. `==` compares the numbers as given; whether
/// two lines are the same is asked with [`Line::angle_to`].
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

    /// The same line by its lower end: plunge 0–90°. Of the two trends of a horizontal line the one
    /// below 180° is given.
    ///
    /// # Errors
    /// When the plunge is outside ±90° or the trend has no true north.
    pub fn lower_end(self) -> Result<Line> {
        self.vector()?;
        if self.plunge.si() < 0.0 {
            return Ok(Line { trend: self.trend.turned_by(Angle::deg(180.0)), plunge: -self.plunge });
        }
        let west = self.trend.true_north()?.si() >= std::f64::consts::PI;
        let trend = if self.plunge.si() == 0.0 && west { self.trend.turned_by(Angle::deg(-180.0)) } else { self.trend };
        Ok(Line { trend, plunge: self.plunge })
    }

    /// The angle between two lines, 0–90°: tan β = |l₁ × l₂| / |l₁ · l₂|, exact also for small
    /// angles. Either end of a line gives the same angle.
    ///
    /// # Errors
    /// When a plunge is outside ±90° or a trend has no true north.
    pub fn angle_to(&self, other: &Line) -> Result<Angle> {
        Ok(Angle::from_si(angle_between_lines(self.vector()?, other.vector()?)))
    }

    /// The angle between a line and its projection on a plane, 0° in the plane to 90° along its
    /// pole: tan β = |l · n| / |l × n|.
    ///
    /// # Errors
    /// When the plunge is outside ±90°, the dip outside 0–90°, or an azimuth has no true north.
    pub fn angle_to_plane(&self, plane: &Plane) -> Result<Angle> {
        let (line, normal) = (self.vector()?, plane.axes()?.normal);
        Ok(Angle::from_si(dot(line, normal).abs().atan2(norm(cross(line, normal)))))
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    fn line(trend: f64, plunge: f64) -> Line {
        Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }
    }

    #[test]
    fn either_end_is_the_same_line() {
        let down = line(35.0, 12.0);
        let up = line(215.0, -12.0);
        assert!(down.angle_to(&up).unwrap().in_deg() < 1e-13);
        let lower = up.lower_end().unwrap();
        assert!((lower.trend.true_north().unwrap().in_deg() - 35.0).abs() < 1e-12);
        assert_eq!(lower.plunge, 12.deg());
        // A horizontal line has two equal trends.
        assert!(line(300.0, 0.0).angle_to(&line(120.0, 0.0)).unwrap().in_deg() < 1e-13);
        let one = line(300.0, 0.0).lower_end().unwrap().trend.true_north().unwrap();
        assert!((one.in_deg() - 120.0).abs() < 1e-12);
        assert_eq!(line(120.0, 0.0).lower_end().unwrap(), line(120.0, 0.0));
    }

    #[test]
    fn small_angles_and_angles_to_planes() {
        let tiny = line(10.0, 0.0).angle_to(&line(10.0 + 1e-7, 0.0)).unwrap().in_deg();
        assert!((tiny - 1e-7).abs() < 1e-13, "{tiny:e}");
        let plane = Plane { strike: Azimuth::from_true_north(0.deg()), dip: 30.deg() };
        assert!((line(90.0, 0.0).angle_to_plane(&plane).unwrap().in_deg() - 30.0).abs() < 1e-12);
        assert!((plane.pole().unwrap().angle_to_plane(&plane).unwrap().in_deg() - 90.0).abs() < 1e-12);
        assert!(line(90.0, 30.0).angle_to_plane(&plane).unwrap().in_deg() < 1e-13);
    }

    #[test]
    fn what_is_no_line_is_refused() {
        assert!(line(0.0, 91.0).angle_to(&line(0.0, 0.0)).unwrap_err().to_string().starts_with("plunge is 91°"));
        assert!(line(f64::NAN, 0.0).lower_end().is_err());
        let magnetic = Line { trend: Azimuth::from_magnetic_north(10.deg()), plunge: 5.deg() };
        assert!(magnetic.lower_end().unwrap_err().to_string().contains("with_declination"));
    }
}
