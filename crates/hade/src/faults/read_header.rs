//! What a file of planes declares above its table: north, units.

use std::io::Read;

use crate::error::Result;
use crate::frames::{Azimuth, North};
use crate::lines::{Lines, number, shown};
use crate::units::{Angle, Pressure};

/// The keys that mean something; every other `#` line is a remark.
const KEYS: [&str; 6] = ["north", "north_correction", "declination", "convergence", "angle_unit", "cohesion_unit"];
/// Those that say how the file's north lies to true north.
const CORRECTIONS: [&str; 3] = ["north_correction", "declination", "convergence"];

/// The declarations as they stand: key, line, value.
#[derive(Default)]
pub(super) struct Declarations(Vec<(&'static str, usize, String)>);

/// A cohesion from a number in the declared unit.
pub(super) type Cohesion = fn(f64) -> Pressure;

/// The declarations as they are used.
pub(super) struct Header {
    north: fn(Angle) -> Azimuth,
    correction: Option<Angle>,
    /// A cohesion in the declared unit.
    pub cohesion: Option<Cohesion>,
}

impl Header {
    /// An azimuth of the table, with the file's correction.
    pub fn azimuth(&self, degrees: f64) -> Result<Azimuth> {
        let azimuth = (self.north)(Angle::deg(degrees));
        match (azimuth.north(), self.correction) {
            (North::Grid, Some(c)) => azimuth.with_convergence(c),
            (North::Magnetic, Some(c)) => azimuth.with_declination(c),
            _ => Ok(azimuth),
        }
    }
}

impl Declarations {
    /// Takes in a line that begins with `#`.
    pub fn take<R: Read>(&mut self, lines: &Lines<R>, text: &str, above_table: bool) -> Result<()> {
        let Some((key, value)) = text.trim_start_matches('#').split_once(':') else { return Ok(()) };
        let key = key.trim().to_lowercase();
        let Some(key) = KEYS.iter().find(|k| **k == key) else { return Ok(()) };
        if !above_table {
            return Err(lines.bad(
                format!("\"{key}\" is declared below the column names"),
                "move every declaration above the column names",
            ));
        }
        // A spreadsheet that saves the file again fills the line up with separators.
        let value = value.trim().trim_end_matches([',', ';']).trim();
        // The correction may stand on the line of the north.
        let (value, rest) = match value.split_once(',') {
            Some((north, rest)) if *key == "north" => (north.trim(), Some(rest.trim())),
            _ => (value, None),
        };
        self.put(lines, key, value)?;
        let Some(rest) = rest else { return Ok(()) };
        let other = rest.split_once(':').map(|(key, value)| (key.trim().to_lowercase(), value.trim()));
        match other.as_ref().and_then(|(key, value)| Some((CORRECTIONS.iter().find(|k| *k == key)?, value))) {
            Some((key, value)) => self.put(lines, key, value),
            None => Err(lines.bad_in(
                "north",
                format!("\"{}\" does not say what it is", shown(rest)),
                "write \"north: magnetic, declination: 2.5\" or \"north: grid, convergence: -1.3\"",
            )),
        }
    }

    fn put<R: Read>(&mut self, lines: &Lines<R>, key: &'static str, value: &str) -> Result<()> {
        if let Some((_, line, _)) = self.0.iter().find(|(k, ..)| *k == key) {
            return Err(lines.bad(format!("\"{key}\" is declared again (first in line {line})"), "keep one of the two"));
        }
        if value.is_empty() {
            return Err(lines.bad(format!("\"{key}\" has no value"), "write the value after the colon"));
        }
        self.0.push((key, lines.number(), value.to_owned()));
        Ok(())
    }

    fn get(&self, key: &str) -> Option<(usize, &str)> {
        self.0.iter().find(|(k, ..)| *k == key).map(|(_, line, value)| (*line, value.as_str()))
    }

    /// The declarations as the table needs them; `lines` stands at the column names.
    pub fn settle<R: Read>(&self, lines: &Lines<R>) -> Result<Header> {
        let lacking = |what: &str, write: &str| {
            lines.bad(format!("the file does not say {what}"), format!("add a line \"{write}\" above the column names"))
        };
        let (north_line, north) = self
            .get("north")
            .ok_or_else(|| lacking("from which north its strikes are", "# north: true | grid | magnetic"))?;
        let north = north.to_lowercase();
        let maker = match north.trim_end_matches(" north") {
            "true" => Azimuth::from_true_north,
            "grid" => Azimuth::from_grid_north,
            "magnetic" => Azimuth::from_magnetic_north,
            other => {
                return Err(lines.bad_at(
                    Some(north_line),
                    Some("north"),
                    format!("\"{}\" is no north", shown(other)),
                    "write true, grid or magnetic",
                ));
            }
        };
        let kind = maker(Angle::default()).north();
        let correction = self.correction(lines, kind)?;
        match (kind, correction) {
            (North::Grid, None) => {
                return Err(lacking(
                    "how grid north lies to true north",
                    "# north_correction: <convergence in degrees, east positive>",
                ));
            }
            (North::Magnetic, None) => {
                return Err(lacking(
                    "how magnetic north lies to true north",
                    "# north_correction: <declination in degrees, east positive>",
                ));
            }
            _ => {}
        }
        match self.get("angle_unit") {
            None => return Err(lacking("the unit of its angles", "# angle_unit: deg")),
            Some((_, unit)) if ["deg", "degree", "degrees", "°"].contains(&unit.to_lowercase().as_str()) => {}
            Some((line, unit)) => {
                return Err(lines.bad_at(
                    Some(line),
                    Some("angle_unit"),
                    format!("angles in \"{}\" are not read", shown(unit)),
                    "convert them to degrees and write deg",
                ));
            }
        }
        Ok(Header { north: maker, correction, cohesion: self.cohesion(lines)? })
    }

    fn correction<R: Read>(&self, lines: &Lines<R>, north: North) -> Result<Option<Angle>> {
        let stated: Vec<(&str, usize, &str)> =
            CORRECTIONS.iter().filter_map(|key| self.get(key).map(|(line, text)| (*key, line, text))).collect();
        let (key, line, text) = match stated.as_slice() {
            [] => return Ok(None),
            [one] => *one,
            [(first, ..), (second, line, _), ..] => {
                return Err(lines.bad_at(
                    Some(*line),
                    Some(second),
                    format!("\"{first}\" states the correction of the north too"),
                    "keep one of the two",
                ));
            }
        };
        let bad = |why: String, fix: &str| lines.bad_at(Some(line), Some(key), why, fix);
        let digits = text.trim_end_matches("degrees").trim_end_matches("deg").trim_end_matches('°').trim();
        let value = number(digits).map_err(|(why, fix)| bad(why, &fix))?;
        if value.abs() > 180.0 {
            return Err(bad(
                format!("{value}° is not between -180° and 180°"),
                "write the convergence or declination in degrees, east positive",
            ));
        }
        match (north, key) {
            (North::True, _) if value != 0.0 => Err(bad(
                "azimuths from true north need no correction".to_owned(),
                "remove the line, or correct \"north\"",
            )),
            (North::Grid, "declination") => {
                Err(bad("azimuths from grid north have no declination".to_owned(), "state the convergence"))
            }
            (North::Magnetic, "convergence") => {
                Err(bad("azimuths from magnetic north have no convergence".to_owned(), "state the declination"))
            }
            _ => Ok(Some(Angle::deg(value))),
        }
    }

    fn cohesion<R: Read>(&self, lines: &Lines<R>) -> Result<Option<Cohesion>> {
        let Some((line, unit)) = self.get("cohesion_unit") else { return Ok(None) };
        let maker: Cohesion = match unit.to_lowercase().as_str() {
            "mpa" => Pressure::mpa,
            "kpa" => Pressure::kpa,
            "bar" => Pressure::bar,
            "psi" => Pressure::psi,
            _ => {
                return Err(lines.bad_at(
                    Some(line),
                    Some("cohesion_unit"),
                    format!("\"{}\" is no unit of cohesion that is known here", shown(unit)),
                    "write MPa, kPa, bar or psi",
                ));
            }
        };
        Ok(Some(maker))
    }
}
