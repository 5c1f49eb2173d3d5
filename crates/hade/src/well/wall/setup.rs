//! What a wall is made of: stress, pore pressure and rock, and what may come to it: seepage through
//! the wall, heating or cooling, a plane of weakness, rock that creeps.

use serde::{Deserialize, Serialize};

use super::shear::PlaneAtWall;
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::vector::apply;
use crate::frames::{Attitude, Borehole, Plane};
use crate::rock::Rock;
use crate::stress::Stress;
use crate::units::{
    Angle, Expansion, Pressure, Quantity, Warming, as_typed, require_between, require_not_negative, with_typed_unit,
};

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

/// Heating or cooling of the wall by the mud, held until it is steady.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Thermal {
    /// How much warmer the wall is than the formation was; cooling is negative.
    pub warming: Warming,
    /// Young's modulus E of the rock, above zero.
    pub youngs_modulus: Pressure,
    /// The rock's coefficient of linear thermal expansion, zero or more.
    pub expansion: Expansion,
}

impl Thermal {
    /// Refuses what no rock and no mud has.
    pub(crate) fn checked(self) -> Result<Self> {
        self.warming.finite("temperature difference")?;
        let e = self.youngs_modulus;
        if !(e.si().is_finite() && e.si() > 0.0) {
            return Err(Error::out_of_range(
                "Young's modulus E",
                with_typed_unit(e),
                "above zero; a thermal stress cannot be had without it",
            ));
        }
        require_expansion(self.expansion)?;
        Ok(self)
    }

    /// E α_T ΔT / (1 − ν), what it adds to hoop and axial stress, Pa.
    pub(crate) fn stress(&self, poisson: f64) -> f64 {
        self.youngs_modulus.si() * self.expansion.si() * self.warming.si() / (1.0 - poisson)
    }
}

/// A plane of weakness through the wall, such as bedding: it slips before the rock beside it fails.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct WeakPlane {
    /// Its attitude, in the geographic frame.
    pub plane: Plane,
    /// Its cohesion, zero or more.
    pub cohesion: Pressure,
    /// Its friction angle, 0° or more, below 90°.
    pub friction_angle: Angle,
}

/// Fluid that passes the wall.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub(crate) struct Seepage {
    /// Biot's coefficient α, 0–1.
    pub biot: f64,
    /// The share of the pressure above the pore pressure that the wall holds back: 0 permeable, 1
    /// impermeable.
    pub sealing: f64,
}

/// A wall with everything that was said of it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct WallSetup {
    pub(crate) inputs: WallInputs,
    pub(crate) seepage: Option<Seepage>,
    pub(crate) thermal: Option<Thermal>,
    pub(crate) weak_plane: Option<WeakPlane>,
    pub(crate) creeps: bool,
}

impl WallSetup {
    /// The plain wall: impermeable, at the temperature of the rock, without a plane of weakness.
    pub(crate) fn plain(inputs: WallInputs) -> Self {
        WallSetup { inputs, seepage: None, thermal: None, weak_plane: None, creeps: false }
    }

    /// The share of the pressure above the pore pressure that passes the wall.
    pub(crate) fn passes(&self) -> f64 {
        self.seepage.map_or(0.0, |s| 1.0 - s.sealing)
    }

    /// 2η = α (1 − 2ν) / (1 − ν).
    pub(crate) fn eta2(&self) -> f64 {
        let nu = self.inputs.rock.poisson;
        self.seepage.map_or(0.0, |s| s.biot * (1.0 - 2.0 * nu) / (1.0 - nu))
    }

    /// E α_T ΔT / (1 − ν), what heating adds to hoop and axial stress.
    pub(crate) fn thermal_stress(&self) -> f64 {
        self.thermal.map_or(0.0, |thermal| thermal.stress(self.inputs.rock.poisson))
    }

    /// Refuses what no wall has.
    pub(crate) fn checked(&self) -> Result<Attitude> {
        let Some(attitude) = self.inputs.stress.attitude() else {
            return Err(Error::undeclared(
                "The stress at the wall names no hole",
                "carry it there with the chain of the hole's attitude.",
            ));
        };
        attitude.angles()?;
        if !self.inputs.stress.tensor().is_finite() {
            return Err(Error::out_of_range("stress in borehole axes", "not finite", "six finite numbers"));
        }
        self.inputs.pore.finite("pore pressure")?;
        self.inputs.rock.checked()?;
        if let Some(seepage) = self.seepage {
            require_between("Biot's coefficient α", seepage.biot, 0.0, 1.0)?;
            require_between("sealing of the wall", seepage.sealing, 0.0, 1.0)?;
        }
        self.thermal.map(Thermal::checked).transpose()?;
        if let Some(weak) = self.weak_plane {
            weak.plane.axes()?;
            require_not_negative("cohesion of the plane of weakness", weak.cohesion)?;
            let phi = weak.friction_angle;
            if !(phi.si() >= 0.0 && phi.si() < std::f64::consts::FRAC_PI_2) {
                return Err(Error::out_of_range(
                    "friction angle of the plane of weakness",
                    with_typed_unit(phi),
                    "at least 0° and below 90°",
                ));
            }
        }
        Ok(attitude)
    }

    /// The plane of weakness in the hole's axes.
    pub(crate) fn plane_at_wall(&self, attitude: Attitude) -> Result<Option<PlaneAtWall>> {
        let Some(weak) = self.weak_plane else { return Ok(None) };
        let normal = apply(&attitude.matrix()?, weak.plane.axes()?.normal);
        let [.., yz, xz] = self.inputs.stress.tensor().0;
        Ok(Some(PlaneAtWall::new(normal, yz, xz, weak.cohesion.si(), weak.friction_angle.si().tan())))
    }

    /// Everything as inputs of a card, as it was typed.
    pub(crate) fn items(&self) -> Vec<Item> {
        let WallInputs { stress, pore, rock } = self.inputs;
        let mut items = vec![
            stress.item("S'", "stress in borehole axes (x top of hole, y right, z along the hole)"),
            Item::typed("P_p", "pore pressure", pore),
        ];
        items.extend(rock.items());
        items.extend(items_beside_rock(self.seepage, self.thermal, self.weak_plane));
        items
    }

    /// "permeable (α = 1)", for a title or a table.
    pub(crate) fn model_words(&self) -> String {
        let mut words = match self.seepage {
            None => "impermeable wall".to_owned(),
            Some(Seepage { biot, sealing }) if sealing <= 0.0 => format!("permeable wall (α = {})", as_typed(biot)),
            Some(Seepage { biot, sealing }) => {
                format!("wall that seals {} % (α = {})", as_typed(100.0 * sealing), as_typed(biot))
            }
        };
        if let Some(thermal) = self.thermal {
            let sense = if thermal.warming.si() < 0.0 { "cooled" } else { "warmed" };
            words.push_str(&format!(", {sense} by {}", with_typed_unit(Warming::from_si(thermal.warming.si().abs()))));
        }
        if let Some(weak) = self.weak_plane {
            words.push_str(&format!(", plane of weakness {}", weak.plane.words()));
        }
        words
    }

    /// What a reader must know of this wall, besides its method.
    pub(crate) fn notes(&self) -> Vec<String> {
        let mut notes = Vec::new();
        if self.creeps {
            notes.push("WARNING: the rock creeps (salt or the like). Elastic limits are NOT VALID for it: its stress relaxes towards isotropic and the hole closes with time at any pressure below the overburden. These numbers only show what an elastic rock would do.".to_owned());
        }
        if self.passes() > 0.0 {
            notes.push("Fluid passes the wall: the pressure in the hole stands in the pores behind it, and supports it the less. Drawn below the pore pressure, fluid flows into the hole and may spall the wall; that is not in these limits.".to_owned());
        }
        if self.thermal.is_some() {
            notes.push(
                "The thermal stress is the steady one at the wall; the rock warms or cools towards it over hours."
                    .to_owned(),
            );
        }
        notes
    }

    /// Topics of cautions.
    pub(crate) fn topics(&self) -> Vec<&'static str> {
        let mut topics = Vec::new();
        if self.creeps {
            topics.push("creep");
        }
        if self.passes() > 0.0 {
            topics.push("permeable-wall");
        }
        if self.thermal.is_some() {
            topics.push("thermal");
        }
        if self.weak_plane.is_some() {
            topics.push("weak-plane");
        }
        topics
    }
}

/// Refuses what no rock expands by: in 1/K rock has some 10⁻⁵, and a number of some units is that of another unit.
pub(crate) fn require_expansion(expansion: Expansion) -> Result<Expansion> {
    const MOST: f64 = 1e-3;
    if require_not_negative("thermal expansion α_T", expansion)?.si() <= MOST {
        return Ok(expansion);
    }
    Err(Error::out_of_range(
        "thermal expansion α_T",
        format!("{} 1/K", as_typed(expansion.si())),
        format!("at most {MOST} 1/K (rock has some 1e-5); a value in 1e-6/K is typed (12e-6).per_kelvin()"),
    ))
}

/// What a wall has beside its stress and rock as inputs of a card: how it is sealed, its temperature, a plane of
/// weakness.
pub(crate) fn items_beside_rock(
    seepage: Option<Seepage>,
    thermal: Option<Thermal>,
    weak_plane: Option<WeakPlane>,
) -> Vec<Item> {
    let mut items = Vec::new();
    if let Some(seepage) = seepage {
        items.push(Item::typed("α", "Biot's coefficient", seepage.biot));
        items.push(Item::typed("w_s", "sealing of the wall: 0 permeable, 1 impermeable", seepage.sealing).chosen());
    }
    if let Some(thermal) = thermal {
        items.push(Item::typed("ΔT", "temperature of the wall less that of the formation", thermal.warming));
        items.push(Item::typed("E", "Young's modulus", thermal.youngs_modulus));
        items.push(Item::typed("α_T", "coefficient of linear thermal expansion", thermal.expansion));
    }
    if let Some(weak) = weak_plane {
        items.push(weak.plane.strike.item("s_w", "strike of the plane of weakness, dip to its right"));
        items.push(Item::typed("d_w", "dip of the plane of weakness", weak.plane.dip));
        items.push(Item::typed("c_w", "cohesion of the plane of weakness", weak.cohesion));
        items.push(Item::typed("φ_w", "friction angle of the plane of weakness", weak.friction_angle));
    }
    items
}
