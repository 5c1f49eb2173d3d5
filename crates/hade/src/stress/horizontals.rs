//! A stress stated by its vertical and two horizontal magnitudes.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::made::Made;
use super::tensor::Tensor;
use crate::error::{Error, Result};
use crate::frames::{Azimuth, Geographic};
use crate::units::{Pressure, Quantity, with_typed_unit};

/// The vertical stress, the two horizontal ones, and the azimuth of the larger of these. Stating a
/// stress so assumes that the vertical is a principal direction.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Horizontals {
    /// The vertical stress.
    pub sv: Pressure,
    /// The larger horizontal stress.
    pub sh_max: Pressure,
    /// The smaller horizontal stress.
    pub sh_min: Pressure,
    /// The azimuth of the larger horizontal stress.
    pub sh_max_azimuth: Azimuth,
}

impl Stress<Geographic> {
    /// The tensor of a vertical and two horizontal stresses.
    ///
    /// # Errors
    /// When S_Hmax < S_hmin, a number is not finite, or the azimuth has no true north.
    pub fn from_horizontals(given: Horizontals) -> Result<Self> {
        given.sv.finite("vertical stress S_v")?;
        given.sh_max.finite("larger horizontal stress S_Hmax")?;
        given.sh_min.finite("smaller horizontal stress S_hmin")?;
        if given.sh_max < given.sh_min {
            return Err(Error::not_physical(
                format!(
                    "S_Hmax {} is smaller than S_hmin {}",
                    with_typed_unit(given.sh_max),
                    with_typed_unit(given.sh_min)
                ),
                "exchange the two, and turn the azimuth by 90° if it belongs to the other.",
            ));
        }
        let (s, c) = given.sh_max_azimuth.true_north()?.si().sin_cos();
        let (sv, big, small) = (given.sv.si(), given.sh_max.si(), given.sh_min.si());
        let tensor =
            Tensor([big * c * c + small * s * s, big * s * s + small * c * c, sv, (big - small) * s * c, 0.0, 0.0]);
        Ok(Stress::of(tensor, Made::Horizontals(given), None))
    }
}
