//! What holds a fault: friction and cohesion.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
use crate::units::{Angle, Pressure, Quantity, as_typed, require_not_negative};

/// The strength of a fault in shear: τ = C + μ σ'_n. Both numbers are stated; a fault without
/// cohesion says `cohesion: 0.mpa()`.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct FaultStrength {
    /// The coefficient of friction μ = tan φ, a plain number greater than zero (not an angle).
    pub friction: f64,
    /// The cohesion C: the shear stress that the fault bears without effective normal stress, zero
    /// or more.
    pub cohesion: Pressure,
}

/// A coefficient of friction beyond this was never measured on rock.
const UNHEARD_OF: f64 = 2.0;

impl FaultStrength {
    /// By the angle of friction φ, μ = tan φ, and the cohesion.
    ///
    /// # Errors
    /// When the angle is not greater than 0° and smaller than 90°, or the cohesion is negative.
    pub fn from_friction_angle(angle: Angle, cohesion: Pressure) -> Result<Self> {
        if !(angle.si() > 0.0 && angle.in_deg() < 90.0) {
            return Err(Error::out_of_range(
                "angle of friction of a fault",
                crate::units::with_typed_unit(angle),
                "greater than 0° and smaller than 90°",
            ));
        }
        FaultStrength { friction: angle.si().tan(), cohesion }.checked()
    }

    /// Byerlee's friction of rock at effective normal stresses below 200 MPa: τ = 0.85 σ'_n.
    /// Byerlee, J. (1978) Friction of rocks, Pure and Applied Geophysics 116, 615–626.
    pub fn byerlee_below_200_mpa() -> Self {
        FaultStrength { friction: 0.85, cohesion: Pressure::mpa(0.0) }
    }

    /// Byerlee's friction of rock at effective normal stresses above 200 MPa: τ = 50 MPa + 0.6 σ'_n.
    /// Byerlee, J. (1978) Friction of rocks, Pure and Applied Geophysics 116, 615–626.
    pub fn byerlee_above_200_mpa() -> Self {
        FaultStrength { friction: 0.6, cohesion: Pressure::mpa(50.0) }
    }

    /// The angle of friction φ = arctan μ.
    pub fn friction_angle(self) -> Angle {
        Angle::from_si(self.friction.atan())
    }

    /// The shear stress that the fault bears at an effective normal stress: C + μ σ'_n. Its use for
    /// an open fault (σ'_n ≤ 0) is a matter of form: nothing presses it together.
    pub fn shear_strength(self, effective_normal: Pressure) -> Pressure {
        self.cohesion + effective_normal * self.friction
    }

    /// Itself, when both numbers can be a fault's.
    pub(super) fn checked(self) -> Result<Self> {
        require_friction(self.friction)?;
        require_not_negative("cohesion of the fault", self.cohesion)?;
        Ok(self)
    }

    /// What a reader should know about the numbers.
    pub(super) fn doubt(self) -> Option<String> {
        (self.friction > UNHEARD_OF).then(|| {
            format!(
                "A coefficient of friction of {} is larger than any measured on rock; was an angle written in its place?",
                as_typed(self.friction)
            )
        })
    }

    /// "μ 0.6, C 0 MPa".
    pub fn words(self) -> String {
        format!("μ {}, C {}", as_typed(self.friction), crate::units::with_typed_unit(self.cohesion))
    }
}

/// Refuses a coefficient of friction that is not greater than zero.
pub(super) fn require_friction(friction: f64) -> Result<f64> {
    if friction.is_finite() && friction > 0.0 {
        return Ok(friction);
    }
    Err(Error::out_of_range(
        "coefficient of friction of the fault",
        as_typed(friction),
        "a number greater than zero, tan of the angle of friction",
    ))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    #[test]
    fn strength_is_stated_and_in_range() {
        let of = |friction: f64, cohesion: f64| FaultStrength { friction, cohesion: cohesion.mpa() }.checked();
        assert_eq!(of(0.6, 0.0).unwrap().words(), "μ 0.6, C 0 MPa");
        for bad in [of(0.0, 1.0), of(-0.6, 1.0), of(f64::NAN, 1.0), of(0.6, -1.0), of(0.6, f64::INFINITY)] {
            assert!(bad.is_err());
        }
        assert!(of(0.0, 0.0).unwrap_err().to_string().starts_with("coefficient of friction of the fault is 0, but"));
        let s = FaultStrength::from_friction_angle(30.deg(), 1.mpa()).unwrap();
        assert!((s.friction_angle().in_deg() - 30.0).abs() < 1e-12);
        assert!((s.shear_strength(10.mpa()).in_mpa() - (1.0 + 10.0 / 3.0_f64.sqrt())).abs() < 1e-12);
        for bad in [0.0, 90.0, -5.0, f64::NAN] {
            assert!(FaultStrength::from_friction_angle(bad.deg(), 0.mpa()).is_err(), "{bad}");
        }
        assert!(of(31.0, 0.0).unwrap().doubt().unwrap().contains("was an angle written"));
        assert!(of(0.85, 0.0).unwrap().doubt().is_none());
    }
}
