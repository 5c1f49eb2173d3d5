//! The rock of a wall.

use serde::{Deserialize, Serialize};

use super::Strength;
use crate::card::Item;
use crate::error::Result;
use crate::units::{Pressure, as_typed, require_between, require_not_negative, with_typed_unit};

/// The rock of a wall: isotropic, linear elastic up to its strength. Nothing of it is defaulted.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Rock {
    /// Poisson's ratio, 0–0.5.
    pub poisson: f64,
    /// The tensile strength T₀, zero or more: the wall parts where the least effective principal
    /// stress reaches −T₀.
    pub tensile_strength: Pressure,
    /// The shear strength.
    pub strength: Strength,
}

impl Rock {
    /// Refuses what no rock has.
    pub(crate) fn checked(self) -> Result<Self> {
        require_between("Poisson's ratio", self.poisson, 0.0, 0.5)?;
        require_not_negative("tensile strength T₀", self.tensile_strength)?;
        self.strength.checked()?;
        Ok(self)
    }

    /// "Mohr–Coulomb, c 10 MPa, φ 30°; ν 0.25, T_0 2 MPa".
    pub(crate) fn words(self) -> String {
        let tensile = with_typed_unit(self.tensile_strength);
        format!("{}; ν {}, T_0 {tensile}", self.strength.words(), as_typed(self.poisson))
    }

    /// Its numbers as inputs of a card, as they were typed.
    pub(crate) fn items(self) -> Vec<Item> {
        let mut items = vec![
            Item::typed("ν", "Poisson's ratio", self.poisson),
            Item::typed("T_0", "tensile strength", self.tensile_strength),
        ];
        items.extend(self.strength.items());
        items
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    fn rock() -> Rock {
        Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: Strength::mohr_coulomb(10.mpa(), 30.deg()) }
    }

    #[test]
    fn refusals_name_quantity_value_and_range() {
        let message = |r: Rock| r.checked().unwrap_err().to_string();
        assert_eq!(
            message(Rock { poisson: 0.6, ..rock() }),
            "Poisson's ratio is 0.6, but it must be between 0 and 0.5."
        );
        assert!(message(Rock { poisson: f64::NAN, ..rock() }).starts_with("Poisson's ratio is NaN"));
        assert_eq!(
            message(Rock { tensile_strength: (-1).mpa(), ..rock() }),
            "tensile strength T₀ is -1 MPa, but it must be zero or more."
        );
        let strength = Strength::mohr_coulomb((-3).mpa(), 30.deg());
        assert_eq!(message(Rock { strength, ..rock() }), "cohesion is -3 MPa, but it must be zero or more.");
        let strength = Strength::mohr_coulomb_ucs(30.mpa(), 90.deg());
        assert_eq!(
            message(Rock { strength, ..rock() }),
            "friction angle is 90°, but it must be at least 0° and below 90°."
        );
        let strength = Strength::mohr_coulomb_ucs(f64::INFINITY.mpa(), 30.deg());
        assert!(message(Rock { strength, ..rock() }).starts_with("uniaxial compressive strength is"));
        assert!(rock().checked().is_ok());
    }
}
