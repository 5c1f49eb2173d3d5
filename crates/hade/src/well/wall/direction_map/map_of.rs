//! What a map over hole directions shows.

use serde::{Deserialize, Serialize};

use super::direction_map::MapInputs;
use crate::units::Quantity;
use crate::well::wall::shear::ShearWall;
use crate::well::wall::tension::{Parting, parting};

/// Which limit a map shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[non_exhaustive]
pub enum MapOf {
    /// The lowest pressure at which no place of the wall fails in shear. Lower is better.
    LowerShear,
    /// The highest pressure at which no place of the wall fails in shear. Higher is better.
    UpperShear,
    /// The pressure at which the wall parts. Higher is better.
    Initiation,
    /// How far the bare limits are apart: the smallest of upper shear limit, initiation and S3, less the
    /// larger of lower shear limit and pore pressure. Without margins or an allowed width, and negative
    /// where the two have crossed. Wider is better.
    Width,
}

impl MapOf {
    /// "lower shear limit".
    pub fn words(self) -> &'static str {
        match self {
            MapOf::LowerShear => "lower shear limit",
            MapOf::UpperShear => "upper shear limit",
            MapOf::Initiation => "fracture initiation",
            MapOf::Width => "width of the range by bare limits",
        }
    }

    pub(super) fn symbol(self) -> &'static str {
        match self {
            MapOf::LowerShear => "p_ls",
            MapOf::UpperShear => "p_us",
            MapOf::Initiation => "p_i",
            MapOf::Width => "Δp",
        }
    }

    /// Whether a direction with a larger value is the better one.
    pub(super) fn larger_is_better(self) -> bool {
        self != MapOf::LowerShear
    }

    /// "lowest".
    pub(super) fn best_word(self) -> &'static str {
        match self {
            MapOf::LowerShear => "lowest",
            MapOf::UpperShear | MapOf::Initiation => "highest",
            MapOf::Width => "widest",
        }
    }

    /// "highest".
    pub(super) fn worst_word(self) -> &'static str {
        match self {
            MapOf::LowerShear => "highest",
            MapOf::UpperShear | MapOf::Initiation => "lowest",
            MapOf::Width => "narrowest",
        }
    }

    /// What a direction without a value lacks.
    pub(super) fn none_words(self) -> &'static str {
        match self {
            MapOf::LowerShear | MapOf::UpperShear => "no pressure that is safe in shear",
            MapOf::Initiation => "no pressure at which the wall neither parts nor spalls",
            MapOf::Width => "no pressure between bottom and top",
        }
    }

    /// The value of one wall; `least` is S3. In Pa.
    pub(super) fn of_wall(self, wall: &ShearWall, inputs: &MapInputs, least: f64) -> Option<f64> {
        let part = || match parting(wall.effective_wall(), wall.pore, inputs.rock.tensile_strength.si(), wall.scale()) {
            Parting::At(peak) => Some(peak.value),
            Parting::Always { .. } => None,
        };
        match self {
            MapOf::LowerShear => wall.lower(),
            MapOf::UpperShear => wall.ends()?[1].map(|peak| peak.value),
            MapOf::Initiation => part(),
            MapOf::Width => {
                let [lower, upper] = wall.ends()?;
                let top = upper.map_or(f64::INFINITY, |peak| peak.value).min(part()?).min(least);
                let bottom = lower.map_or(f64::NEG_INFINITY, |peak| peak.value).max(wall.pore);
                Some(top - bottom)
            }
        }
    }
}
