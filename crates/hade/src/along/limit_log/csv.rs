//! The whole log as a CSV file.

use std::path::Path;

use super::limit_log::LimitLog;
use super::row::LogRow;
use crate::error::{Error, Result};
use crate::units::{Length, Pressure, Quantity};
use crate::well::GovernedPressure;

const COLUMNS: [&str; 19] = [
    "md",
    "tvd",
    "layer",
    "depleted",
    "sv",
    "sh_max",
    "sh_min",
    "pore",
    "least_stress",
    "lower_shear",
    "initiation",
    "upper_shear",
    "bottom",
    "bottom_governed_by",
    "top",
    "top_governed_by",
    "bottom_mud_weight",
    "top_mud_weight",
    "warming",
];

impl LimitLog {
    /// Writes every depth as a CSV file with full figures: depths in metres, pressures in MPa, mud
    /// weights in sg, the warming of the wall in K, empty where there is none. The file is written aside and renamed,
    /// so that none is ever half written.
    ///
    /// # Errors
    /// When the file cannot be written.
    pub fn write_csv(&self, path: impl AsRef<Path>) -> Result<()> {
        let path = path.as_ref();
        let mut aside = path.as_os_str().to_owned();
        aside.push(format!(".{}.part", std::process::id()));
        let aside = Path::new(&aside);
        let written = self.text().and_then(|text| std::fs::write(aside, text).map_err(|e| e.to_string()));
        let done = written.and_then(|()| std::fs::rename(aside, path).map_err(|e| e.to_string()));
        done.map_err(|why| {
            // What is half done is no file of anybody's.
            let _ = std::fs::remove_file(aside);
            Error::Unreadable {
                path: path.display().to_string(),
                line: None,
                column: None,
                why: format!("it cannot be written ({why})"),
                fix: "give a path in a folder that exists and may be written to".to_owned(),
            }
        })
    }

    fn text(&self) -> std::result::Result<Vec<u8>, String> {
        let declared = format!(
            "# hole: {}\n# depth_datum: rotary table\n# depth_unit: m\n# pressure_unit: MPa\n# mud_weight_unit: sg\n# warming_unit: K\n# allowed width of a failing arc, per lobe: {}\n# margin at the bottom: {}, at the top: {}\n",
            self.hole().replace(['\r', '\n'], " "),
            crate::units::with_typed_unit(self.choices.allowed_width),
            crate::units::with_typed_unit(self.choices.margin_bottom),
            crate::units::with_typed_unit(self.choices.margin_top),
        );
        let mut writer = csv::Writer::from_writer(declared.into_bytes());
        writer.write_record(COLUMNS).map_err(|e| e.to_string())?;
        for row in self.rows() {
            writer.write_record(cells(&row)).map_err(|e| e.to_string())?;
        }
        writer.into_inner().map_err(|e| e.to_string())
    }
}

fn cells(row: &LogRow) -> [String; 19] {
    let m = |depth: Length| depth.si().to_string();
    let mpa = |pressure: Pressure| pressure.in_mpa().to_string();
    let some = |pressure: Option<Pressure>| pressure.map(mpa).unwrap_or_default();
    let pressure = |end: Option<GovernedPressure>| some(end.map(|end| end.pressure));
    let governed =
        |end: Option<GovernedPressure>| end.map(|end| end.governed_by.short().to_owned()).unwrap_or_default();
    let weight = |end: Option<GovernedPressure>| {
        end.map(|end| row.mud_weight(end.pressure).in_sg().to_string()).unwrap_or_default()
    };
    [
        m(row.md),
        m(row.tvd),
        row.layer().to_owned(),
        if row.depleted { "yes" } else { "no" }.to_owned(),
        mpa(row.sv),
        mpa(row.sh_max),
        mpa(row.sh_min),
        mpa(row.pore),
        mpa(row.least_stress),
        some(row.lower_shear),
        some(row.initiation),
        some(row.upper_shear),
        pressure(row.bottom),
        governed(row.bottom),
        pressure(row.top),
        governed(row.top),
        weight(row.bottom),
        weight(row.top),
        row.warming.map(|warming| warming.in_kelvin().to_string()).unwrap_or_default(),
    ]
}
