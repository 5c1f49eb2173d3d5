//! What a survey file declares above its table: north, units, datum, levels.

use std::io::Read;

use super::station::TieIn;
use crate::error::Result;
use crate::frames::{Azimuth, DatumTie, Name, North, Site, declared_tie};
use crate::lines::{Declarations, Lines, number, shown};
use crate::units::{Angle, Length};

/// The keys that mean something; every other `#` line is a remark.
pub(super) const KEYS: [&str; 12] = [
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

/// The declarations as the table needs them; `lines` stands at the column names. What the file does
/// not say of its north a site may.
pub(super) fn settle<R: Read>(declared: &Declarations, lines: &Lines<R>, site: Option<Site>) -> Result<Header> {
    let lacking = |what: &str, write: &str| {
        lines.bad(format!("the file does not say {what}"), format!("add a line \"{write}\" above the column names"))
    };
    let (north_line, north) = declared
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
    let site = site.filter(|_| from != North::True && declared.get("north_correction").is_none());
    let correction = match (declared.get("north_correction"), site) {
        (Some((line, text)), _) => Some(Angle::deg(degrees(lines, line, text)?)),
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
    let lacking_correction = |what: &str, write: &str| {
        lines.bad(
            format!("the file does not say {what}"),
            format!("add a line \"{write}\" above the column names, or read it with Survey::read_csv_at(path, site)?"),
        )
    };
    match (from, correction) {
        (North::True, Some(c)) if c != Angle::default() => {
            return Err(lines.bad_at(
                declared.get("north_correction").map(|(line, _)| line),
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
    let unit = match declared.get("depth_unit") {
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
    match declared.get("angle_unit") {
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
    match declared.get("depth_datum") {
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
    let hole = declared.get("hole").map(|(_, name)| Name::new(&shown(name)));
    Ok(Header {
        hole,
        tie: declared_tie(declared, lines)?,
        tie_in: tie_in(declared, lines)?,
        unit,
        north: maker,
        correction,
        site,
    })
}

fn degrees<R: Read>(lines: &Lines<R>, line: usize, text: &str) -> Result<f64> {
    let digits = text.trim_end_matches("degrees").trim_end_matches("deg").trim_end_matches('°').trim();
    let value = number(digits).map_err(|(why, fix)| lines.bad_at(Some(line), Some("north_correction"), why, fix))?;
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

fn tie_in<R: Read>(declared: &Declarations, lines: &Lines<R>) -> Result<Option<TieIn>> {
    let [north, east, tvd] = [
        declared.length(lines, "tie_in_north")?,
        declared.length(lines, "tie_in_east")?,
        declared.length(lines, "tie_in_tvd")?,
    ];
    match (north, east, tvd) {
        (Some(north), Some(east), Some(tvd)) => Ok(Some(TieIn { north, east, tvd })),
        (None, None, None) => Ok(None),
        _ => {
            Err(lines.bad("the tie-in is not whole", "state tie_in_north, tie_in_east and tie_in_tvd, or none of them"))
        }
    }
}
