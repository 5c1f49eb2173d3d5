//! Stress and pore pressure of the ground by another route, for checks.

use super::depletion::{MaxPath, MinPath};
use super::in_hole::GroundInHole;
use super::layer::Layer;
use crate::field::InHole;
use crate::units::{Length, Quantity, Warming};
use crate::well::{Place, Survey};

impl GroundInHole<'_> {
    /// S_v, P_p, S_hmin, S_Hmax of a layer at a place: profiles by the distances to their points, the
    /// ratio by its distances to the ratios at the points, S = K S_v + (1 − K) P_p − κ ΔP_p.
    pub fn by_another_route(&self, place: &Place, index: usize) -> Option<[f64; 4]> {
        let layer = self.layer(index)?;
        let tvd = place.at[2];
        let (sv, pore) = (self.sv.by_another_route(tvd), self.pore.by_another_route(tvd));
        let extent = self.extent(place, index);
        let total = |which: usize| -> Option<f64> {
            let ratio = match (layer.ratios, &self.horizontals) {
                (Some(ratios), _) => *ratios.get(which)?,
                (None, Some(profiles)) => match self.ratio(profiles.get(which)?, tvd, extent) {
                    Some(ratio) => ratio,
                    None => return Some(profiles.get(which)?.by_another_route(tvd)),
                },
                (None, None) => return None,
            };
            Some(ratio * sv + (1.0 - ratio) * pore)
        };
        let (min, max) = (total(0)?, total(1)?);
        let [of_min, of_max, drawdown] = relief(layer);
        Some([sv, pore - drawdown, min - of_min, max - of_max])
    }

    /// The layers a millimetre of hole above and below a depth: one is that of the depth, both at a contact.
    pub fn layers_beside(&self, survey: &Survey, md: Length) -> Vec<&Layer> {
        let beside = |by: f64| {
            let md = (md.si() + by).clamp(survey.first_md().si(), survey.last_md().si());
            self.layer(self.layer_at(&survey.place(Length::m(md)).ok()?).ok()?)
        };
        [-1e-3, 1e-3].into_iter().filter_map(beside).collect()
    }

    /// How much a layer's wall is warmed at a place: as it states, or by the temperatures of the other route.
    pub fn warming_by_another_route(&self, place: &Place, index: usize) -> Option<Warming> {
        let layer = self.layer(index)?;
        match (layer.thermal, &self.temperatures) {
            (None, Some(both)) => both.warming_by_another_route(place.at[2]),
            (own, _) => own.map(|thermal| thermal.warming),
        }
    }

    /// The ratio by the distances to the points in the layer; `None` for a gradient.
    fn ratio(&self, profile: &InHole, tvd: f64, extent: [f64; 2]) -> Option<f64> {
        let at = |depth: f64| {
            let (sv, pore) = (self.sv.by_another_route(depth), self.pore.by_another_route(depth));
            1.0 - (sv - profile.by_another_route(depth)) / (sv - pore)
        };
        match profile.points_about(tvd, extent)? {
            [Some(above), Some(below)] => {
                Some((at(above) * (below - tvd) + at(below) * (tvd - above)) / (below - above))
            }
            [Some(one), None] | [None, Some(one)] => Some(at(one)),
            [None, None] => Some(f64::NAN),
        }
    }
}

/// What depletion took from S_hmin, S_Hmax and the pore pressure.
fn relief(layer: &Layer) -> [f64; 3] {
    let Some(depletion) = layer.depletion else { return [0.0; 3] };
    let drawdown = depletion.drawdown.si();
    let nu = layer.rock.poisson;
    let min = match depletion.sh_min {
        MinPath::Measured(a) => a * drawdown,
        MinPath::Uniaxial { biot } => biot * (drawdown - drawdown * nu / (1.0 - nu)),
    };
    let max = match depletion.sh_max {
        MaxPath::AsMin => min,
        MaxPath::Measured(a) => a * drawdown,
    };
    [min, max, drawdown]
}
