//! The ground as a record holds it: of long files, only the points about the depths that it prints.

use serde::{Deserialize, Serialize};

use super::ground::{Ground, GroundInputs, HorizontalProfiles, Interval};
use super::in_hole::GroundInHole;
use super::layer::Layer;
use crate::card::{Card, Item};
use crate::error::{Error, Result};
use crate::field::{PressureProfile, ProfileRecord, TemperatureInHole, TemperatureProfile, TemperatureRecord};
use crate::frames::Azimuth;
use crate::well::Place;

/// The ground of a record.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct GroundRecord {
    sv: ProfileRecord,
    pore: ProfileRecord,
    horizontals: Option<[ProfileRecord; 2]>,
    sh_max_azimuth: Azimuth,
    layers: Vec<Layer>,
    intervals: Vec<Interval>,
    /// Of the ground and of the mud.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    temperatures: Option<[TemperatureRecord; 2]>,
}

impl GroundInHole<'_> {
    /// The ground as the record of these places holds it.
    pub fn record(&self, places: &[(Place, usize)]) -> GroundRecord {
        let inputs = &self.ground.inputs;
        let mut depths: Vec<f64> = places.iter().map(|(place, _)| place.at[2]).collect();
        // A ratio stands on vertical stress and pore pressure at the points of its table.
        for (place, layer) in places {
            for profile in self.horizontals.iter().flatten() {
                let points = profile.points_about(place.at[2], self.extent(place, *layer));
                depths.extend(points.into_iter().flatten().flatten());
            }
        }
        let about = |profile: &PressureProfile, own: &dyn Fn(f64) -> f64| {
            profile.record_about(&depths.iter().map(|depth| own(*depth)).collect::<Vec<_>>())
        };
        let horizontals = inputs.horizontals.as_ref().zip(self.horizontals.as_ref()).map(|(stated, [min, max])| {
            [about(&stated.sh_min, &|depth| min.own_depth(depth)), about(&stated.sh_max, &|depth| max.own_depth(depth))]
        });
        let own = |of: &TemperatureInHole| depths.iter().map(|depth| of.own_depth(*depth)).collect::<Vec<_>>();
        let stated = self.ground.temperatures.as_ref().zip(self.temperatures.as_ref());
        let temperatures = stated.map(|(stated, here)| {
            [stated.ground.record_about(&own(&here.ground)), stated.mud.record_about(&own(&here.mud))]
        });
        GroundRecord {
            temperatures,
            sv: about(&inputs.sv, &|depth| self.sv.own_depth(depth)),
            pore: about(&inputs.pore, &|depth| self.pore.own_depth(depth)),
            horizontals,
            sh_max_azimuth: inputs.sh_max_azimuth,
            layers: inputs.layers.clone(),
            intervals: self.ground.intervals.clone(),
        }
    }
}

impl Ground {
    /// The azimuth of S_Hmax.
    pub(crate) fn azimuth(&self) -> Azimuth {
        self.inputs.sh_max_azimuth
    }

    /// The cards that its azimuths stand on.
    pub(crate) fn upstream(&self) -> Vec<Card> {
        let own = self.inputs.layers.iter().filter_map(|layer| layer.sh_max_azimuth);
        std::iter::once(self.inputs.sh_max_azimuth).chain(own).flat_map(|azimuth| azimuth.upstream()).collect()
    }

    /// From a record.
    pub(crate) fn from_record(record: GroundRecord) -> Result<Self> {
        let profile = PressureProfile::from_record;
        let horizontals = match record.horizontals {
            Some([min, max]) => Some(HorizontalProfiles { sh_min: profile(min)?, sh_max: profile(max)? }),
            None => None,
        };
        let layers = record.layers.into_iter().map(Layer::checked).collect::<Result<Vec<_>>>()?;
        if record.intervals.iter().any(|interval| interval.layer >= layers.len()) {
            return Err(Error::not_physical(
                "An interval of the record",
                "the ground has no such layer; make the record again.",
            ));
        }
        let ground = Ground::new(GroundInputs {
            sv: profile(record.sv)?,
            pore: profile(record.pore)?,
            horizontals,
            sh_max_azimuth: record.sh_max_azimuth,
            layers,
        })?;
        let ground = Ground { intervals: record.intervals, ..ground };
        let Some([of_ground, of_mud]) = record.temperatures else { return Ok(ground) };
        let temperature = TemperatureProfile::from_record;
        ground.with_temperatures(&temperature(of_ground)?, &temperature(of_mud)?)
    }

    /// Everything it was made of as inputs of a card.
    pub(crate) fn items(&self) -> Vec<Item> {
        let inputs = &self.inputs;
        let mut items = vec![inputs.sv.input_item(), inputs.pore.input_item()];
        if let Some(both) = &inputs.horizontals {
            items.extend([both.sh_min.input_item(), both.sh_max.input_item()]);
        }
        items.extend(self.temperatures.iter().flat_map(|both| [both.ground.input_item(), both.mud.input_item()]));
        items.push(inputs.sh_max_azimuth.item("A", "azimuth of S_Hmax"));
        for layer in &inputs.layers {
            items.extend(layer.items());
        }
        for interval in &self.intervals {
            if let Some([path, sha256]) = interval.file {
                items.push(Item::file("intervals of layers", path.text(), sha256.text()));
                continue;
            }
            let name = inputs.layers.get(interval.layer).map_or("", Layer::name);
            items.push(Item::typed("", format!("beginning of {name}, measured depth"), interval.from));
            items.push(Item::typed("", format!("end of {name}, measured depth"), interval.to));
        }
        // One file or one number stands once.
        let mut once: Vec<Item> = Vec::with_capacity(items.len());
        for item in items {
            let again = |known: &Item| {
                known.name == item.name
                    && known.shown == item.shown
                    && known.sha256 == item.sha256
                    && known.si == item.si
            };
            if !once.iter().any(again) {
                once.push(item);
            }
        }
        once
    }
}
