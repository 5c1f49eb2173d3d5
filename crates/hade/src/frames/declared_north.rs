//! The north of a file's azimuths as it is declared above its table, and how it lies to true north.

use std::io::Read;

use super::{Azimuth, North, Site};
use crate::error::{Error, Result};
use crate::lines::{Column, Declarations, Row, Table, reason, shown};
use crate::units::Angle;

/// The keys that declare a north. The last three say how it lies to true north, each alone.
pub(crate) const NORTH_KEYS: [&str; 4] = ["north", "north_correction", "declination", "convergence"];

/// A north with its correction, in which the azimuths of a table are read.
#[derive(Clone, Copy, Debug)]
pub(crate) struct DeclaredNorth {
    /// The azimuth 0° from it.
    zero: Azimuth,
}

impl DeclaredNorth {
    /// The north that a file declares. Where it names grid or magnetic north and not how that lies to
    /// true north, a site may say it. `angles` are the file's, for messages ("azimuths", "strikes"),
    /// and `reader` is the type that reads such a file with a site ("Survey").
    pub fn read(declared: &Declarations, site: Option<Site>, angles: &str, reader: &str) -> Result<Self> {
        let text = declared.get("north").ok_or_else(|| {
            declared.lacking(&format!("from which north its {angles} are"), "# north: true | grid | magnetic")
        })?;
        let zero = measured_from(declared, text)?;
        let stated = correction(declared, zero.north())?;
        let corrected = match (zero.north(), stated, site) {
            (North::True, ..) => Ok(zero),
            (North::Grid, Some(c), _) => zero.with_convergence(c),
            (North::Magnetic, Some(c), _) => zero.with_declination(c),
            (_, None, Some(site)) => site.true_azimuth(zero).map_err(|e| {
                declared.bad(
                    "north",
                    reason(&e),
                    "correct the site, or add a line \"# north_correction: <degrees, east positive>\" to the file",
                )
            }),
            (north, None, None) => Err(lacking(declared, north, reader)),
        };
        Ok(DeclaredNorth { zero: corrected? })
    }

    /// The azimuth in a cell of the table, corrected. Where a site corrected it, it remembers the site.
    pub fn azimuth_in<R: Read>(&self, table: &Table<R>, row: &Row, column: &Column) -> Result<Azimuth> {
        let degrees = table.degrees(row, column, [-180.0, 360.0], "give it clockwise from north in degrees")?;
        Ok(self.zero.with_measured(Angle::deg(degrees)))
    }

    /// The site, where the correction is the site's and not the file's.
    pub fn site(&self) -> Option<Site> {
        self.zero.site()
    }
}

fn measured_from(declared: &Declarations, text: &str) -> Result<Azimuth> {
    if let Some((_, rest)) = text.split_once(',') {
        return Err(declared.bad(
            "north",
            format!("\"{}\" does not say what it is", shown(rest.trim())),
            "write \"north: magnetic, declination: 2.5\" or \"north: grid, convergence: -1.3\"",
        ));
    }
    match text.to_lowercase().trim_end_matches(" north") {
        "true" => Ok(Azimuth::from_true_north(Angle::default())),
        "grid" => Ok(Azimuth::from_grid_north(Angle::default())),
        "magnetic" => Ok(Azimuth::from_magnetic_north(Angle::default())),
        other => {
            Err(declared.bad("north", format!("\"{}\" is no north", shown(other)), "write true, grid or magnetic"))
        }
    }
}

/// The correction that the file states.
fn correction(declared: &Declarations, north: North) -> Result<Option<Angle>> {
    let [_, corrections @ ..] = NORTH_KEYS;
    let stated: Vec<&str> = corrections.into_iter().filter(|key| declared.get(key).is_some()).collect();
    let key = match stated.as_slice() {
        [] => return Ok(None),
        [one] => *one,
        [first, second, ..] => {
            return Err(declared.bad(
                second,
                format!("\"{first}\" states the correction of the north too"),
                "keep one of the two",
            ));
        }
    };
    let Some(value) = declared.degrees(key)? else { return Ok(None) };
    let (why, fix) = match (north, key) {
        _ if value.abs() > 180.0 => (
            format!("{value}° is not between -180° and 180°"),
            "write the convergence or declination in degrees, east positive",
        ),
        (North::True, _) if value != 0.0 => {
            (format!("azimuths from {} need no correction", north.words()), "remove the line, or correct \"north\"")
        }
        (North::Grid, "declination") => {
            (format!("azimuths from {} have no declination", north.words()), "state the convergence")
        }
        (North::Magnetic, "convergence") => {
            (format!("azimuths from {} have no convergence", north.words()), "state the declination")
        }
        _ => return Ok(Some(Angle::deg(value))),
    };
    Err(declared.bad(key, why, fix))
}

fn lacking(declared: &Declarations, north: North, reader: &str) -> Error {
    let correction = if north == North::Grid { "convergence" } else { "declination" };
    declared.bad_together(
        format!("the file does not say how {} lies to true north", north.words()),
        format!(
            "add a line \"# north_correction: <{correction} in degrees, east positive>\" above the column names, or read it with {reader}::read_csv_at(path, site)?"
        ),
    )
}
