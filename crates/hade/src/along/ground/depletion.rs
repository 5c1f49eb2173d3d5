//! A layer whose pore pressure was drawn down, and what that took from its horizontal stresses.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
use crate::units::{Pressure, Quantity, as_typed, require_between, with_typed_unit};

/// How the smaller horizontal stress followed the pore pressure: ΔS_hmin = κ ΔP_p.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum MinPath {
    /// κ as measured, 0–1.
    Measured(f64),
    /// κ of a wide, thin, elastic layer that cannot strain sideways: α (1 − 2ν) / (1 − ν), with Biot's
    /// coefficient α, 0–1, and the Poisson's ratio of the layer's rock.
    Uniaxial {
        /// Biot's coefficient α.
        biot: f64,
    },
}

/// How the larger horizontal stress followed.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum MaxPath {
    /// By as much as the smaller one.
    AsMin,
    /// By its own κ, 0–1.
    Measured(f64),
}

/// A drawdown of the pore pressure with the stress path that came with it. The vertical stress stays.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Depletion {
    /// By how much the pore pressure fell below the profile, more than zero.
    pub drawdown: Pressure,
    /// The path of the smaller horizontal stress.
    pub sh_min: MinPath,
    /// The path of the larger horizontal stress.
    pub sh_max: MaxPath,
}

impl Depletion {
    /// κ of the smaller and of the larger horizontal stress, in rock of a Poisson's ratio.
    pub(super) fn paths(&self, poisson: f64) -> Result<[f64; 2]> {
        let drawdown = self.drawdown.finite("drawdown of the pore pressure")?;
        if drawdown.si() <= 0.0 {
            return Err(Error::out_of_range(
                "drawdown of the pore pressure",
                with_typed_unit(drawdown),
                "more than zero: say by how much it fell",
            ));
        }
        let min = match self.sh_min {
            MinPath::Measured(a) => require_between("stress path κ of S_hmin", a, 0.0, 1.0)?,
            MinPath::Uniaxial { biot } => {
                require_between("Biot's coefficient α", biot, 0.0, 1.0)? * (1.0 - 2.0 * poisson) / (1.0 - poisson)
            }
        };
        let max = match self.sh_max {
            MaxPath::AsMin => min,
            MaxPath::Measured(a) => require_between("stress path κ of S_Hmax", a, 0.0, 1.0)?,
        };
        Ok([min, max])
    }

    /// "pore pressure drawn down by 12 MPa, κ 0.64 of S_hmin, S_Hmax as S_hmin".
    pub(crate) fn words(&self) -> String {
        let min = match self.sh_min {
            MinPath::Measured(a) => format!("κ {} of S_hmin", as_typed(a)),
            MinPath::Uniaxial { biot } => {
                format!("κ = α (1 − 2ν) / (1 − ν) of S_hmin with α {}", as_typed(biot))
            }
        };
        let max = match self.sh_max {
            MaxPath::AsMin => "S_Hmax by as much".to_owned(),
            MaxPath::Measured(a) => format!("κ {} of S_Hmax", as_typed(a)),
        };
        format!("pore pressure drawn down by {}, {min}, {max}", with_typed_unit(self.drawdown))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    /// A sand drawn down by 12 MPa with κ 0.64 loses 7.68 MPa; at α 1 and ν 0.25 κ is 2/3.
    #[test]
    fn paths_of_stress() {
        let measured = Depletion { drawdown: 12.mpa(), sh_min: MinPath::Measured(0.64), sh_max: MaxPath::AsMin };
        let [min, max] = measured.paths(0.25).unwrap();
        assert!((measured.drawdown.in_mpa() * min - 7.68).abs() < 1e-12 && min == max);
        let uniaxial =
            Depletion { sh_min: MinPath::Uniaxial { biot: 1.0 }, sh_max: MaxPath::Measured(0.4), ..measured };
        let [min, max] = uniaxial.paths(0.25).unwrap();
        assert!((min - 2.0 / 3.0).abs() < 1e-15 && max == 0.4);
        let refused = |d: Depletion| d.paths(0.25).unwrap_err().to_string();
        assert!(refused(Depletion { drawdown: 0.mpa(), ..measured }).contains("more than zero"));
        assert!(refused(Depletion { sh_min: MinPath::Measured(1.2), ..measured }).contains("between 0 and 1"));
        assert!(refused(Depletion { sh_max: MaxPath::Measured(f64::NAN), ..measured }).contains("S_Hmax"));
        assert!(refused(Depletion { sh_min: MinPath::Uniaxial { biot: -0.1 }, ..measured }).contains("Biot"));
        assert!(refused(Depletion { drawdown: f64::INFINITY.mpa(), ..measured }).contains("finite"));
    }
}
