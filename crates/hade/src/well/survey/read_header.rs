//! What a survey file declares above its table: north, units, datum, levels.

use super::station::TieIn;
use crate::error::Result;
use crate::frames::{DatumTie, DeclaredNorth, LEVEL_KEYS, NORTH_KEYS, Name, Site, declared_tie};
use crate::lines::{Declarations, Unit, Units, shown};
use crate::units::Length;

/// The keys that mean something; every other `#` line is a remark.
pub(super) const KEYS: &[&[&str]] =
    &[&["hole", "depth_unit", "angle_unit", "depth_datum", "datum"], &NORTH_KEYS, &LEVEL_KEYS, &TIE_IN_KEYS];
const TIE_IN_KEYS: [&str; 3] = ["tie_in_north", "tie_in_east", "tie_in_tvd"];

const DEPTHS: Units<Length> = Units {
    key: "depth_unit",
    what: "the unit of its depths",
    known: &[("m", Length::m), ("ft", Length::ft)],
    fix: "write m or ft",
};

/// The declarations as they are used.
pub(super) struct Header {
    pub hole: Option<Name>,
    pub tie: Option<DatumTie>,
    pub tie_in: Option<TieIn>,
    /// A depth from a number in the file's unit.
    pub depth: Unit<Length>,
    pub north: DeclaredNorth,
}

/// The declarations as the table needs them. What the file does not say of its north a site may.
pub(super) fn settle(declared: &Declarations, site: Option<Site>) -> Result<Header> {
    let north = DeclaredNorth::read(declared, site, "azimuths", "Survey")?;
    let depth = declared.unit(&DEPTHS, None)?;
    declared.require_degrees()?;
    let key = if declared.get("datum").is_some() { "datum" } else { "depth_datum" };
    match declared.get(key) {
        None => return Err(declared.lacking("where its depths count from", "# depth_datum: rotary table")),
        Some(datum) if ["rotary table", "drill floor"].contains(&datum.to_lowercase().as_str()) => {}
        Some(datum) => {
            return Err(declared.bad(
                key,
                format!("measured depths from \"{}\" are not read", shown(datum)),
                "give them from the rotary table (or drill floor)",
            ));
        }
    }
    let hole = declared.get("hole").map(|name| Name::new(&shown(name)));
    Ok(Header { hole, tie: declared_tie(declared)?, tie_in: tie_in(declared)?, depth, north })
}

fn tie_in(declared: &Declarations) -> Result<Option<TieIn>> {
    let [north, east, tvd] = TIE_IN_KEYS.map(|key| declared.length(key));
    match (north?, east?, tvd?) {
        (Some(north), Some(east), Some(tvd)) => Ok(Some(TieIn { north, east, tvd })),
        (None, None, None) => Ok(None),
        _ => Err(declared.bad_together(
            "the tie-in is not whole",
            "state tie_in_north, tie_in_east and tie_in_tvd, or none of them",
        )),
    }
}
