//! A plane in space by strike and dip.

use serde::{Deserialize, Serialize};

use super::azimuth::three_figures;
use super::vector::{V3, angle_between_lines, cross, scale, wrap};
use super::{Azimuth, Line};
use crate::error::Result;
use crate::units::{Angle, Quantity, require_between};

/// A plane: it dips to the right of its strike (dip direction = strike + 90°).
///
/// A vertical plane has two equal strikes, 180° apart, and a horizontal one any strike. `==`
/// compares the numbers as given; whether two planes are parallel is asked with
/// [`Plane::angle_to`].
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

/// A plane is taken as exactly vertical or horizontal within this angle, in radians.
const EXACT: f64 = 1e-12;

impl Plane {
    /// A plane by the azimuth it dips towards and its dip: strike = dip direction − 90°.
    pub fn from_dip_direction(dip_direction: Azimuth, dip: Angle) -> Self {
        Plane { strike: dip_direction.turned_by(Angle::deg(-90.0)), dip }
    }

    /// The azimuth the plane dips towards: strike + 90°.
    pub fn dip_direction(self) -> Azimuth {
        self.strike.turned_by(Angle::deg(90.0))
    }

    /// The line across the plane, by its lower end: trend = strike − 90°, plunge = 90° − dip.
    ///
    /// # Errors
    /// When the dip is outside 0–90° or the strike has no true north.
    pub fn pole(self) -> Result<Line> {
        self.axes()?;
        Ok(Line { trend: self.strike.turned_by(Angle::deg(-90.0)), plunge: Angle::deg(90.0) - self.dip })
    }

    /// The plane across a line, whose pole the line is. Across a horizontal line the plane is
    /// vertical and strikes at the line's trend + 90°; across a vertical line it is horizontal and
    /// its strike means nothing.
    ///
    /// # Errors
    /// When the plunge is outside ±90° or the trend has no true north.
    pub fn across(line: Line) -> Result<Self> {
        line.vector()?;
        let quarter = if line.plunge.si() < 0.0 { -90.0 } else { 90.0 };
        Ok(Plane { strike: line.trend.turned_by(Angle::deg(quarter)), dip: Angle::deg(90.0) - line.plunge.abs() })
    }

    /// The angle between two planes (dihedral angle), 0–90°: the angle between their poles.
    ///
    /// # Errors
    /// When a dip is outside 0–90° or a strike has no true north.
    pub fn angle_to(&self, other: &Plane) -> Result<Angle> {
        Ok(Angle::from_si(angle_between_lines(self.axes()?.normal, other.axes()?.normal)))
    }

    pub(crate) fn axes(self) -> Result<PlaneAxes> {
        require_between("dip", self.dip, Angle::deg(0.0), Angle::deg(90.0))?;
        let (s, d) = (self.strike.true_north()?.si(), self.dip.si());
        let along_strike = [s.cos(), s.sin(), 0.0];
        let down_dip = [-s.sin() * d.cos(), s.cos() * d.cos(), d.sin()];
        Ok(PlaneAxes { along_strike, down_dip, normal: cross(along_strike, down_dip) })
    }

    /// The plane across a vector in north, east, down, of any length and sign. A vertical plane is
    /// given by its strike below 180°, a horizontal one by strike 000°.
    pub(crate) fn with_normal(v: V3) -> Self {
        let n = if v[2] < 0.0 { scale(v, -1.0) } else { v };
        let level = n[0].hypot(n[1]);
        let (strike, dip) = if level <= EXACT * n[2] {
            (0.0, 0.0)
        } else if n[2] <= EXACT * level {
            let strike = n[0].atan2(-n[1]).rem_euclid(std::f64::consts::PI);
            (if strike >= std::f64::consts::PI { 0.0 } else { strike }, std::f64::consts::FRAC_PI_2)
        } else {
            (wrap(n[0].atan2(-n[1])), level.atan2(n[2]))
        };
        Plane { strike: Azimuth::from_true_north(Angle::from_si(strike)), dip: Angle::from_si(dip) }
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    fn true_north(degrees: f64) -> Azimuth {
        Azimuth::from_true_north(degrees.deg())
    }
    fn degrees(azimuth: Azimuth) -> f64 {
        azimuth.true_north().unwrap().in_deg()
    }

    #[test]
    fn dip_direction_is_strike_and_a_quarter() {
        let plane = Plane::from_dip_direction(true_north(30.0), 60.deg());
        assert!((degrees(plane.strike) - 300.0).abs() < 1e-12);
        assert_eq!(plane.dip_direction(), true_north(30.0));
        // The correction of a magnetic azimuth goes with it.
        let magnetic = Azimuth::from_magnetic_north(35.deg()).with_declination((-5).deg()).unwrap();
        assert!((degrees(Plane::from_dip_direction(magnetic, 60.deg()).strike) - 300.0).abs() < 1e-12);
    }

    #[test]
    fn pole_and_plane_across_go_there_and_back() {
        for (strike, dip) in [(0.0, 0.0), (45.0, 60.0), (200.0, 90.0), (359.9, 0.1), (120.0, 45.0)] {
            let plane = Plane { strike: true_north(strike), dip: dip.deg() };
            let pole = plane.pole().unwrap();
            assert!((pole.angle_to_plane(&plane).unwrap().in_deg() - 90.0).abs() < 1e-10);
            assert!(pole.plunge.in_deg() >= 0.0);
            let back = Plane::across(pole).unwrap();
            assert!(back.angle_to(&plane).unwrap().in_deg() < 1e-12, "{strike}/{dip}");
            let other_end = Line { trend: pole.trend.turned_by(180.deg()), plunge: -pole.plunge };
            assert!(Plane::across(other_end).unwrap().angle_to(&plane).unwrap().in_deg() < 1e-12);
            assert!(Plane::with_normal(plane.axes().unwrap().normal).angle_to(&plane).unwrap().in_deg() < 1e-10);
        }
        // Dip 60 towards 135: the pole plunges 30 towards 315.
        let pole = Plane { strike: true_north(45.0), dip: 60.deg() }.pole().unwrap();
        assert!((degrees(pole.trend) - 315.0).abs() < 1e-12 && (pole.plunge.in_deg() - 30.0).abs() < 1e-12);
    }

    #[test]
    fn a_vertical_plane_has_two_equal_strikes() {
        let one = Plane { strike: true_north(20.0), dip: 90.deg() };
        let other = Plane { strike: true_north(200.0), dip: 90.deg() };
        assert!(one.angle_to(&other).unwrap().in_deg() < 1e-12);
        // Of a vertical plane found from a vector the strike is below 180°, whatever the last bit.
        for noise in [1e-17, -1e-17] {
            let found = Plane::with_normal([1.0, 0.0, noise]);
            assert_eq!((found.strike, found.dip), (true_north(90.0), 90.deg()));
        }
        let planes = [0.0, 60.0].map(|dip| Plane { strike: true_north(10.0), dip: dip.deg() });
        assert!((planes[0].angle_to(&planes[1]).unwrap().in_deg() - 60.0).abs() < 1e-12);
    }

    #[test]
    fn what_is_no_plane_is_refused() {
        let steep = Plane { strike: true_north(0.0), dip: 120.deg() };
        assert!(steep.pole().unwrap_err().to_string().starts_with("dip is 120°"));
        assert!(Plane::across(Line { trend: true_north(0.0), plunge: 100.deg() }).is_err());
        let grid = Plane { strike: Azimuth::from_grid_north(10.deg()), dip: 30.deg() };
        assert!(grid.pole().is_err() && steep.angle_to(&grid).is_err());
    }
}
