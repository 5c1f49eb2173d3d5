//! Layers by intervals of measured depth.

use std::io::Read;
use std::path::Path;

use super::rock_columns::{ROCK_DECLARES, ROCK_KEYS, ROCK_MAY_HAVE, RockColumns};
use crate::along::ground::ground::MOST;
use crate::along::ground::layer::{Layer, LayerTop};
use crate::along::ground::layer_intervals::LayerIntervals;
use crate::along::spans::SpanColumns;
use crate::error::Result;
use crate::frames::{NORTH_KEYS, Name};
use crate::lines::{Expected, Lines, Table};
use crate::units::Length;

const EXPECTED: Expected = Expected {
    keys: &[&["hole", "datum", "depth_datum", "depth_unit"], &ROCK_KEYS, &NORTH_KEYS],
    always: &ROCK_DECLARES,
    file: "a table of intervals with the columns from, to, layer, poisson, tensile_strength, ucs or cohesion, friction_angle",
    names: "from, to, layer, poisson, tensile_strength, ucs or cohesion, friction_angle",
    besides: &[&ROCK_MAY_HAVE],
    units_in_names: false,
    rows: ["interval", "intervals"],
    most: MOST,
    fewer: "join neighbouring intervals of one rock",
};

pub(crate) fn read_intervals(path: &Path) -> Result<LayerIntervals> {
    read(Lines::open(path)?)
}

fn read<R: Read>(lines: Lines<R>) -> Result<LayerIntervals> {
    let mut table = Table::open(lines, &EXPECTED)?;
    let spans = SpanColumns::of(&table)?;
    let rock = RockColumns::of(&table, false)?;
    let mut layers: Vec<Layer> = Vec::new();
    let mut intervals: Vec<(Length, Length, Name)> = Vec::new();
    while let Some(row) = table.next_row()? {
        let [from, to] = spans.span(&table, &row, intervals.last().map(|(_, to, _)| *to))?;
        let layer = rock.layer(&table, &row, LayerTop::ByMeasuredDepth)?;
        match layers.iter().find(|known| known.name == layer.name) {
            None => layers.push(layer),
            Some(known) if *known == layer => {}
            Some(_) => {
                return Err(table.bad_in(
                    &rock.layer,
                    format!("the layer {} is stated otherwise further up", layer.name),
                    "state the same of it in each of its intervals, or give it another name",
                ));
            }
        }
        intervals.push((from, to, layer.name));
    }
    let (path, sha256) = table.source();
    let file = [Name::new(&path), Name::new(&sha256)];
    let layers = layers.into_iter().map(|layer| Layer { file: Some(file), ..layer }).collect();
    Ok(LayerIntervals { layers, intervals, file })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rock::Strength;
    use crate::units::Units;
    use proptest::prelude::*;

    const HEADER: &str = "# datum: rotary table\n# depth_unit: m\n# pressure_unit: MPa\n# angle_unit: deg\n";
    const GOOD: &str = "From,To,Layer,Poisson,T0,UCS,Friction_Angle,K_min,K_max\n2950,3100,Tern sand,0.2,1,40,38,0.6,0.75\n3100,3180.5,shale,0.25,2,28,30,0.65,0.8\n3180.5,3300,Tern sand,0.2,1,40,38,0.6,0.75\n";

    fn parse(text: &str) -> Result<LayerIntervals> {
        read(Lines::over(text.as_bytes(), "i.csv"))
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
    fn reads_intervals_with_the_layers_they_name() {
        let read = parse(&format!("{HEADER}{GOOD}")).unwrap();
        assert_eq!(read.layers().iter().map(Layer::name).collect::<Vec<_>>(), ["Tern sand", "shale"]);
        assert_eq!(read.intervals()[1], (3100.m(), 3180.5.m(), "shale"));
        assert_eq!((read.intervals().len(), read.intervals()[2].2), (3, "Tern sand"));
        assert_eq!(read.layers()[0].rock.strength, Strength::mohr_coulomb_ucs(40.mpa(), 38.deg()));
        assert_eq!((read.layers()[1].top, read.layers()[1].ratios), (LayerTop::ByMeasuredDepth, Some([0.65, 0.8])));
        let feet = format!("\u{feff}{HEADER}{GOOD}").replace('\n', "\r\n").replace("unit: m\r", "unit: ft\r");
        assert_eq!(parse(&feet).unwrap().intervals()[0].0, 2950.ft());
    }

    #[test]
    fn bad_files_say_where_and_what_to_do() {
        assert_eq!(
            with("3100,3180.5", "3090,3180.5"),
            "i.csv, line 7, column \"From\": the beginning 3090 m lies above the end of the row before, 3100 m; sort the rows by depth, and let none overlap."
        );
        assert_eq!(
            with("3100,3180.5", "3110,3180.5"),
            "i.csv, line 7, column \"From\": between the end of the row before, 3100 m, and the beginning 3110 m lies a gap; begin each row where the one before ends, or add the row between."
        );
        assert_eq!(
            with("2950,3100", "2950,2950"),
            "i.csv, line 6, column \"To\": the end 2950 m is not below the beginning, 2950 m; give its measured depth further down the hole."
        );
        assert!(
            with("2950,3100", "-1,3100").contains("column \"From\": measured depth -1 is not between 0 and 25000 m")
        );
        assert!(with("2950,3100", "2950,1e300").contains("column \"To\": measured depth 1e300"));
        assert!(with("2950,3100", "\"2950,5\",3100").contains("decimal comma"));
        assert!(
            with("datum: rotary table", "datum: mean sea level")
                .contains("measured depths count from the rotary table")
        );
        assert!(with("# datum: rotary table\n", "").contains("which level its depths count from"));
        assert!(with("# depth_unit: m\n", "").contains("# depth_unit: m | ft"));
        assert!(with("# pressure_unit: MPa\n", "").contains("# pressure_unit"));
        assert!(with("To,", "end,").contains("column \"to\": the column is missing"));
        assert!(
            with("3180.5,3300,Tern sand,0.2", "3180.5,3300,Tern sand,0.3")
                .contains("line 8, column \"Layer\": the layer Tern sand is stated otherwise")
        );
        assert!(with("shale", "").contains("no name"));
        assert!(refused("").contains("the file is empty"));
        let many: String = (0..=MOST).map(|k| format!("{k},{},a,0.2,1,10,30\n", k + 1)).collect();
        let e = refused(&format!("{HEADER}from,to,layer,poisson,t0,ucs,friction_angle\n{many}"));
        assert!(e.contains("more than 200 intervals"), "{e}");
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"));
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.()\\[\\]\"\\-# :]{0,40}\n){0,12}") {
            let names = "from,to,layer,poisson,t0,ucs,friction_angle,k_min,k_max,drawdown,path_min,path_max,wall,biot,sealing\n";
            let _ = parse(&format!("{HEADER}{names}{table}"));
            let _ = parse(&table);
        }
    }
}
