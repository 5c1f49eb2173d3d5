//! The shear strength of a rock, as it was stated.

use serde::{Deserialize, Serialize};

use super::drucker_prager::{DruckerPrager, Fit};
use super::hoek_brown::HoekBrownLaw;
use super::law::Law;
use super::modified_lade::ModifiedLade;
use super::mogi_coulomb::MogiCoulomb;
use super::mohr_coulomb::MohrCoulomb;
use crate::card::{Formula, Item, Reference, Step};
use crate::error::{Error, Result};
use crate::stress::EffectiveStress;
use crate::stress::tensor::Tensor;
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
    MogiCoulomb { cohesion: Pressure, friction_angle: Angle },
    ModifiedLade { cohesion: Pressure, friction_angle: Angle },
    DruckerPrager { fit: Fit, cohesion: Pressure, friction_angle: Angle },
    HoekBrown(HoekBrown),
}

/// A rock mass by Hoek and Brown: the intact rock, and what joints and disturbance leave of it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct HoekBrown {
    /// The uniaxial compressive strength of the intact rock, above zero.
    pub sigma_ci: Pressure,
    /// The constant mi of the intact rock, above zero.
    pub m_i: f64,
    /// The geological strength index, 0–100; 100 is intact rock.
    pub gsi: f64,
    /// The disturbance factor D, 0–1; 0 is undisturbed.
    pub disturbance: f64,
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

    /// Mogi–Coulomb (Al-Ajmi and Zimmerman 2005) by cohesion (zero or more) and friction angle (0°
    /// or more, below 90°): it counts the intermediate stress, and is Mohr–Coulomb where two are
    /// equal.
    pub fn mogi_coulomb(cohesion: Pressure, friction_angle: Angle) -> Self {
        Strength(Stated::MogiCoulomb { cohesion, friction_angle })
    }

    /// The modified Lade criterion (Ewy 1999) by cohesion (zero or more) and friction angle (above
    /// 0°, below 90°).
    pub fn modified_lade(cohesion: Pressure, friction_angle: Angle) -> Self {
        Strength(Stated::ModifiedLade { cohesion, friction_angle })
    }

    /// Drucker–Prager inside Mohr–Coulomb, touching its faces; by cohesion (zero or more) and
    /// friction angle (0° or more, below 90°). For comparison.
    pub fn drucker_prager_inscribed(cohesion: Pressure, friction_angle: Angle) -> Self {
        Strength(Stated::DruckerPrager { fit: Fit::Inscribed, cohesion, friction_angle })
    }

    /// Drucker–Prager through the edges of triaxial compression; by cohesion (zero or more) and
    /// friction angle (0° or more, below 90°). For comparison: it flatters the rock.
    pub fn drucker_prager_circumscribed(cohesion: Pressure, friction_angle: Angle) -> Self {
        Strength(Stated::DruckerPrager { fit: Fit::Circumscribed, cohesion, friction_angle })
    }

    /// Drucker–Prager through the edges of triaxial extension; by cohesion (zero or more) and friction
    /// angle (0° or more, below 90°). For comparison.
    pub fn drucker_prager_extension(cohesion: Pressure, friction_angle: Angle) -> Self {
        Strength(Stated::DruckerPrager { fit: Fit::Extension, cohesion, friction_angle })
    }

    /// Hoek–Brown (2002 edition) of a rock mass.
    pub fn hoek_brown(rock_mass: HoekBrown) -> Self {
        Strength(Stated::HoekBrown(rock_mass))
    }

    /// How much more the rock bears, in the measure of its criterion (Mohr–Coulomb: UCS + q σ3' −
    /// σ1'; see the criterion's card). Positive: it holds; negative: it fails. Not a number when the
    /// strength itself is out of range.
    pub fn margin(&self, stress: &EffectiveStress) -> Pressure {
        match self.checked() {
            Ok(sound) => Pressure::from_si(-sound.law().excess(stress.principal().map(Quantity::si))),
            Err(_) => Pressure::from_si(f64::NAN),
        }
    }

    /// "Mohr–Coulomb".
    pub fn name(&self) -> &'static str {
        match self.0 {
            Stated::MohrCoulomb { .. } | Stated::MohrCoulombUcs { .. } => "Mohr–Coulomb",
            Stated::MogiCoulomb { .. } => "Mogi–Coulomb",
            Stated::ModifiedLade { .. } => "modified Lade",
            Stated::DruckerPrager { fit: Fit::Inscribed, .. } => "Drucker–Prager, inscribed",
            Stated::DruckerPrager { fit: Fit::Circumscribed, .. } => "Drucker–Prager, circumscribed",
            Stated::DruckerPrager { fit: Fit::Extension, .. } => "Drucker–Prager, extension",
            Stated::HoekBrown(_) => "Hoek–Brown",
        }
    }

    /// The margin in words: "UCS + q σ'_3 − σ'_1".
    pub(crate) fn margin_words(self) -> &'static str {
        match self.0 {
            Stated::MohrCoulomb { .. } | Stated::MohrCoulombUcs { .. } => "UCS + q σ'_3 − σ'_1",
            Stated::MogiCoulomb { .. } => "a + b σ'_m − τ_oct",
            Stated::ModifiedLade { .. } => "σ'_m + S_1 − u",
            Stated::DruckerPrager { .. } => "k + α I_1 − √J_2",
            Stated::HoekBrown(_) => "σ'_3 − (σ_ci / m_b) (((σ'_1 − σ'_3) / σ_ci)^(1/a) − s)",
        }
    }

    fn friction_angle(self) -> Option<Angle> {
        match self.0 {
            Stated::MohrCoulomb { friction_angle, .. }
            | Stated::MohrCoulombUcs { friction_angle, .. }
            | Stated::MogiCoulomb { friction_angle, .. }
            | Stated::ModifiedLade { friction_angle, .. }
            | Stated::DruckerPrager { friction_angle, .. } => Some(friction_angle),
            Stated::HoekBrown(_) => None,
        }
    }

    /// Itself, or the error that says what no rock has.
    pub(crate) fn checked(self) -> Result<Self> {
        // TODO-HELPER: Hoek–Brown ranges, modified Lade needs φ > 0.
        match self.0 {
            Stated::MohrCoulomb { cohesion, .. }
            | Stated::MogiCoulomb { cohesion, .. }
            | Stated::ModifiedLade { cohesion, .. }
            | Stated::DruckerPrager { cohesion, .. } => {
                require_not_negative("cohesion", cohesion)?;
            }
            Stated::MohrCoulombUcs { ucs, .. } => {
                require_not_negative("uniaxial compressive strength", ucs)?;
            }
            Stated::HoekBrown(_) => {}
        }
        if let Some(phi) = self.friction_angle() {
            if !(phi.si() >= 0.0 && phi.si() < std::f64::consts::FRAC_PI_2) {
                return Err(Error::out_of_range("friction angle", with_typed_unit(phi), "at least 0° and below 90°"));
            }
            if !self.law().size().is_finite() || !self.law().excess([2.0, 1.0, 0.5]).is_finite() {
                return Err(Error::out_of_range(
                    "friction angle",
                    with_typed_unit(phi),
                    "far enough below 90° for a finite strength",
                ));
            }
        }
        Ok(self)
    }

    /// The criterion with its constants worked out.
    pub(crate) fn law(self) -> Law {
        match self.0 {
            Stated::MohrCoulomb { cohesion, friction_angle } => {
                Law::MohrCoulomb(MohrCoulomb::from_cohesion(cohesion.si(), friction_angle.si()))
            }
            Stated::MohrCoulombUcs { ucs, friction_angle } => {
                Law::MohrCoulomb(MohrCoulomb::from_ucs(ucs.si(), friction_angle.si()))
            }
            Stated::MogiCoulomb { cohesion, friction_angle } => {
                Law::MogiCoulomb(MogiCoulomb::from_cohesion(cohesion.si(), friction_angle.si()))
            }
            Stated::ModifiedLade { cohesion, friction_angle } => {
                Law::ModifiedLade(ModifiedLade::from_cohesion(cohesion.si(), friction_angle.si()))
            }
            Stated::DruckerPrager { fit, cohesion, friction_angle } => {
                Law::DruckerPrager(DruckerPrager::from_cohesion(fit, cohesion.si(), friction_angle.si()))
            }
            Stated::HoekBrown(mass) => {
                Law::HoekBrown(HoekBrownLaw::new(mass.sigma_ci.si(), mass.m_i, mass.gsi, mass.disturbance))
            }
        }
    }

    // SHIM: until the wall takes every criterion.
    pub(crate) fn mohr_coulomb_line(self) -> MohrCoulomb {
        match self.law() {
            Law::MohrCoulomb(line) => line,
            _ => MohrCoulomb { ucs: 0.0, q: 1.0 },
        }
    }
    pub(crate) fn by_tangent(self) -> (f64, Pressure) {
        let line = self.mohr_coulomb_line();
        (line.q.sqrt(), Pressure::from_si(line.ucs))
    }

    /// By how much an effective stress, as a whole tensor, exceeds what the rock bears, by another
    /// route than [`Law::excess`]: for checks.
    pub(crate) fn excess_by_tensor(self, effective: Tensor) -> f64 {
        // TODO-HELPER: a route of its own for each criterion.
        self.law().excess(effective.eigen().values)
    }

    /// The margin of effective principal stresses (Pa), with the numbers put in.
    pub(crate) fn worked(self, [s1, s2, s3]: [f64; 3]) -> Vec<Step> {
        // TODO-HELPER
        let mpa = |c: f64| fixed(c * 1e-6, 4);
        let margin = -self.law().excess([s1, s2, s3]);
        let Law::MohrCoulomb(line) = self.law() else {
            return vec![Step::worked(format!("{} = {} MPa", self.margin_words(), mpa(margin)))];
        };
        vec![Step::worked(format!(
            "UCS + q σ'_3 − σ'_1 = {} + {} · ({}) − ({}) = {} MPa",
            mpa(line.ucs),
            fixed(line.q, 5),
            mpa(s3),
            mpa(s1),
            mpa(margin)
        ))]
    }

    /// The numbers as they were typed.
    pub(crate) fn items(self) -> Vec<Item> {
        let stated = match self.0 {
            Stated::MohrCoulomb { cohesion, .. }
            | Stated::MogiCoulomb { cohesion, .. }
            | Stated::ModifiedLade { cohesion, .. }
            | Stated::DruckerPrager { cohesion, .. } => Item::typed("c", "cohesion", cohesion),
            Stated::MohrCoulombUcs { ucs, .. } => Item::typed("UCS", "uniaxial compressive strength", ucs),
            Stated::HoekBrown(mass) => {
                return vec![
                    Item::typed("σ_ci", "uniaxial compressive strength of the intact rock", mass.sigma_ci),
                    Item::typed("m_i", "Hoek–Brown constant of the intact rock", mass.m_i),
                    Item::typed("GSI", "geological strength index", mass.gsi),
                    Item::typed("D", "disturbance factor", mass.disturbance),
                ];
            }
        };
        vec![stated, Item::typed("φ", "friction angle", self.friction_angle().unwrap_or_default())]
    }

    /// The derived constants, with the numbers put in.
    pub(crate) fn steps(self) -> Vec<Step> {
        // TODO-HELPER: the other criteria.
        let (Law::MohrCoulomb(line), Some(phi)) = (self.law(), self.friction_angle()) else { return Vec::new() };
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

    pub(crate) fn assumptions(self) -> Vec<String> {
        Vec::new()
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
