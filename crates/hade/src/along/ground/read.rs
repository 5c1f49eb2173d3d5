//! Reading layers from CSV, strictly and line by line.

use std::io::Read;
use std::path::Path;

use super::ground::MOST;
use super::layer::{Layer, LayerTop, TopPlane};
use crate::error::{Error, Result};
use crate::field::{DEPTHS, PRESSURES, declared_datum};
use crate::frames::{Datum, DatumTie, DeclaredNorth, Depth, LEVEL_KEYS, NORTH_KEYS, Name, Plane, declared_tie};
use crate::lines::{Column, Expected, Lines, Row, Table, Unit, reason};
use crate::rock::{Rock, Strength};
use crate::units::{Angle, Length, Pressure};

const EXPECTED: Expected = Expected {
    keys: &[&["hole", "datum", "depth_datum", "depth_unit", "pressure_unit", "angle_unit"], &NORTH_KEYS, &LEVEL_KEYS],
    file: "a table of layers with the columns layer, top, poisson, tensile_strength, ucs or cohesion, friction_angle",
    names: "layer, top, poisson, tensile_strength, ucs, friction_angle",
    units_in_names: false,
    rows: ["layer", "layers"],
    most: MOST,
    fewer: "join thin layers of one rock",
};

/// The columns of a dipping top.
struct PlaneColumns {
    strike: Column,
    dip: Column,
    north: Column,
    east: Column,
}

struct Columns {
    layer: Column,
    top: Column,
    poisson: Column,
    tensile: Column,
    strength: Column,
    /// Whether the strength is stated as cohesion.
    by_cohesion: bool,
    friction: Column,
    ratios: Option<[Column; 2]>,
    azimuth: Option<Column>,
    plane: Option<PlaneColumns>,
}

/// What the file declares.
struct Declared {
    depth: Unit<Length>,
    pressure: Unit<Pressure>,
    datum: Datum,
    tie: Option<DatumTie>,
    north: Option<DeclaredNorth>,
}

pub(super) fn read_layers(path: &Path) -> Result<Vec<Layer>> {
    read(Lines::open(path)?)
}

fn read<R: Read>(lines: Lines<R>) -> Result<Vec<Layer>> {
    let mut table = Table::open(lines, &EXPECTED)?;
    let columns = columns(&table)?;
    let declared = declared(&table, &columns)?;
    let mut layers: Vec<Layer> = Vec::new();
    let mut deepest: Option<Length> = None;
    while let Some(row) = table.next_row()? {
        let layer = layer(&table, &columns, &declared, &row)?;
        if layers.iter().any(|other| other.name == layer.name) {
            return Err(table.bad_in(
                &columns.layer,
                format!("the layer {} stands twice", layer.name),
                "give each layer its own name; where the hole enters one again, say so with .with_intervals(…)?",
            ));
        }
        if let LayerTop::Level(top) = layer.top {
            if let Some(above) = deepest.filter(|above| *above >= top.tvd) {
                return Err(table.bad_in(
                    &columns.top,
                    format!("the top {} is not deeper than the one before, {above}", top.tvd),
                    "list the layers from the top down",
                ));
            }
            deepest = Some(top.tvd);
        }
        layers.push(layer);
    }
    let (path, sha256) = table.source();
    let file = Some([Name::new(&path), Name::new(&sha256)]);
    Ok(layers.into_iter().map(|layer| Layer { file, ..layer }).collect())
}

fn columns<R: Read>(table: &Table<R>) -> Result<Columns> {
    let (ucs, cohesion) = (table.column_if_any(&["ucs"])?, table.column_if_any(&["cohesion"])?);
    let (strength, by_cohesion) = match (ucs, cohesion) {
        (Some(_), Some(cohesion)) => {
            return Err(table.bad_in(&cohesion, "the strength is stated as ucs too", "keep one of the two columns"));
        }
        (None, Some(cohesion)) => (cohesion, true),
        (Some(ucs), None) => (ucs, false),
        (None, None) => return Err(table.missing("ucs")),
    };
    let together = |names: &[&str]| -> Result<Option<Vec<Column>>> {
        let found = names.iter().map(|name| table.column_if_any(&[name])).collect::<Result<Vec<_>>>()?;
        if found.iter().all(Option::is_none) {
            return Ok(None);
        }
        let missing = names.iter().zip(&found).find(|(_, column)| column.is_none()).map(|(name, _)| *name);
        match missing {
            Some(name) => {
                table.column_or(&[name], &format!("give the columns {} together", names.join(", "))).map(|_| None)
            }
            None => Ok(Some(found.into_iter().flatten().collect())),
        }
    };
    let ratios = together(&["k_min", "k_max"])?.and_then(|two| <[Column; 2]>::try_from(two).ok());
    let plane = together(&["strike", "dip", "north", "east"])?.and_then(|four| <[Column; 4]>::try_from(four).ok());
    Ok(Columns {
        layer: table.column(&["layer", "name"])?,
        top: table.column(&["top", "tvd"])?,
        poisson: table.column(&["poisson", "poissons_ratio"])?,
        tensile: table.column(&["tensile_strength", "t0"])?,
        strength,
        by_cohesion,
        friction: table.column(&["friction_angle"])?,
        ratios,
        azimuth: table.column_if_any(&["sh_max_azimuth"])?,
        plane: plane.map(|[strike, dip, north, east]| PlaneColumns { strike, dip, north, east }),
    })
}

fn declared<R: Read>(table: &Table<R>, columns: &Columns) -> Result<Declared> {
    let declared = table.declared();
    declared.require_degrees()?;
    let north = match (&columns.azimuth, &columns.plane) {
        (None, None) => None,
        _ => Some(DeclaredNorth::read(declared, None, "azimuths", "Survey")?),
    };
    Ok(Declared {
        depth: declared.unit(&DEPTHS, None)?,
        pressure: declared.unit(&PRESSURES, None)?,
        datum: declared_datum(declared)?,
        tie: declared_tie(declared)?,
        north,
    })
}

fn layer<R: Read>(table: &Table<R>, columns: &Columns, declared: &Declared, row: &Row) -> Result<Layer> {
    let pressure = |column: &Column| table.number(row, column).map(declared.pressure);
    let stated = pressure(&columns.strength)?;
    let friction =
        Angle::deg(table.degrees(row, &columns.friction, [0.0, 90.0], "give the friction angle in degrees")?);
    let strength = if columns.by_cohesion {
        Strength::mohr_coulomb(stated, friction)
    } else {
        Strength::mohr_coulomb_ucs(stated, friction)
    };
    let rock =
        Rock { poisson: table.number(row, &columns.poisson)?, tensile_strength: pressure(&columns.tensile)?, strength };
    let refused = |e: Error| table.bad(reason(&e), "correct the row");
    let name = table.text(row, &columns.layer)?;
    let layer =
        Layer::new(name, top(table, columns, declared, row)?, rock).and_then(Layer::checked).map_err(refused)?;
    let layer = match &columns.azimuth {
        Some(column) if !table.text(row, column)?.is_empty() => match declared.north {
            Some(north) => layer.sh_max_towards(north.azimuth_in(table, row, column)?),
            None => layer,
        },
        _ => layer,
    };
    let Some([min, max]) = &columns.ratios else { return Ok(layer) };
    match [table.number_if_any(row, Some(min))?, table.number_if_any(row, Some(max))?] {
        [None, None] => Ok(layer),
        [Some(least), Some(most)] => layer.horizontal_ratios(least, most).map_err(refused),
        [None, _] => Err(table.bad_in(min, "the value is missing", "fill in both ratios or neither")),
        [_, None] => Err(table.bad_in(max, "the value is missing", "fill in both ratios or neither")),
    }
}

fn top<R: Read>(table: &Table<R>, columns: &Columns, declared: &Declared, row: &Row) -> Result<LayerTop> {
    let Some(tvd) = table.number_if_any(row, Some(&columns.top))? else { return Ok(LayerTop::ByMeasuredDepth) };
    let depth = Depth { tvd: (declared.depth)(tvd), below: declared.datum };
    // Tops of a hole whose levels the file states are of that hole, carried over at equal elevation.
    let depth = match declared.tie {
        Some(tie) => tie
            .convert(depth, Datum::MeanSeaLevel)
            .map_err(|e| table.bad_in(&columns.top, reason(&e), "declare the level of that datum"))?,
        None => depth,
    };
    let Some(PlaneColumns { strike, dip, north, east }) = &columns.plane else { return Ok(LayerTop::Level(depth)) };
    let (Some(dip_here), Some(declared_north)) = (table.number_if_any(row, Some(dip))?, declared.north) else {
        return Ok(LayerTop::Level(depth));
    };
    if !(0.0..=90.0).contains(&dip_here) {
        return Err(table.bad_in(
            dip,
            format!("{dip_here}° is not between 0° and 90°"),
            "give the dip below horizontal",
        ));
    }
    Ok(LayerTop::Plane(TopPlane {
        depth,
        north: (declared.depth)(table.number(row, north)?),
        east: (declared.depth)(table.number(row, east)?),
        plane: Plane { strike: declared_north.azimuth_in(table, row, strike)?, dip: Angle::deg(dip_here) },
    }))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;
    use proptest::prelude::*;

    const HEADER: &str = "# datum: rotary table\n# depth_unit: m\n# pressure_unit: MPa\n# angle_unit: deg\n# north: grid, convergence: -1.5\n";
    const GOOD: &str = "Layer,Top,Poisson,Tensile_Strength,UCS,Friction_Angle,K_min,K_max,SH_max_azimuth,strike,dip,north,east\nUpper shale,1000,0.25,2,28,30,,,,,,,\nTern sand,2000,0.2,1,40,38,0.6,0.75,36.5,90,12,100,-50\nlateral,,0.2,1,40,38,,,,,,,\n";

    fn parse(text: &str) -> Result<Vec<Layer>> {
        read(Lines::over(text.as_bytes(), "l.csv"))
    }
    fn refused(text: &str) -> String {
        parse(text).unwrap_err().to_string()
    }
    fn with(from: &str, to: &str) -> String {
        let text = format!("{HEADER}{GOOD}");
        assert!(text.contains(from), "{from}");
        refused(&text.replacen(from, to, 1))
    }

    #[test]
    fn reads_layers_with_their_declarations() {
        let layers = parse(&format!("{HEADER}{GOOD}")).unwrap();
        assert_eq!(layers.iter().map(Layer::name).collect::<Vec<_>>(), ["Upper shale", "Tern sand", "lateral"]);
        assert_eq!(layers[0].top, LayerTop::Level(Depth::below_rotary_table(1000.m())));
        assert_eq!(layers[0].rock.strength, Strength::mohr_coulomb_ucs(28.mpa(), 30.deg()));
        assert_eq!(layers[2].top, LayerTop::ByMeasuredDepth);
        let LayerTop::Plane(top) = layers[1].top else { panic!("{:?}", layers[1].top) };
        assert_eq!((top.depth.tvd, top.north, top.east), (2000.m(), 100.m(), (-50).m()));
        let north = |azimuth: crate::frames::Azimuth| azimuth.true_north().unwrap().in_deg();
        assert!((north(top.plane.strike) - 88.5).abs() < 1e-12);
        assert!((north(layers[1].sh_max_azimuth.unwrap()) - 35.0).abs() < 1e-12);
        assert_eq!((layers[1].ratios, layers[0].ratios), (Some([0.6, 0.75]), None));
        // Tops of a hole with stated levels are carried over at equal elevation.
        let tied = format!("# rotary_table_above_msl: 32.5 m\n{HEADER}{GOOD}");
        assert_eq!(parse(&tied).unwrap()[0].top, LayerTop::Level(Depth::below_mean_sea_level(967.5.m())));
        let spreadsheet =
            format!("\u{feff}{HEADER}{GOOD}").replace('\n', "\r\n").replace("UCS", "Cohesion").replace("MPa", "psi");
        let cohesion = Strength::mohr_coulomb(28.psi(), 30.deg());
        assert_eq!(parse(&spreadsheet).unwrap()[0].rock.strength, cohesion);
    }

    #[test]
    fn bad_files_say_where_and_what_to_do() {
        assert_eq!(
            with("lateral,,", "lateral,900,"),
            "l.csv, line 9, column \"Top\": the top 900.0 m is not deeper than the one before, 1000.0 m; list the layers from the top down."
        );
        assert!(with("# datum: rotary table\n", "").contains("which level its depths count from"));
        assert!(with("# depth_unit: m\n", "").contains("# depth_unit: m | ft"));
        assert!(with("# pressure_unit: MPa\n", "").contains("# pressure_unit"));
        assert!(with("# angle_unit: deg\n", "").contains("# angle_unit: deg"));
        assert!(with("# north: grid, convergence: -1.5\n", "").contains("from which north"));
        assert!(with("north: grid, convergence: -1.5", "north: magnetic").contains("how magnetic north lies"));
        assert!(with("Friction_Angle", "phi").contains("column \"friction_angle\": the column is missing"));
        assert!(with("UCS", "strength").contains("column \"ucs\": the column is missing"));
        assert!(with("Poisson", "Cohesion").contains("stated as ucs too"));
        assert!(with("K_max", "x").contains("give the columns k_min, k_max together"));
        assert!(with("0.6,0.75", "0.6,").contains("fill in both ratios or neither"));
        assert!(with("0.6,0.75", "0.9,0.75").contains("exchange the two"));
        assert!(with("1000,0.25", "1000,0.75").contains("line 7: Poisson's ratio is 0.75"));
        assert!(with("1000,0.25", "\"1000,5\",0.25").contains("decimal comma"));
        assert!(with("90,12", "90,95").contains("not between 0° and 90°"));
        assert!(with("90,12", "90,88").contains("85°"));
        assert!(with("Tern sand", "Upper shale").contains("stands twice"));
        assert!(with("Upper shale", "").contains("no name"));
        assert!(refused("").contains("the file is empty"));
        assert!(refused(HEADER).contains("holds no table"));
        let many: String = (0..=MOST).map(|k| format!("a{k},{k},0.2,1,10,30\n")).collect();
        let e = refused(&format!("{HEADER}layer,top,poisson,tensile_strength,ucs,friction_angle\n{many}"));
        assert!(e.contains("more than 200 layers"), "{e}");
        assert!(read_layers(Path::new("no/file.csv")).unwrap_err().to_string().contains("relative to the notebook"));
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"));
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.()\\[\\]\"\\-# :]{0,40}\n){0,12}") {
            let names = "layer,top,poisson,tensile_strength,ucs,friction_angle,k_min,k_max,sh_max_azimuth,strike,dip,north,east\n";
            let _ = parse(&format!("{HEADER}{names}{table}"));
            let _ = parse(&table);
        }
    }
}
