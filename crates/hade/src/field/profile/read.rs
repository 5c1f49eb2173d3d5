//! Reading one column of pressure or temperature against depth from CSV, strictly and line by line.

use std::io::Read;
use std::path::Path;

use super::about::ProfileSource;
use super::law::Law;
use super::points::{AgainstDepth, Point, Points, require_point};
use super::pressure_profile::PressureProfile;
use crate::error::{Error, Result};
use crate::field::declared::{DEPTHS, PRESSURES, TEMPERATURES, declared_datum};
use crate::frames::{Datum, DatumTie, LEVEL_KEYS, Name, declared_tie};
use crate::lines::{Column, Expected, Lines, Row, Table, Unit, Units, reason, shown, without_unit};
use crate::units::{Length, Temperature};

/// More rows than this are no table by depth but a log.
const MOST_ROWS: usize = 100_000;

const OF_PRESSURE: Expected = Expected {
    keys: &[&["hole", "datum", "depth_datum", "depth_unit", "pressure_unit"], &LEVEL_KEYS],
    always: &[(&["datum", "depth_datum"], "# datum: rotary table"), (&["depth_unit"], "# depth_unit: m")],
    file: "a table with the columns tvd and pressure",
    names: "tvd, pressure",
    besides: &[],
    units_in_names: true,
    rows: ["row", "rows"],
    most: MOST_ROWS,
    fewer: "keep a row every few metres; straight lines run between them",
};

const OF_TEMPERATURE: Expected = Expected {
    keys: &[&["hole", "datum", "depth_datum", "depth_unit", "temperature_unit"], &LEVEL_KEYS],
    file: "a table with the columns tvd and temperature",
    names: "tvd, temperature",
    ..OF_PRESSURE
};

/// What a file says of one column.
pub(super) struct ColumnByDepth<Q> {
    pub points: Points<Q>,
    pub hole: Option<Name>,
    pub tie: Option<DatumTie>,
    pub source: ProfileSource,
}

/// The two columns that are read, and what their numbers are.
struct Columns<Q> {
    depth: Column,
    value: Column,
    depth_unit: Unit<Length>,
    value_unit: Unit<Q>,
    datum: Datum,
}

pub(super) fn read_csv(path: &Path, column: &str) -> Result<PressureProfile> {
    read(Lines::open(path)?, column)
}

fn read<R: Read>(lines: Lines<R>, column: &str) -> Result<PressureProfile> {
    let ColumnByDepth { points, hole, tie, source } = read_column(lines, column, &OF_PRESSURE, &PRESSURES)?;
    Ok(PressureProfile::from_file(Law::Table(points), column, hole, tie, source))
}

/// A column of temperatures.
pub(super) fn temperatures<R: Read>(lines: Lines<R>, column: &str) -> Result<ColumnByDepth<Temperature>> {
    read_column(lines, column, &OF_TEMPERATURE, &TEMPERATURES)
}

fn read_column<R: Read, Q: AgainstDepth>(
    lines: Lines<R>,
    column: &str,
    expected: &'static Expected,
    units: &Units<Q>,
) -> Result<ColumnByDepth<Q>> {
    let mut table = Table::open(lines, expected)?;
    let columns = columns(&table, column, units)?;
    let tie = declared_tie(table.declared())?;
    let mut points: Vec<Point<Q>> = Vec::new();
    while let Some(row) = table.next_row()? {
        points.push(point(&table, &columns, &row, points.last())?);
    }
    if points.len() < 2 {
        return Err(table.bad_file(
            format!("the table has {} rows, and a line needs two", points.len()),
            "add the rows down to the depth of interest",
        ));
    }
    let hole = table.declared().get("hole").map(|name| Name::new(&shown(name)));
    let (path, sha256) = table.source();
    let source = ProfileSource::File { path, sha256, column: columns.value.name };
    Ok(ColumnByDepth { points: Points::new(columns.datum, points)?, hole, tie, source })
}

fn columns<R: Read, Q>(table: &Table<R>, column: &str, units: &Units<Q>) -> Result<Columns<Q>> {
    let depth = table.column_or(
        &["tvd", "true vertical depth", "tvdss"],
        "name the column of true vertical depths tvd (measured depths are converted with a survey first)",
    )?;
    let value = table.column_or(&[without_unit(column)], "ask for one of the columns of the file")?;
    let declared = table.declared();
    let datum = declared_datum(declared)?;
    if table.is_named(&depth, "tvdss") && datum != Datum::MeanSeaLevel {
        return Err(table.bad_in(
            &depth,
            format!("the name says depths below mean sea level, and the file declares {}", datum.words()),
            "name the column tvd, or correct the datum",
        ));
    }
    Ok(Columns {
        depth_unit: declared.unit(&DEPTHS, table.unit_in_name(&depth))?,
        value_unit: declared.unit(units, table.unit_in_name(&value))?,
        depth,
        value,
        datum,
    })
}

fn point<R: Read, Q: AgainstDepth>(
    table: &Table<R>,
    columns: &Columns<Q>,
    row: &Row,
    above: Option<&Point<Q>>,
) -> Result<Point<Q>> {
    let Columns { depth, value, .. } = columns;
    let point = ((columns.depth_unit)(table.number(row, depth)?), (columns.value_unit)(table.number(row, value)?));
    require_point(above.map(|p| p.0), point).map_err(|e| {
        let of_value = matches!(&e, Error::OutOfRange { what, .. } if what.starts_with(Q::KIND));
        table.bad_in(if of_value { value } else { depth }, reason(&e), "correct the row")
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;
    use proptest::prelude::*;

    const HEADER: &str = "# hole: X-1\n# datum: rotary table\n# depth_unit: m\n# pressure_unit: MPa\n# rotary_table_above_msl: 25 m\n# mudline_above_msl: -300 m\n";
    const GOOD: &str = "TVD,Pore_Pressure,sh min\n1000,10.5,15\n2000,21.5,31\n";

    fn parse(text: &str, column: &str) -> Result<PressureProfile> {
        read(Lines::over(text.as_bytes(), "p.csv"), column)
    }
    fn refused(text: &str) -> String {
        parse(text, "pore pressure").unwrap_err().to_string()
    }
    fn refused_table(table: &str) -> String {
        refused(&format!("{HEADER}{table}"))
    }
    fn with(from: &str, to: &str) -> String {
        let text = format!("{HEADER}{GOOD}");
        assert!(text.contains(from), "{from}");
        refused(&text.replacen(from, to, 1))
    }

    #[test]
    fn reads_a_column_with_its_declarations() {
        let text = format!("{HEADER}{GOOD}");
        let profile = parse(&text, "pore_pressure").unwrap();
        assert_eq!((profile.datum(), profile.covers()), (Datum::RotaryTable, (1000.m(), Some(2000.m()))));
        let at = |p: &PressureProfile, z: f64| p.at(crate::frames::Depth::below_rotary_table(z.m())).unwrap().pressure;
        assert_eq!(at(&profile, 1500.0), 16.mpa());
        assert_eq!(at(&parse(&text, "SH_min").unwrap(), 2000.0), 31.mpa());
        // The file's own levels turn a depth below the mudline into one of the table.
        let mudline = crate::frames::Depth::below_mudline(1175.m());
        assert_eq!(profile.at(mudline).unwrap().pressure, 16.mpa());
        // Units in the column names, a byte-order mark, carriage returns, spreadsheet padding.
        let other = "\u{feff}# depth_datum: MSL,,\r\nnote,tvdss (ft),\"pore pressure [psi]\"\r\n\"a, b\",1000,450\r\n,2000,900\r\n,,\r\n";
        let psi = parse(other, "pore pressure").unwrap();
        assert_eq!(psi.datum(), Datum::MeanSeaLevel);
        assert!(
            (at(&psi.tied(crate::frames::DatumTie::rotary_table_at(0.m()).unwrap()).unwrap(), 1500.0 * 0.3048)
                - 675.psi())
            .abs()
                < 1.pa()
        );
    }

    #[test]
    fn an_undeclared_datum_or_unit_is_refused() {
        assert_eq!(
            with("# datum: rotary table\n", ""),
            "p.csv, line 6: the file does not say which level its depths count from; add a line \"# datum: rotary table | mean sea level | ground | mudline\" above the column names."
        );
        assert!(with("datum: rotary table", "datum: sea").contains("is no datum"));
        assert!(with("# hole: X-1", "# depth_datum: mudline").contains("keep one"));
        assert!(with("# depth_unit: m\n", "").contains("does not say its depth unit"));
        assert!(with("# pressure_unit: MPa\n", "").contains("# pressure_unit: MPa | kPa | Pa | bar | psi"));
        assert!(with("pressure_unit: MPa", "pressure_unit: ksc").contains("write one of MPa, kPa"));
        assert!(with("Pore_Pressure", "Pore_Pressure (psi)").contains("keep one of the two"));
        assert!(with("TVD,", "TVDSS,").contains("the name says depths below mean sea level"));
        assert!(with("25 m", "25").contains("has no unit"));
        assert!(with("-300 m", "300 m").contains("above the rotary table"));
        assert!(refused(&format!("{HEADER}{GOOD}# datum: mudline\n")).contains("below the column names"));
    }

    #[test]
    fn every_bad_row_says_where_and_what_to_do() {
        assert_eq!(
            refused_table("tvd,pore pressure\n1000,10\n900,11\n"),
            "p.csv, line 9, column \"tvd\": Depth 900 m: it comes after 1000 m in the table; sort the table by depth; correct the row."
        );
        assert!(refused_table("tvd,pore pressure\n1000,10\n1000,11\n").contains("stands twice"));
        assert!(refused_table("tvd,pore pressure\n1000,10\n").contains("1 rows"));
        assert!(refused_table("md,pore pressure\n1000,10\n").contains("converted with a survey"));
        assert!(refused_table("tvd,pressure\n1000,10\n").contains("column \"pore pressure\": the column is missing"));
        assert!(refused_table("tvd,pore pressure,pore_pressure\n").contains("two columns"));
        assert!(refused_table("tvd;pore pressure\n1000;10\n").contains("not separated by commas"));
        assert!(refused_table("tvd,pore pressure\n1000,10,5\n").contains("3 values for 2 columns"));
        assert!(refused_table("tvd,pore pressure\n1000,\"10,5\"\n").contains("decimal comma"));
        assert!(refused_table("tvd,pore pressure\n1000,\n").contains("value is missing"));
        assert!(refused_table("tvd,pore pressure\n1000\n").contains("ends before this column"));
        assert!(refused_table("tvd,pore pressure\n1000,inf\n").contains("not a finite number"));
        assert!(
            refused_table("tvd,pore pressure\n1000,10500\n")
                .contains("column \"pore pressure\": pressure of the table")
        );
        assert!(refused_table("tvd,pore pressure\n100000,10\n").contains("column \"tvd\": depth of the table"));
        assert!(refused_table("").contains("holds no table"));
        assert_eq!(refused(""), "p.csv: the file is empty; give a table with the columns tvd and pressure.");
        assert!(
            PressureProfile::read_csv("no/file.csv", "p").unwrap_err().to_string().contains("relative to the notebook")
        );
    }

    /// The record of a long file holds the points around the depth, and the ends of the whole.
    #[test]
    fn the_card_of_a_long_file_stays_small_and_replays() {
        use crate::card::Explain;
        let mut text = format!("{HEADER}tvd,pore pressure\n");
        for k in 0..5000 {
            text.push_str(&format!("{},{}\n", k, 0.01 * f64::from(k) + 1e-6 * f64::from(k % 7)));
        }
        let profile = parse(&text, "pore pressure").unwrap();
        for z in [0.0, 0.5, 1234.25, 4998.5, 4999.0] {
            let at = profile.at(crate::frames::Depth::below_rotary_table(z.m())).unwrap();
            let card = at.card();
            assert!(card.inputs.numbers().len() < 450, "{}", card.inputs.numbers().len());
            let again = crate::field::PressureAtDepth::compute(at.inputs()).unwrap();
            assert_eq!(again.card(), card);
            assert!(card.passed(), "{:#?}", card.checks);
        }
        let e = profile.at(crate::frames::Depth::below_rotary_table(5000.m())).unwrap_err().to_string();
        assert!(e.contains("between 0 m and 4999 m"), "{e}");
    }

    #[test]
    fn reads_temperatures_on_either_scale_and_refuses_an_unstated_one() {
        let header = HEADER.replace("pressure_unit: MPa", "temperature_unit: F");
        let read = |text: &str| temperatures(Lines::over(text.as_bytes(), "t.csv"), "ground");
        let column = read(&format!("{header}tvd,ground\n0,50\n1000,212\n")).unwrap();
        assert!((column.points.points[1].1 - 100.celsius()).in_kelvin().abs() < 1e-12);
        assert!((column.points.at(500.m()).unwrap() - 55.celsius()).in_kelvin().abs() < 1e-12);
        let refused = |text: &str| read(text).map(|_| ()).unwrap_err().to_string();
        assert!(
            refused(&format!("{HEADER}tvd,ground\n0,50\n1000,212\n")).contains("# temperature_unit: C | °C | F | °F")
        );
        let named = read(&format!("{}tvd,ground (°C)\n0,5\n10,6\n", HEADER.replace("# pressure_unit: MPa\n", "")));
        assert_eq!(named.unwrap().points.points[1].1, 6.celsius());
        // Kelvin taken for Celsius (a slip of the scale).
        let celsius = header.replace("temperature_unit: F", "temperature_unit: C");
        assert_eq!(
            refused(&format!("{celsius}tvd,ground\n0,5\n1000,1200\n")),
            "t.csv, line 9, column \"ground\": temperature of the table is 1200 °C, but it must be between -60 °C and 600 °C; correct the row."
        );
        assert!(refused(&format!("{celsius}tvd,ground\n0,5\n0,6\n")).contains("keep one temperature for each depth"));
    }

    #[test]
    fn a_table_without_end_is_refused_in_bounded_memory() {
        let mut text = format!("{HEADER}tvd,pore pressure\n");
        for k in 0..=MOST_ROWS {
            text.push_str(&format!("{},1\n", k as f64 * 0.1));
        }
        assert!(refused(&text).contains("more than 100000 rows"));
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"), "p");
            let _ = temperatures(Lines::over(bytes.as_slice(), "x"), "t");
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.()\\[\\]\"\\-# :]{0,30}\n){0,12}") {
            let _ = parse(&format!("{HEADER}tvd,p\n{table}"), "p");
            let _ = parse(&table, "p");
            let of_t = format!("{}tvd,t\n{table}", HEADER.replace("pressure_unit: MPa", "temperature_unit: C"));
            let _ = temperatures(Lines::over(of_t.as_bytes(), "x"), "t");
        }
    }
}
