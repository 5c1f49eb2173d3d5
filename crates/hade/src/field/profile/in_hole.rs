//! A profile as the pressure at depths below the rotary table of one hole: for logs along it.

use serde::{Deserialize, Serialize};

use super::about::{ProfileAbout, ProfileSource};
use super::at_depth::by_another_route;
use super::law::Law;
use super::points::{Point, Points};
use super::pressure_profile::{PressureProfile, ProfileData, whole_item};
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::DatumTie;
use crate::units::{Length, Pressure, Quantity, as_typed, fixed};

/// A profile in a hole.
#[derive(Clone, Debug)]
pub(crate) struct InHole {
    profile: PressureProfile,
    /// What is added to a depth below the rotary table to make it one below the profile's datum.
    shift: f64,
}

/// A profile as a record holds it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub(crate) struct ProfileRecord {
    about: ProfileAbout,
    law: Law,
}

impl PressureProfile {
    /// The profile in a hole with these levels. A profile that states levels of its own, of another
    /// hole, is carried over at equal elevation; one that states none is of this hole.
    pub(crate) fn in_hole(&self, levels: Option<DatumTie>) -> Result<InHole> {
        let ProfileData { about, law } = self.data();
        let about = about.clone().in_hole(levels);
        let shift = about.shift(law.datum())?;
        if let Law::Gradient { start, .. } = law {
            Law::start_pressure(*start, about.tie)?;
        }
        Ok(InHole { shift, profile: PressureProfile::build(about, law.clone()) })
    }

    /// As a record holds it. Of a file, only the points about these depths below its datum: what
    /// there is at them is the same.
    pub(crate) fn record_about(&self, depths: &[f64]) -> ProfileRecord {
        let data = self.data();
        let law = if data.about.source == ProfileSource::Typed { data.law.clone() } else { data.law.about(depths) };
        ProfileRecord { about: data.about.clone(), law }
    }

    /// From a record.
    pub(crate) fn from_record(record: ProfileRecord) -> Result<Self> {
        record.law.checked()?;
        Ok(PressureProfile::build(record.about, record.law))
    }

    /// Its file, or the whole of it, as an input of a card.
    pub(crate) fn input_item(&self) -> Item {
        let ProfileData { about, law } = self.data();
        match &about.source {
            ProfileSource::File { path, sha256, .. } => {
                Item::file(format!("{} against depth", about.meaning), path.clone(), sha256.clone())
            }
            ProfileSource::Typed => whole_item(about, law),
        }
    }
}

impl InHole {
    /// The pressure at a depth below the rotary table, both in SI.
    pub fn at(&self, tvd: f64) -> Result<f64> {
        let data = self.profile.data();
        data.law
            .pressure(Length::m(tvd + self.shift), data.about.tie)
            .map(Pressure::si)
            .map_err(|e| Error::not_physical(capital(&data.about.meaning), crate::lines::reason(&e) + "."))
    }

    /// The same by another route, for checks.
    pub fn by_another_route(&self, tvd: f64) -> f64 {
        let data = self.profile.data();
        let depth = Length::m(tvd + self.shift);
        by_another_route(&data.law, data.about.tie, depth).map_or(f64::NAN, Pressure::si)
    }

    /// How the pressure at a depth is found, with the numbers: "P_p = 12 + (24 − 12) · …".
    pub fn worked(&self, tvd: f64) -> String {
        let data = self.profile.data();
        let (symbol, depth) = (&data.about.symbol, Length::m(tvd + self.shift));
        let at = self.at(tvd).map_or(f64::NAN, |p| p * 1e-6);
        let (z, mpa) = (|z: Length| fixed(z.si(), 2), |p: Pressure| fixed(p.in_mpa(), 4));
        let place = format!("at TVD {} m below {}", z(depth), data.law.datum().words());
        match &data.law {
            Law::Gradient { from, start, gradient } => format!(
                "{symbol} {place} = {} + {} MPa/km · ({} − ({})) m / 1000 = {} MPa",
                mpa(Law::start_pressure(*start, data.about.tie).unwrap_or_default()),
                as_typed(gradient.in_mpa_per_km()),
                z(depth),
                z(from.tvd),
                fixed(at, 4)
            ),
            Law::Table(table) => match table.around(depth) {
                Ok(((z1, p1), (z2, p2))) if z1 != z2 => format!(
                    "{symbol} {place} = {p} + ({} − {p}) · ({} − {t}) / ({} − {t}) = {} MPa",
                    mpa(p2),
                    z(depth),
                    z(z2),
                    fixed(at, 4),
                    p = mpa(p1),
                    t = z(z1)
                ),
                _ => format!("{symbol} {place} = {} MPa, a point of its table", fixed(at, 4)),
            },
        }
    }

    /// Whether it says anything of a depth below the rotary table.
    pub fn covers(&self, tvd: f64) -> bool {
        let (first, last) = self.profile.covers();
        let depth = tvd + self.shift;
        depth >= first.si() && last.is_none_or(|last| depth <= last.si())
    }

    /// The points of a table within an interval of depths below the rotary table, nearest to a depth:
    /// the one at or above it, and the one below it. `None` for a gradient, which has no points.
    pub fn points_about(&self, tvd: f64, [from, to]: [f64; 2]) -> Option<[Option<f64>; 2]> {
        let Law::Table(Points { points, .. }) = &self.profile.data().law else { return None };
        let back = |p: &Point<Pressure>| p.0.si() - self.shift;
        let next = points.partition_point(|p| back(p) <= tvd);
        let above = next.checked_sub(1).and_then(|k| points.get(k)).map(back).filter(|z| *z >= from);
        let below = points.get(next).map(back).filter(|z| *z < to);
        Some([above, below])
    }

    /// A depth below the rotary table as one below the datum of the profile.
    pub fn own_depth(&self, tvd: f64) -> f64 {
        tvd + self.shift
    }
}

fn capital(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map(|c| c.to_uppercase().collect::<String>()).unwrap_or_default() + letters.as_str()
}
