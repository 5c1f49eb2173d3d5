//! What a depth is measured from, and how the levels of one hole are tied together.

use serde::{Deserialize, Serialize};

use crate::card::Item;
use crate::error::{Error, Result};
use crate::sheet::IntoGiven;
use crate::units::{Length, Quantity, require_between, with_typed_unit};

/// The level a vertical depth counts down from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Datum {
    /// The rotary table (drill floor). Mud weight always refers to it.
    RotaryTable,
    /// Mean sea level. A depth below it may be negative on land.
    MeanSeaLevel,
    /// The ground surface, on land.
    Ground,
    /// The sea floor.
    Mudline,
}

impl Datum {
    /// "the rotary table", "mean sea level", "the ground", "the mudline".
    pub fn words(self) -> &'static str {
        match self {
            Datum::RotaryTable => "the rotary table",
            Datum::MeanSeaLevel => "mean sea level",
            Datum::Ground => "the ground",
            Datum::Mudline => "the mudline",
        }
    }

    /// The symbols of a depth below it and of its elevation above mean sea level.
    pub(crate) fn symbols(self) -> (&'static str, &'static str) {
        match self {
            Datum::RotaryTable => ("z", "e_RT"),
            Datum::MeanSeaLevel => ("z_s", "e_MSL"),
            Datum::Ground => ("z_g", "e_G"),
            Datum::Mudline => ("z_m", "e_M"),
        }
    }

    /// The datum that a file names in one of the trade's usual words.
    pub(crate) fn from_words(words: &str) -> Option<Self> {
        match words.trim().to_uppercase().trim_start_matches("THE ") {
            "RT" | "RKB" | "KB" | "DF" | "ROTARY TABLE" | "DRILL FLOOR" | "KELLY BUSHING" => Some(Datum::RotaryTable),
            "GL" | "GROUND" | "GROUND LEVEL" => Some(Datum::Ground),
            "MSL" | "MEAN SEA LEVEL" => Some(Datum::MeanSeaLevel),
            "ML" | "MUDLINE" | "SEA FLOOR" | "SEABED" => Some(Datum::Mudline),
            _ => None,
        }
    }
}

/// A true vertical depth with the level it counts from, positive down.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Depth {
    /// The vertical distance below the datum.
    pub tvd: Length,
    /// The datum.
    pub below: Datum,
}

impl Depth {
    /// A depth below the rotary table.
    pub fn below_rotary_table(tvd: Length) -> Self {
        Depth { tvd, below: Datum::RotaryTable }
    }
    /// A depth below mean sea level.
    pub fn below_mean_sea_level(tvd: Length) -> Self {
        Depth { tvd, below: Datum::MeanSeaLevel }
    }
    /// A depth below the ground.
    pub fn below_ground(tvd: Length) -> Self {
        Depth { tvd, below: Datum::Ground }
    }
    /// A depth below the mudline.
    pub fn below_mudline(tvd: Length) -> Self {
        Depth { tvd, below: Datum::Mudline }
    }

    /// "2950 m below the rotary table"; at the level itself "the rotary table".
    pub fn words(self) -> String {
        if self.tvd.si() == 0.0 {
            return self.below.words().to_owned();
        }
        format!("{} below {}", with_typed_unit(self.tvd), self.below.words())
    }
}

impl IntoGiven for Depth {
    type Value = Depth;
    fn into_given(self, symbol: &str, meaning: &str) -> (Depth, Item, Option<(f64, String)>) {
        let shown = format!("{} below {}", with_typed_unit(self.tvd), self.below.words());
        (self, Item::new(symbol, meaning, Length::KIND, vec![self.tvd.si()], shown), None)
    }
}

/// The levels of one hole, as elevations above mean sea level. The rotary table's is always known;
/// the ground's (on land) or the mudline's (at sea, negative) only when it was stated.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(try_from = "Levels")]
pub struct DatumTie {
    rotary_table: Length,
    ground: Option<Length>,
    mudline: Option<Length>,
}

/// The levels as a record holds them, before they are checked.
#[derive(Deserialize)]
struct Levels {
    rotary_table: Length,
    ground: Option<Length>,
    mudline: Option<Length>,
}

impl TryFrom<Levels> for DatumTie {
    type Error = Error;
    fn try_from(levels: Levels) -> Result<Self> {
        let mut tie = DatumTie::rotary_table_at(levels.rotary_table)?;
        if let Some(ground) = levels.ground {
            tie = tie.with_ground_at(ground)?;
        }
        if let Some(mudline) = levels.mudline {
            tie = tie.with_mudline_at(mudline)?;
        }
        Ok(tie)
    }
}

/// No site lies higher or deeper than this, in metres; beyond it a unit was mistaken.
const FARTHEST: f64 = 12_000.0;

impl DatumTie {
    /// A hole whose rotary table lies at an elevation above mean sea level.
    ///
    /// # Errors
    /// When the elevation is not finite or beyond ±12 km.
    pub fn rotary_table_at(elevation: Length) -> Result<Self> {
        let rotary_table = level("elevation of the rotary table above mean sea level", elevation)?;
        Ok(DatumTie { rotary_table, ground: None, mudline: None })
    }

    /// With the ground at an elevation above mean sea level.
    ///
    /// # Errors
    /// When it lies above the rotary table, or a mudline was stated.
    pub fn with_ground_at(self, elevation: Length) -> Result<Self> {
        let ground = self.lower("ground", elevation)?;
        if self.mudline.is_some() {
            return Err(both());
        }
        Ok(DatumTie { ground: Some(ground), ..self })
    }

    /// With the mudline at an elevation above mean sea level: negative, as it lies below the sea.
    ///
    /// # Errors
    /// When it lies above the sea or the rotary table, or a ground was stated.
    pub fn with_mudline_at(self, elevation: Length) -> Result<Self> {
        let mudline = self.lower("mudline", elevation)?;
        if mudline.si() > 0.0 {
            return Err(Error::out_of_range(
                "elevation of the mudline above mean sea level",
                format!("{mudline}"),
                "negative, since the sea floor lies below the sea (on land, state the ground)",
            ));
        }
        if self.ground.is_some() {
            return Err(both());
        }
        Ok(DatumTie { mudline: Some(mudline), ..self })
    }

    fn lower(self, what: &str, elevation: Length) -> Result<Length> {
        let elevation = level(&format!("elevation of the {what} above mean sea level"), elevation)?;
        if elevation > self.rotary_table {
            return Err(Error::not_physical(
                format!("The {what} at {elevation} above mean sea level"),
                format!("it would lie above the rotary table, {}; check both elevations.", self.rotary_table),
            ));
        }
        Ok(elevation)
    }

    /// The elevation of a level above mean sea level.
    ///
    /// # Errors
    /// When it was not stated.
    pub fn elevation(self, of: Datum) -> Result<Length> {
        let stated = match of {
            Datum::RotaryTable => Some(self.rotary_table),
            Datum::MeanSeaLevel => Some(Length::default()),
            Datum::Ground => self.ground,
            Datum::Mudline => self.mudline,
        };
        stated.ok_or_else(|| {
            let method = if of == Datum::Ground { "with_ground_at" } else { "with_mudline_at" };
            Error::undeclared(
                format!("The elevation of {} is not stated for this hole", of.words()),
                format!("add it to the hole's tie with .{method}(elevation above mean sea level)?."),
            )
        })
    }

    /// The same point as a depth below another level of this hole. [`DatumTie::conversion`] gives
    /// the same with a card.
    ///
    /// # Errors
    /// When the depth is not finite or one of the levels was not stated.
    pub fn convert(self, depth: Depth, to: Datum) -> Result<Depth> {
        depth.tvd.finite("depth")?;
        if depth.below == to {
            return Ok(depth);
        }
        let above = self.elevation(depth.below)? - self.elevation(to)?;
        Ok(Depth { tvd: depth.tvd - above, below: to })
    }

    /// "rotary table 31.8 m and ground 25.0 m above mean sea level".
    pub fn words(self) -> String {
        let other = match (self.ground, self.mudline) {
            (Some(ground), _) => format!(" and ground {ground}"),
            (_, Some(mudline)) => format!(" and mudline {mudline}"),
            _ => String::new(),
        };
        format!("rotary table {}{other} above mean sea level", self.rotary_table)
    }
}

fn level(what: &str, elevation: Length) -> Result<Length> {
    require_between(what, elevation, Length::m(-FARTHEST), Length::m(FARTHEST))
}

fn both() -> Error {
    Error::not_physical(
        "A hole with a ground and a mudline",
        "state the ground on land or the mudline at sea, not both.",
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    #[test]
    fn one_point_in_every_datum() {
        // 25 m air gap, 300 m of water: 1000 m below the rotary table is 675 m below the mudline.
        let tie = DatumTie::rotary_table_at(25.m()).unwrap().with_mudline_at((-300).m()).unwrap();
        let depth = Depth::below_rotary_table(1000.m());
        assert_eq!(tie.convert(depth, Datum::MeanSeaLevel).unwrap().tvd, 975.m());
        let mudline = tie.convert(depth, Datum::Mudline).unwrap();
        assert_eq!(mudline, Depth::below_mudline(675.m()));
        assert_eq!(tie.convert(mudline, Datum::RotaryTable).unwrap(), depth);
        // On land TVD below the sea may be negative.
        let land = DatumTie::rotary_table_at(432.m()).unwrap().with_ground_at(425.m()).unwrap();
        assert_eq!(land.convert(Depth::below_ground(25.m()), Datum::MeanSeaLevel).unwrap().tvd, (-400).m());
        assert_eq!(land.words(), "rotary table 432.0 m and ground 425.0 m above mean sea level");
    }

    #[test]
    fn a_record_with_levels_that_cannot_be_is_not_read() {
        use crate::card::Data;
        let tie = DatumTie::rotary_table_at(25.m()).unwrap().with_mudline_at((-300).m()).unwrap();
        assert_eq!(DatumTie::read(&tie.write()).unwrap(), tie);
        assert!(DatumTie::read(&tie.write().with_number("/mudline", 500.0)).is_err());
        assert!(DatumTie::read(&tie.write().with_number("/rotary_table", 99_000.0)).is_err());
    }

    #[test]
    fn what_was_not_stated_is_refused() {
        let tie = DatumTie::rotary_table_at(25.m()).unwrap();
        let e = tie.convert(Depth::below_ground(10.m()), Datum::RotaryTable).unwrap_err();
        assert!(e.to_string().contains("with_ground_at"), "{e}");
        assert!(tie.with_ground_at(26.m()).unwrap_err().to_string().contains("above the rotary table"));
        assert!(tie.with_mudline_at(10.m()).is_err());
        assert!(tie.with_ground_at(1.m()).unwrap().with_mudline_at((-5).m()).is_err());
        assert!(DatumTie::rotary_table_at(f64::NAN.m()).unwrap_err().is_range());
        assert!(tie.convert(Depth::below_rotary_table(f64::INFINITY.m()), Datum::RotaryTable).is_err());
    }
}
