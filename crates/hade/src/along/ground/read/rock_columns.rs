//! The columns of a table of layers that say what a layer is of: rock, stress, depletion, wall.

use std::io::Read;

use crate::along::ground::depletion::{Depletion, MaxPath, MinPath};
use crate::along::ground::layer::{InFile, Layer, LayerTop};
use crate::error::{Error, Result};
use crate::field::PRESSURES;
use crate::frames::DeclaredNorth;
use crate::lines::{Column, Row, Table, Unit, Units, reason, shown};
use crate::rock::{Rock, Strength};
use crate::units::{Angle, Expansion, Pressure};

/// The keys that these columns need, beside those of a north.
pub(super) const ROCK_KEYS: [&str; 4] = ["pressure_unit", "angle_unit", "modulus_unit", "expansion_unit"];

/// What every such file declares.
pub(super) const ROCK_DECLARES: [(&[&str], &str); 4] = [
    (&["datum", "depth_datum"], "# datum: rotary table"),
    (&["depth_unit"], "# depth_unit: m"),
    (&["pressure_unit"], "# pressure_unit: MPa"),
    (&["angle_unit"], "# angle_unit: deg"),
];

/// The columns that may be left out.
pub(super) const ROCK_MAY_HAVE: [&str; 11] = [
    "k_min",
    "k_max",
    "sh_max_azimuth",
    "drawdown",
    "path_min",
    "path_max",
    "wall",
    "biot",
    "sealing",
    "youngs_modulus",
    "thermal_expansion",
];

const MODULI: Units<Pressure> = Units {
    key: "modulus_unit",
    what: "the unit of Young's moduli",
    known: &[("GPa", Pressure::gpa), ("MPa", Pressure::mpa), ("psi", Pressure::psi)],
    fix: "write one of GPa, MPa, psi",
};

const EXPANSIONS: Units<Expansion> = Units {
    key: "expansion_unit",
    what: "the unit of thermal expansion",
    known: &[("1/K", Expansion::per_kelvin), ("1e-6/K", |value| Expansion::per_kelvin(1e-6 * value))],
    fix: "write 1/K or 1e-6/K",
};

/// The columns that were found, and what their numbers are.
pub(super) struct RockColumns {
    pub layer: Column,
    poisson: Column,
    tensile: Column,
    strength: Column,
    /// Whether the strength is stated as cohesion.
    by_cohesion: bool,
    friction: Column,
    ratios: Option<[Column; 2]>,
    azimuth: Option<Column>,
    /// Drawdown, and the paths of S_hmin and S_Hmax.
    depletion: Option<[Column; 3]>,
    wall: Option<Column>,
    sealing: Option<Column>,
    biot: Option<Column>,
    expanding: Option<([Column; 2], Unit<Pressure>, Unit<Expansion>)>,
    pressure: Unit<Pressure>,
    pub north: Option<DeclaredNorth>,
}

/// Columns that stand together or not at all.
pub(super) fn together<R: Read, const N: usize>(table: &Table<R>, names: [&str; N]) -> Result<Option<[Column; N]>> {
    let found = names.iter().map(|name| table.column_if_any(&[name])).collect::<Result<Vec<_>>>()?;
    if found.iter().all(Option::is_none) {
        return Ok(None);
    }
    if let Some((name, _)) = names.iter().zip(&found).find(|(_, column)| column.is_none()) {
        table.column_or(&[name], &format!("give the columns {} together", names.join(", ")))?;
    }
    Ok(<[Column; N]>::try_from(found.into_iter().flatten().collect::<Vec<_>>()).ok())
}

impl RockColumns {
    /// With a north where a column holds azimuths; `norths` says whether some other one does.
    pub fn of<R: Read>(table: &Table<R>, norths: bool) -> Result<Self> {
        let (ucs, cohesion) = (table.column_if_any(&["ucs"])?, table.column_if_any(&["cohesion"])?);
        let (strength, by_cohesion) = match (ucs, cohesion) {
            (Some(_), Some(cohesion)) => {
                return Err(table.bad_in(
                    &cohesion,
                    "the strength is stated as ucs too",
                    "keep one of the two columns",
                ));
            }
            (None, Some(cohesion)) => (cohesion, true),
            (Some(ucs), None) => (ucs, false),
            (None, None) => return Err(table.missing("ucs")),
        };
        let sealing = table.column_if_any(&["sealing"])?;
        let wall = match &sealing {
            Some(_) => Some(table.column_or(&["wall"], "say in it which walls are partly sealed")?),
            None => table.column_if_any(&["wall"])?,
        };
        let declared = table.declared();
        let expanding = match together(table, ["youngs_modulus", "thermal_expansion"])? {
            Some(both) => Some((both, declared.unit(&MODULI, None)?, declared.unit(&EXPANSIONS, None)?)),
            None => None,
        };
        let azimuth = table.column_if_any(&["sh_max_azimuth"])?;
        let columns = RockColumns {
            layer: table.column(&["layer", "name"])?,
            poisson: table.column(&["poisson", "poissons_ratio"])?,
            tensile: table.column(&["tensile_strength", "t0"])?,
            strength,
            by_cohesion,
            friction: table.column(&["friction_angle"])?,
            ratios: together(table, ["k_min", "k_max"])?,
            depletion: together(table, ["drawdown", "path_min", "path_max"])?,
            wall,
            sealing,
            biot: table.column_if_any(&["biot"])?,
            expanding,
            pressure: declared.unit(&PRESSURES, None)?,
            north: match norths || azimuth.is_some() {
                true => Some(DeclaredNorth::read(declared, None, "azimuths", "Survey")?),
                false => None,
            },
            azimuth,
        };
        declared.require_degrees()?;
        Ok(columns)
    }

    /// The layer of a row, from a top down.
    pub fn layer<R: Read>(&self, table: &Table<R>, row: &Row, top: LayerTop) -> Result<Layer> {
        let refused = |e: Error| table.bad(reason(&e), "correct the row");
        let stated = self.pressure(table, row, &self.strength)?;
        let friction = table.degrees(row, &self.friction, [0.0, 90.0], "give the friction angle in degrees")?;
        let strength = match self.by_cohesion {
            true => Strength::mohr_coulomb(stated, Angle::deg(friction)),
            false => Strength::mohr_coulomb_ucs(stated, Angle::deg(friction)),
        };
        let tensile_strength = self.pressure(table, row, &self.tensile)?;
        let rock = Rock { poisson: table.number(row, &self.poisson)?, tensile_strength, strength };
        let mut layer =
            Layer::new(table.text(row, &self.layer)?, top, rock).and_then(Layer::checked).map_err(refused)?;
        if let (Some(column), Some(north)) = (&self.azimuth, self.north)
            && !table.text(row, column)?.is_empty()
        {
            layer = layer.sh_max_towards(north.azimuth_in(table, row, column)?);
        }
        if let Some([min, max]) = all_or_none(table, row, self.ratios.as_ref(), "both ratios or neither")? {
            layer = layer.horizontal_ratios(table.number(row, min)?, table.number(row, max)?).map_err(refused)?;
        }
        if let Some(columns) = all_or_none(table, row, self.depletion.as_ref(), "drawdown and both paths, or none")? {
            layer = layer.depleted(self.depletion(table, row, columns)?).map_err(refused)?;
        }
        if let Some((columns, modulus, expansion)) = &self.expanding
            && let Some([e, alpha]) = all_or_none(table, row, Some(columns), "both values or neither")?
        {
            let (e, alpha) = (modulus(table.number(row, e)?), expansion(table.number(row, alpha)?));
            layer = layer.thermal_properties(e, alpha).map_err(refused)?;
        }
        if let Some([biot, sealing]) = self.seepage(table, row)? {
            layer = layer.partly_sealed(biot, sealing).map_err(refused)?;
        }
        let in_file = InFile {
            azimuth: layer.sh_max_azimuth.is_some(),
            ratios: layer.ratios.is_some(),
            depletion: layer.depletion.is_some(),
            seepage: layer.seepage.is_some(),
            thermal_properties: layer.thermal_properties.is_some(),
        };
        Ok(Layer { in_file, ..layer })
    }

    fn pressure<R: Read>(&self, table: &Table<R>, row: &Row, column: &Column) -> Result<Pressure> {
        table.number(row, column).map(self.pressure)
    }

    fn depletion<R: Read>(&self, table: &Table<R>, row: &Row, [drawdown, min, max]: &[Column; 3]) -> Result<Depletion> {
        let sh_min = match table.text(row, min)?.to_lowercase().as_str() {
            "uniaxial" => MinPath::Uniaxial { biot: self.biot(table, row, "a uniaxial stress path")? },
            _ => MinPath::Measured(table.number(row, min)?),
        };
        let sh_max = match table.text(row, max)?.to_lowercase().replace('_', " ").as_str() {
            "as min" => MaxPath::AsMin,
            _ => MaxPath::Measured(table.number(row, max)?),
        };
        Ok(Depletion { drawdown: self.pressure(table, row, drawdown)?, sh_min, sh_max })
    }

    /// Biot's coefficient and sealing of a wall that fluid passes.
    fn seepage<R: Read>(&self, table: &Table<R>, row: &Row) -> Result<Option<[f64; 2]>> {
        let Some(wall) = &self.wall else { return Ok(None) };
        let words = table.text(row, wall)?.to_lowercase().replace('_', " ");
        let sealing = table.number_if_any(row, self.sealing.as_ref())?;
        match (words.as_str(), sealing) {
            ("" | "impermeable", None) => Ok(None),
            ("permeable", None) => Ok(Some([self.biot(table, row, "a permeable wall")?, 0.0])),
            ("partly sealed", Some(sealing)) => Ok(Some([self.biot(table, row, "a partly sealed wall")?, sealing])),
            ("partly sealed", None) => Err(table.bad_in(
                wall,
                "how far the wall seals is not stated",
                "give the share it holds back, 0 to 1, in the column sealing",
            )),
            ("" | "impermeable" | "permeable", Some(_)) => Err(table.bad_in(
                wall,
                "a sealing is stated, and the wall is not partly sealed",
                "write partly sealed, or leave the sealing empty",
            )),
            _ => Err(table.bad_in(
                wall,
                format!("\"{}\" is no kind of wall that is known here", shown(&words)),
                "write impermeable, permeable or partly sealed",
            )),
        }
    }

    fn biot<R: Read>(&self, table: &Table<R>, row: &Row, of: &str) -> Result<f64> {
        table
            .number_if_any(row, self.biot.as_ref())?
            .ok_or_else(|| table.bad(format!("{of} needs Biot's coefficient"), "give it, 0 to 1, in the column biot"))
    }
}

/// Columns whose cells are all filled, or `None` where all are empty.
fn all_or_none<'a, R: Read, const N: usize>(
    table: &Table<R>,
    row: &Row,
    columns: Option<&'a [Column; N]>,
    fill_in: &str,
) -> Result<Option<&'a [Column; N]>> {
    let Some(columns) = columns else { return Ok(None) };
    let mut empty = Vec::with_capacity(N);
    for column in columns {
        empty.extend(table.text(row, column)?.is_empty().then_some(column));
    }
    match empty.first() {
        None => Ok(Some(columns)),
        Some(_) if empty.len() == N => Ok(None),
        Some(first) => Err(table.bad_in(first, "the value is missing", format!("fill in {fill_in}"))),
    }
}
