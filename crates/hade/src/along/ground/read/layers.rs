//! Layers by their tops.

use std::io::Read;
use std::path::Path;

use super::rock_columns::{ROCK_DECLARES, ROCK_KEYS, ROCK_MAY_HAVE, RockColumns, together};
use crate::along::ground::ground::MOST;
use crate::along::ground::layer::{Layer, LayerTop, TopPlane};
use crate::error::Result;
use crate::field::{DEPTHS, declared_datum};
use crate::frames::{Datum, DatumTie, Depth, LEVEL_KEYS, NORTH_KEYS, Name, Plane, declared_tie};
use crate::lines::{Column, Expected, Lines, Row, Table, Unit, reason};
use crate::units::{Angle, Length};

const EXPECTED: Expected = Expected {
    keys: &[&["hole", "datum", "depth_datum", "depth_unit"], &ROCK_KEYS, &NORTH_KEYS, &LEVEL_KEYS],
    always: &ROCK_DECLARES,
    file: "a table of layers with the columns layer, top, poisson, tensile_strength, ucs or cohesion, friction_angle",
    names: "layer, top, poisson, tensile_strength, ucs or cohesion, friction_angle",
    besides: &[&["strike", "dip", "north", "east"], &ROCK_MAY_HAVE],
    units_in_names: false,
    rows: ["layer", "layers"],
    most: MOST,
    fewer: "join thin layers of one rock",
};

/// Where a layer begins.
struct TopColumns {
    top: Column,
    /// Strike, dip, north and east of a dipping top.
    plane: Option<[Column; 4]>,
    depth: Unit<Length>,
    datum: Datum,
    tie: Option<DatumTie>,
}

pub(crate) fn read_layers(path: &Path) -> Result<Vec<Layer>> {
    read(Lines::open(path)?)
}

fn read<R: Read>(lines: Lines<R>) -> Result<Vec<Layer>> {
    let mut table = Table::open(lines, &EXPECTED)?;
    let tops = tops(&table)?;
    let rock = RockColumns::of(&table, tops.plane.is_some())?;
    let mut layers: Vec<Layer> = Vec::new();
    let mut deepest: Option<Length> = None;
    while let Some(row) = table.next_row()? {
        let layer = rock.layer(&table, &row, top(&table, &tops, &rock, &row)?)?;
        if layers.iter().any(|other| other.name == layer.name) {
            return Err(table.bad_in(
                &rock.layer,
                format!("the layer {} stands twice", layer.name),
                "give each layer its own name; where the hole enters one again, say so with .with_intervals(…)?",
            ));
        }
        if let LayerTop::Level(top) = layer.top {
            if let Some(above) = deepest.filter(|above| *above >= top.tvd) {
                return Err(table.bad_in(
                    &tops.top,
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

fn tops<R: Read>(table: &Table<R>) -> Result<TopColumns> {
    let declared = table.declared();
    Ok(TopColumns {
        top: table.column(&["top", "tvd"])?,
        plane: together(table, ["strike", "dip", "north", "east"])?,
        depth: declared.unit(&DEPTHS, None)?,
        datum: declared_datum(declared)?,
        tie: declared_tie(declared)?,
    })
}

fn top<R: Read>(table: &Table<R>, tops: &TopColumns, rock: &RockColumns, row: &Row) -> Result<LayerTop> {
    let Some(tvd) = table.number_if_any(row, Some(&tops.top))? else { return Ok(LayerTop::ByMeasuredDepth) };
    let depth = Depth { tvd: (tops.depth)(tvd), below: tops.datum };
    // Tops of a hole whose levels the file states are of that hole, carried over at equal elevation.
    let depth = match tops.tie {
        Some(tie) => tie
            .convert(depth, Datum::MeanSeaLevel)
            .map_err(|e| table.bad_in(&tops.top, reason(&e), "declare the level of that datum"))?,
        None => depth,
    };
    let Some([strike, dip, north, east]) = &tops.plane else { return Ok(LayerTop::Level(depth)) };
    let (Some(dip_here), Some(declared_north)) = (table.number_if_any(row, Some(dip))?, rock.north) else {
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
        north: (tops.depth)(table.number(row, north)?),
        east: (tops.depth)(table.number(row, east)?),
        plane: Plane { strike: declared_north.azimuth_in(table, row, strike)?, dip: Angle::deg(dip_here) },
    }))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::along::ground::layer::InFile;
    use crate::rock::Strength;
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

    const WALLS: &str = "layer,top,poisson,t0,ucs,friction_angle,drawdown,path_min,path_max,wall,biot,sealing,youngs_modulus,thermal_expansion\nshale,1000,0.25,2,28,30,,,,,,,9,12\nsand,2000,0.2,1,40,38,12,0.64,as min,permeable,0.9,,14,11\ncoal,2100,0.3,1,20,30,12,uniaxial,0.4,Partly_sealed,0.8,0.25,,\nlime,2200,0.3,1,90,40,,,,impermeable,1,,,\n";
    const UNITS: &str = "# modulus_unit: GPa\n# expansion_unit: 1e-6/K\n";

    /// Depletion, wall and thermal properties are those that the methods of a layer state.
    #[test]
    fn reads_what_a_layer_may_state_beside_its_rock() {
        use crate::along::{Depletion, MaxPath, MinPath};
        let layers = parse(&format!("{HEADER}{UNITS}{WALLS}")).unwrap();
        let bare = |k: usize| Layer::new(layers[k].name(), layers[k].top, layers[k].rock).unwrap();
        let told = |k: usize| Layer { file: None, in_file: InFile::default(), ..layers[k] };
        let expanding =
            |layer: Layer, e: f64, a: f64| layer.thermal_properties(e.gpa(), (a * 1e-6).per_kelvin()).unwrap();
        assert_eq!(told(0), expanding(bare(0), 9.0, 12.0));
        let drained = Depletion { drawdown: 12.mpa(), sh_min: MinPath::Measured(0.64), sh_max: MaxPath::AsMin };
        let sand = bare(1).depleted(drained).unwrap().permeable(0.9).unwrap();
        assert_eq!(told(1), expanding(sand, 14.0, 11.0));
        let elastic = Depletion { sh_min: MinPath::Uniaxial { biot: 0.8 }, sh_max: MaxPath::Measured(0.4), ..drained };
        assert_eq!(told(2), bare(2).depleted(elastic).unwrap().partly_sealed(0.8, 0.25).unwrap());
        assert_eq!(told(3), bare(3));
        // The file stands for all of it; what is typed afterwards stands for itself.
        assert_eq!(layers[1].items().len(), 1);
        let again = layers[1].depleted(elastic).unwrap().items();
        assert_eq!(again.len(), 4, "{again:?}");
    }

    #[test]
    fn what_a_layer_cannot_state_is_told() {
        let with = |from: &str, to: &str| {
            let text = format!("{HEADER}{UNITS}{WALLS}");
            assert!(text.contains(from), "{from}");
            refused(&text.replacen(from, to, 1))
        };
        assert_eq!(
            with("12,0.64,as min", "12,,as min"),
            "l.csv, line 10, column \"path_min\": the value is missing; fill in drawdown and both paths, or none."
        );
        assert!(with("12,0.64,as min", "12,1.64,as min").contains("line 10: stress path κ of S_hmin is 1.64"));
        assert!(with("12,0.64,as min", "-12,0.64,as min").contains("more than zero"));
        assert!(with("12,0.64,as min", "12,0.64,like").contains("column \"path_max\": \"like\" is not a number"));
        assert!(with("path_max,", "path,").contains("give the columns drawdown, path_min, path_max together"));
        assert!(with("permeable,0.9", "permeable,").contains("line 10: a permeable wall needs Biot's coefficient"));
        assert!(with("Partly_sealed,0.8", "impermeable,").contains("a uniaxial stress path needs Biot's coefficient"));
        assert!(
            with("permeable,0.9", "leaky,0.9")
                .contains("\"leaky\" is no kind of wall that is known here; write impermeable")
        );
        assert!(with("0.8,0.25", "0.8,").contains("how far the wall seals is not stated"));
        assert!(with("0.8,0.25", "0.8,25").contains("line 11: sealing of the wall is 25"));
        assert!(with("permeable,0.9,,", "permeable,0.9,0.5,").contains("not partly sealed"));
        assert!(with("wall,biot", "walls,biot").contains("column \"wall\": the column is missing"));
        assert!(with("# modulus_unit: GPa\n", "").contains("# modulus_unit: GPa | MPa | psi"));
        assert!(with("# expansion_unit: 1e-6/K\n", "").contains("# expansion_unit: 1/K | 1e-6/K"));
        assert!(with(",9,12", ",9,").contains("fill in both values or neither"));
        assert!(with(",9,12", ",0,12").contains("Young's modulus E is 0 MPa"));
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"));
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.()\\[\\]\"\\-# :]{0,40}\n){0,12}") {
            let names = "layer,top,poisson,tensile_strength,ucs,friction_angle,k_min,k_max,sh_max_azimuth,strike,dip,north,east,drawdown,path_min,path_max,wall,biot,sealing,youngs_modulus,thermal_expansion\n";
            let _ = parse(&format!("{HEADER}{UNITS}{names}{table}"));
            let _ = parse(&table);
        }
    }
}
