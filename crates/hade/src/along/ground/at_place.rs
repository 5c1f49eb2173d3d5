//! What the ground says of one place of a hole: stress, pore pressure, and the wall there.

use super::in_hole::GroundInHole;
use super::layer::Layer;
use crate::card::Item;
use crate::error::{Error, Result};
use crate::field::InHole;
use crate::frames::{Azimuth, Borehole, Name};
use crate::stress::{Horizontals, Stress};
use crate::units::{Length, Pressure, Quantity, fixed, with_typed_unit};
use crate::well::{Place, WallInputs, WallSetup, items_beside_rock};

/// Stress, pore pressure and rock at a place of a hole.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct AtPlace {
    /// The measured depth.
    pub md: Length,
    /// The true vertical depth below the rotary table.
    pub tvd: Length,
    /// The total vertical stress.
    pub sv: Pressure,
    /// The pore pressure, after any depletion.
    pub pore: Pressure,
    /// The smaller horizontal stress, after any depletion.
    pub sh_min: Pressure,
    /// The larger horizontal stress, after any depletion.
    pub sh_max: Pressure,
    /// The azimuth of the larger one.
    pub sh_max_azimuth: Azimuth,
    /// By how much the pore pressure was drawn down.
    pub drawdown: Option<Pressure>,
    pub(crate) layer: Layer,
    /// How the two horizontal stresses were found, before depletion.
    pub(crate) by: [HorizontalBy; 2],
    /// A of the two, where the layer is depleted.
    pub(crate) paths: [f64; 2],
    pub(crate) place: Place,
}

/// How a horizontal stress was found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum HorizontalBy {
    /// The ratio that the layer states.
    Ratio(f64),
    /// A gradient, which says the total stress at every depth.
    Gradient,
    /// Points of a table: depth below the rotary table and ratio of each, and the ratio here.
    Table { points: [Option<(f64, f64)>; 2], ratio: f64 },
}

impl AtPlace {
    /// The name of the layer.
    pub fn layer(&self) -> &'static str {
        self.layer.name.text()
    }

    pub(crate) fn layer_name(&self) -> Name {
        self.layer.name
    }

    /// What the layer states of rock and wall, as results: so that a wall made of these is known to come from here.
    pub(crate) fn rock_items(&self) -> Vec<Item> {
        let Layer { rock, seepage, thermal, weak_plane, .. } = self.layer;
        let mut items = rock.items();
        // The warming is a result by itself.
        items.extend(items_beside_rock(seepage, thermal, weak_plane).into_iter().filter(|item| item.symbol != "ΔT"));
        items
    }

    /// The wall of the hole there.
    pub(crate) fn wall(&self) -> Result<WallSetup> {
        let stress: Stress<Borehole> = self.place.attitude().chain()?.carry(&self.stress()?);
        let Layer { rock, seepage, thermal, weak_plane, creeps, .. } = self.layer;
        Ok(WallSetup { inputs: WallInputs { stress, pore: self.pore, rock }, seepage, thermal, weak_plane, creeps })
    }

    /// The total stress there, the vertical being a principal direction.
    ///
    /// # Errors
    /// When S_Hmax is smaller than S_hmin.
    pub fn stress(&self) -> Result<Stress> {
        Stress::from_horizontals(Horizontals {
            sv: self.sv,
            sh_max: self.sh_max,
            sh_min: self.sh_min,
            sh_max_azimuth: self.sh_max_azimuth,
        })
    }
}

impl GroundInHole<'_> {
    /// What the ground says of a place in a layer.
    pub fn state(&self, place: &Place, layer: usize) -> Result<AtPlace> {
        self.state_there(place, layer).map_err(|e| {
            Error::not_physical(
                format!("The ground at MD {} (TVD {} m)", with_typed_unit(Length::m(place.md)), fixed(place.at[2], 2)),
                crate::lines::reason(&e) + ".",
            )
        })
    }

    fn state_there(&self, place: &Place, index: usize) -> Result<AtPlace> {
        let tvd = place.at[2];
        let mut layer = *self.layer(index).ok_or_else(|| {
            Error::not_physical("A layer of the record", "the ground has no such layer; make the record again.")
        })?;
        let (sv, pore) = (self.sv.at(tvd)?, self.pore.at(tvd)?);
        let effective = above_zero(sv, pore, tvd)?;
        let (by, total) = match (layer.ratios, &self.horizontals) {
            (Some(ratios), _) => (ratios.map(HorizontalBy::Ratio), ratios.map(|ratio| pore + ratio * effective)),
            (None, Some(profiles)) => {
                let extent = self.extent(place, index);
                let [(by_min, min), (by_max, max)] = [
                    self.horizontal(&profiles[0], tvd, extent, [pore, effective], layer.name)?,
                    self.horizontal(&profiles[1], tvd, extent, [pore, effective], layer.name)?,
                ];
                ([by_min, by_max], [min, max])
            }
            (None, None) => {
                return Err(Error::undeclared(
                    format!("Nothing says the horizontal stresses of the layer {}", layer.name),
                    "state its ratios of effective stress with .horizontal_ratios(min, max)?.",
                ));
            }
        };
        if let Some(both) = &self.temperatures {
            layer.thermal = both.thermal(&layer, tvd)?;
        }
        let (paths, drawdown) = match layer.depletion {
            Some(depletion) => (depletion.paths(layer.rock.poisson)?, depletion.drawdown.si()),
            None => ([0.0; 2], 0.0),
        };
        if pore - drawdown < 0.0 {
            return Err(Error::not_physical(
                format!("The drawdown {} in the layer {}", with_typed_unit(Pressure::from_si(drawdown)), layer.name),
                format!("the pore pressure before it is only {}; correct one of the two.", Pressure::from_si(pore)),
            ));
        }
        let [sh_min, sh_max] = [total[0] - paths[0] * drawdown, total[1] - paths[1] * drawdown];
        let state = AtPlace {
            md: Length::m(place.md),
            tvd: Length::m(tvd),
            sv: Pressure::from_si(sv),
            pore: Pressure::from_si(pore - drawdown),
            sh_min: Pressure::from_si(sh_min),
            sh_max: Pressure::from_si(sh_max),
            sh_max_azimuth: layer.sh_max_azimuth.unwrap_or(self.ground.inputs.sh_max_azimuth),
            drawdown: layer.depletion.map(|depletion| depletion.drawdown),
            layer,
            by,
            paths,
            place: *place,
        };
        state.stress()?;
        Ok(state)
    }

    /// A horizontal stress before depletion: the gradient's, or by the ratio of effective stress, which
    /// runs straight between the points of the table that lie in the layer.
    fn horizontal(
        &self,
        profile: &InHole,
        tvd: f64,
        extent: [f64; 2],
        [pore, effective]: [f64; 2],
        layer: Name,
    ) -> Result<(HorizontalBy, f64)> {
        let Some(depths) = profile.points_about(tvd, extent) else {
            return Ok((HorizontalBy::Gradient, profile.at(tvd)?));
        };
        let mut points = [None; 2];
        for (point, depth) in points.iter_mut().zip(depths) {
            let Some(depth) = depth else { continue };
            let (sv, pore) = (self.sv.at(depth)?, self.pore.at(depth)?);
            *point = Some((depth, (profile.at(depth)? - pore) / above_zero(sv, pore, depth)?));
        }
        let ratio = match points {
            [Some((above, k)), Some((below, l))] => k + (l - k) * ((tvd - above) / (below - above)),
            [Some((_, k)), None] | [None, Some((_, k))] => k,
            [None, None] => {
                return Err(Error::undeclared(
                    format!("No point of the table of horizontal stresses lies in the layer {layer}"),
                    "add one to the table, or state the layer's ratios with .horizontal_ratios(min, max)?.",
                ));
            }
        };
        Ok((HorizontalBy::Table { points, ratio }, pore + ratio * effective))
    }
}

/// S_v − P_p, which a ratio of effective stress needs above zero.
fn above_zero(sv: f64, pore: f64, tvd: f64) -> Result<f64> {
    if sv - pore > 0.0 {
        return Ok(sv - pore);
    }
    Err(Error::not_physical(
        format!("The effective vertical stress at TVD {} m", fixed(tvd, 2)),
        format!(
            "S_v {} is not above the pore pressure {}; correct the profiles, or begin deeper.",
            Pressure::from_si(sv),
            Pressure::from_si(pore)
        ),
    ))
}
