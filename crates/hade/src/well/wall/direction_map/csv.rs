//! A map as a table for other programs.

use std::fmt::Write as _;
use std::path::Path;

use super::direction_map::DirectionMap;
use super::map_of::MapOf;
use crate::error::{Error, Result};
use crate::interrupt;
use crate::units::as_typed;

impl DirectionMap {
    /// Every mapped direction as comma-separated values: two lines that say what it is, the names of the columns,
    /// then inclination and azimuth in degrees and the limit in MPa, which is left empty where no pressure is
    /// safe.
    pub fn to_csv(&self) -> String {
        let column = match self.shows() {
            MapOf::LowerShear => "lower_shear_limit_mpa",
            MapOf::UpperShear => "upper_shear_limit_mpa",
            MapOf::Initiation => "initiation_mpa",
            MapOf::Width => "range_width_mpa",
        };
        let mut text = format!(
            "# {}, MPa; impermeable wall; no pressure is safe where it is empty\n# inclination from vertical down, azimuth clockwise from true north\ninclination_deg,azimuth_deg,{column}\n",
            self.shows().words(),
        );
        for (number, value) in self.values.iter().enumerate() {
            if number % self.grid.azimuths == 0 {
                interrupt::check();
            }
            let (inclination, azimuth) = self.grid.direction(number);
            let limit = value.map_or_else(String::new, |p| format!("{}", p.in_mpa()));
            let [i, a] = [inclination, azimuth].map(|angle| as_typed(angle.to_degrees()));
            // Writing to a string does not fail.
            let _ = writeln!(text, "{i},{a},{limit}");
        }
        text
    }

    /// Writes [`to_csv`](DirectionMap::to_csv) to a file. It is written aside and takes the file's place when it
    /// is whole.
    ///
    /// # Errors
    /// When the file cannot be written.
    pub fn write_csv(&self, path: impl AsRef<Path>) -> Result<()> {
        let path = path.as_ref();
        let mut aside = path.as_os_str().to_owned();
        aside.push(format!(".{}.part", std::process::id()));
        let aside = Path::new(&aside);
        let put = std::fs::write(aside, self.to_csv()).and_then(|()| std::fs::rename(aside, path));
        put.map_err(|error| {
            let _ = std::fs::remove_file(aside);
            Error::Unreadable {
                path: path.display().to_string(),
                line: None,
                column: None,
                why: format!("cannot be written ({error})"),
                fix: "name a file in a folder that exists and may be written to".to_owned(),
            }
        })
    }
}
