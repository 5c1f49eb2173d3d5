//! Reading a set of planes from CSV, strictly and line by line.

use std::collections::HashMap;
use std::io::Read;
use std::path::Path;

use super::read_header::{Declarations, Header};
use super::set::{Fault, FaultSet, FaultSource, MOST_PLANES, require_name};
use crate::error::{Error, Result};
use crate::frames::{Name, Plane};
use crate::lines::{Lines, number, shown};
use crate::units::{Angle, Pressure};

pub(super) fn read_csv(path: &Path) -> Result<FaultSet> {
    read(Lines::open(path)?)
}

/// The places of the columns, and how many there are.
struct Columns {
    name: usize,
    direction: usize,
    /// Whether the direction is that of dip.
    of_dip: bool,
    dip: usize,
    friction: Option<usize>,
    cohesion: Option<usize>,
    count: usize,
}

pub(super) fn read<R: Read>(mut lines: Lines<R>) -> Result<FaultSet> {
    let mut declared = Declarations::default();
    let mut table: Option<(Columns, Header)> = None;
    let mut faults: Vec<Fault> = Vec::new();
    let mut names: HashMap<&'static str, usize> = HashMap::new();
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
            // It then ends with one too, before the separators that fill the line up.
            let bare = bare.trim_end_matches([',', ';']).trim_end_matches('"');
            declared.take(&lines, bare, table.is_none())?;
            continue;
        }
        let fields = lines.fields(text)?;
        match &table {
            None => {
                let columns = columns(&lines, text, &fields)?;
                let header = declared.settle(&lines)?;
                if columns.cohesion.is_some() && header.cohesion.is_none() {
                    return Err(lines.bad_in(
                        "cohesion",
                        "the file does not say the unit of its cohesions",
                        "add a line \"# cohesion_unit: MPa\" above the column names",
                    ));
                }
                table = Some((columns, header));
            }
            Some((columns, header)) => {
                if faults.len() >= MOST_PLANES {
                    return Err(lines.bad(
                        format!("the file holds more than {MOST_PLANES} planes"),
                        "keep the planes near the place of interest",
                    ));
                }
                let fault = row(&lines, columns, header, &fields, &names)?;
                names.insert(fault.name.text(), lines.number());
                faults.push(fault);
            }
        }
    }
    let whole = |why: &str, fix: &str| lines.bad_at(None, None, why, fix);
    if table.is_none() {
        return Err(match any {
            false => whole("the file is empty", "give a table of planes with columns name, strike, dip"),
            true => whole("the file holds no table", "add the line of column names name,strike,dip and the planes"),
        });
    }
    if faults.is_empty() {
        return Err(whole("the file holds no plane", "add the planes below the column names"));
    }
    let path = lines.path().to_owned();
    let source = FaultSource::File { path: path.clone(), sha256: lines.sha256() };
    FaultSet::build(source, faults).map_err(|e| Error::Unreadable {
        path,
        line: None,
        column: None,
        why: e.to_string().trim_end_matches('.').to_owned(),
        fix: "correct the file".to_owned(),
    })
}

fn columns<R: Read>(lines: &Lines<R>, text: &str, fields: &[String]) -> Result<Columns> {
    if fields.len() == 1 && (text.contains(';') || text.contains('\t')) {
        return Err(lines.bad(
            "the columns are not separated by commas",
            "save the table with commas between columns and points in decimals",
        ));
    }
    let names: Vec<String> = fields.iter().map(|f| f.to_lowercase().replace('_', " ")).collect();
    let perhaps = |wanted: &[&str]| -> Result<Option<usize>> {
        let mut found = names.iter().enumerate().filter(|(_, n)| wanted.contains(&n.as_str())).map(|(i, _)| i);
        match (found.next(), found.next()) {
            (Some(_), Some(_)) => Err(lines.bad_in(
                wanted.first().copied().unwrap_or_default(),
                "two columns have this name",
                "keep one of them",
            )),
            (place, _) => Ok(place),
        }
    };
    let missing = |name: &str| {
        lines.bad_in(
            name,
            format!("the column is missing; there are: {}", shown(&fields.join(", "))),
            "name the columns name, strike (or dip_direction), dip in the first line that does not begin with #",
        )
    };
    let find = |wanted: &[&str]| -> Result<usize> {
        perhaps(wanted)?.ok_or_else(|| missing(wanted.first().copied().unwrap_or_default()))
    };
    let strike = perhaps(&["strike"])?;
    let dip_direction = perhaps(&["dip direction", "dip azimuth", "dipdir", "dip dir"])?;
    let (direction, of_dip) = match (strike, dip_direction) {
        (Some(place), None) => (place, false),
        (None, Some(place)) => (place, true),
        (None, None) => return Err(missing("strike")),
        (Some(_), Some(_)) => {
            return Err(lines.bad_in(
                "dip_direction",
                "the file states both strike and dip direction",
                "keep one of the two columns",
            ));
        }
    };
    Ok(Columns {
        name: find(&["name", "fault", "plane"])?,
        direction,
        of_dip,
        dip: find(&["dip"])?,
        friction: perhaps(&["friction", "mu", "μ"])?,
        cohesion: perhaps(&["cohesion"])?,
        count: fields.len(),
    })
}

fn row<R: Read>(
    lines: &Lines<R>,
    columns: &Columns,
    header: &Header,
    fields: &[String],
    names: &HashMap<&'static str, usize>,
) -> Result<Fault> {
    if fields.len() > columns.count {
        return Err(lines.bad(
            format!("the row has {} values for {} columns", fields.len(), columns.count),
            "write decimals with a point (a decimal comma splits a number in two), and quote texts that hold commas",
        ));
    }
    let text = |place: usize, name: &str| -> Result<&str> {
        fields
            .get(place)
            .map(String::as_str)
            .ok_or_else(|| lines.bad_in(name, "the row ends before this column", "fill the value in or remove the row"))
    };
    let value = |place: usize, name: &str| -> Result<f64> {
        number(text(place, name)?).map_err(|(why, fix)| lines.bad_in(name, why, fix))
    };
    // A value that may be left out.
    let own = |place: Option<usize>, name: &str| -> Result<Option<f64>> {
        match place.and_then(|p| fields.get(p).map(|text| (p, text))) {
            Some((place, text)) if !text.is_empty() => value(place, name).map(Some),
            _ => Ok(None),
        }
    };
    let name = text(columns.name, "name")?;
    require_name(name).map_err(|(why, fix)| lines.bad_in("name", why, fix))?;
    if let Some(line) = names.get(name) {
        return Err(lines.bad_in(
            "name",
            format!("the name \"{}\" stands twice (first in line {line})", shown(name)),
            "give each plane a name of its own",
        ));
    }
    let direction_name = if columns.of_dip { "dip_direction" } else { "strike" };
    let direction = value(columns.direction, direction_name)?;
    if !(-180.0..=360.0).contains(&direction) {
        return Err(lines.bad_in(
            direction_name,
            format!("{direction}° is not between 0° and 360°"),
            "give it clockwise from north in degrees",
        ));
    }
    let dip = value(columns.dip, "dip")?;
    if !(0.0..=90.0).contains(&dip) {
        return Err(lines.bad_in(
            "dip",
            format!("{dip}° is not between 0° and 90°"),
            "give the dip below horizontal in degrees; a plane that dips to the left of its strike has the strike's other end",
        ));
    }
    let friction = own(columns.friction, "friction")?;
    if let Some(friction) = friction.filter(|f| *f <= 0.0) {
        return Err(lines.bad_in(
            "friction",
            format!("{friction} is not greater than zero"),
            "give the coefficient of friction, or leave it empty to use the one stated for the set",
        ));
    }
    let cohesion = own(columns.cohesion, "cohesion")?;
    if let Some(cohesion) = cohesion.filter(|c| *c < 0.0) {
        return Err(lines.bad_in(
            "cohesion",
            format!("{cohesion} is negative"),
            "give zero or more, or leave it empty to use the one stated for the set",
        ));
    }
    let azimuth = header
        .azimuth(direction)
        .map_err(|e| lines.bad_in(direction_name, e.to_string(), "correct the declarations"))?;
    let strike = if columns.of_dip { azimuth.turned_by(Angle::deg(-90.0)) } else { azimuth };
    let unit = header.cohesion.unwrap_or(Pressure::mpa);
    Ok(Fault {
        name: Name::new(name),
        plane: Plane { strike, dip: Angle::deg(dip) },
        friction,
        cohesion: cohesion.map(unit),
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::{Quantity, Units};
    use proptest::prelude::*;

    const HEADER: &str = "# north: grid\n# north_correction: -1.5\n# angle_unit: deg\n# cohesion_unit: MPa\n";
    const GOOD: &str = "name,strike,dip\nF-1,40,60\nF-2,215.5,65\n";

    fn parse(text: &str) -> Result<FaultSet> {
        read(Lines::over(text.as_bytes(), "f.csv"))
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
            let _ = read(Lines::over(bytes.as_slice(), "x"));
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
