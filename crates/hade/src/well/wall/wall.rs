//! The wall of a hole at one depth.

use serde::{Deserialize, Serialize};

use super::elastic::Kirsch;
use super::setup::{Seepage, Thermal, WallInputs, WallSetup, WeakPlane};
use super::shear::ShearWall;
use crate::card::{Card, Explain, Item};
use crate::error::Result;
use crate::frames::Attitude;
use crate::frames::vector::dot;
use crate::interrupt;
use crate::rock::Strength;
use crate::units::{Pressure, Quantity};

/// The wall of a hole: elastic, of rock that fails in shear or parts in tension. It is impermeable, at
/// the temperature of the rock, and without a plane of weakness, until a method says otherwise.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Wall {
    pub(super) setup: WallSetup,
    pub(super) shear: ShearWall,
    pub(super) attitude: Attitude,
}

/// The inputs of a result at one wall pressure.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AtPressure {
    pub(super) wall: WallSetup,
    pub(super) pressure: Pressure,
}

impl Wall {
    /// A wall.
    ///
    /// # Errors
    /// When the stress does not say which hole it is in, a number is not finite, Poisson's ratio is
    /// outside 0–0.5, or the strength is out of its range.
    pub fn new(inputs: WallInputs) -> Result<Self> {
        Wall::of(WallSetup::plain(inputs))
    }

    pub(crate) fn of(setup: WallSetup) -> Result<Self> {
        interrupt::check();
        let attitude = setup.checked()?;
        let WallInputs { stress, pore, rock } = setup.inputs;
        let kirsch = Kirsch::new(stress.tensor(), rock.poisson).warmed(setup.thermal_stress());
        let plane = setup.plane_at_wall(attitude)?;
        let shear = ShearWall::new(kirsch, rock.strength.law(), plane, pore.si(), setup.passes(), setup.eta2());
        Ok(Wall { setup, shear, attitude })
    }

    /// The same wall, permeable: the pressure in the hole stands in the pores behind the wall, and
    /// seepage adds 2η (p − P_p) to the hoop and axial stress, η = α (1 − 2ν) / (2 (1 − ν)) with
    /// Biot's coefficient α (Haimson and Fairhurst 1967).
    ///
    /// # Errors
    /// When α is outside 0–1.
    pub fn permeable(self, biot: f64) -> Result<Self> {
        self.partly_sealed(biot, 0.0)
    }

    /// The same wall, between permeable (sealing 0) and impermeable (sealing 1): that share of the
    /// pressure above the pore pressure is held back by the filter cake, the rest passes.
    ///
    /// # Errors
    /// When Biot's coefficient α or the sealing is outside 0–1.
    pub fn partly_sealed(self, biot: f64, sealing: f64) -> Result<Self> {
        Wall::of(WallSetup { seepage: Some(Seepage { biot, sealing }), ..self.setup })
    }

    /// The same wall, impermeable.
    ///
    /// # Errors
    /// As [`Wall::new`].
    pub fn impermeable(self) -> Result<Self> {
        Wall::of(WallSetup { seepage: None, ..self.setup })
    }

    /// The same wall warmed or cooled by the mud: E α_T ΔT / (1 − ν) is added to hoop and axial
    /// stress.
    ///
    /// # Errors
    /// When E is not above zero, α_T is negative, or a number is not finite.
    pub fn thermal(self, thermal: Thermal) -> Result<Self> {
        Wall::of(WallSetup { thermal: Some(thermal), ..self.setup })
    }

    /// The same wall with a plane of weakness that slips where the whole traction on it asks for more
    /// than c_w + σn' tan φ_w (Jaeger 1960). It may slip at any place of the wall.
    ///
    /// # Errors
    /// When the plane is none, its cohesion is negative, or its friction angle is outside 0° to
    /// below 90°.
    pub fn weak_plane(self, weak_plane: WeakPlane) -> Result<Self> {
        Wall::of(WallSetup { weak_plane: Some(weak_plane), ..self.setup })
    }

    /// The same wall in rock that creeps, such as salt: every result then says that elastic limits
    /// are not valid.
    pub fn in_creeping_rock(self) -> Self {
        Wall { setup: WallSetup { creeps: true, ..self.setup }, ..self }
    }

    /// The same wall judged by another criterion.
    ///
    /// # Errors
    /// When the strength is out of its range.
    pub fn with_strength(self, strength: Strength) -> Result<Self> {
        let mut setup = self.setup;
        setup.inputs.rock.strength = strength;
        Wall::of(setup)
    }

    /// Stress, pore pressure and rock it was made of.
    pub fn inputs(&self) -> WallInputs {
        self.setup.inputs
    }

    pub(super) fn strength(&self) -> Strength {
        self.setup.inputs.rock.strength
    }

    pub(super) fn pore(&self) -> Pressure {
        self.setup.inputs.pore
    }

    /// The total normal stress on a level plane, in the far field.
    pub(super) fn vertical_stress(&self) -> Pressure {
        let down = self.attitude.matrix().map_or([0.0; 3], |rows| rows.map(|row| row[2]));
        let stress = self.setup.inputs.stress.tensor();
        Pressure::from_si(dot(down, stress.times(down)))
    }

    pub(super) fn at_pressure(&self, pressure: Pressure) -> Result<AtPressure> {
        interrupt::check();
        pressure.finite("wall pressure")?;
        Ok(AtPressure { wall: self.setup, pressure })
    }

    /// "KF-3 at 2950 m", or the attitude where the hole has no name; with what is said of the wall
    /// beside it where that is not the plain wall.
    pub(super) fn place(&self) -> String {
        let plain = WallSetup { creeps: self.setup.creeps, ..WallSetup::plain(self.setup.inputs) };
        let place = self.setup.inputs.stress.name().map_or_else(|| self.attitude.words(), |name| name.to_string());
        if self.setup == plain { place } else { format!("{place}, {}", self.setup.model_words()) }
    }

    /// Where it is, which criterion and model it has, and everything it was made of, in two lines.
    pub(crate) fn words(&self) -> String {
        let place = self.setup.inputs.stress.name().map_or_else(|| self.attitude.words(), |name| name.to_string());
        let made_of: Vec<String> = self.items().iter().map(|i| format!("{} {}", i.symbol, i.shown)).collect();
        format!(
            "Wall of {place}: {}, judged by {}\n{}",
            self.setup.model_words(),
            self.strength().name(),
            made_of.join("; ")
        )
    }

    /// Everything it was made of as inputs of a card.
    pub(super) fn items(&self) -> Vec<Item> {
        self.setup.items()
    }

    /// Topics of cautions, with those of the result.
    pub(super) fn topics(&self, of_result: &[&str]) -> Vec<String> {
        of_result.iter().chain(self.setup.topics().iter()).map(|t| (*t).to_owned()).collect()
    }

    /// The cards every result of this wall stands on.
    pub(super) fn upstream(&self) -> Vec<Card> {
        let mut cards = self.setup.inputs.stress.upstream();
        cards.push(self.setup.inputs.stress.card());
        if let Some(weak) = self.setup.weak_plane {
            cards.extend(weak.plane.strike.upstream());
        }
        cards
    }
}

/// The examined wall pressure as an input.
pub(super) fn pressure_item(pressure: Pressure) -> Item {
    Item::typed("p_w", "wall pressure", pressure)
}
