//! Reading a set of planes from CSV, strictly and line by line.

use std::collections::HashMap;
use std::io::Read;
use std::path::Path;

use super::set::{Fault, FaultSet, FaultSource, MOST_PLANES, require_name};
use crate::error::Result;
use crate::frames::{DeclaredNorth, NORTH_KEYS, Name, Plane, Site};
use crate::lines::{Column, Expected, Lines, Row, Table, Unit, Units, reason, shown};
use crate::units::{Angle, Pressure};

const EXPECTED: Expected = Expected {
    keys: &[&NORTH_KEYS, &["angle_unit", "cohesion_unit"]],
    always: &[(&["north"], "# north: true | grid | magnetic"), (&["angle_unit"], "# angle_unit: deg")],
    file: "a table of planes with columns name, strike, dip",
    names: "name, strike (or dip_direction), dip",
    besides: &[&["friction", "cohesion"]],
    units_in_names: false,
    rows: ["plane", "planes"],
    most: MOST_PLANES,
    fewer: "keep the planes near the place of interest",
};

const COHESIONS: Units<Pressure> = Units {
    key: "cohesion_unit",
    what: "the unit of its cohesions",
    known: &[("MPa", Pressure::mpa), ("kPa", Pressure::kpa), ("bar", Pressure::bar), ("psi", Pressure::psi)],
    fix: "write MPa, kPa, bar or psi",
};

pub(super) fn read_csv(path: &Path) -> Result<FaultSet> {
    read(Lines::open(path)?, None)
}

impl FaultSet {
    /// Reads a set of planes as [`FaultSet::read_csv`] does, from a file that names its north as grid
    /// or magnetic and not how that lies to true north: the site's convergence or declination then
    /// corrects every strike, and the strikes remember the site. A correction that the file states
    /// itself goes before the site's.
    ///
    /// # Errors
    /// As [`FaultSet::read_csv`], and when the site has no map grid for grid north, or lies outside
    /// the years of the magnetic models for magnetic north.
    pub fn read_csv_at(path: impl AsRef<Path>, site: Site) -> Result<Self> {
        read(Lines::open(path.as_ref())?, Some(site))
    }
}

struct Columns {
    name: Column,
    direction: Column,
    /// Whether the direction is that of dip.
    of_dip: bool,
    dip: Column,
    friction: Option<Column>,
    cohesion: Option<Column>,
}

/// What the file declares above its table.
struct Header {
    north: DeclaredNorth,
    /// A cohesion from a number in the file's unit, where there are cohesions.
    cohesion: Option<Unit<Pressure>>,
}

pub(super) fn read<R: Read>(lines: Lines<R>, site: Option<Site>) -> Result<FaultSet> {
    let mut table = Table::open(lines, &EXPECTED)?;
    let columns = columns(&table)?;
    let header = header(&table, &columns, site)?;
    let mut faults: Vec<Fault> = Vec::new();
    let mut names: HashMap<&'static str, usize> = HashMap::new();
    while let Some(row) = table.next_row()? {
        let fault = fault(&table, &columns, &header, &row, &names)?;
        names.insert(fault.name.text(), table.line());
        faults.push(fault);
    }
    let (path, sha256) = table.source();
    let source = FaultSource::File { path, sha256 };
    FaultSet::build(source, faults).map_err(|e| table.bad_file(reason(&e), "correct the file"))
}

fn columns<R: Read>(table: &Table<R>) -> Result<Columns> {
    let strike = table.column_if_any(&["strike"])?;
    let dip_direction = table.column_if_any(&["dip_direction", "dip_azimuth", "dipdir", "dip_dir"])?;
    let (direction, of_dip) = match (strike, dip_direction) {
        (Some(strike), None) => (strike, false),
        (None, Some(direction)) => (direction, true),
        (None, None) => return Err(table.missing("strike")),
        (Some(_), Some(direction)) => {
            return Err(table.bad_in(
                &direction,
                "the file states both strike and dip direction",
                "keep one of the two columns",
            ));
        }
    };
    Ok(Columns {
        name: table.column(&["name", "fault", "plane"])?,
        direction,
        of_dip,
        dip: table.column(&["dip"])?,
        friction: table.column_if_any(&["friction", "mu", "μ"])?,
        cohesion: table.column_if_any(&["cohesion"])?,
    })
}

fn header<R: Read>(table: &Table<R>, columns: &Columns, site: Option<Site>) -> Result<Header> {
    let declared = table.declared();
    let north = DeclaredNorth::read(declared, site, "strikes", "FaultSet")?;
    declared.require_degrees()?;
    let cohesion = declared.unit_if_any(&COHESIONS)?;
    if let (Some(column), None) = (&columns.cohesion, cohesion) {
        return Err(table.bad_in(
            column,
            "the file does not say the unit of its cohesions",
            "add a line \"# cohesion_unit: MPa\" above the column names",
        ));
    }
    Ok(Header { north, cohesion })
}

fn fault<R: Read>(
    table: &Table<R>,
    columns: &Columns,
    header: &Header,
    row: &Row,
    names: &HashMap<&'static str, usize>,
) -> Result<Fault> {
    let name = table.text(row, &columns.name)?;
    require_name(name).map_err(|(why, fix)| table.bad_in(&columns.name, why, fix))?;
    if let Some(line) = names.get(name) {
        return Err(table.bad_in(
            &columns.name,
            format!("the name \"{}\" stands twice (first in line {line})", shown(name)),
            "give each plane a name of its own",
        ));
    }
    let azimuth = header.north.azimuth_in(table, row, &columns.direction)?;
    let strike = if columns.of_dip { azimuth.turned_by(Angle::deg(-90.0)) } else { azimuth };
    let fix = "give the dip below horizontal in degrees; a plane that dips to the left of its strike has the strike's other end";
    let dip = Angle::deg(table.degrees(row, &columns.dip, [0.0, 90.0], fix)?);
    let own = |column: &Option<Column>, wrong: fn(f64) -> bool, why: &str, fix: &str| {
        let value = table.number_if_any(row, column.as_ref())?;
        match (column, value.filter(|v| wrong(*v))) {
            (Some(column), Some(value)) => Err(table.bad_in(
                column,
                format!("{value} is {why}"),
                format!("give {fix}, or leave it empty to use the one stated for the set"),
            )),
            _ => Ok(value),
        }
    };
    let friction = own(&columns.friction, |f| f <= 0.0, "not greater than zero", "the coefficient of friction")?;
    let cohesion = own(&columns.cohesion, |c| c < 0.0, "negative", "zero or more")?;
    let unit = header.cohesion.unwrap_or(Pressure::mpa);
    Ok(Fault { name: Name::new(name), plane: Plane { strike, dip }, friction, cohesion: cohesion.map(unit) })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::{Quantity, Units};
    use proptest::prelude::*;

    const HEADER: &str = "# north: grid\n# north_correction: -1.5\n# angle_unit: deg\n# cohesion_unit: MPa\n";
    const GOOD: &str = "name,strike,dip\nF-1,40,60\nF-2,215.5,65\n";

    fn parse(text: &str) -> Result<FaultSet> {
        read(Lines::over(text.as_bytes(), "f.csv"), None)
    }
    fn parse_at(text: &str, site: Site) -> Result<FaultSet> {
        read(Lines::over(text.as_bytes(), "f.csv"), Some(site))
    }
    fn with_header(table: &str) -> Result<FaultSet> {
        parse(&format!("{HEADER}{table}"))
    }
    fn refused(text: &str) -> String {
        parse(text).unwrap_err().to_string()
    }
    fn refused_table(table: &str) -> String {
        with_header(table).unwrap_err().to_string()
    }

    #[test]
    fn reads_columns_in_any_order_with_their_declarations() {
        let set = with_header(
            "Dip,Comment,Name,Dip_Direction,Friction,Cohesion\n60,\"a, b\",F-1,130,,\n65,,\"F 2\",10.0,0.45,1.5\n",
        )
        .unwrap();
        let [a, b] = <[Fault; 2]>::try_from(set.faults()).unwrap();
        assert!((a.plane.strike.true_north().unwrap().in_deg() - 38.5).abs() < 1e-12);
        assert_eq!((a.plane.dip, a.friction, a.cohesion), (60.deg(), None, None));
        assert!((b.plane.strike.true_north().unwrap().in_deg() - 278.5).abs() < 1e-12);
        assert_eq!((b.name.text(), b.friction, b.cohesion), ("F 2", Some(0.45), Some(1.5.mpa())));
        let psi = parse(&format!("{}name,strike,dip,cohesion\nA,1,2,100\n", HEADER.replace("MPa", "psi"))).unwrap();
        assert_eq!(psi.faults()[0].cohesion, Some(100.psi()));
    }

    #[test]
    fn the_correction_may_stand_beside_the_north() {
        let bearing = |north: &str| {
            let set = parse(&format!("{north}\n# angle_unit: deg\n{GOOD}")).unwrap();
            set.faults()[0].plane.strike.true_north().unwrap().in_deg()
        };
        let close = |north: &str, want: f64| assert!((bearing(north) - want).abs() < 1e-12, "{north}");
        close("# north: magnetic, declination: 2.5", 42.5);
        close("\"# north: magnetic, declination: 2.5\",,", 42.5);
        close("# north: Magnetic north\n# declination: 2.5 deg", 42.5);
        close("# north: grid, convergence: -1.32,,", 38.68);
        close("# north: grid\n# north_correction: -1.32°", 38.68);
        close("# north: true", 40.0);
        let said = |north: &str| refused(&format!("{north}\n# angle_unit: deg\n{GOOD}"));
        assert!(said("# north: magnetic, 2.5").contains("does not say what it is"));
        assert!(said("# north: magnetic, declination:").contains("has no value"));
        assert!(said("# north: magnetic, convergence: 2.5").contains("state the declination"));
        assert!(said("# north: grid, declination: 2.5").contains("state the convergence"));
        assert!(said("# north: grid, convergence: 2\n# north_correction: 2").contains("keep one of the two"));
        assert!(said("# north: true, declination: 2").contains("need no correction"));
    }

    #[test]
    fn a_site_gives_the_correction_that_the_file_does_not() {
        use crate::card::Explain;
        use crate::faults::FaultStrength;
        use crate::stress::{Horizontals, Stress};
        let site = Site::at(57.2.deg(), 1.8.deg(), "2026-05-01").unwrap();
        let on_grid = site.with_utm(31).unwrap();
        let bare = format!("{HEADER}{GOOD}").replace("# north_correction: -1.5\n", "");
        assert!(refused(&bare).contains("FaultSet::read_csv_at(path, site)?"), "{}", refused(&bare));
        let first = |set: &FaultSet| set.faults()[0].plane.strike.true_north().unwrap().in_deg() - 40.0;
        let by_grid = parse_at(&bare, on_grid).unwrap();
        assert!((first(&by_grid) - on_grid.convergence().unwrap().angle.in_deg()).abs() < 1e-12);
        let magnetic = bare.replace("north: grid", "north: magnetic");
        let by_needle = parse_at(&magnetic, site).unwrap();
        assert!((first(&by_needle) - site.declination().unwrap().angle.in_deg()).abs() < 1e-12);
        let of_dip = parse_at(&magnetic.replace("strike", "dip_direction").replace(",40,", ",130,"), site).unwrap();
        assert!((first(&of_dip) - first(&by_needle)).abs() < 1e-12);
        // A strike remembers the site, so that a card on one plane stands on the site's card too.
        let stress = Stress::from_horizontals(Horizontals {
            sv: 66.9.mpa(),
            sh_max: 58.2.mpa(),
            sh_min: 47.1.mpa(),
            sh_max_azimuth: crate::frames::Azimuth::from_true_north(35.deg()),
        })
        .unwrap();
        let strength = FaultStrength { friction: 0.6, cohesion: 0.mpa() };
        let alone = stress.slip_on(by_needle.faults()[0].plane, strength, 31.mpa()).unwrap();
        let kinds: Vec<String> = alone.upstream().into_iter().map(|c| c.kind).collect();
        assert!(kinds.ends_with(&["magnetic-declination".to_owned(), "azimuth-to-true-north".to_owned()]), "{kinds:?}");
        // The card of the ranking takes the correction from the site's, and is computed again from its record.
        for (set, kind) in [(&by_needle, "magnetic-declination"), (&by_grid, "grid-convergence")] {
            let ranked = set.ranked(&stress, strength, 31.mpa()).unwrap();
            let (card, upstream) = (ranked.card(), ranked.upstream());
            let above = upstream.last().unwrap();
            assert_eq!(above.kind, kind);
            let taken = card.explanation.inputs.iter().any(|i| i.same_value(&above.explanation.results[0]));
            assert!(taken, "{:#?}", card.explanation.inputs);
            assert!(card.passed() && crate::replay::replay(&card).unwrap().agrees());
            let said = card.explanation.notes.join(" ");
            assert!(said.contains("the correction of 57.2° N, 1.8° E on 2026-05-01"), "{said}");
        }
        // The file's own correction goes first, and true north needs none.
        let own = parse_at(&format!("{HEADER}{GOOD}"), on_grid).unwrap();
        assert_eq!(own, parse(&format!("{HEADER}{GOOD}")).unwrap());
        let plain = own.ranked(&stress, strength, 31.mpa()).unwrap();
        assert!(plain.upstream().iter().all(|c| c.kind != "grid-convergence"));
        let straight = bare.replace("north: grid", "north: true");
        assert_eq!(parse_at(&straight, site).unwrap(), parse(&straight).unwrap());
        // A site that cannot say it is refused with file and line.
        let e = parse_at(&bare, site).unwrap_err().to_string();
        assert!(e.starts_with("f.csv, line 1, column \"north\": The site") && e.contains("with_utm(31)"), "{e}");
        let late = Site::at(57.2.deg(), 1.8.deg(), "2035-05-01").unwrap();
        assert!(parse_at(&magnetic, late).unwrap_err().to_string().contains("WMM2025"));
        // The record of many planes holds the site once.
        let many: String = (0..400).map(|k| format!("F{k},{},{}\n", k % 360, k % 91)).collect();
        let set = parse_at(&magnetic.replace("F-1,40,60\n", &many), on_grid).unwrap();
        let sites = |set: &FaultSet| {
            let record = set.ranked(&stress, strength, 31.mpa()).unwrap().card().inputs.text();
            record.matches("latitude").count()
        };
        assert!(sites(&set) > 0 && sites(&set) == sites(&by_grid));
    }

    #[test]
    fn byte_order_mark_carriage_returns_and_spreadsheet_padding_are_accepted() {
        let plain = with_header(GOOD).unwrap();
        let text =
            format!("\u{feff}{HEADER}{GOOD}\n,,\n").replace('\n', "\r\n").replace("north: grid", "north: grid,,");
        assert_eq!(parse(&text).unwrap().faults(), plain.faults());
    }

    #[test]
    fn undeclared_north_or_unit_is_refused() {
        let without = |key: &str, table: &str| {
            let header: String = HEADER.lines().filter(|l| !l.contains(key)).map(|l| format!("{l}\n")).collect();
            parse(&format!("{header}{table}"))
        };
        let said = |key: &str| without(key, GOOD).unwrap_err().to_string();
        assert_eq!(
            said("# north:"),
            "f.csv, line 4: the file does not say from which north its strikes are; add a line \"# north: true | grid | magnetic\" above the column names."
        );
        assert!(said("north_correction").contains("how grid north lies"));
        assert!(said("angle_unit").contains("unit of its angles"));
        assert!(without("cohesion_unit", GOOD).is_ok());
        let table = "name,strike,dip,cohesion\nA,1,2,3\n";
        let unit = without("cohesion_unit", table).unwrap_err().to_string();
        assert!(unit.starts_with("f.csv, line 4, column \"cohesion\": the file does not say the unit"), "{unit}");
        let with = |from: &str, to: &str| refused(&format!("{HEADER}{GOOD}").replace(from, to));
        assert!(with("north: grid", "north: east").contains("is no north"));
        assert!(with("north: grid", "north: magnetic\n# north: grid").contains("declared again"));
        assert!(with("-1.5", "-1,5").contains("decimal comma"));
        assert!(with("-1.5", "999").contains("between -180"));
        assert!(with("angle_unit: deg", "angle_unit: grad").contains("convert them to degrees"));
        assert!(with("unit: MPa", "unit: tsi").contains("write MPa, kPa, bar or psi"));
        assert!(with("unit: MPa", "unit:").contains("has no value"));
        assert!(refused(&format!("{HEADER}{GOOD}# north: true\n")).contains("below the column names"));
    }

    #[test]
    fn every_bad_row_says_where_and_what_to_do() {
        assert_eq!(
            refused_table("name,strike,dip\nA,40,60\nB,41,95\n"),
            "f.csv, line 7, column \"dip\": 95° is not between 0° and 90°; give the dip below horizontal in degrees; a plane that dips to the left of its strike has the strike's other end."
        );
        assert_eq!(
            refused_table("name,strike,dip\nA,40,60\nA,41,61\n"),
            "f.csv, line 7, column \"name\": the name \"A\" stands twice (first in line 6); give each plane a name of its own."
        );
        assert!(refused_table("name,strike,dip\n,40,60\n").contains("name is missing"));
        assert!(refused_table("name,strike,dip\n").contains("no plane"));
        assert!(refused_table("name,strike\nA,1\n").contains("column \"dip\": the column is missing"));
        assert!(refused_table("name,dip\nA,1\n").contains("column \"strike\": the column is missing"));
        assert!(refused_table("strike,dip\n1,1\n").contains("column \"name\": the column is missing"));
        assert!(refused_table("name,strike,dip_direction,dip\nA,1,91,1\n").contains("both strike and dip direction"));
        assert!(refused_table("name,strike,strike,dip\nA,1,1,1\n").contains("two columns"));
        assert!(refused_table("name;strike;dip\nA;1;1\n").contains("not separated by commas"));
        assert!(refused_table("name,strike,dip\nA,40,5,60\n").contains("4 values for 3 columns"));
        assert_eq!(
            refused_table("name,strike,dip\nA,\"40,5\",60\n"),
            "f.csv, line 6, column \"strike\": \"40,5\" has a decimal comma; write decimals with a point."
        );
        assert!(refused_table("name,strike,dip\nA,NE,60\n").contains("\"NE\" is not a number"));
        assert!(refused_table("name,strike,dip\nA,,60\n").contains("value is missing"));
        assert!(refused_table("name,strike,dip\nA,40\n").contains("ends before this column"));
        assert!(refused_table("name,strike,dip\nA,361,60\n").contains("between 0° and 360°"));
        assert!(refused_table("name,strike,dip\nA,40,-1\n").contains("between 0° and 90°"));
        assert!(refused_table("name,strike,dip\nA,NaN,60\n").contains("not a finite number"));
        assert!(refused_table("name,strike,dip,friction\nA,40,60,0\n").contains("not greater than zero"));
        assert!(refused_table("name,strike,dip,friction\nA,40,60,high\n").contains("not a number"));
        assert!(refused_table("name,strike,dip,cohesion\nA,40,60,-1\n").contains("is negative"));
        assert_eq!(refused(""), "f.csv: the file is empty; give a table of planes with columns name, strike, dip.");
        assert!(refused("# north: true\n").contains("holds no table"));
        assert!(FaultSet::read_csv("no/such/file.csv").unwrap_err().to_string().contains("relative to the notebook"));
    }

    #[test]
    fn a_set_without_end_is_refused_in_bounded_memory() {
        let mut text = format!("{HEADER}name,strike,dip\n");
        for k in 0..=MOST_PLANES {
            text.push_str(&format!("F{k},1,1\n"));
        }
        assert!(refused(&text).contains("more than 100000 planes"));
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"), None);
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.\"\\-# :]{0,30}\n){0,12}") {
            let _ = with_header(&format!("name,strike,dip\n{table}"));
            let _ = parse(&table);
        }

        #[test]
        fn what_is_read_is_what_was_written(strike in 0.0..360.0_f64, dip in 0.0..=90.0_f64) {
            let set = parse(&format!("# north: true\n# angle_unit: deg\nname,strike,dip\nA,{strike},{dip}\n")).unwrap();
            prop_assert_eq!(set.faults()[0].plane.dip.si().to_bits(), dip.deg().si().to_bits());
            prop_assert_eq!(set.faults()[0].plane.strike.measured(), strike.deg());
        }
    }
}
