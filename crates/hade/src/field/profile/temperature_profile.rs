//! A temperature against depth, as it was stated or read.

use std::path::Path;
use std::sync::Arc;

use serde::{Deserialize, Serialize};

use super::about::{ProfileAbout, ProfileSource};
use super::points::{AgainstDepth, DEEPEST, Points};
use super::read::{ColumnByDepth, temperatures};
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::{Datum, DatumTie, Depth};
use crate::lines::Lines;
use crate::sheet::IntoGiven;
use crate::units::{Length, Quantity, Temperature, TemperatureGradient, require_between, with_typed_unit};

/// A temperature, of the ground or of the mud at the wall, against true vertical depth: a table with straight
/// lines between its points, a gradient from a level down, or one value. It says which level its depths count
/// from; nothing is extrapolated. Copies are cheap: they share the points.
#[derive(Clone, Debug, PartialEq)]
pub struct TemperatureProfile {
    data: Arc<TemperatureData>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct TemperatureData {
    pub about: ProfileAbout,
    pub law: TemperatureLaw,
}

/// What a temperature follows with depth.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "law", rename_all = "snake_case")]
pub(super) enum TemperatureLaw {
    /// Straight lines between points.
    Table(Points<Temperature>),
    /// A gradient from a level down.
    Gradient { from: Depth, start: Temperature, gradient: TemperatureGradient },
    /// The same at every depth.
    Uniform { temperature: Temperature },
}

/// Symbol and meaning of any temperature.
const ANY: (&str, &str) = ("T", "temperature");
/// A table that is typed holds no more points than this, so that the record can hold it.
const MOST_TYPED: usize = 2000;
/// No temperature changes with depth by more than this, K/km; beyond it a unit was mistaken.
const STEEPEST: f64 = 300.0;

impl TemperatureLaw {
    /// The same law, held against what a table, a gradient or a value may be.
    fn checked(self) -> Result<Self> {
        let possible = |what: &str, value: Temperature| {
            let [least, greatest] = Temperature::possible();
            require_between(what, value, least, greatest).map(|_| ())
        };
        match &self {
            TemperatureLaw::Table(table) => Points::new(table.datum, table.points.clone()).map(|_| ())?,
            TemperatureLaw::Gradient { from, start, gradient } => {
                let deepest = Length::m(DEEPEST);
                require_between("the depth where the gradient begins", from.tvd, -deepest, deepest)?;
                possible("the temperature where the gradient begins", *start)?;
                let steepest = TemperatureGradient::kelvin_per_km(STEEPEST);
                require_between("the gradient of temperature", *gradient, -steepest, steepest)?;
            }
            TemperatureLaw::Uniform { temperature } => possible("temperature", *temperature)?,
        }
        Ok(self)
    }

    /// The level its depths count from; none where it is the same at every depth.
    pub fn datum(&self) -> Option<Datum> {
        match self {
            TemperatureLaw::Table(table) => Some(table.datum),
            TemperatureLaw::Gradient { from, .. } => Some(from.below),
            TemperatureLaw::Uniform { .. } => None,
        }
    }

    /// The depths it covers; a gradient has no lower end, and one value holds everywhere.
    pub fn covers(&self) -> [Option<Length>; 2] {
        match self {
            TemperatureLaw::Table(table) => table.ends.map(Some),
            TemperatureLaw::Gradient { from, .. } => [Some(from.tvd), None],
            TemperatureLaw::Uniform { .. } => [None; 2],
        }
    }

    /// The temperature at a depth below its datum.
    pub fn at(&self, depth: Length) -> Result<Temperature> {
        match self {
            TemperatureLaw::Table(table) => table.at(depth),
            TemperatureLaw::Gradient { from, start, gradient } => {
                if depth < from.tvd {
                    return Err(Error::out_of_range(
                        "the depth asked for",
                        Depth { tvd: depth, below: from.below }.words(),
                        format!(
                            "at or below {}, where the gradient of temperature begins (nothing is extrapolated)",
                            with_typed_unit(from.tvd)
                        ),
                    ));
                }
                let [least, greatest] = Temperature::possible();
                require_between("temperature by its gradient", *start + *gradient * (depth - from.tvd), least, greatest)
            }
            TemperatureLaw::Uniform { temperature } => Ok(*temperature),
        }
    }
}

impl TemperatureProfile {
    /// A table of at most 2000 points, in order of true vertical depth below a datum; straight lines run
    /// between them.
    ///
    /// # Errors
    /// With fewer than two points or more than 2000, depths that do not rise or lie beyond 20 km, or
    /// temperatures outside −60 to 600 °C.
    pub fn from_points(points: &[(Length, Temperature)], datum: Datum) -> Result<Self> {
        if points.len() > MOST_TYPED {
            return Err(Error::out_of_range(
                "the number of points of a typed table",
                points.len().to_string(),
                format!("at most {MOST_TYPED}, so that the record can hold them; put a longer table into a file"),
            ));
        }
        TemperatureProfile::typed(TemperatureLaw::Table(Points::new(datum, points.to_vec())?))
    }

    /// A gradient from a level down: `temperature` at `from` (at the surface, where that is the ground or the
    /// mudline), growing by `gradient` with depth below it.
    ///
    /// # Errors
    /// When a number is not finite, the level lies beyond 20 km, the temperature outside −60 to 600 °C or the
    /// gradient outside ±300 K/km.
    pub fn from_gradient(gradient: TemperatureGradient, from: Depth, temperature: Temperature) -> Result<Self> {
        TemperatureProfile::typed(TemperatureLaw::Gradient { from, start: temperature, gradient })
    }

    /// The same temperature at every depth.
    ///
    /// # Errors
    /// When it is outside −60 to 600 °C.
    pub fn uniform(temperature: Temperature) -> Result<Self> {
        TemperatureProfile::typed(TemperatureLaw::Uniform { temperature })
    }

    /// Reads one column of a CSV file. Lines that begin with `#` above the column names declare what a table of
    /// numbers cannot say; keys in any order and case, free remarks allowed:
    ///
    /// ```text
    /// # hole: KF-1                          (optional)
    /// # datum: rotary table                 (or mean sea level, ground, mudline; also as depth_datum)
    /// # depth_unit: m | ft
    /// # temperature_unit: C | F
    /// # rotary_table_above_msl: 32.4 m      (optional; also ground_above_msl, mudline_above_msl)
    /// tvd,ground,mud
    /// ```
    ///
    /// Units may stand in the column names instead: `tvd (m),ground (C)`. Depths are true vertical ones, in a
    /// column `tvd`. Further columns are ignored. At most 100 000 rows.
    ///
    /// # Errors
    /// With file, line, column and what to change, as [`PressureProfile::read_csv`](super::PressureProfile::read_csv).
    pub fn read_csv(path: impl AsRef<Path>, column: &str) -> Result<Self> {
        let ColumnByDepth { points, hole, tie, source } = temperatures(Lines::open(path.as_ref())?, column)?;
        let about =
            ProfileAbout { hole, source, tie, tie_in_file: tie.is_some(), ..ProfileAbout::typed(ANY.0, column.trim()) };
        Ok(TemperatureProfile::build(TemperatureData { about, law: TemperatureLaw::Table(points) }))
    }

    fn typed(law: TemperatureLaw) -> Result<Self> {
        let about = ProfileAbout::typed(ANY.0, ANY.1);
        Ok(TemperatureProfile::build(TemperatureData { about, law: law.checked()? }))
    }

    pub(super) fn build(data: TemperatureData) -> Self {
        TemperatureProfile { data: Arc::new(data) }
    }

    /// From a record.
    pub(super) fn checked(TemperatureData { about, law }: TemperatureData) -> Result<Self> {
        Ok(TemperatureProfile::build(TemperatureData { about, law: law.checked()? }))
    }

    fn with_about(&self, about: ProfileAbout) -> Self {
        TemperatureProfile::build(TemperatureData { about, law: self.data.law.clone() })
    }

    /// Under a symbol and what it means: `.of("T_f", "temperature of the ground")`. Cards use both.
    pub fn of(&self, symbol: &str, meaning: &str) -> Self {
        let about = self.data.about.clone();
        self.with_about(ProfileAbout { symbol: symbol.to_owned(), meaning: meaning.to_owned(), ..about })
    }

    /// The same; under this symbol and meaning where `of` gave it none of its own.
    pub(crate) fn or_of(&self, symbol: &str, meaning: &str) -> Self {
        let about = &self.data.about;
        if about.symbol != ANY.0 {
            return self.clone();
        }
        self.of(symbol, if about.meaning == ANY.1 { meaning } else { &about.meaning })
    }

    /// With the levels of its hole, so that a depth below any of them can be asked for.
    ///
    /// # Errors
    /// When the file states other levels.
    pub fn tied(&self, tie: DatumTie) -> Result<Self> {
        Ok(self.with_about(self.data.about.clone().tied(tie)?))
    }

    /// The temperature at a depth.
    ///
    /// # Errors
    /// When the depth lies outside what the profile covers (nothing is extrapolated), or counts from another
    /// level than the profile and the elevation of one of the two was not stated.
    pub fn at(&self, depth: Depth) -> Result<Temperature> {
        let TemperatureData { about, law } = self.data();
        match law.datum() {
            Some(datum) => law.at(about.in_datum(depth, datum)?),
            None => law.at(depth.tvd),
        }
    }

    pub(super) fn data(&self) -> &TemperatureData {
        &self.data
    }

    /// "temperature of the ground against depth: 30 K/km from the rotary table, 8 °C there".
    pub(crate) fn words(&self) -> String {
        let item = self.whole_item();
        format!("{}: {}", item.name, item.shown)
    }

    /// Its file, or its numbers, as an input of a card.
    pub(crate) fn input_item(&self) -> Item {
        let about = &self.data.about;
        match &about.source {
            ProfileSource::File { path, sha256, .. } => {
                Item::file(format!("{} against depth", about.meaning), path.clone(), sha256.clone())
            }
            ProfileSource::Typed => self.whole_item(),
        }
    }

    /// The whole of it as one value: depths and temperatures of a table in turn; where a gradient begins, the
    /// temperature there, and the gradient; or the one value.
    fn whole_item(&self) -> Item {
        let TemperatureData { about, law } = self.data();
        let below = law.datum().map_or("", Datum::words);
        let name = format!("{} against depth", about.meaning);
        match law {
            TemperatureLaw::Table(Points { points, count, ends: [first, last], .. }) => Item::new(
                &about.symbol,
                name,
                format!("temperature against depth below {below}"),
                points.iter().flat_map(|(z, t)| [z.si(), t.si()]).collect(),
                format!("{count} points, TVD {} to {} below {below}", with_typed_unit(*first), with_typed_unit(*last)),
            ),
            TemperatureLaw::Gradient { from, start, gradient } => Item::new(
                &about.symbol,
                name,
                format!("temperature gradient from a depth below {below}"),
                vec![from.tvd.si(), start.si(), gradient.si()],
                format!("{} from {}, {} there", with_typed_unit(*gradient), from.words(), with_typed_unit(*start)),
            ),
            TemperatureLaw::Uniform { temperature } => Item::typed(&about.symbol, about.meaning.clone(), *temperature),
        }
    }
}

impl IntoGiven for TemperatureProfile {
    type Value = TemperatureProfile;
    /// As one given; the profile takes over the symbol and the meaning.
    fn into_given(self, symbol: &str, meaning: &str) -> (TemperatureProfile, Item, Option<(f64, String)>) {
        let given = self.of(symbol, meaning);
        let item = Item { name: meaning.to_owned(), ..given.whole_item() };
        (given, item, None)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    /// 8 °C at the mudline of a sea of 300 m and 32 K/km below it: 40 °C a kilometre down, which lies 1325 m
    /// below a rotary table 25 m above the sea.
    #[test]
    fn a_gradient_counts_from_its_level() {
        let sea = DatumTie::rotary_table_at(25.m()).unwrap().with_mudline_at((-300).m()).unwrap();
        let profile =
            TemperatureProfile::from_gradient(32.kelvin_per_km(), Depth::below_mudline(0.m()), 8.celsius()).unwrap();
        let depth = Depth::below_rotary_table(1325.m());
        let e = profile.at(depth).unwrap_err().to_string();
        assert!(e.contains("not tied together for this temperature"), "{e}");
        let at = profile.tied(sea).unwrap().at(depth).unwrap();
        assert!((at - 40.celsius()).in_kelvin().abs() < 1e-9, "{at}");
        let e = profile.tied(sea).unwrap().at(Depth::below_rotary_table(300.m())).unwrap_err().to_string();
        assert!(e.contains("at or below 0 m, where the gradient of temperature begins"), "{e}");
        assert_eq!(TemperatureProfile::uniform(45.celsius()).unwrap().at(depth).unwrap(), 45.celsius());
    }

    #[test]
    fn what_cannot_be_a_temperature_is_refused() {
        let zero = Depth::below_ground(0.m());
        let gradient = |g: f64, t: Temperature| TemperatureProfile::from_gradient(g.kelvin_per_km(), zero, t);
        assert!(gradient(301.0, 8.celsius()).unwrap_err().to_string().contains("between -300 K/km and 300 K/km"));
        assert!(gradient(f64::NAN, 8.celsius()).is_err());
        assert!(gradient(30.0, f64::INFINITY.celsius()).is_err());
        let e = gradient(290.0, 8.celsius()).unwrap().at(Depth::below_ground(5000.m())).unwrap_err().to_string();
        assert!(e.contains("temperature by its gradient is 1458 °C"), "{e}");
        assert!(TemperatureProfile::uniform((-274).celsius()).unwrap_err().to_string().contains("-60 °C and 600 °C"));
        let points = |points: &[(Length, Temperature)]| TemperatureProfile::from_points(points, Datum::Ground);
        assert!(points(&[(0.m(), 1.celsius())]).unwrap_err().to_string().contains("points of a temperature table"));
        assert!(points(&[(0.m(), 1.celsius()), (0.m(), 2.celsius())]).is_err());
        let table = points(&[(0.m(), 10.celsius()), (1000.m(), 40.celsius())]).unwrap();
        assert_eq!(table.at(Depth::below_ground(500.m())).unwrap(), 25.celsius());
        let e = table.at(Depth::below_ground(1001.m())).unwrap_err().to_string();
        assert!(e.contains("between 0 m and 1000 m"), "{e}");
    }
}
