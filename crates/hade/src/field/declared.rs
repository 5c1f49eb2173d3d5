//! What tables by depth declare above their columns: units, and the level that depths count from.

use crate::error::Result;
use crate::frames::Datum;
use crate::lines::{Declarations, Units, shown};
use crate::units::{Density, Length, Pressure, Temperature};

/// The units of depths.
pub(crate) const DEPTHS: Units<Length> = Units {
    key: "depth_unit",
    what: "its depth unit",
    known: &[("m", Length::m), ("ft", Length::ft)],
    fix: "write m or ft",
};

/// The units of pressures and stresses.
pub(crate) const PRESSURES: Units<Pressure> = Units {
    key: "pressure_unit",
    what: "its pressure unit",
    known: &[
        ("MPa", Pressure::mpa),
        ("kPa", Pressure::kpa),
        ("Pa", Pressure::pa),
        ("bar", Pressure::bar),
        ("psi", Pressure::psi),
    ],
    fix: "write one of MPa, kPa, Pa, bar, psi",
};

/// The scales of temperature.
pub(crate) const TEMPERATURES: Units<Temperature> = Units {
    key: "temperature_unit",
    what: "its unit of temperature",
    known: &[
        ("C", Temperature::celsius),
        ("°C", Temperature::celsius),
        ("F", Temperature::fahrenheit),
        ("°F", Temperature::fahrenheit),
    ],
    fix: "write C or F",
};

/// The units of mud weights.
pub(crate) const MUD_WEIGHTS: Units<Density> = Units {
    key: "mud_weight_unit",
    what: "the unit of its mud weights",
    known: &[
        ("sg", Density::sg),
        ("kg/m3", Density::kg_m3),
        ("g/cm3", Density::g_cm3),
        ("ppg", Density::ppg),
        ("pcf", Density::pcf),
    ],
    fix: "write one of sg, kg/m3, g/cm3, ppg, pcf",
};

/// Holds the file to measured depths: these count from the rotary table.
pub(crate) fn require_measured_depths(declared: &Declarations) -> Result<()> {
    let datum = declared_datum(declared)?;
    if datum == Datum::RotaryTable {
        return Ok(());
    }
    let key = if declared.get("datum").is_some() { "datum" } else { "depth_datum" };
    Err(declared.bad(
        key,
        format!("measured depths count from the rotary table, and the file declares {}", datum.words()),
        "give the depths along the hole from the rotary table, and write rotary table",
    ))
}

/// The level that the depths of a file count from.
pub(crate) fn declared_datum(declared: &Declarations) -> Result<Datum> {
    let words = "rotary table, mean sea level, ground or mudline";
    let mut found: Option<Datum> = None;
    for key in ["datum", "depth_datum"] {
        let Some(text) = declared.get(key) else { continue };
        let Some(here) = Datum::from_words(text) else {
            let why = format!("\"{}\" is no datum that is known here", shown(text));
            return Err(declared.bad(key, why, format!("write {words}")));
        };
        if let Some(other) = found.filter(|other| *other != here) {
            let why = format!("it says {}, and \"datum\" says {}", here.words(), other.words());
            return Err(declared.bad(key, why, "keep one"));
        }
        found = Some(here);
    }
    found.ok_or_else(|| {
        declared
            .lacking("which level its depths count from", "# datum: rotary table | mean sea level | ground | mudline")
    })
}
