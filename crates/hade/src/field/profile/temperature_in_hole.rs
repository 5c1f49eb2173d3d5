//! A temperature at depths below the rotary table of one hole: for logs along it.

use serde::{Deserialize, Serialize};

use super::about::ProfileSource;
use super::temperature_profile::{TemperatureData, TemperatureLaw, TemperatureProfile};
use crate::error::{Error, Result};
use crate::frames::DatumTie;
use crate::units::{Length, Quantity, Temperature, as_typed, fixed};

/// A profile in a hole.
#[derive(Clone, Debug)]
pub(crate) struct TemperatureInHole {
    profile: TemperatureProfile,
    /// What is added to a depth below the rotary table to make it one below the profile's datum.
    shift: f64,
}

/// A profile as a record holds it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(transparent)]
pub(crate) struct TemperatureRecord(TemperatureData);

impl TemperatureProfile {
    /// The profile in a hole with these levels, as a profile of pressure.
    pub(crate) fn in_hole(&self, levels: Option<DatumTie>) -> Result<TemperatureInHole> {
        let TemperatureData { about, law } = self.data();
        let about = about.clone().in_hole(levels);
        let shift = law.datum().map_or(Ok(0.0), |datum| about.shift(datum))?;
        Ok(TemperatureInHole { shift, profile: TemperatureProfile::build(TemperatureData { about, law: law.clone() }) })
    }

    /// As a record holds it. Of a file, only the points about these depths below its datum.
    pub(crate) fn record_about(&self, depths: &[f64]) -> TemperatureRecord {
        let TemperatureData { about, law } = self.data();
        let law = match law {
            TemperatureLaw::Table(table) if about.source != ProfileSource::Typed => {
                TemperatureLaw::Table(table.about(depths))
            }
            other => other.clone(),
        };
        TemperatureRecord(TemperatureData { about: about.clone(), law })
    }

    /// From a record.
    pub(crate) fn from_record(record: TemperatureRecord) -> Result<Self> {
        TemperatureProfile::checked(record.0)
    }
}

impl TemperatureInHole {
    /// The temperature at a depth below the rotary table, metres.
    pub fn at(&self, tvd: f64) -> Result<Temperature> {
        let TemperatureData { about, law } = self.profile.data();
        law.at(Length::m(tvd + self.shift))
            .map_err(|e| Error::not_physical(format!("The {}", about.meaning), crate::lines::reason(&e) + "."))
    }

    /// The same by another route, for checks: by the distances to the points of a table, a gradient in feet and
    /// degrees Fahrenheit.
    pub fn by_another_route(&self, tvd: f64) -> Option<Temperature> {
        let depth = Length::m(tvd + self.shift);
        match &self.profile.data().law {
            TemperatureLaw::Table(table) => table.by_distances(depth),
            TemperatureLaw::Gradient { from, start, gradient } => {
                let hundreds_of_feet = (depth.in_ft() - from.tvd.in_ft()) / 100.0;
                let more = gradient.in_fahrenheit_per_100_ft() * hundreds_of_feet;
                Some(Temperature::fahrenheit(start.in_fahrenheit() + more))
            }
            TemperatureLaw::Uniform { temperature } => Some(*temperature),
        }
    }

    /// Whether it says anything of a depth below the rotary table.
    pub fn covers(&self, tvd: f64) -> bool {
        let [first, last] = self.profile.data().law.covers();
        let depth = Length::m(tvd + self.shift);
        first.is_none_or(|first| depth >= first) && last.is_none_or(|last| depth <= last)
    }

    /// A depth below the rotary table as one below the datum of the profile.
    pub fn own_depth(&self, tvd: f64) -> f64 {
        tvd + self.shift
    }

    /// How the temperature at a depth is found, with the numbers.
    pub fn worked(&self, tvd: f64) -> String {
        let TemperatureData { about, law } = self.profile.data();
        let depth = Length::m(tvd + self.shift);
        let (m, c) = (|z: Length| fixed(z.si(), 2), |t: Temperature| fixed(t.in_celsius(), 3));
        let at = law.at(depth).map_or_else(|_| String::new(), c);
        let datum = law.datum().map_or("", |datum| datum.words());
        let begin = format!("{} at TVD {} m below {datum}", about.symbol, m(depth));
        match law {
            TemperatureLaw::Uniform { .. } => format!("{} = {at} °C at every depth", about.symbol),
            TemperatureLaw::Gradient { from, start, gradient } => format!(
                "{begin} = {} + {} K/km · ({} − ({})) m / 1000 = {at} °C",
                c(*start),
                as_typed(gradient.in_kelvin_per_km()),
                m(depth),
                m(from.tvd)
            ),
            TemperatureLaw::Table(table) => match table.around(depth) {
                Ok(((z1, t1), (z2, t2))) if z1 != z2 => format!(
                    "{begin} = {t} + ({} − {t}) · ({} − {z}) / ({} − {z}) = {at} °C",
                    c(t2),
                    m(depth),
                    m(z2),
                    t = c(t1),
                    z = m(z1)
                ),
                _ => format!("{begin} = {at} °C, a point of its table"),
            },
        }
    }
}
