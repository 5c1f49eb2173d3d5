//! Reading one column of pressure against depth from CSV, strictly and line by line.

use std::io::Read;
use std::path::Path;

use super::law::{Law, Point, require_point};
use super::pressure_profile::{PressureProfile, ProfileSource};
use crate::error::{Error, Result};
use crate::frames::{Datum, Name, declared_tie};
use crate::lines::{Declarations, Lines, fields, number, shown};
use crate::units::{Length, Pressure};

/// The keys that mean something; every other `#` line is a remark.
const KEYS: [&str; 8] = [
    "hole",
    "datum",
    "depth_datum",
    "depth_unit",
    "pressure_unit",
    "rotary_table_above_msl",
    "ground_above_msl",
    "mudline_above_msl",
];
/// More rows than this are no table of pressures but a log.
const MOST_ROWS: usize = 100_000;

/// Makes a quantity of a number in the unit of the file.
type Unit<Q> = fn(f64) -> Q;

/// The two columns that are read, and what their numbers are.
struct Columns {
    depth: usize,
    pressure: usize,
    /// The column names as messages show them.
    names: [String; 2],
    count: usize,
    depth_unit: Unit<Length>,
    pressure_unit: Unit<Pressure>,
    datum: Datum,
}

pub(super) fn read_csv(path: &Path, column: &str) -> Result<PressureProfile> {
    read(Lines::open(path)?, column)
}

pub(super) fn read<R: Read>(mut lines: Lines<R>, column: &str) -> Result<PressureProfile> {
    let mut declared = Declarations::of(&KEYS);
    let mut table: Option<Columns> = None;
    let mut tie = None;
    let mut points: Vec<Point> = Vec::new();
    let mut any = false;
    while let Some(text) = lines.line()? {
        let text = text.trim();
        any |= !text.is_empty();
        if text.trim_matches([',', ';', ' ', '\t']).is_empty() {
            continue;
        }
        // A spreadsheet may put a remark into quotation marks when it holds a comma.
        let bare = text.trim_start_matches('"');
        if bare.starts_with('#') {
            declared.take(&lines, bare.trim_end_matches('"'), table.is_none())?;
            continue;
        }
        let fields = fields(&lines, text)?;
        let Some(columns) = &table else {
            table = Some(columns(&lines, &declared, text, &fields, column)?);
            tie = declared_tie(&declared, &lines)?;
            continue;
        };
        if points.len() >= MOST_ROWS {
            return Err(lines.bad(
                format!("the file holds more than {MOST_ROWS} rows"),
                "keep a row every few metres; straight lines run between them",
            ));
        }
        points.push(row(&lines, columns, &fields, points.last())?);
    }
    let whole = |why: &str, fix: &str| lines.bad_at(None, None, why, fix);
    let columns = match table {
        Some(columns) => columns,
        None if any => return Err(whole("the file holds no table", "add the line of column names and the rows")),
        None => return Err(whole("the file is empty", "give a table with the columns tvd and pressure")),
    };
    if points.len() < 2 {
        return Err(whole(
            &format!("the table has {} rows, and a line needs two", points.len()),
            "add the rows down to the depth of interest",
        ));
    }
    let hole = declared.get("hole").map(|(_, name)| Name::new(&shown(name)));
    let (path, [_, name]) = (lines.path().to_owned(), columns.names);
    let source = ProfileSource::File { path, sha256: lines.sha256(), column: name };
    Ok(PressureProfile::from_file(Law::table(columns.datum, points)?, column, hole, tie, source))
}

/// A column name without its unit, and the unit: "SHmin (psi)" → "shmin", "psi".
fn heading(text: &str) -> (String, Option<String>) {
    let text = text.trim();
    let open = text.find(['(', '[']);
    let unit = open.and_then(|at| text.get(at + 1..)).and_then(|rest| rest.strip_suffix([')', ']']));
    let name = match (open, unit) {
        (Some(at), Some(_)) => text.get(..at).unwrap_or(text),
        _ => text,
    };
    (name.trim().to_lowercase().replace('_', " "), unit.map(|u| u.trim().to_owned()))
}

fn columns<R: Read>(
    lines: &Lines<R>,
    declared: &Declarations,
    text: &str,
    fields: &[String],
    column: &str,
) -> Result<Columns> {
    if fields.len() == 1 && (text.contains(';') || text.contains('\t')) {
        return Err(lines.bad(
            "the columns are not separated by commas",
            "save the table with commas between columns and points in decimals",
        ));
    }
    let headings: Vec<(String, Option<String>)> = fields.iter().map(|f| heading(f)).collect();
    let find = |wanted: &[&str], fix: String| -> Result<usize> {
        let name = wanted.first().copied().unwrap_or_default();
        let mut found = headings.iter().enumerate().filter(|(_, (n, _))| wanted.contains(&n.as_str())).map(|(i, _)| i);
        match (found.next(), found.next()) {
            (Some(place), None) => Ok(place),
            (Some(_), Some(_)) => Err(lines.bad_in(name, "two columns have this name", "keep one of them")),
            (None, _) => {
                let why = format!("the column is missing; there are: {}", shown(&fields.join(", ")));
                Err(lines.bad_in(name, why, fix))
            }
        }
    };
    let wanted = heading(column).0;
    let depth = find(
        &["tvd", "true vertical depth", "tvdss"],
        "name the column of true vertical depths tvd (measured depths are converted with a survey first)".to_owned(),
    )?;
    let pressure = find(&[wanted.as_str()], "ask for one of the columns of the file".to_owned())?;
    let datum = datum(lines, declared)?;
    let is_subsea = headings.get(depth).is_some_and(|(name, _)| name == "tvdss");
    if is_subsea && datum != Datum::MeanSeaLevel {
        return Err(lines.bad_in(
            "tvdss",
            format!("the name says depths below mean sea level, and the file declares {}", datum.words()),
            "name the column tvd, or correct the datum",
        ));
    }
    let unit_of = |place: usize| headings.get(place).and_then(|(_, unit)| unit.as_deref());
    let name_of = |place: usize| fields.get(place).map(|f| shown(f)).unwrap_or_default();
    Ok(Columns {
        depth,
        pressure,
        names: [name_of(depth), name_of(pressure)],
        count: fields.len(),
        depth_unit: unit(lines, declared, "depth_unit", "m | ft", unit_of(depth), length_unit)?,
        pressure_unit: unit(
            lines,
            declared,
            "pressure_unit",
            "MPa | kPa | Pa | bar | psi",
            unit_of(pressure),
            pressure_unit,
        )?,
        datum,
    })
}

fn length_unit(text: &str) -> Option<Unit<Length>> {
    match text.to_lowercase().as_str() {
        "m" => Some(Length::m),
        "ft" => Some(Length::ft),
        _ => None,
    }
}

fn pressure_unit(text: &str) -> Option<Unit<Pressure>> {
    match text.to_lowercase().as_str() {
        "mpa" => Some(Pressure::mpa),
        "kpa" => Some(Pressure::kpa),
        "pa" => Some(Pressure::pa),
        "bar" => Some(Pressure::bar),
        "psi" => Some(Pressure::psi),
        _ => None,
    }
}

/// The unit of a column: from its name, or declared for the file; the two must not differ.
fn unit<R: Read, Q>(
    lines: &Lines<R>,
    declared: &Declarations,
    key: &'static str,
    known: &str,
    in_name: Option<&str>,
    of: fn(&str) -> Option<Unit<Q>>,
) -> Result<Unit<Q>> {
    let choose = known.replace(" |", ",");
    let read = |line: usize, text: &str| {
        of(text).ok_or_else(|| {
            let why = format!("\"{}\" is no unit that is known here", shown(text));
            lines.bad_at(Some(line), Some(key), why, format!("write one of {choose}"))
        })
    };
    match (in_name, declared.get(key)) {
        (None, None) => Err(lines.bad(
            format!("the file does not say its {}", key.replace('_', " ")),
            format!("add a line \"# {key}: {known}\" above the column names"),
        )),
        (Some(name), Some((line, text))) if !name.eq_ignore_ascii_case(text) => Err(lines.bad_at(
            Some(line),
            Some(key),
            format!("\"{}\" is declared, and the column name says \"{}\"", shown(text), shown(name)),
            "keep one of the two",
        )),
        (_, Some((line, text))) => read(line, text),
        (Some(name), None) => read(lines.number(), name),
    }
}

fn datum<R: Read>(lines: &Lines<R>, declared: &Declarations) -> Result<Datum> {
    let words = "rotary table, mean sea level, ground or mudline";
    let stated = [("datum", declared.get("datum")), ("depth_datum", declared.get("depth_datum"))];
    let mut found: Option<Datum> = None;
    for (key, entry) in stated {
        let Some((line, text)) = entry else { continue };
        let bad = |why: String, fix: &str| Err(lines.bad_at(Some(line), Some(key), why, fix));
        match (Datum::from_words(text), found) {
            (None, _) => {
                return bad(format!("\"{}\" is no datum that is known here", shown(text)), &format!("write {words}"));
            }
            (Some(here), Some(other)) if here != other => {
                return bad(format!("it says {}, and \"datum\" says {}", here.words(), other.words()), "keep one");
            }
            (here, _) => found = here,
        }
    }
    found.ok_or_else(|| {
        lines.bad(
            "the file does not say which level its depths count from",
            format!("declare it with a line \"# datum: …\" above the column names: {words}"),
        )
    })
}

fn row<R: Read>(lines: &Lines<R>, columns: &Columns, fields: &[String], above: Option<&Point>) -> Result<Point> {
    if fields.len() > columns.count {
        return Err(lines.bad(
            format!("the row has {} values for {} columns", fields.len(), columns.count),
            "write decimals with a point (a decimal comma splits a number in two), and quote texts that hold commas",
        ));
    }
    let [depth, pressure] = &columns.names;
    let value = |place: usize, name: &str| -> Result<f64> {
        let Some(text) = fields.get(place) else {
            return Err(lines.bad_in(name, "the row ends before this column", "fill the value in or remove the row"));
        };
        number(text).map_err(|(why, fix)| lines.bad_in(name, why, fix))
    };
    let point = (
        (columns.depth_unit)(value(columns.depth, depth)?),
        (columns.pressure_unit)(value(columns.pressure, pressure)?),
    );
    require_point(above.map(|p| p.0), point).map_err(|e| {
        let name =
            if matches!(&e, Error::OutOfRange { what, .. } if what.starts_with("pressure")) { pressure } else { depth };
        lines.bad_in(name, e.to_string().trim_end_matches('.'), "correct the row")
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
            "p.csv, line 6: the file does not say which level its depths count from; declare it with a line \"# datum: …\" above the column names: rotary table, mean sea level, ground or mudline."
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
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.()\\[\\]\"\\-# :]{0,30}\n){0,12}") {
            let _ = parse(&format!("{HEADER}tvd,p\n{table}"), "p");
            let _ = parse(&table, "p");
        }
    }
}
