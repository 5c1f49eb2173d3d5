//! An input of a wall with its distribution.

use serde::{Deserialize, Serialize};

use crate::card::Item;
use crate::error::Result;
use crate::spread::{Distribution, Spread};
use crate::units::{Angle, Pressure, Quantity};
use crate::well::wall::sensitivity::{Varied, Vary};
use crate::well::wall::wall::Wall;

/// An input of a wall and how it is distributed: `Drawn::sh_max(Distribution::normal(55.mpa(), 3.mpa()))`. Nothing is
/// drawn that is not named.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Drawn {
    pub(super) input: Varied,
    pub(super) spread: Spread,
}

impl Drawn {
    fn new<Q: Quantity>(input: Varied, distribution: Distribution<Q>) -> Self {
        Drawn { input, spread: distribution.plain() }
    }
    /// The vertical stress: the down–down component of the geographic tensor.
    pub fn sv(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::VerticalStress, distribution)
    }
    /// The larger horizontal stress: the normal stress along its azimuth.
    pub fn sh_max(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::LargerHorizontal, distribution)
    }
    /// The smaller horizontal stress: the normal stress across that azimuth.
    pub fn sh_min(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::SmallerHorizontal, distribution)
    }
    /// The azimuth of the larger horizontal stress from true north: the whole tensor is turned about the vertical.
    pub fn sh_max_azimuth(distribution: Distribution<Angle>) -> Self {
        Drawn::new(Varied::HorizontalAzimuth, distribution)
    }
    /// The pore pressure, while the total stresses stay.
    pub fn pore(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::PorePressure, distribution)
    }
    /// Poisson's ratio.
    pub fn poisson(distribution: Distribution<f64>) -> Self {
        Drawn::new(Varied::Poisson, distribution)
    }
    /// The tensile strength T₀.
    pub fn tensile_strength(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::TensileStrength, distribution)
    }
    /// The cohesion, of a strength that was stated by it.
    pub fn cohesion(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::Cohesion, distribution)
    }
    /// The uniaxial compressive strength, of a Mohr–Coulomb strength that was stated by it.
    pub fn ucs(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::Ucs, distribution)
    }
    /// The friction angle, of a strength that was stated by it.
    pub fn friction_angle(distribution: Distribution<Angle>) -> Self {
        Drawn::new(Varied::FrictionAngle, distribution)
    }
    /// The uniaxial compressive strength of the intact rock, of a Hoek–Brown rock mass.
    pub fn sigma_ci(distribution: Distribution<Pressure>) -> Self {
        Drawn::new(Varied::SigmaCi, distribution)
    }
    /// The constant m_i of the intact rock, of a Hoek–Brown rock mass.
    pub fn m_i(distribution: Distribution<f64>) -> Self {
        Drawn::new(Varied::IntactConstant, distribution)
    }
    /// The geological strength index, of a Hoek–Brown rock mass.
    pub fn gsi(distribution: Distribution<f64>) -> Self {
        Drawn::new(Varied::Gsi, distribution)
    }
    /// The disturbance factor D, of a Hoek–Brown rock mass.
    pub fn disturbance(distribution: Distribution<f64>) -> Self {
        Drawn::new(Varied::Disturbance, distribution)
    }
    /// The inclination of the hole. One smaller than zero leans to the other side.
    pub fn inclination(distribution: Distribution<Angle>) -> Self {
        Drawn::new(Varied::Inclination, distribution)
    }
    /// The azimuth of the hole from true north.
    pub fn hole_azimuth(distribution: Distribution<Angle>) -> Self {
        Drawn::new(Varied::HoleAzimuth, distribution)
    }
    /// Biot's coefficient, of a permeable or partly sealed wall.
    pub fn biot(distribution: Distribution<f64>) -> Self {
        Drawn::new(Varied::Biot, distribution)
    }

    /// "S_Hmax".
    pub fn symbol(self) -> &'static str {
        self.input.about().0
    }

    /// "larger horizontal stress".
    pub fn name(self) -> &'static str {
        self.input.about().1
    }

    pub(super) fn shown(self, si: f64) -> String {
        self.input.shown(si)
    }

    /// "normal, mean 55 MPa, standard deviation 3 MPa".
    pub(super) fn words(self) -> String {
        self.spread.words(&|si| self.shown(si))
    }

    /// The distribution, as a choice of the engineer.
    pub(super) fn item(self) -> Item {
        let name = format!("distribution of the {}", self.name());
        Item::new(&format!("~{}", self.symbol()), name, "distribution", self.spread.numbers(), self.words()).chosen()
    }
}

impl Vary {
    /// Normal about what a wall states, with the amount as standard deviation.
    pub(crate) fn drawn(self, wall: &Wall) -> Result<Drawn> {
        let distribution = Distribution::<f64>::normal(self.value(&wall.setup)?, self.by());
        Ok(Drawn { input: self.input(), spread: distribution.plain() })
    }

    /// The standard deviation as an input of a card.
    pub(crate) fn deviation_item(self) -> Item {
        let input = self.input();
        let name = format!("standard deviation of the {} at every depth", self.name());
        Item::new(&format!("s_{}", self.symbol()), name, "standard deviation", vec![self.by()], input.shown(self.by()))
    }
}
