//! The temperatures of the ground and of the mud at the wall by depth, and what their difference does to rock.

use serde::{Deserialize, Serialize};

use super::ground::Ground;
use super::layer::Layer;
use crate::error::{Error, Result};
use crate::field::{TemperatureInHole, TemperatureProfile};
use crate::frames::DatumTie;
use crate::units::{Expansion, Pressure, Quantity, Warming, with_typed_unit};
use crate::well::{Thermal, require_expansion};

/// Both temperatures by depth.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Temperatures {
    pub ground: TemperatureProfile,
    /// Of the mud, at the wall.
    pub mud: TemperatureProfile,
}

/// What a difference of temperature does to the rock of a layer.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub(crate) struct ThermalProperties {
    pub youngs_modulus: Pressure,
    pub expansion: Expansion,
}

impl ThermalProperties {
    pub fn checked(self) -> Result<Self> {
        let e = self.youngs_modulus;
        if !(e.si().is_finite() && e.si() > 0.0) {
            return Err(Error::out_of_range("Young's modulus E", with_typed_unit(e), "above zero"));
        }
        require_expansion(self.expansion)?;
        Ok(self)
    }
}

impl Ground {
    /// The same with the temperature of the ground and that of the mud at the wall by depth. At each depth the
    /// wall is warmed by ΔT = T_mud − T_ground (cooling negative), with E and α_T of the layer
    /// ([`Layer::thermal_properties`]).
    ///
    /// # Errors
    /// When a layer states a ΔT of its own, or no E and α_T.
    pub fn with_temperatures(&self, ground: &TemperatureProfile, mud: &TemperatureProfile) -> Result<Self> {
        let temperatures = Temperatures {
            ground: ground.or_of("T_g", "temperature of the ground"),
            mud: mud.or_of("T_m", "temperature of the mud at the wall"),
        };
        let ground = Ground { temperatures: Some(temperatures), ..self.clone() };
        ground.require_one_temperature()?;
        Ok(ground)
    }

    /// That every layer says, and says once, how its wall is warmed.
    pub(super) fn require_one_temperature(&self) -> Result<()> {
        let by_depth = self.temperatures.is_some();
        for layer in &self.inputs.layers {
            let Layer { name, thermal, thermal_properties, .. } = layer;
            match (thermal, thermal_properties) {
                (Some(own), properties) if by_depth || properties.is_some() => {
                    return Err(Error::not_physical(
                        format!("The layer {name} states a ΔT of its own, {}", with_typed_unit(own.warming)),
                        "temperatures by depth say it too; keep one of the two: leave out .thermal(…), or .with_temperatures(…)? and .thermal_properties(…)?.",
                    ));
                }
                (None, None) if by_depth => {
                    return Err(Error::undeclared(
                        format!("Nothing says what temperature does to the rock of the layer {name}"),
                        "state E and α_T with .thermal_properties(E, α_T)?; with an α_T of 0 it does nothing.",
                    ));
                }
                (None, Some(_)) if !by_depth => {
                    return Err(Error::undeclared(
                        format!("The layer {name} states E and α_T, and nothing says the temperatures"),
                        "give them with ground.with_temperatures(&ground_temperature, &mud_temperature)?.",
                    ));
                }
                _ => {}
            }
        }
        Ok(())
    }
}

/// Both in one hole.
#[derive(Clone, Debug)]
pub(super) struct TemperaturesInHole {
    pub ground: TemperatureInHole,
    pub mud: TemperatureInHole,
}

impl Temperatures {
    pub fn in_hole(&self, levels: Option<DatumTie>) -> Result<TemperaturesInHole> {
        Ok(TemperaturesInHole { ground: self.ground.in_hole(levels)?, mud: self.mud.in_hole(levels)? })
    }
}

impl TemperaturesInHole {
    /// How the wall of a layer is warmed at a depth below the rotary table, metres.
    pub fn thermal(&self, layer: &Layer, tvd: f64) -> Result<Option<Thermal>> {
        let Some(ThermalProperties { youngs_modulus, expansion }) = layer.thermal_properties else { return Ok(None) };
        let warming = self.mud.at(tvd)? - self.ground.at(tvd)?;
        Ok(Some(Thermal { warming, youngs_modulus, expansion }))
    }

    /// ΔT by another route, for checks.
    pub fn warming_by_another_route(&self, tvd: f64) -> Option<Warming> {
        Some(self.mud.by_another_route(tvd)? - self.ground.by_another_route(tvd)?)
    }

    /// Whether both say anything of a depth.
    pub fn covers(&self, tvd: f64) -> bool {
        self.ground.covers(tvd) && self.mud.covers(tvd)
    }
}
