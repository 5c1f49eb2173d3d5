//! The shear strength of a rock, as it was stated.

use serde::{Deserialize, Serialize};

use super::MohrCoulomb;
use crate::card::{Formula, Item, Reference, Step};
use crate::error::{Error, Result};
use crate::stress::EffectiveStress;
use crate::units::{Angle, Pressure, Quantity, fixed, require_not_negative, with_typed_unit};

/// A shear strength: which criterion, with the numbers that were typed. A constructor takes any
/// number; the first use that can fail (a [`Wall`](crate::well::Wall)) refuses a bad one.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Strength(Stated);

#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "criterion", rename_all = "snake_case")]
enum Stated {
    MohrCoulomb { cohesion: Pressure, friction_angle: Angle },
    MohrCoulombUcs { ucs: Pressure, friction_angle: Angle },
}

impl Strength {
    /// Mohr–Coulomb by cohesion (zero or more) and friction angle (0° or more, below 90°).
    pub fn mohr_coulomb(cohesion: Pressure, friction_angle: Angle) -> Self {
        Strength(Stated::MohrCoulomb { cohesion, friction_angle })
    }

    /// Mohr–Coulomb by uniaxial compressive strength (zero or more) and friction angle (0° or more,
    /// below 90°).
    pub fn mohr_coulomb_ucs(ucs: Pressure, friction_angle: Angle) -> Self {
        Strength(Stated::MohrCoulombUcs { ucs, friction_angle })
    }

    /// How much more σ1' the rock bears: UCS + q σ3' − σ1'. Positive: it holds; negative: it fails.
    /// Not a number when the strength itself is out of range.
    pub fn margin(&self, stress: &EffectiveStress) -> Pressure {
        match self.checked() {
            Ok(sound) => Pressure::from_si(sound.mohr_coulomb_line().margin(stress.principal().map(Quantity::si))),
            Err(_) => Pressure::from_si(f64::NAN),
        }
    }

    /// "Mohr–Coulomb".
    pub fn name(&self) -> &'static str {
        match self.0 {
            Stated::MohrCoulomb { .. } | Stated::MohrCoulombUcs { .. } => "Mohr–Coulomb",
        }
    }

    fn friction_angle(self) -> Angle {
        match self.0 {
            Stated::MohrCoulomb { friction_angle, .. } | Stated::MohrCoulombUcs { friction_angle, .. } => {
                friction_angle
            }
        }
    }

    /// Itself, or the error that says what no rock has.
    pub(crate) fn checked(self) -> Result<Self> {
        match self.0 {
            Stated::MohrCoulomb { cohesion, .. } => require_not_negative("cohesion", cohesion)?,
            Stated::MohrCoulombUcs { ucs, .. } => require_not_negative("uniaxial compressive strength", ucs)?,
        };
        let phi = self.friction_angle();
        if !(phi.si() >= 0.0 && phi.si() < std::f64::consts::FRAC_PI_2) {
            return Err(Error::out_of_range("friction angle", with_typed_unit(phi), "at least 0° and below 90°"));
        }
        let line = self.mohr_coulomb_line();
        if !(line.q.is_finite() && line.ucs.is_finite()) {
            return Err(Error::out_of_range(
                "friction angle",
                with_typed_unit(phi),
                "far enough below 90° for a finite strength",
            ));
        }
        Ok(self)
    }

    pub(crate) fn mohr_coulomb_line(self) -> MohrCoulomb {
        match self.0 {
            Stated::MohrCoulomb { cohesion, friction_angle } => {
                MohrCoulomb::from_cohesion(cohesion.si(), friction_angle.si())
            }
            Stated::MohrCoulombUcs { ucs, friction_angle } => MohrCoulomb::from_ucs(ucs.si(), friction_angle.si()),
        }
    }

    /// tan(45° + φ/2) and UCS = 2 c tan(45° + φ/2), the other form of the same line: q is the
    /// tangent's square. For checks.
    pub(crate) fn by_tangent(self) -> (f64, Pressure) {
        let tangent = (std::f64::consts::FRAC_PI_4 + 0.5 * self.friction_angle().si()).tan();
        match self.0 {
            Stated::MohrCoulomb { cohesion, .. } => (tangent, cohesion * (2.0 * tangent)),
            Stated::MohrCoulombUcs { ucs, .. } => (tangent, ucs),
        }
    }

    /// The numbers as they were typed.
    pub(crate) fn items(self) -> Vec<Item> {
        let stated = match self.0 {
            Stated::MohrCoulomb { cohesion, .. } => Item::typed("c", "cohesion", cohesion),
            Stated::MohrCoulombUcs { ucs, .. } => Item::typed("UCS", "uniaxial compressive strength", ucs),
        };
        vec![stated, Item::typed("φ", "friction angle", self.friction_angle())]
    }

    /// The derived constants, with the numbers put in.
    pub(crate) fn steps(self) -> Vec<Step> {
        let (line, phi) = (self.mohr_coulomb_line(), self.friction_angle());
        let s = phi.si().sin();
        let mut steps = vec![Step::worked(format!(
            "q = (1 + sin φ) / (1 − sin φ) = (1 + {}) / (1 − {}) = {}",
            fixed(s, 6),
            fixed(s, 6),
            fixed(line.q, 5)
        ))];
        if let Stated::MohrCoulomb { cohesion, .. } = self.0 {
            steps.push(Step::worked(format!(
                "UCS = 2 c cos φ / (1 − sin φ) = 2 · {} · {} / (1 − {}) = {} MPa",
                fixed(cohesion.in_mpa(), 3),
                fixed(phi.si().cos(), 6),
                fixed(s, 6),
                fixed(line.ucs * 1e-6, 3)
            )));
        }
        steps
    }

    pub(crate) fn formulas(self) -> Vec<Formula> {
        vec![
            Formula::new("sigma'_1 = upright(\"UCS\") + q sigma'_3", "σ'_1 = UCS + q σ'_3"),
            Formula::new("q = (1 + sin phi) / (1 - sin phi)", "q = (1 + sin φ) / (1 − sin φ)"),
            Formula::new("upright(\"UCS\") = (2 c cos phi) / (1 - sin phi)", "UCS = 2 c cos φ / (1 − sin φ)"),
        ]
    }

    pub(crate) fn references(self) -> Vec<Reference> {
        vec![Reference::new(
            "Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, ch. 4 (Coulomb's criterion; cited from memory)",
        )]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Geographic;
    use crate::stress::{Components, Stress};
    use crate::units::Units;

    #[test]
    fn margin_is_positive_where_the_rock_holds_and_takes_effective_stress() {
        let s: Stress<Geographic> = Stress::from_components(Components {
            nn: 60.mpa(),
            ee: 40.mpa(),
            dd: 25.mpa(),
            ne: 0.mpa(),
            nd: 0.mpa(),
            ed: 0.mpa(),
        })
        .unwrap();
        let strength = Strength::mohr_coulomb(10.mpa(), 30.deg());
        // σ' = 40, 20, 5 at 20 MPa: 34.641 + 3 · 5 − 40 = 9.641.
        let margin = strength.margin(&s.effective(20.mpa()).unwrap());
        assert!((margin.in_mpa() - 9.641_016_151_377_55).abs() < 1e-9);
        let weak = Strength::mohr_coulomb_ucs(10.mpa(), 30.deg());
        assert!(weak.margin(&s.effective(20.mpa()).unwrap()) < 0.mpa());
        let bad = Strength::mohr_coulomb((-1).mpa(), 30.deg());
        assert!(bad.margin(&s.effective(20.mpa()).unwrap()).in_mpa().is_nan());
    }

    #[test]
    fn what_was_typed_survives_the_record() {
        let strength = Strength::mohr_coulomb_ucs(34.6.mpa(), 30.deg());
        let text = serde_json::to_string(&strength).unwrap();
        assert!(text.contains("mohr_coulomb_ucs"), "{text}");
        assert_eq!(serde_json::from_str::<Strength>(&text).unwrap(), strength);
    }
}
