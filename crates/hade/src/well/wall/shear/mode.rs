//! How a place of the wall fails: its principal stresses against the directions of the wall.

use serde::{Deserialize, Serialize};

use crate::well::wall::elastic::AtWall;

/// A direction of the wall's axes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum WallDirection {
    /// Across the wall.
    Radial,
    /// Around the hole.
    Hoop,
    /// Along the hole.
    Axial,
}

impl WallDirection {
    /// "radial", "hoop", "axial".
    pub fn word(self) -> &'static str {
        match self {
            WallDirection::Radial => "radial",
            WallDirection::Hoop => "hoop",
            WallDirection::Axial => "axial",
        }
    }
}

/// How a place of the wall fails: along which wall direction each principal stress lies nearest,
/// largest first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Mode {
    /// The directions of σ1', σ2', σ3'.
    pub directions: [WallDirection; 3],
    /// Whether the two in the wall are turned from hoop and axial by a shear stress.
    pub turned: bool,
}

impl Mode {
    /// "σ'_1 hoop, σ'_2 axial, σ'_3 radial"; with "nearest" before the first where a shear stress in the
    /// wall turns them.
    pub fn words(self) -> String {
        let [a, b, c] = self.directions.map(WallDirection::word);
        let near = if self.turned { "nearest " } else { "" };
        format!("σ'_1 {near}{a}, σ'_2 {b}, σ'_3 {c}")
    }
}

/// The directions of the principal stresses, largest first. Stresses closer than rounding keep the
/// order hoop, axial, radial, so that the words do not turn on a last bit.
pub(crate) fn mode_of(at: AtWall, scale: f64) -> Mode {
    use WallDirection::{Axial, Hoop, Radial};
    let same = 1e-9 * scale;
    let (e1, e2, share) = at.in_the_wall();
    let (larger, smaller) = if e1 - e2 <= same || share >= 0.5 { (Hoop, Axial) } else { (Axial, Hoop) };
    let directions = if at.radial > e1 + same {
        [Radial, larger, smaller]
    } else if at.radial > e2 + same {
        [larger, Radial, smaller]
    } else {
        [larger, smaller, Radial]
    };
    Mode { directions, turned: at.shear.abs() > same }
}
