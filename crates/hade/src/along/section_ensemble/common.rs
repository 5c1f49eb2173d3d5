//! What the depths of a layer, or of the section, have in common in each draw.

use super::depths::SectionDepth;
use crate::error::Result;
use crate::frames::Name;
use crate::progress::Progress;
use crate::spread::{Draws, RankCorrelation};
use crate::units::Quantity;
use crate::well::Vary;

/// The mud weights that several depths have in common in one draw.
#[derive(Clone, Copy, Debug)]
pub(super) struct Common {
    /// Whether some depth leaves the draw out.
    pub left_out: bool,
    /// The highest bottom, kg/m³; infinite where a depth has none.
    pub bottom: f64,
    /// The lowest top, kg/m³; −∞ where a depth has none.
    pub top: f64,
    /// Whether the planned mud lies inside at every depth.
    pub keeps: bool,
}

impl Common {
    /// Of no depth.
    pub const NOTHING: Common = Common { left_out: false, bottom: f64::NEG_INFINITY, top: f64::INFINITY, keeps: true };

    pub fn and(self, other: Common) -> Common {
        Common {
            left_out: self.left_out || other.left_out,
            bottom: self.bottom.max(other.bottom),
            top: self.top.min(other.top),
            keeps: self.keeps && other.keeps,
        }
    }

    /// Whether a mud weight in kg/m³ lies inside.
    pub fn holds(&self, weight: f64) -> bool {
        self.bottom <= weight && weight <= self.top
    }
}

/// The draws of one layer.
pub(super) struct LayerDraws {
    pub layer: Name,
    pub depths: usize,
    pub common: Vec<Common>,
}

/// Draws every depth and keeps what those of each layer have in common. Memory grows with the layers, not with the
/// depths.
pub(super) fn by_layers(
    depths: &[SectionDepth],
    draws: Draws,
    spreads: &[Vary],
    correlations: &[RankCorrelation],
) -> Result<Vec<LayerDraws>> {
    let progress = Progress::new(&format!("{} draws at each of {} depths", draws.count, depths.len()), depths.len());
    let mut layers: Vec<LayerDraws> = Vec::new();
    for depth in depths {
        progress.advance(1);
        let ensemble = depth.ensemble(draws, spreads, correlations)?;
        let name = depth.row.layer_name();
        let place = layers.iter().position(|layer| layer.layer == name).unwrap_or_else(|| {
            let common = vec![Common::NOTHING; draws.count as usize];
            layers.push(LayerDraws { layer: name, depths: 0, common });
            layers.len() - 1
        });
        let Some(layer) = layers.get_mut(place) else { continue };
        layer.depths += 1;
        for (common, ends) in layer.common.iter_mut().zip(ensemble.ends()) {
            *common = common.and(of_depth(depth, ends));
        }
    }
    Ok(layers)
}

/// What one depth asks of the mud in a draw, from bottom and top in Pa.
fn of_depth(depth: &SectionDepth, ends: Option<[Option<f64>; 2]>) -> Common {
    let Some([bottom, top]) = ends else { return Common { left_out: true, ..Common::NOTHING } };
    let keeps = match (depth.planned, bottom, top) {
        (Some([low, high]), Some(bottom), Some(top)) => bottom <= low.si() && high.si() <= top,
        (Some(_), ..) => false,
        (None, ..) => true,
    };
    Common {
        left_out: false,
        bottom: bottom.map_or(f64::INFINITY, |p| depth.weight(p)),
        top: top.map_or(f64::NEG_INFINITY, |p| depth.weight(p)),
        keeps,
    }
}
