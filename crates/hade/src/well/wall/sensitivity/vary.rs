//! One input of a wall made smaller and larger by a stated amount.

use serde::{Deserialize, Serialize};

use crate::card::Item;
use crate::units::{Angle, Pressure, Quantity, with_typed_unit};

/// An input, and by how much it is varied both ways: one standard deviation, or whatever the engineer
/// holds possible. The amount is above zero and never defaulted.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Vary {
    pub(super) input: Varied,
    /// In SI.
    by: f64,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub(crate) enum Varied {
    VerticalStress,
    LargerHorizontal,
    SmallerHorizontal,
    HorizontalAzimuth,
    PorePressure,
    Poisson,
    TensileStrength,
    Cohesion,
    Ucs,
    FrictionAngle,
    SigmaCi,
    IntactConstant,
    Gsi,
    Disturbance,
    Inclination,
    HoleAzimuth,
    Biot,
}

impl Varied {
    /// Symbol and name of the input, and how its number is written.
    pub(crate) fn about(self) -> (&'static str, &'static str, Measure) {
        use Measure::{Angle, Number, Pressure};
        match self {
            Varied::VerticalStress => ("S_v", "vertical stress", Pressure),
            Varied::LargerHorizontal => ("S_Hmax", "larger horizontal stress", Pressure),
            Varied::SmallerHorizontal => ("S_hmin", "smaller horizontal stress", Pressure),
            Varied::HorizontalAzimuth => ("A_Hmax", "azimuth of the larger horizontal stress", Angle),
            Varied::PorePressure => ("P_p", "pore pressure", Pressure),
            Varied::Poisson => ("ν", "Poisson's ratio", Number),
            Varied::TensileStrength => ("T_0", "tensile strength", Pressure),
            Varied::Cohesion => ("c", "cohesion", Pressure),
            Varied::Ucs => ("UCS", "uniaxial compressive strength", Pressure),
            Varied::FrictionAngle => ("φ", "friction angle", Angle),
            Varied::SigmaCi => ("σ_ci", "uniaxial compressive strength of the intact rock", Pressure),
            Varied::IntactConstant => ("m_i", "Hoek–Brown constant of the intact rock", Number),
            Varied::Gsi => ("GSI", "geological strength index", Number),
            Varied::Disturbance => ("D", "disturbance factor", Number),
            Varied::Inclination => ("i", "inclination of the hole", Angle),
            Varied::HoleAzimuth => ("a", "azimuth of the hole", Angle),
            Varied::Biot => ("α", "Biot's coefficient", Number),
        }
    }

    /// A number of this input with its unit.
    pub(crate) fn shown(self, si: f64) -> String {
        match self.about().2 {
            Measure::Pressure => with_typed_unit(Pressure::from_si(si)),
            Measure::Angle => with_typed_unit(Angle::from_si(si)),
            Measure::Number => with_typed_unit(si),
        }
    }

    /// This input varied by an amount in SI.
    pub(crate) fn by(self, si: f64) -> Vary {
        Vary { input: self, by: si }
    }
}

/// How the number of an input is written.
pub(crate) enum Measure {
    Pressure,
    Angle,
    Number,
}

impl Vary {
    fn new(input: Varied, by: impl Quantity) -> Self {
        Vary { input, by: by.si() }
    }
    /// The vertical stress: the down–down component of the geographic tensor.
    pub fn sv(by: Pressure) -> Self {
        Vary::new(Varied::VerticalStress, by)
    }
    /// The larger horizontal stress: the normal stress along its azimuth.
    pub fn sh_max(by: Pressure) -> Self {
        Vary::new(Varied::LargerHorizontal, by)
    }
    /// The smaller horizontal stress: the normal stress across that azimuth.
    pub fn sh_min(by: Pressure) -> Self {
        Vary::new(Varied::SmallerHorizontal, by)
    }
    /// The azimuth of the larger horizontal stress: the whole tensor is turned about the vertical.
    pub fn sh_max_azimuth(by: Angle) -> Self {
        Vary::new(Varied::HorizontalAzimuth, by)
    }
    /// The pore pressure, while the total stresses stay.
    pub fn pore(by: Pressure) -> Self {
        Vary::new(Varied::PorePressure, by)
    }
    /// Poisson's ratio.
    pub fn poisson(by: f64) -> Self {
        Vary::new(Varied::Poisson, by)
    }
    /// The tensile strength T₀.
    pub fn tensile_strength(by: Pressure) -> Self {
        Vary::new(Varied::TensileStrength, by)
    }
    /// The cohesion, of a strength that was stated by it.
    pub fn cohesion(by: Pressure) -> Self {
        Vary::new(Varied::Cohesion, by)
    }
    /// The uniaxial compressive strength, of a Mohr–Coulomb strength that was stated by it.
    pub fn ucs(by: Pressure) -> Self {
        Vary::new(Varied::Ucs, by)
    }
    /// The friction angle, of a strength that was stated by it.
    pub fn friction_angle(by: Angle) -> Self {
        Vary::new(Varied::FrictionAngle, by)
    }
    /// The uniaxial compressive strength of the intact rock, of a Hoek–Brown rock mass.
    pub fn sigma_ci(by: Pressure) -> Self {
        Vary::new(Varied::SigmaCi, by)
    }
    /// The constant m_i of the intact rock, of a Hoek–Brown rock mass.
    pub fn m_i(by: f64) -> Self {
        Vary::new(Varied::IntactConstant, by)
    }
    /// The disturbance factor D, of a Hoek–Brown rock mass.
    pub fn disturbance(by: f64) -> Self {
        Vary::new(Varied::Disturbance, by)
    }
    /// The geological strength index, of a Hoek–Brown rock mass.
    pub fn gsi(by: f64) -> Self {
        Vary::new(Varied::Gsi, by)
    }
    /// The inclination of the hole. One smaller than zero leans to the other side.
    pub fn inclination(by: Angle) -> Self {
        Vary::new(Varied::Inclination, by)
    }
    /// The azimuth of the hole.
    pub fn hole_azimuth(by: Angle) -> Self {
        Vary::new(Varied::HoleAzimuth, by)
    }
    /// Biot's coefficient, of a permeable or partly sealed wall.
    pub fn biot(by: f64) -> Self {
        Vary::new(Varied::Biot, by)
    }

    /// Symbol and name of the input, and how its number is written.
    fn about(self) -> (&'static str, &'static str, Measure) {
        self.input.about()
    }

    /// "S_Hmax".
    pub fn symbol(self) -> &'static str {
        self.about().0
    }

    /// "larger horizontal stress".
    pub fn name(self) -> &'static str {
        self.about().1
    }

    /// By how much, in SI.
    pub(crate) fn by(self) -> f64 {
        self.by
    }

    pub(crate) fn input(self) -> Varied {
        self.input
    }

    pub(super) fn same_input(self, other: Vary) -> bool {
        self.input == other.input
    }

    /// A number of this input with its unit.
    pub(super) fn shown(self, si: f64) -> String {
        self.input.shown(si)
    }

    /// The amount, as a choice.
    pub(super) fn item(self) -> Item {
        let (symbol, name, measure) = self.about();
        let (symbol, name) = (format!("±{symbol}"), format!("change of {name}"));
        match measure {
            Measure::Pressure => Item::typed(&symbol, name, Pressure::from_si(self.by)),
            Measure::Angle => Item::typed(&symbol, name, Angle::from_si(self.by)),
            Measure::Number => Item::typed(&symbol, name, self.by),
        }
        .chosen()
    }

    /// How it changes the stress, where it does.
    pub(super) fn on_stress(self) -> Option<&'static str> {
        match self.input {
            Varied::VerticalStress => Some("S_v: the down–down component"),
            Varied::LargerHorizontal => Some("S_Hmax: the normal stress along its azimuth"),
            Varied::SmallerHorizontal => Some("S_hmin: the normal stress across that azimuth"),
            Varied::HorizontalAzimuth => Some("A_Hmax: the whole tensor turned about the vertical"),
            _ => None,
        }
    }
}

/// What the checks take: which way an input changes a wall, by another route.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Route {
    /// The far field gains that much along a direction: down, or the horizontal one of the larger
    /// (0) or the smaller (1) stress.
    Down,
    Along(usize),
    /// Hole and plane of weakness turn about the vertical, against the stress; or the hole alone, with.
    StressTurns,
    HoleTurns,
    /// The hole leans over more.
    HoleLeans,
    /// The number is put in place of the other.
    Number,
}

impl Vary {
    pub(super) fn route(self) -> Route {
        match self.input {
            Varied::VerticalStress => Route::Down,
            Varied::LargerHorizontal => Route::Along(0),
            Varied::SmallerHorizontal => Route::Along(1),
            Varied::HorizontalAzimuth => Route::StressTurns,
            Varied::HoleAzimuth => Route::HoleTurns,
            Varied::Inclination => Route::HoleLeans,
            _ => Route::Number,
        }
    }
}
