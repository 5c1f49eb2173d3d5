//! Reading a survey from CSV, strictly and line by line.

use std::io::Read;
use std::path::Path;

use super::read_header::{Header, KEYS, settle};
use super::station::{Direct, Station, follows};
use super::survey::{MOST_STATIONS, Meta, Survey, SurveySource};
use crate::error::Result;
use crate::frames::Site;
use crate::lines::{Column, Expected, Lines, Row, Table, reason};
use crate::units::{Angle, Length};

const EXPECTED: Expected = Expected {
    keys: KEYS,
    always: &[
        (&["north"], "# north: true | grid | magnetic"),
        (&["depth_datum", "datum"], "# depth_datum: rotary table"),
        (&["depth_unit"], "# depth_unit: m"),
        (&["angle_unit"], "# angle_unit: deg"),
    ],
    file: "a survey with columns md, inclination, azimuth",
    names: "md, inclination, azimuth",
    besides: &[],
    units_in_names: false,
    rows: ["station", "stations"],
    most: MOST_STATIONS,
    fewer: "keep a station every 10 m or so",
};

pub(super) fn read_csv(path: &Path) -> Result<Survey> {
    read(Lines::open(path)?, None)
}

impl Survey {
    /// Reads a survey as [`Survey::read_csv`] does, from a file that names its north as grid or
    /// magnetic and not how that lies to true north: the site's convergence or declination then
    /// corrects every station. A correction that the file states itself goes before the site's.
    ///
    /// # Errors
    /// As [`Survey::read_csv`], and when the site has no map grid for grid north, or lies outside the
    /// years of the magnetic models for magnetic north.
    pub fn read_csv_at(path: impl AsRef<Path>, site: Site) -> Result<Self> {
        read(Lines::open(path.as_ref())?, Some(site))
    }
}

struct Columns {
    md: Column,
    inclination: Column,
    azimuth: Column,
}

pub(super) fn read<R: Read>(lines: Lines<R>, site: Option<Site>) -> Result<Survey> {
    let mut table = Table::open(lines, &EXPECTED)?;
    let columns = Columns {
        md: table.column(&["md", "measured depth"])?,
        inclination: table.column(&["inclination", "incl", "inc"])?,
        azimuth: table.column(&["azimuth", "azi", "az"])?,
    };
    let header = settle(table.declared(), site)?;
    let mut stations: Vec<Station> = Vec::new();
    let mut above: Option<Direct> = None;
    while let Some(row) = table.next_row()? {
        let station = station(&table, &columns, &header, &row)?;
        above = Some(join(&table, &columns, above.as_ref(), &station)?);
        stations.push(station);
    }
    match stations.as_slice() {
        [_] => {
            return Err(table.bad_file(
                "the file holds one station, and a path needs two",
                "add the stations down to the depth of interest",
            ));
        }
        [first, ..] if first.md != Length::default() && header.tie_in.is_none() => {
            return Err(table.bad_file(
                format!("the first station is at measured depth {}, and nothing says where that is", first.md),
                "begin with a station at measured depth 0, or declare tie_in_north, tie_in_east and tie_in_tvd",
            ));
        }
        _ => {}
    }
    let Header { hole, tie, tie_in, .. } = header;
    let (path, sha256) = table.source();
    let source = SurveySource::File { path, sha256 };
    let meta = Meta { hole, source, tie, tie_in_file: tie.is_some(), tie_in, site: header.north.site() };
    Survey::build(stations, meta).map_err(|e| table.bad_file(reason(&e), "correct the file"))
}

fn station<R: Read>(table: &Table<R>, columns: &Columns, header: &Header, row: &Row) -> Result<Station> {
    let md = table.number(row, &columns.md)?;
    if md < 0.0 {
        return Err(table.bad_in(
            &columns.md,
            format!("measured depth {md} is negative"),
            "count it along the hole from the rotary table",
        ));
    }
    let fix = "give the inclination from vertical-down in degrees";
    let inclination = table.degrees(row, &columns.inclination, [0.0, 180.0], fix)?;
    // The survey remembers the site, once for all its stations.
    let azimuth = header.north.azimuth_in(table, row, &columns.azimuth)?.without_site();
    Ok(Station { md: (header.depth)(md), inclination: Angle::deg(inclination), azimuth })
}

/// Holds a station against the one above it.
fn join<R: Read>(table: &Table<R>, columns: &Columns, above: Option<&Direct>, station: &Station) -> Result<Direct> {
    let here = station.direct().map_err(|e| table.bad(reason(&e), "correct the row"))?;
    if let Some(above) = above {
        follows(above, &here).map_err(|(why, fix)| table.bad_in(&columns.md, why, fix))?;
    }
    Ok(here)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;
    use proptest::prelude::*;

    const HEADER: &str = "# hole: X-1\n# north: grid\n# north_correction: -1.5\n# depth_unit: m\n# angle_unit: deg\n# depth_datum: rotary table\n# rotary_table_above_msl: 32.4 m\n";

    fn parse(text: &str) -> Result<Survey> {
        read(Lines::over(text.as_bytes(), "s.csv"), None)
    }
    fn parse_at(text: &str, site: Site) -> Result<Survey> {
        read(Lines::over(text.as_bytes(), "s.csv"), Some(site))
    }
    fn with_header(table: &str) -> Result<Survey> {
        parse(&format!("{HEADER}{table}"))
    }
    fn refused(text: &str) -> String {
        parse(text).unwrap_err().to_string()
    }
    fn refused_table(table: &str) -> String {
        with_header(table).unwrap_err().to_string()
    }

    const GOOD: &str = "md,inclination,azimuth\n0,0,0\n100,1.5,120\n";

    #[test]
    fn reads_columns_in_any_order_with_their_declarations() {
        let survey =
            with_header("Comment, Azimuth ,MD,Inclination\nstart,121.5,0,0\n\"a, b\",121.5,100.5,2\n").unwrap();
        let last = survey.at(100.5.m()).unwrap();
        assert!((last.attitude.azimuth.true_north().unwrap().in_deg() - 120.0).abs() < 1e-12);
        assert_eq!(survey.hole().unwrap().text(), "X-1");
        assert_eq!(survey.tie().unwrap().words(), "rotary table 32.4 m above mean sea level");
        let feet = parse(&format!("{}{GOOD}", HEADER.replace("depth_unit: m", "depth_unit: ft"))).unwrap();
        assert_eq!(feet.last_md(), 100.ft());
    }

    /// From a measured depth to a depth below any level; levels that the file states are its own.
    #[test]
    fn a_measured_depth_becomes_a_depth_below_any_level() {
        use crate::card::{Explain, Standing};
        use crate::frames::{Datum, Depth};
        let header = HEADER.replace("32.4 m\n", "25 m\n# mudline_above_msl: -300 m\n");
        let survey = parse(&format!("{header}md,inclination,azimuth\n0,0,0\n2000,0,120\n")).unwrap();
        let position = survey.at(1000.m()).unwrap();
        let conversion = position.conversion(Datum::Mudline).unwrap();
        assert_eq!(conversion.depth(), Depth::below_mudline(675.m()));
        assert_eq!(conversion.depth(), position.below(Datum::Mudline).unwrap());
        let card = conversion.card();
        assert!(card.passed());
        assert_eq!(card.title(), "TVD 1000 m below the rotary table of X-1 as a depth below the mudline");
        let [depth, levels] = card.explanation.inputs.as_slice() else { panic!("{:?}", card.explanation.inputs) };
        assert!(position.card().explanation.results.iter().any(|r| r.same_value(depth)));
        assert_eq!((levels.standing, levels.shown.as_str()), (Standing::File, "s.csv"));
        assert_eq!(levels.name, "levels of X-1, above mean sea level: rotary table 25 m, mudline -300 m");
        let upstream: Vec<String> = conversion.upstream().into_iter().map(|c| c.kind).collect();
        assert_eq!(upstream, ["survey-position"]);
        assert!(position.conversion(Datum::Ground).unwrap_err().to_string().contains("with_ground_at"));
    }

    #[test]
    fn byte_order_mark_carriage_returns_and_spreadsheet_padding_are_accepted() {
        let plain = with_header(GOOD).unwrap();
        let text =
            format!("\u{feff}{HEADER}{GOOD}\n,,\n").replace('\n', "\r\n").replace("north: grid", "north: grid,,");
        assert_eq!(parse(&text).unwrap().stations(), plain.stations());
    }

    #[test]
    fn undeclared_north_unit_or_datum_is_refused() {
        let without = |key: &str| {
            let header: String = HEADER.lines().filter(|l| !l.contains(key)).map(|l| format!("{l}\n")).collect();
            refused(&format!("{header}{GOOD}"))
        };
        assert!(without("# north:").contains("from which north"), "{}", without("# north:"));
        assert!(without("north_correction").contains("how grid north lies"));
        assert!(
            without("depth_unit")
                .starts_with("s.csv, line 7: the file does not say the unit of its depths; add a line")
        );
        assert!(without("angle_unit").contains("unit of its angles"));
        assert!(without("depth_datum").contains("depths count from"));
        assert!(with_header(GOOD).is_ok());
        let with = |from: &str, to: &str| refused(&format!("{HEADER}{GOOD}").replace(from, to));
        assert!(with("north: grid", "north: east").contains("is no north"));
        assert!(with("north: grid", "north: magnetic\n# north: grid").contains("declared again"));
        assert!(with("north: grid", "north: true").contains("need no correction"));
        assert!(with("-1.5", "-1,5").contains("decimal comma"));
        assert!(with("-1.5", "999").contains("between -180"));
        assert!(with("depth_unit: m", "depth_unit: fathom").contains("write m or ft"));
        assert!(with("depth_unit: m", "depth_unit:").contains("has no value"));
        assert!(with("angle_unit: deg", "angle_unit: grad").contains("convert them to degrees"));
        assert!(with("datum: rotary table", "datum: sea").contains("are not read"));
        assert!(with("32.4 m", "32.4").contains("has no unit"));
        assert!(with("32.4 m", "high m").contains("not a number"));
        assert!(with("# rotary_table", "# ground").contains("not of the rotary table"));
        assert!(with("# hole: X-1", "# tie_in_tvd: 3 m").contains("tie-in is not whole"));
        assert!(with("32.4 m", "32.4 m\n# ground_above_msl: 50 m").contains("above the rotary table"));
        assert!(refused(&format!("{HEADER}{GOOD}# north: true\n")).contains("below the column names"));
    }

    #[test]
    fn the_correction_may_stand_beside_the_north() {
        let own = "# north: grid\n# north_correction: -1.5";
        assert!(HEADER.contains(own));
        let with = |north: &str| parse(&format!("{HEADER}{GOOD}").replace(own, north));
        let close = |north: &str, want: f64| {
            let azimuth = with(north).unwrap().stations()[1].azimuth.true_north().unwrap();
            assert!((azimuth.in_deg() - want).abs() < 1e-12, "{north}");
        };
        close("# north: magnetic, declination: 2.5", 122.5);
        close("\"# north: magnetic, declination: 2.5\",,", 122.5);
        close("# north: Magnetic north\n# declination: 2.5 deg", 122.5);
        close("# north: grid, convergence: -1.32,,", 118.68);
        close("# north: grid, north_correction: -1.32°", 118.68);
        close("# north: true", 120.0);
        let said = |north: &str| with(north).unwrap_err().to_string();
        assert!(said("# north: magnetic, 2.5").contains("does not say what it is"));
        assert!(said("# north: magnetic, convergence: 2.5").contains("state the declination"));
        assert!(said("# north: grid, convergence: 2\n# north_correction: 2").contains("keep one of the two"));
    }

    #[test]
    fn a_site_gives_the_correction_that_the_file_does_not() {
        use crate::card::{Card, Explain};
        let site = Site::at(57.2.deg(), 1.8.deg(), "2026-05-01").unwrap();
        let on_grid = site.with_utm(31).unwrap();
        let bare = format!("{HEADER}{GOOD}").replace("# north_correction: -1.5\n", "");
        assert!(refused(&bare).contains("read_csv_at(path, site)?"), "{}", refused(&bare));
        let last = |survey: &Survey| survey.stations()[1].azimuth.true_north().unwrap().in_deg() - 120.0;
        let by_grid = parse_at(&bare, on_grid).unwrap();
        assert!((last(&by_grid) - on_grid.convergence().unwrap().angle.in_deg()).abs() < 1e-12);
        let magnetic = bare.replace("north: grid", "north: magnetic");
        let by_needle = parse_at(&magnetic, site).unwrap();
        assert!((last(&by_needle) - site.declination().unwrap().angle.in_deg()).abs() < 1e-12);
        // Its cards stand on the site's, and take its correction from there.
        let table = by_needle.table().unwrap();
        for (card, upstream) in [
            (table.card(), table.upstream()),
            (by_needle.at(50.m()).unwrap().card(), by_needle.at(50.m()).unwrap().upstream()),
        ] {
            let [above] = upstream.as_slice() else { panic!("{upstream:#?}") };
            assert_eq!(above.kind, "magnetic-declination");
            let taken = |c: &Card| c.explanation.inputs.iter().any(|i| i.same_value(&above.explanation.results[0]));
            assert!(taken(&card), "{:#?}", card.explanation.inputs);
            assert!(crate::replay::replay(&card).unwrap().agrees());
            let said = serde_json::to_string(&card.explanation.steps).unwrap();
            assert!(said.contains("57.2° N, 1.8° E on 2026-05-01"), "{said}");
        }
        // The file's own correction goes first, and true north needs none.
        let own = parse_at(&format!("{HEADER}{GOOD}"), on_grid).unwrap();
        assert_eq!(own, parse(&format!("{HEADER}{GOOD}")).unwrap());
        assert!(own.table().unwrap().upstream().is_empty());
        let straight = bare.replace("north: grid", "north: true");
        assert_eq!(parse_at(&straight, site).unwrap(), parse(&straight).unwrap());
        // A site that cannot say it is refused with file and line.
        let e = parse_at(&bare, site).unwrap_err().to_string();
        assert!(e.starts_with("s.csv, line 2, column \"north\": The site") && e.contains("with_utm(31)"), "{e}");
        let late = Site::at(57.2.deg(), 1.8.deg(), "2035-05-01").unwrap();
        assert!(parse_at(&magnetic, late).unwrap_err().to_string().contains("WMM2025"));
    }

    #[test]
    fn every_bad_row_says_where_and_what_to_do() {
        assert_eq!(
            refused_table("md,inclination,azimuth\n0,0,0\n200,1,120\n100,1,120\n"),
            "s.csv, line 11, column \"md\": measured depth 100 m comes after 200 m, so the stations are not sorted; sort the stations by measured depth."
        );
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,1,1\n100,1,2\n").contains("stands twice"));
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n").contains("one station"));
        assert!(refused_table("md,inclination,azimuth\n").contains("no station"));
        assert!(refused_table("md,azimuth\n0,0\n").contains("column \"inclination\": the column is missing"));
        assert!(refused_table("md,md,inclination,azimuth\n0,0,0,0\n").contains("two columns"));
        assert!(refused_table("0,0,0\n100,1,2\n").contains("column \"md\": the column is missing"));
        assert!(refused_table("md;inclination;azimuth\n0;0;0\n").contains("not separated by commas"));
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,12,5,120\n").contains("4 values for 3 columns"));
        assert_eq!(
            refused_table("md,inclination,azimuth\n0,0,0\n100,\"12,5\",120\n"),
            "s.csv, line 10, column \"inclination\": \"12,5\" has a decimal comma; write decimals with a point."
        );
        assert!(
            refused_table("md,inclination,azimuth\n0,0,0\n100,twelve,120\n").contains("\"twelve\" is not a number")
        );
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,,120\n").contains("value is missing"));
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,12\n").contains("ends before this column"));
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,181,120\n").contains("between 0° and 180°"));
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,-1,120\n").contains("between 0° and 180°"));
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,1,720\n").contains("between 0° and 360°"));
        assert!(refused_table("md,inclination,azimuth\n0,0,0\n100,NaN,120\n").contains("not a finite number"));
        assert!(refused_table("md,inclination,azimuth\n-5,0,0\n100,1,120\n").contains("is negative"));
        assert!(refused_table("md,inclination,azimuth\n50,0,0\n100,1,120\n").contains("tie_in_tvd"));
        assert_eq!(refused(""), "s.csv: the file is empty; give a survey with columns md, inclination, azimuth.");
        assert!(refused("# north: true\n").contains("holds no table"));
        assert!(Survey::read_csv("no/such/file.csv").unwrap_err().to_string().contains("relative to the notebook"));
    }

    #[test]
    fn a_file_may_begin_below_the_rotary_table() {
        let header = HEADER.replace("# hole: X-1", "# tie_in_north: 1 m\n# tie_in_east: 2 m\n# tie_in_tvd: 49 m");
        let survey = parse(&format!("{header}md,inclination,azimuth\n50,0,0\n100,1,120\n")).unwrap();
        assert_eq!(survey.at(50.m()).unwrap().tvd, 49.m());
        let far = header.replace("tie_in_tvd: 49 m", "tie_in_tvd: 490 m");
        assert!(refused(&format!("{far}md,inclination,azimuth\n50,0,0\n100,1,120\n")).contains("farther than"));
    }

    #[test]
    fn a_survey_without_end_is_refused_in_bounded_memory() {
        let mut text = format!("{HEADER}md,inclination,azimuth\n");
        for k in 0..=MOST_STATIONS {
            text.push_str(&format!("{k},1,1\n"));
        }
        assert!(refused(&text).contains("more than 100000 stations"));
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"), None);
        }

        #[test]
        fn never_panics_on_near_misses(table in "([a-z0-9,;.\"\\-# :]{0,30}\n){0,12}") {
            let _ = with_header(&format!("md,inclination,azimuth\n{table}"));
            let _ = parse(&table);
        }
    }
}
