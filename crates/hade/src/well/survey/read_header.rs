//! What a survey file declares above its table: north, units, datum, levels.

use std::io::Read;

use super::station::TieIn;
use crate::error::{Error, Result};
use crate::frames::{Azimuth, DatumTie, Name, North, Site};
use crate::lines::{Lines, number, shown};
use crate::units::{Angle, Length};

/// The keys that mean something; every other `#` line is a remark.
const KEYS: [&str; 12] = [
    "hole",
    "north",
    "north_correction",
    "depth_unit",
    "angle_unit",
    "depth_datum",
    "rotary_table_above_msl",
    "ground_above_msl",
    "mudline_above_msl",
    "tie_in_north",
    "tie_in_east",
    "tie_in_tvd",
];

/// The declarations as they stand: key, line, value.
#[derive(Default)]
pub(super) struct Declarations(Vec<(&'static str, usize, String)>);

/// The declarations as they are used.
pub(super) struct Header {
    pub hole: Option<Name>,
    pub tie: Option<DatumTie>,
    pub tie_in: Option<TieIn>,
    /// Metres in one unit of depth.
    unit: fn(f64) -> Length,
    north: fn(Angle) -> Azimuth,
    correction: Option<Angle>,
    /// The site, where the correction is the site's and not the file's.
    pub site: Option<Site>,
}

impl Header {
    pub fn depth(&self, value: f64) -> Length {
        (self.unit)(value)
    }
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
        // A spreadsheet that saves the file again fills the line up with separators.
        let value = value.trim().trim_end_matches([',', ';']).trim();
        if !above_table {
            return Err(lines.bad(
                format!("\"{key}\" is declared below the column names"),
                "move every declaration above the column names",
            ));
        }
        if let Some((_, line, _)) = self.0.iter().find(|(k, ..)| k == key) {
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

    /// The declarations as the table needs them; `lines` stands at the column names. What the file does
    /// not say of its north a site may.
    pub fn settle<R: Read>(&self, lines: &Lines<R>, site: Option<Site>) -> Result<Header> {
        let lacking = |what: &str, write: &str| {
            lines.bad(format!("the file does not say {what}"), format!("add a line \"{write}\" above the column names"))
        };
        let lacking_correction = |what: &str, write: &str| {
            lines.bad(
                format!("the file does not say {what}"),
                format!(
                    "add a line \"{write}\" above the column names, or read it with Survey::read_csv_at(path, site)?"
                ),
            )
        };
        let (north_line, north) = self
            .get("north")
            .ok_or_else(|| lacking("from which north its azimuths are", "# north: true | grid | magnetic"))?;
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
        let from = maker(Angle::default()).north();
        let site = site.filter(|_| from != North::True && self.get("north_correction").is_none());
        let correction = match (self.get("north_correction"), site) {
            (Some((line, text)), _) => Some(Angle::deg(self.degrees(lines, line, text)?)),
            (None, Some(site)) => {
                let found = site.true_azimuth(maker(Angle::default())).map_err(|e| {
                    lines.bad_at(
                        Some(north_line),
                        Some("north"),
                        e.to_string().trim_end_matches('.'),
                        "correct the site, or add a line \"# north_correction: <degrees, east positive>\" to the file",
                    )
                })?;
                found.correction()
            }
            (None, None) => None,
        };
        match (from, correction) {
            (North::True, Some(c)) if c != Angle::default() => {
                return Err(lines.bad_at(
                    self.get("north_correction").map(|(line, _)| line),
                    Some("north_correction"),
                    "azimuths from true north need no correction",
                    "remove the line, or correct \"north\"",
                ));
            }
            (North::Grid, None) => {
                return Err(lacking_correction(
                    "how grid north lies to true north",
                    "# north_correction: <convergence in degrees, east positive>",
                ));
            }
            (North::Magnetic, None) => {
                return Err(lacking_correction(
                    "how magnetic north lies to true north",
                    "# north_correction: <declination in degrees, east positive>",
                ));
            }
            _ => {}
        }
        let unit = match self.get("depth_unit") {
            None => return Err(lacking("the unit of its depths", "# depth_unit: m | ft")),
            Some((_, unit)) if unit.eq_ignore_ascii_case("m") => Length::m,
            Some((_, unit)) if unit.eq_ignore_ascii_case("ft") => Length::ft,
            Some((line, unit)) => {
                return Err(lines.bad_at(
                    Some(line),
                    Some("depth_unit"),
                    format!("\"{}\" is no unit of depth that is known here", shown(unit)),
                    "write m or ft",
                ));
            }
        };
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
        match self.get("depth_datum") {
            None => return Err(lacking("where its depths count from", "# depth_datum: rotary table")),
            Some((_, datum)) if ["rotary table", "drill floor"].contains(&datum.to_lowercase().as_str()) => {}
            Some((line, datum)) => {
                return Err(lines.bad_at(
                    Some(line),
                    Some("depth_datum"),
                    format!("measured depths from \"{}\" are not read", shown(datum)),
                    "give them from the rotary table (or drill floor)",
                ));
            }
        }
        let hole = self.get("hole").map(|(_, name)| Name::new(&shown(name)));
        Ok(Header { hole, tie: self.tie(lines)?, tie_in: self.tie_in(lines)?, unit, north: maker, correction, site })
    }

    fn degrees<R: Read>(&self, lines: &Lines<R>, line: usize, text: &str) -> Result<f64> {
        let digits = text.trim_end_matches("degrees").trim_end_matches("deg").trim_end_matches('°').trim();
        let value =
            number(digits).map_err(|(why, fix)| lines.bad_at(Some(line), Some("north_correction"), why, fix))?;
        if value.abs() > 180.0 {
            return Err(lines.bad_at(
                Some(line),
                Some("north_correction"),
                format!("{value}° is not between -180° and 180°"),
                "write the convergence or declination in degrees, east positive",
            ));
        }
        Ok(value)
    }

    /// A length that carries its unit: "32.4 m".
    fn length<R: Read>(&self, lines: &Lines<R>, key: &str) -> Result<Option<Length>> {
        let Some((line, text)) = self.get(key) else { return Ok(None) };
        let lower = text.to_lowercase();
        let (digits, unit): (&str, fn(f64) -> Length) = match (lower.strip_suffix("ft"), lower.strip_suffix('m')) {
            (Some(digits), _) => (digits, Length::ft),
            (_, Some(digits)) => (digits, Length::m),
            _ => {
                return Err(lines.bad_at(
                    Some(line),
                    Some(key),
                    format!("\"{}\" has no unit", shown(text)),
                    "write the unit after the number, m or ft",
                ));
            }
        };
        let value = number(digits).map_err(|(why, fix)| lines.bad_at(Some(line), Some(key), why, fix))?;
        Ok(Some(unit(value)))
    }

    fn tie<R: Read>(&self, lines: &Lines<R>) -> Result<Option<DatumTie>> {
        let of = |key: &str| -> Result<Option<Length>> { self.length(lines, key) };
        let place = |key: &str, e: Error| {
            lines.bad_at(
                self.get(key).map(|(line, _)| line),
                Some(key),
                e.to_string().trim_end_matches('.'),
                "correct the elevation",
            )
        };
        let (ground, mudline) = (of("ground_above_msl")?, of("mudline_above_msl")?);
        let Some(rotary) = of("rotary_table_above_msl")? else {
            return match (ground, mudline) {
                (None, None) => Ok(None),
                _ => Err(lines.bad(
                    "the file states the level of the ground or mudline and not of the rotary table",
                    "add a line \"# rotary_table_above_msl: … m\" above the column names",
                )),
            };
        };
        let mut tie = DatumTie::rotary_table_at(rotary).map_err(|e| place("rotary_table_above_msl", e))?;
        if let Some(ground) = ground {
            tie = tie.with_ground_at(ground).map_err(|e| place("ground_above_msl", e))?;
        }
        if let Some(mudline) = mudline {
            tie = tie.with_mudline_at(mudline).map_err(|e| place("mudline_above_msl", e))?;
        }
        Ok(Some(tie))
    }

    fn tie_in<R: Read>(&self, lines: &Lines<R>) -> Result<Option<TieIn>> {
        let [north, east, tvd] = [
            self.length(lines, "tie_in_north")?,
            self.length(lines, "tie_in_east")?,
            self.length(lines, "tie_in_tvd")?,
        ];
        match (north, east, tvd) {
            (Some(north), Some(east), Some(tvd)) => Ok(Some(TieIn { north, east, tvd })),
            (None, None, None) => Ok(None),
            _ => {
                Err(lines
                    .bad("the tie-in is not whole", "state tie_in_north, tie_in_east and tie_in_tvd, or none of them"))
            }
        }
    }
}
