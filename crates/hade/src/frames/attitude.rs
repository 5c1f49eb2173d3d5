//! The attitude of a borehole at one depth.

use serde::{Deserialize, Serialize};

use super::azimuth::{TRUE_AZIMUTH, bearing, three_figures};
use super::vector::{M3, cross};
use super::{Axes, Azimuth, Borehole, Chain, Geographic, Name, WallAxes};
use crate::card::Item;
use crate::error::Result;
use crate::units::{Angle, Quantity, require_between};

/// How a borehole lies at one depth. In a vertical hole the azimuth stays the reference of tool
/// faces.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Attitude {
    /// From vertical-down, 0–180°; above 90° the hole rises.
    pub inclination: Angle,
    /// The azimuth the hole goes towards.
    pub azimuth: Azimuth,
}

/// An attitude with a name ("KF-3 at 2950 m"), so that messages and cards can say which hole.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct NamedAttitude {
    /// The attitude.
    pub attitude: Attitude,
    /// The name.
    pub name: Name,
}

impl Attitude {
    /// With a name.
    pub fn named(self, name: &str) -> NamedAttitude {
        NamedAttitude { attitude: self, name: Name::new(name) }
    }

    /// The chain of turns from the geographic frame to this hole's.
    ///
    /// # Errors
    /// When the inclination is outside 0–180° or the azimuth has no true north.
    pub fn chain(self) -> Result<Chain<Geographic, Borehole>> {
        Chain::between(Axes::NorthEastDown, Axes::Hole { attitude: self, name: None })
    }

    /// The turn from this hole's axes to those of its wall at a tool face: radial, around, along.
    ///
    /// # Errors
    /// As [`Attitude::chain`], or when the tool face is not a finite number.
    pub fn wall_chain(self, tool_face: Angle) -> Result<Chain<Borehole, WallAxes>> {
        wall_chain(self, None, tool_face)
    }

    /// Inclination and true azimuth in radians, checked.
    pub(crate) fn angles(self) -> Result<(f64, f64)> {
        require_between("inclination", self.inclination, Angle::deg(0.0), Angle::deg(180.0))?;
        Ok((self.inclination.si(), self.azimuth.true_north()?.si()))
    }

    /// Rows: top of hole, right, along the hole.
    pub(crate) fn matrix(self) -> Result<M3> {
        let (i, a) = self.angles()?;
        Ok(borehole_axes(i, a))
    }

    /// Whether the top of the hole is undefined, so that tool faces count from the azimuth.
    pub fn is_vertical(self) -> bool {
        self.inclination.si().sin().abs() < NEAR_VERTICAL.to_radians().sin()
    }

    /// Inclination and azimuth as inputs or results. The suffix tells two holes apart.
    pub(crate) fn items(self, suffix: &str) -> Vec<Item> {
        let (i, a) = (format!("i{suffix}"), format!("a{suffix}"));
        let azimuth = match self.azimuth.true_north() {
            Ok(angle) => Item::new(&a, "azimuth of the hole", TRUE_AZIMUTH, vec![angle.si()], bearing(angle)),
            Err(_) => self.azimuth.item(&a, "azimuth of the hole"),
        };
        vec![Item::typed(&i, "inclination of the hole from vertical", self.inclination), azimuth]
    }

    /// From where tool faces count in this hole, in one sentence.
    pub(crate) fn tool_face_reference(self) -> String {
        let a = self.azimuth.true_north().unwrap_or_default();
        if !self.is_vertical() {
            return "Tool faces count clockwise from the top of the hole, looking along the hole away from its mouth."
                .to_owned();
        }
        if self.inclination.in_deg() < 90.0 {
            return format!("The hole is vertical: tool faces count clockwise from azimuth {}°.", three_figures(a));
        }
        let opposite = a + Angle::deg(180.0);
        format!(
            "The hole points straight up: tool faces count from azimuth {}°, clockwise looking up the hole (anticlockwise seen from above).",
            three_figures(opposite)
        )
    }

    /// "inclination 42.0°, azimuth 120.0°".
    pub fn words(self) -> String {
        let azimuth = self.azimuth.true_north().unwrap_or(self.azimuth.measured());
        format!("inclination {:.1}, azimuth {}°", self.inclination, three_figures(azimuth))
    }
}

impl NamedAttitude {
    /// The chain of turns from the geographic frame to this hole's, under its name.
    ///
    /// # Errors
    /// As [`Attitude::chain`].
    pub fn chain(self) -> Result<Chain<Geographic, Borehole>> {
        Chain::between(Axes::NorthEastDown, Axes::Hole { attitude: self.attitude, name: Some(self.name) })
    }

    /// The turn from this hole's axes to those of its wall at a tool face: radial, around, along.
    ///
    /// # Errors
    /// As [`Attitude::wall_chain`].
    pub fn wall_chain(self, tool_face: Angle) -> Result<Chain<Borehole, WallAxes>> {
        wall_chain(self.attitude, Some(self.name), tool_face)
    }
}

fn wall_chain(attitude: Attitude, name: Option<Name>, tool_face: Angle) -> Result<Chain<Borehole, WallAxes>> {
    Chain::between(Axes::Hole { attitude, name }, Axes::Wall { attitude, name, tool_face })
}

/// Below this inclination (degrees, from vertical up or down) the top of the hole is not a useful
/// reference, and tool faces are named from the azimuth.
const NEAR_VERTICAL: f64 = 0.1;

/// Rows: top of hole h, right r = t × h, along the hole t.
pub(crate) fn borehole_axes(i: f64, a: f64) -> M3 {
    let ((si, ci), (sa, ca)) = (i.sin_cos(), a.sin_cos());
    let h = [ci * ca, ci * sa, -si];
    let t = [si * ca, si * sa, ci];
    [h, cross(t, h), t]
}
