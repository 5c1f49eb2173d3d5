//! The ground along one hole: in which layer the hole is, and where it passes from one into the next.

use super::ground::{Ground, Interval};
use super::layer::{Layer, LayerTop};
use super::temperatures::TemperaturesInHole;
use crate::error::{Error, Result};
use crate::field::InHole;
use crate::frames::vector::V3;
use crate::frames::{Datum, Depth};
use crate::units::{Length, Pressure, Quantity, fixed, with_typed_unit};
use crate::well::{Place, Survey};

/// The ground, with every depth below the rotary table of one hole.
#[derive(Clone, Debug)]
pub(crate) struct GroundInHole<'a> {
    pub(super) ground: &'a Ground,
    pub(super) sv: InHole,
    pub(super) pore: InHole,
    /// S_hmin and S_Hmax.
    pub(super) horizontals: Option<[InHole; 2]>,
    pub(super) temperatures: Option<TemperaturesInHole>,
    tops: Vec<Top>,
}

/// A top below the rotary table.
#[derive(Clone, Copy, Debug)]
enum Top {
    Level(f64),
    /// Depth at the wellhead, and how it grows to the north and to the east.
    Plane([f64; 3]),
    None,
}

impl Top {
    /// Its depth below a place at the surface; infinite where there is none.
    fn below(self, [north, east, _]: V3) -> f64 {
        match self {
            Top::Level(depth) => depth,
            Top::Plane([depth, to_north, to_east]) => depth + to_north * north + to_east * east,
            Top::None => f64::INFINITY,
        }
    }
}

/// Crossings are found to this, metres along the hole.
const CLOSE: f64 = 1e-7;

impl<'a> GroundInHole<'a> {
    pub fn new(ground: &'a Ground, survey: &Survey) -> Result<Self> {
        survey.datum()?;
        ground.require_one_temperature()?;
        let levels = survey.tie().ok();
        let to_rotary = |depth: Depth| match depth.below {
            Datum::RotaryTable => Ok(depth.tvd.si()),
            _ => survey.tie().and_then(|tie| tie.convert(depth, Datum::RotaryTable)).map(|d| d.tvd.si()),
        };
        let mut tops = Vec::with_capacity(ground.inputs.layers.len());
        let mut above: Option<(&Layer, f64)> = None;
        for layer in &ground.inputs.layers {
            let top = match layer.top {
                LayerTop::Level(depth) => Top::Level(to_rotary(depth)?),
                LayerTop::Plane(top) => {
                    let [n, e, d] = top.plane.axes()?.normal;
                    let (to_north, to_east) = (-n / d, -e / d);
                    let depth = to_rotary(top.depth)? - to_north * top.north.si() - to_east * top.east.si();
                    Top::Plane([depth, to_north, to_east])
                }
                LayerTop::ByMeasuredDepth => Top::None,
            };
            // Level tops are in order; dipping ones may cross, and then a layer wedges out.
            if let Top::Level(depth) = top {
                if let Some((other, shallower)) = above.filter(|(_, shallower)| *shallower >= depth) {
                    return Err(Error::not_physical(
                        format!("The top of {} at TVD {} m", layer.name, fixed(depth, 2)),
                        format!(
                            "it is not deeper than that of {}, {} m below the rotary table; list the layers from the top down.",
                            other.name,
                            fixed(shallower, 2)
                        ),
                    ));
                }
                above = Some((layer, depth));
            }
            tops.push(top);
        }
        let inputs = &ground.inputs;
        let horizontals = match &inputs.horizontals {
            Some(both) => Some([both.sh_min.in_hole(levels)?, both.sh_max.in_hole(levels)?]),
            None => None,
        };
        Ok(GroundInHole {
            ground,
            sv: inputs.sv.in_hole(levels)?,
            pore: inputs.pore.in_hole(levels)?,
            horizontals,
            temperatures: ground.temperatures.as_ref().map(|both| both.in_hole(levels)).transpose()?,
            tops,
        })
    }

    pub fn layer(&self, index: usize) -> Option<&'a Layer> {
        self.ground.inputs.layers.get(index)
    }

    /// The stated interval that holds a measured depth; one that ends there does not.
    pub(super) fn interval_at(&self, md: f64) -> Option<&Interval> {
        self.ground.intervals.iter().find(|i| i.from.si() <= md && md < i.to.si())
    }

    /// The layer that a place is in: that of the stated interval, otherwise the last in the list whose top
    /// lies at or above the place.
    pub fn layer_at(&self, place: &Place) -> Result<usize> {
        if let Some(interval) = self.interval_at(place.md) {
            return Ok(interval.layer);
        }
        let found = self.tops.iter().rposition(|top| top.below(place.at) <= place.at[2]);
        found.ok_or_else(|| {
            Error::out_of_range(
                "the depth asked for",
                format!("MD {} at TVD {} m", with_typed_unit(Length::m(place.md)), fixed(place.at[2], 2)),
                "in a layer: the top of the first one lies deeper, and no interval of measured depth holds it",
            )
        })
    }

    /// How vertical stress and pore pressure at a depth are found, with the numbers.
    pub fn vertical_worked(&self, tvd: f64) -> [String; 2] {
        [self.sv.worked(tvd), self.pore.worked(tvd)]
    }

    /// How the temperatures at a depth are found, with the numbers; nothing where none are stated by depth.
    pub fn temperatures_worked(&self, tvd: f64) -> Vec<String> {
        self.temperatures.iter().flat_map(|both| [both.ground.worked(tvd), both.mud.worked(tvd)]).collect()
    }

    /// The pore pressure before any depletion.
    pub fn virgin_pore(&self, tvd: f64) -> Pressure {
        Pressure::from_si(self.pore.at(tvd).unwrap_or(f64::NAN))
    }

    /// The depths between which a layer lies below a place; everything, where the layer is stated by
    /// measured depth.
    pub(super) fn extent(&self, place: &Place, layer: usize) -> [f64; 2] {
        let top = self.tops.get(layer).map_or(f64::INFINITY, |top| top.below(place.at));
        let stated =
            self.ground.intervals.iter().any(|i| i.layer == layer && i.from.si() <= place.md && place.md <= i.to.si());
        if stated || !top.is_finite() {
            return [f64::NEG_INFINITY, f64::INFINITY];
        }
        let base = self.tops.iter().skip(layer + 1).map(|t| t.below(place.at)).fold(f64::INFINITY, f64::min);
        [top, base]
    }

    /// Whether the ground says anything of a place.
    pub fn covers(&self, place: &Place) -> bool {
        let tvd = place.at[2];
        let Ok(layer) = self.layer_at(place) else { return false };
        let profiles = match (&self.horizontals, self.layer(layer).and_then(|layer| layer.ratios)) {
            (Some([min, max]), None) => {
                let reaches = |profile: &InHole| {
                    profile
                        .points_about(tvd, self.extent(place, layer))
                        .map_or_else(|| profile.covers(tvd), |points| points.iter().any(Option::is_some))
                };
                reaches(min) && reaches(max)
            }
            _ => true,
        };
        let warmed = self.temperatures.as_ref().is_none_or(|both| both.covers(tvd));
        profiles && warmed && self.sv.covers(tvd) && self.pore.covers(tvd) && tvd > 0.0
    }

    /// Where the hole passes a top or the end of an interval strictly between two places, in order of
    /// measured depth. A top that is reached and left again between them is not seen.
    pub fn contacts(&self, survey: &Survey, above: &Place, below: &Place) -> Result<Vec<f64>> {
        let mut found: Vec<f64> = Vec::new();
        let ends = self.ground.intervals.iter().flat_map(|i| [i.from.si(), i.to.si()]);
        found.extend(ends.filter(|md| *md > above.md && *md < below.md));
        for top in &self.tops {
            let gap = |place: &Place| place.at[2] - top.below(place.at);
            let (first, last) = (gap(above), gap(below));
            if !(first.is_finite() && last.is_finite() && first * last < 0.0) {
                continue;
            }
            let (mut low, mut high) = (above.md, below.md);
            while high - low > CLOSE {
                let middle = 0.5 * (low + high);
                if middle <= low || middle >= high {
                    break;
                }
                if gap(&survey.place(Length::m(middle))?) * first > 0.0 { low = middle } else { high = middle }
            }
            found.push(high);
        }
        found.sort_by(f64::total_cmp);
        found.dedup_by(|a, b| (*a - *b).abs() <= CLOSE);
        Ok(found)
    }
}
