//! The readers of CSV files read the same spellings, and say the same of the same mistake.
#![cfg(test)]

use crate::along::{DrillingEvents, Ground, HoleSection};
use crate::faults::FaultSet;
use crate::field::{PressureProfile, TemperatureProfile};
use crate::frames::Site;
use crate::well::Survey;

/// A file that a reader reads. Its last column holds the numbers that are spoiled.
struct Sample {
    declared: &'static str,
    names: &'static str,
    rows: [&'static str; 2],
    /// The last key declared, and the last column.
    last: [&'static str; 2],
}

const SAMPLES: [Sample; 8] = [
    Sample {
        declared: "# north: magnetic, declination: 2.5\n# angle_unit: deg\n# depth_datum: rotary table\n# depth_unit: m\n",
        names: "MD,Azimuth,Inclination",
        rows: ["0,0,0", "100,1,1"],
        last: ["depth_unit", "Inclination"],
    },
    Sample {
        declared: "# north: magnetic, declination: 2.5\n# a remark\n#\n# angle_unit: deg\n",
        names: "Name,Strike,Dip",
        rows: ["A,0,0", "B,1,1"],
        last: ["angle_unit", "Dip"],
    },
    Sample {
        declared: "# depth_unit: m\n# a remark\n# datum: mean sea level, pressure_unit: MPa\n# hole: X\n",
        names: "tvd,note,P",
        rows: ["0,x,0", "100,y,1"],
        last: ["hole", "P"],
    },
    Sample {
        declared: "# depth_datum: rotary table\n# a remark\n# mud_weight_unit: sg\n# depth_unit: m\n",
        names: "MD,Kind,Mud_Weight",
        rows: ["0,gain,1", "100,losses,1"],
        last: ["depth_unit", "Mud_Weight"],
    },
    Sample {
        declared: "# depth_unit: m\n# a remark\n# datum: ground, temperature_unit: C\n# hole: X\n",
        names: "note,tvd,Ground",
        rows: ["x,0,0", "y,100,1"],
        last: ["hole", "Ground"],
    },
    Sample {
        declared: "# depth_unit: m\n# a remark\n# datum: mean sea level, angle_unit: deg\n# pressure_unit: MPa\n",
        names: "Layer,Top,Poisson,T0,UCS,Friction_Angle",
        rows: ["A,0,0.2,1,10,0", "B,100,0.2,1,10,1"],
        last: ["pressure_unit", "Friction_Angle"],
    },
    Sample {
        declared: "# depth_unit: m\n# a remark\n# datum: rotary table, angle_unit: deg\n# pressure_unit: MPa\n",
        names: "From,To,Layer,Poisson,T0,Friction_Angle,UCS",
        rows: ["0,100,A,0.2,1,30,0", "100,200,B,0.2,1,30,1"],
        last: ["pressure_unit", "UCS"],
    },
    Sample {
        declared: "# mud_weight_unit: sg\n# a remark\n# depth_unit: m\n# datum: rotary table\n",
        names: "Section,Mud_Weight,From,To",
        rows: ["A,1.3,0,0.5", "B,1.3,0.5,1"],
        last: ["datum", "To"],
    },
];

/// What each reader says of a text, with the words that are its own made common ones. All samples
/// declare in four lines.
fn said(samples: &[Sample], site: Option<Site>, text: impl Fn(&Sample) -> String) -> Vec<String> {
    // One file for each call, so that tests may run side by side.
    static CALLS: std::sync::atomic::AtomicUsize = std::sync::atomic::AtomicUsize::new(0);
    let call = CALLS.fetch_add(1, std::sync::atomic::Ordering::Relaxed);
    let path = std::env::temp_dir().join(format!("hade-readers-{}-{call}.csv", std::process::id()));
    let read = |sample: &Sample| {
        std::fs::write(&path, text(sample)).unwrap();
        let result = match (sample.last[1], site) {
            ("Inclination", None) => Survey::read_csv(&path).map(|_| ()),
            ("Inclination", Some(site)) => Survey::read_csv_at(&path, site).map(|_| ()),
            ("Dip", None) => FaultSet::read_csv(&path).map(|_| ()),
            ("Dip", Some(site)) => FaultSet::read_csv_at(&path, site).map(|_| ()),
            ("Mud_Weight", _) => DrillingEvents::read_csv(&path).map(|_| ()),
            ("Ground", _) => TemperatureProfile::read_csv(&path, "Ground").map(|_| ()),
            ("Friction_Angle", _) => Ground::read_layers(&path).map(|_| ()),
            ("UCS", _) => Ground::read_intervals(&path).map(|_| ()),
            ("To", _) => HoleSection::read_csv(&path).map(|_| ()),
            _ => PressureProfile::read_csv(&path, "P").map(|_| ()),
        };
        let mut said = result.map_or_else(|e| e.to_string(), |()| "read".to_owned());
        let lower = sample.last[1].to_lowercase();
        let columns = sample.names.split(',').count();
        for (own, common) in [
            (path.to_str().unwrap(), "t.csv"),
            (&format!("\"{}\"", sample.last[0]), "KEY"),
            (&format!("column \"{}\"", sample.last[1]), "column"),
            (&format!("column \"{lower}\""), "column"),
            (&format!("{} values for {columns} columns", columns + 1), "4 values for 3 columns"),
            ("station", "row"),
            ("plane", "row"),
            ("event", "row"),
            ("layer", "row"),
            ("interval", "row"),
            ("section", "row"),
            ("its strikes", "its azimuths"),
            ("FaultSet::", "Survey::"),
        ] {
            said = said.replace(own, common);
        }
        said
    };
    let all = samples.iter().map(read).collect();
    std::fs::remove_file(&path).unwrap();
    all
}

/// Every reader says these words; "…" at the end stands for what is its own.
fn all_say(words: &str, text: impl Fn(&Sample) -> String) {
    let said = said(&SAMPLES, None, text);
    let same = |s: &String| words.strip_suffix('…').map_or(s == words, |begin| s.starts_with(begin));
    assert!(said.iter().all(same), "{words}\n{said:#?}");
}

fn table(declared: &str, names: &str, [a, b]: [&str; 2]) -> String {
    format!("{declared}{names}\n{a}\n{b}\n")
}
fn whole(s: &Sample) -> String {
    table(s.declared, s.names, s.rows)
}
/// With another cell at the end of the second row.
fn with_cell(s: &Sample, cell: &str) -> String {
    whole(s).replace(s.rows[1], s.rows[1].strip_suffix('1').unwrap()).trim_end().to_owned() + cell + "\n"
}

#[test]
fn every_reader_reads_the_same_spellings() {
    all_say("read", whole);
    all_say("read", |s| format!("\u{feff}{}", whole(s).replace('\n', "\r\n")));
    // As a spreadsheet saves it again.
    all_say("read", |s| {
        let declared: String = s.declared.lines().map(|l| format!("\"{l}\",,\n")).collect();
        format!("{}\n,,\n \n", table(&declared, s.names, s.rows))
    });
    all_say("read", |s| whole(s).replace('\n', "\n# a remark: any\n"));
    all_say("read", |s| with_cell(s, "\" 1.0 \""));
    all_say("read", |s| table(&s.declared.to_uppercase().replace(", ", "\n# "), &s.names.to_uppercase(), s.rows));
    all_say("read", |s| {
        let one_line = s.declared.replace("# a remark\n", "").replace("#\n", "").trim_end().replace("\n#", ",");
        table(&format!("{one_line}\n"), s.names, s.rows)
    });
}

#[test]
fn every_reader_says_the_same_of_a_bad_declaration() {
    let last = |s: &Sample| s.declared.lines().last().unwrap().to_owned() + "\n";
    all_say("t.csv, line 5: KEY is declared again (first in line 4); keep one of the two.", |s| {
        table(&format!("{}{}", s.declared, last(s)), s.names, s.rows)
    });
    all_say("t.csv, line 4: KEY has no value; write the value after the colon.", |s| {
        let bare = format!("# {}:,,\n", s.last[0]);
        table(&s.declared.replace(&last(s), &bare), s.names, s.rows)
    });
    let below = "t.csv, line 8: KEY is declared below the column names; move every declaration above the column names.";
    all_say(below, |s| whole(s) + &last(s));
}

#[test]
fn every_reader_says_the_same_of_a_bad_table() {
    let named = |s: &Sample, names: &str| table(s.declared, names, s.rows);
    all_say("t.csv: the file is empty; give a…", |_| "\n\r\n".to_owned());
    all_say("t.csv: the file holds no table; add the line of column names (…", |s| s.declared.to_owned());
    all_say("t.csv: the file holds no row; add the rows below the column names.", |s| {
        format!("{}{}\n", s.declared, s.names)
    });
    all_say("t.csv, line 5, column: the column is missing; there are: …", |s| {
        named(s, &s.names.replace(s.last[1], "x"))
    });
    all_say("t.csv, line 5, column: two columns have this name; keep one of them.", |s| {
        named(s, &format!("{},{}", s.names, s.last[1]))
    });
    all_say(
        "t.csv, line 5: the columns are not separated by commas; save the table with commas between columns and points in decimals.",
        |s| whole(s).replace(',', ";").replace("; ", ", "),
    );
    for (cell, words) in [
        ("\"1,5\"", ", column: \"1,5\" has a decimal comma; write decimals with a point."),
        ("one", ", column: \"one\" is not a number; write a number, with a decimal point."),
        ("NaN", ", column: \"NaN\" is not a finite number; leave such rows out."),
        ("", ", column: the value is missing; fill it in or remove the row."),
        (
            "1,5",
            ": the row has 4 values for 3 columns; write decimals with a point (a decimal comma splits a number in two), and quote texts that hold commas.",
        ),
    ] {
        all_say(&format!("t.csv, line 7{words}"), |s| with_cell(s, cell));
    }
    all_say("t.csv, line 7, column: the row ends before this column; fill the value in or remove the row.", |s| {
        with_cell(s, "").trim_end().trim_end_matches(',').to_owned()
    });
}

/// A survey and a set of planes declare a north.
#[test]
fn a_bad_north_is_told_in_the_same_words() {
    let site = Site::at(crate::units::Angle::deg(57.2), crate::units::Angle::deg(1.8), "2026-05-01").unwrap();
    let with_norths = &SAMPLES[..2];
    for (north, words) in [
        ("", ", line 4: the file does not say from which north its azimuths are; add a line …"),
        ("# north: east\n", ", line 1, column \"north\": \"east\" is no north; write true, grid or magnetic."),
        ("# north: grid, -1.5\n", ", line 1, column \"north\": \"-1.5\" does not say what it is; write …"),
        (
            "# north: magnetic\n",
            ", line 5: the file does not say how magnetic north lies to true north; add a line \"# north_correction: <declination in degrees, east positive>\" above the column names, or read it with Survey::read_csv_at(path, site)?.",
        ),
        ("# north: grid\n", ", line 5: the file does not say how grid north lies to true north; add a line …"),
        (
            "# north: grid, declination: 1\n",
            ", line 1, column \"declination\": azimuths from grid north have no declination; state the convergence.",
        ),
        (
            "# north: magnetic, convergence: 1\n",
            ", line 1, column \"convergence\": azimuths from magnetic north have no convergence; state the declination.",
        ),
        (
            "# north: true, declination: 1\n",
            ", line 1, column \"declination\": azimuths from true north need no correction; remove the line, or correct \"north\".",
        ),
        (
            "# north: grid, convergence: 1, north_correction: 1\n",
            ", line 1, column \"convergence\": \"north_correction\" states the correction of the north too; keep one of the two.",
        ),
        (
            "# north: magnetic, declination: 2,5\n",
            ", line 1, column \"declination\": \"2,5\" has a decimal comma; write decimals with a point.",
        ),
        (
            "# north: magnetic, declination: 181\n",
            ", line 1, column \"declination\": 181° is not between -180° and 180°; write the convergence or declination in degrees, east positive.",
        ),
    ] {
        let text = |s: &Sample| whole(s).replacen("# north: magnetic, declination: 2.5\n", north, 1);
        let said = said(with_norths, None, text);
        let words = format!("t.csv{words}");
        let same = |s: &String| words.strip_suffix('…').map_or(*s == words, |begin| s.starts_with(begin));
        assert!(said.iter().all(same), "{words}\n{said:#?}");
    }
    // With a site, magnetic north needs no more; grid north needs the site's grid.
    let bare = |north: &'static str| move |s: &Sample| whole(s).replace("magnetic, declination: 2.5", north);
    assert_eq!(said(with_norths, Some(site), bare("magnetic")), ["read", "read"]);
    let of_grid = said(with_norths, Some(site), bare("grid"));
    assert!(
        of_grid[0] == of_grid[1] && of_grid[0].starts_with("t.csv, line 1, column \"north\": The site"),
        "{of_grid:#?}"
    );
}
