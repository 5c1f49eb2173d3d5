//! The wall of a hole at one depth.

use serde::{Deserialize, Serialize};

use super::kirsch::Kirsch;
use super::shear::ShearWall;
use crate::card::{Card, Explain, Item};
use crate::error::{Error, Result};
use crate::frames::{Attitude, Borehole};
use crate::rock::Rock;
use crate::stress::Stress;
use crate::units::{Pressure, Quantity};

/// What a wall is made of. Nothing of it is defaulted.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct WallInputs {
    /// The far-field total stress in the hole's axes.
    pub stress: Stress<Borehole>,
    /// The pore pressure of the formation.
    pub pore: Pressure,
    /// The rock.
    pub rock: Rock,
}

/// The wall of a hole: elastic, impermeable, of rock that fails in shear or parts in tension.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Wall {
    pub(super) inputs: WallInputs,
    pub(super) shear: ShearWall,
    pub(super) attitude: Attitude,
}

/// The inputs of a result at one wall pressure.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AtPressure {
    pub(super) wall: WallInputs,
    pub(super) pressure: Pressure,
}

impl Wall {
    /// A wall.
    ///
    /// # Errors
    /// When the stress does not say which hole it is in, a number is not finite, Poisson's ratio is
    /// outside 0–0.5, a strength is negative or the friction angle is outside 0° to below 90°.
    pub fn new(inputs: WallInputs) -> Result<Self> {
        let Some(attitude) = inputs.stress.attitude() else {
            return Err(Error::undeclared(
                "The stress at the wall names no hole",
                "carry it there with the chain of the hole's attitude.",
            ));
        };
        attitude.angles()?;
        if !inputs.stress.tensor().is_finite() {
            return Err(Error::out_of_range("stress in borehole axes", "not finite", "six finite numbers"));
        }
        inputs.pore.finite("pore pressure")?;
        let rock = inputs.rock.checked()?;
        let shear = ShearWall {
            kirsch: Kirsch::new(inputs.stress.tensor(), rock.poisson),
            line: rock.strength.mohr_coulomb_line(),
            pore: inputs.pore.si(),
        };
        Ok(Wall { inputs, shear, attitude })
    }

    /// What it was made of.
    pub fn inputs(&self) -> WallInputs {
        self.inputs
    }

    pub(super) fn at_pressure(&self, pressure: Pressure) -> Result<AtPressure> {
        pressure.finite("wall pressure")?;
        Ok(AtPressure { wall: self.inputs, pressure })
    }

    /// "KF-3 at 2950 m", or the attitude where the hole has no name.
    pub(super) fn place(&self) -> String {
        self.inputs.stress.name().map_or_else(|| self.attitude.words(), |name| name.to_string())
    }

    /// Stress, pore pressure and rock as inputs of a card.
    pub(super) fn items(&self) -> Vec<Item> {
        let mut items = vec![
            self.inputs.stress.item("S'", "stress in borehole axes (x top of hole, y right, z along the hole)"),
            Item::typed("P_p", "pore pressure", self.inputs.pore),
        ];
        items.extend(self.inputs.rock.items());
        items
    }

    /// The cards every result of this wall stands on.
    pub(super) fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.push(self.inputs.stress.card());
        cards
    }
}

/// The examined wall pressure as an input.
pub(super) fn pressure_item(pressure: Pressure) -> Item {
    Item::typed("p_w", "wall pressure", pressure)
}
