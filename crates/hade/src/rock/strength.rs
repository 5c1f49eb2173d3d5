//! The shear strength of a rock, as it was stated.

use serde::{Deserialize, Serialize};

use super::account::Account;
use super::drucker_prager::{self, DruckerPrager, Fit};
use super::hoek_brown::{self, HoekBrown};
use super::law::Law;
use super::modified_lade::{self, LARGEST_FRICTION_ANGLE, LEAST_FRICTION_ANGLE, ModifiedLade};
use super::mogi_coulomb::{self, MogiCoulomb};
use super::mohr_coulomb::{self, MohrCoulomb};
use super::second_route::{SecondRoute, Tangent};
use crate::card::{Formula, Item, Reference, Step};
use crate::error::{Error, Result};
use crate::stress::EffectiveStress;
use crate::stress::tensor::Tensor;
use crate::units::{Angle, Pressure, Quantity, require_not_negative, with_typed_unit};

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

/// A number that a strength may be stated by.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum StrengthNumber {
    Cohesion,
    Ucs,
    FrictionAngle,
    SigmaCi,
    IntactConstant,
    Gsi,
    Disturbance,
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
    /// 0°, 85° or less).
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

    /// Hoek–Brown (2002 edition) of a rock mass; with GSI 100 and D 0, of intact rock.
    pub fn hoek_brown(rock_mass: HoekBrown) -> Self {
        Strength(Stated::HoekBrown(rock_mass))
    }

    /// The pressure and the angle that it was stated by, and whether that pressure is the uniaxial strength; `None` of
    /// a criterion without an angle.
    pub(super) fn pressure_and_angle(self) -> Option<(Pressure, bool, Angle)> {
        match self.0 {
            Stated::MohrCoulombUcs { ucs, friction_angle } => Some((ucs, true, friction_angle)),
            Stated::MohrCoulomb { cohesion, friction_angle }
            | Stated::MogiCoulomb { cohesion, friction_angle }
            | Stated::ModifiedLade { cohesion, friction_angle }
            | Stated::DruckerPrager { cohesion, friction_angle, .. } => Some((cohesion, false, friction_angle)),
            Stated::HoekBrown(_) => None,
        }
    }

    /// The same with one of its numbers (in SI) in place of that which was stated; a number it was not stated by
    /// changes nothing.
    pub(crate) fn with(self, number: StrengthNumber, si: f64) -> Self {
        let mut stated = self.0;
        match &mut stated {
            Stated::MohrCoulombUcs { ucs, friction_angle } => match number {
                StrengthNumber::Ucs => *ucs = Pressure::from_si(si),
                StrengthNumber::FrictionAngle => *friction_angle = Angle::from_si(si),
                _ => {}
            },
            Stated::MohrCoulomb { cohesion, friction_angle }
            | Stated::MogiCoulomb { cohesion, friction_angle }
            | Stated::ModifiedLade { cohesion, friction_angle }
            | Stated::DruckerPrager { cohesion, friction_angle, .. } => match number {
                StrengthNumber::Cohesion => *cohesion = Pressure::from_si(si),
                StrengthNumber::FrictionAngle => *friction_angle = Angle::from_si(si),
                _ => {}
            },
            Stated::HoekBrown(mass) => match number {
                StrengthNumber::SigmaCi => mass.sigma_ci = Pressure::from_si(si),
                StrengthNumber::IntactConstant => mass.m_i = si,
                StrengthNumber::Gsi => mass.gsi = si,
                StrengthNumber::Disturbance => mass.disturbance = si,
                _ => {}
            },
        }
        Strength(stated)
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

    /// The same cohesion and friction angle by Mohr–Coulomb. `None` for Hoek–Brown, which has
    /// neither; see [`RockMass`](super::RockMass) for an equivalent pair over a range of stress.
    pub fn as_mohr_coulomb(self) -> Option<Strength> {
        match self.0 {
            Stated::MohrCoulomb { .. } | Stated::MohrCoulombUcs { .. } => Some(self),
            _ => self.cohesion_and_friction().map(|(c, phi)| Strength::mohr_coulomb(c, phi)),
        }
    }

    /// The same cohesion and friction angle by Mogi–Coulomb. `None` for Hoek–Brown.
    pub fn as_mogi_coulomb(self) -> Option<Strength> {
        self.cohesion_and_friction().map(|(c, phi)| Strength::mogi_coulomb(c, phi))
    }

    /// The same cohesion and friction angle by the modified Lade criterion. `None` for Hoek–Brown,
    /// and for friction angles that this criterion does not take.
    pub fn as_modified_lade(self) -> Option<Strength> {
        self.cohesion_and_friction()
            .map(|(c, phi)| Strength::modified_lade(c, phi))
            .filter(|lade| lade.checked().is_ok())
    }

    /// Cohesion and friction angle, as stated or, from the uniaxial strength, c = UCS (1 − sin φ) / (2 cos φ).
    /// `None` for Hoek–Brown.
    pub(super) fn cohesion_and_friction(self) -> Option<(Pressure, Angle)> {
        match self.0 {
            Stated::MohrCoulomb { cohesion, friction_angle }
            | Stated::MogiCoulomb { cohesion, friction_angle }
            | Stated::ModifiedLade { cohesion, friction_angle }
            | Stated::DruckerPrager { cohesion, friction_angle, .. } => Some((cohesion, friction_angle)),
            Stated::MohrCoulombUcs { ucs, friction_angle } => {
                let (s, c) = friction_angle.si().sin_cos();
                Some((ucs * ((1.0 - s) / (2.0 * c)), friction_angle))
            }
            Stated::HoekBrown(_) => None,
        }
    }

    /// The fit of a cone, where it is one.
    pub(super) fn fit(self) -> Option<Fit> {
        match self.0 {
            Stated::DruckerPrager { fit, .. } => Some(fit),
            _ => None,
        }
    }

    /// What must be said wherever the criterion is used, if anything.
    pub(crate) fn warning(self) -> Option<&'static str> {
        match self.fit()? {
            Fit::Circumscribed => Some(
                "For comparison only: the circumscribed Drucker–Prager cone flatters the rock everywhere but in triaxial compression.",
            ),
            Fit::Inscribed => Some(
                "For comparison only: the inscribed Drucker–Prager cone is weaker than Mohr–Coulomb but where it touches it.",
            ),
            Fit::Extension => Some(
                "For comparison only: the Drucker–Prager cone through triaxial extension is much weaker than Mohr–Coulomb in triaxial compression.",
            ),
        }
    }

    /// "Mohr–Coulomb, c 10 MPa, φ 30°".
    pub(crate) fn words(self) -> String {
        let numbers: Vec<String> = self.items().iter().map(|i| format!("{} {}", i.symbol, i.shown)).collect();
        format!("{}, {}", self.name(), numbers.join(", "))
    }

    /// The margin in words: "UCS + q σ'_3 − σ'_1".
    pub(crate) fn margin_words(self) -> &'static str {
        self.account().margin
    }

    /// Where the criterion is defined, and what happens outside: one or two sentences.
    pub(crate) fn domain(self) -> &'static str {
        self.account().domain
    }

    /// What the criterion assumes, its domain at the end.
    pub(crate) fn assumptions(self) -> Vec<String> {
        let account = self.account();
        account.assumptions.into_iter().chain([account.domain]).map(str::to_owned).collect()
    }

    /// The derived constants, with the numbers put in.
    pub(crate) fn steps(self) -> Vec<Step> {
        self.account().steps
    }

    /// The formulas of the criterion and its constants.
    pub(crate) fn formulas(self) -> Vec<Formula> {
        self.account().formulas
    }

    /// What the symbols of the formulas are.
    pub(crate) fn symbols(self) -> Vec<(String, String)> {
        self.account().symbols.into_iter().map(|(symbol, what)| (symbol.to_owned(), what.to_owned())).collect()
    }

    /// The sources.
    pub(crate) fn references(self) -> Vec<Reference> {
        self.account().references
    }

    fn account(self) -> Account {
        match self.0 {
            Stated::MohrCoulomb { cohesion: c, friction_angle: phi } => {
                mohr_coulomb::account(MohrCoulomb::from_cohesion(c.si(), phi.si()), Some(c), phi)
            }
            Stated::MohrCoulombUcs { ucs, friction_angle: phi } => {
                mohr_coulomb::account(MohrCoulomb::from_ucs(ucs.si(), phi.si()), None, phi)
            }
            Stated::MogiCoulomb { cohesion: c, friction_angle: phi } => {
                mogi_coulomb::account(MogiCoulomb::from_cohesion(c.si(), phi.si()), c, phi)
            }
            Stated::ModifiedLade { cohesion: c, friction_angle: phi } => {
                modified_lade::account(ModifiedLade::from_cohesion(c.si(), phi.si()), c, phi)
            }
            Stated::DruckerPrager { fit, cohesion: c, friction_angle: phi } => {
                drucker_prager::account(DruckerPrager::from_cohesion(fit, c.si(), phi.si()), fit, c, phi)
            }
            Stated::HoekBrown(mass) => hoek_brown::account(mass),
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
        self.checked_law().map(|_| self)
    }

    /// The law of a strength that can be.
    pub(crate) fn checked_law(self) -> Result<Law> {
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
            Stated::HoekBrown(mass) => {
                mass.checked()?;
            }
        }
        if let Some(phi) = self.friction_angle() {
            if !(phi.si() >= 0.0 && phi.si() < std::f64::consts::FRAC_PI_2) {
                return Err(Error::out_of_range("friction angle", with_typed_unit(phi), "at least 0° and below 90°"));
            }
            if matches!(self.0, Stated::ModifiedLade { .. }) && phi > Angle::deg(LARGEST_FRICTION_ANGLE) {
                return Err(Error::out_of_range(
                    "friction angle of the modified Lade criterion",
                    with_typed_unit(phi),
                    format!("at most {LARGEST_FRICTION_ANGLE}°"),
                ));
            }
            if matches!(self.0, Stated::ModifiedLade { .. }) && phi < Angle::deg(LEAST_FRICTION_ANGLE) {
                return Err(Error::not_physical(
                    format!("The friction angle {}", with_typed_unit(phi)),
                    format!(
                        "the modified Lade criterion needs a friction angle above 0°, {LEAST_FRICTION_ANGLE}° or more, because it shifts the stresses by c / tan φ; state one, or take another criterion."
                    ),
                ));
            }
            let law = self.law();
            if !law.size().is_finite() || !law.excess([2.0, 1.0, 0.5]).is_finite() {
                return Err(Error::out_of_range(
                    "friction angle",
                    with_typed_unit(phi),
                    "far enough below 90° for a finite strength",
                ));
            }
            return Ok(law);
        }
        Ok(self.law())
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
            Stated::HoekBrown(mass) => Law::HoekBrown(mass.law()),
        }
    }

    /// By how much an effective stress (Pa), as a whole tensor, exceeds what the rock bears, by another
    /// route than [`Law::excess`], for checks: other algebra for the constants, the invariants from the
    /// components, principal values not by Jacobi's turns.
    pub(crate) fn excess_by_tensor(self, effective: Tensor) -> f64 {
        self.second_route().excess(effective)
    }

    /// The criterion by its second route.
    pub(super) fn second_route(self) -> SecondRoute {
        let by_cohesion = |c: Pressure, phi: Angle| Tangent::from_cohesion(c.si(), phi.si());
        match self.0 {
            Stated::MohrCoulomb { cohesion, friction_angle } => {
                SecondRoute::mohr_coulomb(by_cohesion(cohesion, friction_angle))
            }
            Stated::MohrCoulombUcs { ucs, friction_angle } => {
                SecondRoute::mohr_coulomb(Tangent::from_ucs(ucs.si(), friction_angle.si()))
            }
            Stated::MogiCoulomb { cohesion, friction_angle } => {
                SecondRoute::mogi_coulomb(by_cohesion(cohesion, friction_angle))
            }
            Stated::ModifiedLade { cohesion, friction_angle } => {
                SecondRoute::modified_lade(by_cohesion(cohesion, friction_angle))
            }
            Stated::DruckerPrager { fit, cohesion, friction_angle } => {
                SecondRoute::drucker_prager(fit, by_cohesion(cohesion, friction_angle))
            }
            Stated::HoekBrown(mass) => mass.second_route(),
        }
    }

    /// The margin of effective principal stresses σ1' ≥ σ2' ≥ σ3' (Pa), with the numbers put in.
    pub(crate) fn worked(self, stress: [f64; 3]) -> Vec<Step> {
        match self.law() {
            Law::MohrCoulomb(line) => mohr_coulomb::worked(line, stress),
            Law::MogiCoulomb(line) => mogi_coulomb::worked(line, stress),
            Law::ModifiedLade(law) => modified_lade::worked(law, stress),
            Law::DruckerPrager(cone) => drucker_prager::worked(cone, stress),
            Law::HoekBrown(law) => hoek_brown::worked(law, stress),
        }
    }

    /// The numbers as they were typed.
    pub(crate) fn items(self) -> Vec<Item> {
        let stated = match self.0 {
            Stated::MohrCoulomb { cohesion, .. }
            | Stated::MogiCoulomb { cohesion, .. }
            | Stated::ModifiedLade { cohesion, .. }
            | Stated::DruckerPrager { cohesion, .. } => Item::typed("c", "cohesion", cohesion),
            Stated::MohrCoulombUcs { ucs, .. } => Item::typed("UCS", "uniaxial compressive strength", ucs),
            Stated::HoekBrown(mass) => return mass.items(),
        };
        vec![stated, Item::typed("φ", "friction angle", self.friction_angle().unwrap_or_default())]
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

    #[test]
    fn every_criterion_survives_the_record_and_says_its_numbers() {
        let (c, phi) = (10.mpa(), 30.deg());
        let mass = HoekBrown { sigma_ci: 80.mpa(), m_i: 12.0, gsi: 55.0, disturbance: 0.2 };
        for (strength, name) in [
            (Strength::mogi_coulomb(c, phi), "mogi_coulomb"),
            (Strength::modified_lade(c, phi), "modified_lade"),
            (Strength::drucker_prager_inscribed(c, phi), "inscribed"),
            (Strength::drucker_prager_circumscribed(c, phi), "circumscribed"),
            (Strength::drucker_prager_extension(c, phi), "extension"),
            (Strength::hoek_brown(mass), "hoek_brown"),
        ] {
            let text = serde_json::to_string(&strength).unwrap();
            assert!(text.contains(name), "{text}");
            assert_eq!(serde_json::from_str::<Strength>(&text).unwrap(), strength);
            assert!(!strength.steps().is_empty() && !strength.worked([50e6, 20e6, 5e6]).is_empty());
            assert!(strength.assumptions().last().is_some_and(|domain| domain == strength.domain()));
            assert!(!strength.symbols().is_empty() && !strength.references().is_empty());
        }
        assert_eq!(Strength::hoek_brown(mass).words(), "Hoek–Brown, σ_ci 80 MPa, m_i 12, GSI 55, D 0.2");
        let flattering = Strength::drucker_prager_circumscribed(c, phi);
        assert!(flattering.warning().unwrap().contains("flatters"));
        assert_eq!(Strength::mohr_coulomb(c, phi).warning(), None);
    }

    #[test]
    fn refusals_say_what_is_allowed() {
        let message = |s: Strength| s.checked().unwrap_err().to_string();
        let lade = |phi: f64| Strength::modified_lade(10.mpa(), phi.deg());
        assert!(message(lade(0.0)).contains("the modified Lade criterion needs a friction angle above 0°"));
        assert!(message(lade(0.001)).contains("0.01° or more"));
        assert!(lade(0.01).checked().is_ok());
        assert!(message(lade(90.0)).contains("below 90°"));
        let mass = HoekBrown { sigma_ci: 80.mpa(), m_i: 12.0, gsi: 55.0, disturbance: 0.2 };
        let of = |mass: HoekBrown| message(Strength::hoek_brown(mass));
        assert_eq!(
            of(HoekBrown { sigma_ci: 0.mpa(), ..mass }),
            "uniaxial compressive strength σci of the intact rock is 0 MPa, but it must be above zero."
        );
        assert_eq!(
            of(HoekBrown { m_i: -3.0, ..mass }),
            "Hoek–Brown constant mi of the intact rock is -3, but it must be above zero."
        );
        assert_eq!(
            of(HoekBrown { gsi: 101.0, ..mass }),
            "geological strength index GSI is 101, but it must be between 0 and 100."
        );
        assert_eq!(
            of(HoekBrown { disturbance: 1.5, ..mass }),
            "disturbance factor D is 1.5, but it must be between 0 and 1."
        );
        for bad in [
            HoekBrown { m_i: f64::NAN, ..mass },
            HoekBrown { gsi: f64::NAN, ..mass },
            HoekBrown { disturbance: f64::NAN, ..mass },
            HoekBrown { sigma_ci: f64::INFINITY.mpa(), ..mass },
            HoekBrown { m_i: 1e-305, ..mass },
        ] {
            assert!(Strength::hoek_brown(bad).checked().is_err(), "{bad:?}");
        }
    }

    #[test]
    fn the_same_cohesion_and_friction_by_another_criterion() {
        let (c, phi) = (10.mpa(), 30.deg());
        let mogi = Strength::mogi_coulomb(c, phi);
        assert_eq!(mogi.as_mohr_coulomb(), Some(Strength::mohr_coulomb(c, phi)));
        assert_eq!(mogi.as_modified_lade(), Some(Strength::modified_lade(c, phi)));
        // UCS 2 · 10 · √3 MPa at 30° is a cohesion of 10 MPa.
        let by_ucs = Strength::mohr_coulomb_ucs((20.0 * 3.0_f64.sqrt()).mpa(), phi);
        assert_eq!(by_ucs.as_mohr_coulomb(), Some(by_ucs));
        let (cohesion, _) = by_ucs.as_mogi_coulomb().unwrap().cohesion_and_friction().unwrap();
        assert!((cohesion.in_mpa() - 10.0).abs() < 1e-12);
        assert_eq!(Strength::mohr_coulomb(c, 0.deg()).as_modified_lade(), None);
        let mass = HoekBrown { sigma_ci: 80.mpa(), m_i: 12.0, gsi: 55.0, disturbance: 0.2 };
        let mass = Strength::hoek_brown(mass);
        assert_eq!([mass.as_mohr_coulomb(), mass.as_mogi_coulomb(), mass.as_modified_lade()], [None; 3]);
    }
}
