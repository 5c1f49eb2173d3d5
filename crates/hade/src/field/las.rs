//! One curve of a LAS 2.0 file against depth, read strictly and line by line.
//!
//! The format: Canadian Well Logging Society, LAS Version 2.0, update of January 2014.

use std::fs::File;
use std::io::Read;
use std::path::Path;

use super::las_header::{Entry, Header, find};
use crate::error::Result;
use crate::lines::{Lines, number, shown};
use crate::units::Length;

/// More rows than this are refused: at a step of 1 cm they are 20 km of hole.
pub(super) const MOST_ROWS: usize = 2_000_000;

/// A curve as it stands in the file: depths in metres, values in the file's unit, NaN where the
/// file says there is none.
#[derive(Debug)]
pub(super) struct Curve {
    pub depths: Vec<f64>,
    pub values: Vec<f64>,
    /// The line each row began on.
    pub lines: Vec<u32>,
    pub unit: String,
    pub unit_line: usize,
    pub parameters: Vec<Entry>,
    pub well: Vec<Entry>,
    pub sha256: String,
    pub path: String,
}

pub(super) fn read_file(path: &Path, curve: &str) -> Result<Curve> {
    read::<File>(Lines::open(path)?, curve)
}

/// What the header says about the data.
struct Layout {
    wrapped: bool,
    null: f64,
    depth_unit: fn(f64) -> Length,
    unit_name: String,
    start: f64,
    stop: f64,
    step: f64,
    /// How many curves, and which is asked for.
    count: usize,
    place: usize,
}

pub(super) fn read<R: Read>(mut lines: Lines<R>, curve: &str) -> Result<Curve> {
    let header = Header::read(&mut lines)?;
    let layout = layout(&lines, &header, curve)?;
    let mut rows = Rows::new(&layout);
    let mut pending: Vec<String> = Vec::new();
    let mut pending_line = 0;
    while let Some(text) = lines.line_lossy()? {
        let line = text.trim();
        if line.is_empty() || line.starts_with('#') {
            continue;
        }
        if line.starts_with('~') {
            return Err(
                lines.bad(format!("\"{}\" stands after the data", shown(line)), "keep ~A as the last section, once")
            );
        }
        let values = line.split_whitespace();
        if !layout.wrapped {
            let values: Vec<&str> = values.collect();
            if values.len() != layout.count {
                return Err(miscounted(&lines, values.len(), layout.count, line));
            }
            rows.push(&lines, &values, lines.number())?;
            continue;
        }
        // Wrapped: the depth stands alone on its line, the other values on as many as they need.
        if pending.is_empty() {
            pending_line = lines.number();
        }
        pending.extend(values.map(str::to_owned));
        if pending.len() > layout.count {
            return Err(miscounted(&lines, pending.len(), layout.count, line));
        }
        if pending.len() == layout.count {
            let values: Vec<&str> = pending.iter().map(String::as_str).collect();
            rows.push(&lines, &values, pending_line)?;
            pending.clear();
        }
    }
    if !pending.is_empty() {
        return Err(lines.bad_at(
            Some(pending_line),
            None,
            format!("the last row has {} of {} values", pending.len(), layout.count),
            "get the file again; it is cut short",
        ));
    }
    rows.finish(&lines)?;
    let unit = header.curves.get(layout.place);
    let path = lines.path().to_owned();
    Ok(Curve {
        depths: rows.depths,
        values: rows.values,
        lines: rows.lines,
        unit: unit.map(|e| e.unit.clone()).unwrap_or_default(),
        unit_line: unit.map_or(0, |e| e.line),
        parameters: header.parameters,
        well: header.well,
        sha256: lines.sha256(),
        path,
    })
}

fn miscounted<R: Read>(lines: &Lines<R>, got: usize, count: usize, line: &str) -> crate::error::Error {
    let why = format!("the row has {got} values for {count} curves");
    if line.contains([',', ';']) {
        return lines.bad(why, "separate values by spaces and write decimals with a point");
    }
    lines.bad(why, if got < count { "get the file again; the row is cut short" } else { "list every curve in ~C" })
}

fn layout<R: Read>(lines: &Lines<R>, header: &Header, curve: &str) -> Result<Layout> {
    let of = |entries: &[Entry], name: &str, section: &str| -> Result<Entry> {
        find(entries, name).cloned().ok_or_else(|| {
            lines.bad_at(
                None,
                None,
                format!("{name} is missing in section {section}"),
                format!("add the line {name} to {section}"),
            )
        })
    };
    let value = |entry: &Entry| -> Result<f64> {
        number(&entry.value).map_err(|(why, fix)| lines.bad_at(Some(entry.line), Some(&entry.mnemonic), why, fix))
    };
    let version = of(&header.version, "VERS", "~V")?;
    if version.value.trim().parse::<f64>() != Ok(2.0) {
        return Err(lines.bad_at(
            Some(version.line),
            Some("VERS"),
            format!("this is LAS version {}, and version 2.0 is read", shown(&version.value)),
            "convert the file to LAS 2.0",
        ));
    }
    let wrap = of(&header.version, "WRAP", "~V")?;
    let wrapped = match wrap.value.to_uppercase().as_str() {
        "YES" => true,
        "NO" => false,
        other => {
            let why = format!("\"{}\" is neither YES nor NO", shown(other));
            return Err(lines.bad_at(Some(wrap.line), Some("WRAP"), why, "write YES or NO"));
        }
    };
    let Some(index) = header.curves.first() else {
        return Err(lines.bad_at(None, None, "section ~C names no curve", "list the curves, the depth first"));
    };
    if !["DEPT", "DEPTH"].iter().any(|name| index.mnemonic.eq_ignore_ascii_case(name)) {
        return Err(lines.bad_at(
            Some(index.line),
            Some(&index.mnemonic),
            "the first curve is not a depth",
            "give a log against depth, with DEPT as the first curve",
        ));
    }
    let depth_unit: fn(f64) -> Length = match index.unit.to_uppercase().as_str() {
        "M" => Length::m,
        "F" | "FT" => Length::ft,
        other => {
            return Err(lines.bad_at(
                Some(index.line),
                Some(&index.mnemonic),
                format!("depth in \"{}\" is not read", shown(other)),
                "write the unit of depth as M or FT",
            ));
        }
    };
    let (start, stop, step) =
        (of(&header.well, "STRT", "~W")?, of(&header.well, "STOP", "~W")?, of(&header.well, "STEP", "~W")?);
    let same =
        |unit: &str| unit.to_uppercase().trim_end_matches('T') == index.unit.to_uppercase().trim_end_matches('T');
    if let Some(other) = [&start, &stop, &step].into_iter().find(|e| !same(&e.unit)) {
        return Err(lines.bad_at(
            Some(other.line),
            Some(&other.mnemonic),
            format!("its unit \"{}\" is not the depth's, \"{}\"", shown(&other.unit), index.unit),
            "state STRT, STOP and STEP in the unit of the depth curve",
        ));
    }
    let null = of(&header.well, "NULL", "~W")?;
    let mut places = header.curves.iter().enumerate().skip(1).filter(|(_, e)| e.mnemonic.eq_ignore_ascii_case(curve));
    let place = match (places.next(), places.next()) {
        (Some((place, _)), None) => place,
        (Some(_), Some((_, second))) => {
            return Err(lines.bad_at(
                Some(second.line),
                Some(curve),
                "two curves have this name",
                "rename one of them",
            ));
        }
        (None, _) => {
            let names: Vec<&str> = header.curves.iter().skip(1).take(30).map(|e| e.mnemonic.as_str()).collect();
            return Err(lines.bad_at(
                None,
                Some(curve),
                format!("there is no such curve; there are: {}", names.join(", ")),
                "ask for one of these",
            ));
        }
    };
    let step_value = value(&step)?;
    if step_value < 0.0 {
        return Err(lines.bad_at(
            Some(step.line),
            Some("STEP"),
            "the log runs upward",
            "write the rows with depth rising, and STEP positive",
        ));
    }
    Ok(Layout {
        wrapped,
        null: value(&null)?,
        depth_unit,
        unit_name: index.unit.to_lowercase(),
        start: value(&start)?,
        stop: value(&stop)?,
        step: step_value,
        count: header.curves.len(),
        place,
    })
}

/// The rows as they are taken in.
struct Rows<'a> {
    layout: &'a Layout,
    depths: Vec<f64>,
    values: Vec<f64>,
    lines: Vec<u32>,
    last: Option<f64>,
}

impl<'a> Rows<'a> {
    fn new(layout: &'a Layout) -> Self {
        Rows { layout, depths: Vec::new(), values: Vec::new(), lines: Vec::new(), last: None }
    }

    /// How far a depth may lie from where STRT, STOP and STEP put it, in the file's unit.
    fn slack(&self) -> f64 {
        (0.01 * self.layout.step).max(1e-3)
    }

    fn push<R: Read>(&mut self, lines: &Lines<R>, values: &[&str], line: usize) -> Result<()> {
        let l = self.layout;
        let read = |place: usize, name: &str| -> Result<f64> {
            let text = values.get(place).copied().unwrap_or_default();
            number(text).map_err(|(why, fix)| lines.bad_at(Some(line), Some(name), why, fix))
        };
        let bad = |why: String, fix: &str| lines.bad_at(Some(line), Some("DEPT"), why, fix);
        let depth = read(0, "DEPT")?;
        let value = read(l.place, "the curve asked for")?;
        if self.depths.len() >= MOST_ROWS {
            return Err(bad(format!("the log has more than {MOST_ROWS} rows"), "resample it at a longer step"));
        }
        match self.last {
            None if (depth - l.start).abs() > self.slack() => {
                return Err(bad(
                    format!("the data begin at {depth} {0} and STRT says {1} {0}", l.unit_name, l.start),
                    "correct STRT or get the file again",
                ));
            }
            Some(above) if depth <= above => {
                return Err(bad(
                    format!("depth {depth} does not lie below {above}"),
                    "sort the rows by depth and keep one for each",
                ));
            }
            Some(above) if l.step > 0.0 && (depth - above - l.step).abs() > self.slack() => {
                return Err(bad(
                    format!("depth goes from {above} to {depth} {} and STEP says {}", l.unit_name, l.step),
                    "restore the missing rows (with NULL), or state STEP 0 for an irregular log",
                ));
            }
            _ => {}
        }
        self.lines.push(u32::try_from(line).unwrap_or(u32::MAX));
        self.last = Some(depth);
        self.depths.push((l.depth_unit)(depth).in_m());
        self.values.push(if value == l.null { f64::NAN } else { value });
        Ok(())
    }

    fn finish<R: Read>(&self, lines: &Lines<R>) -> Result<()> {
        let l = self.layout;
        match self.last {
            None => {
                Err(lines.bad_at(None, None, "the data section ~A is empty", "get the file again; it is cut short"))
            }
            Some(last) if (last - l.stop).abs() > self.slack() => Err(lines.bad_at(
                Some(lines.number()),
                Some("DEPT"),
                format!("the data end at {last} {0} and STOP says {1} {0}", l.unit_name, l.stop),
                "get the file again if it is cut short, or correct STOP",
            )),
            Some(_) => Ok(()),
        }
    }
}

#[cfg(test)]
pub(super) mod tests {
    use super::*;
    use proptest::prelude::*;

    pub const GOOD: &str = "~VERSION INFORMATION\n VERS. 2.0 : CWLS LOG ASCII STANDARD - VERSION 2.0\n WRAP. NO : ONE LINE PER DEPTH STEP\n# a remark\n~WELL\nSTRT.M 100.0 : START\nSTOP.M 103.0 : STOP\nSTEP.M 1.0 : STEP\nNULL. -999.25 : NULL\nWELL. X-1 : WELL\n~CURVE\nDEPT.M : DEPTH\nGR.GAPI : GAMMA\nRHOB.G/C3 : DENSITY\n~PARAMETER\nDREF. RT : DEPTH REFERENCE\nEREF.M 31.8 : ELEVATION OF DEPTH REFERENCE\nEGL.M 25.0 : GROUND\n~A DEPT GR RHOB\n100.0 50 2.0\n101.0 51 2.1\n102.0 52 2.2\n103.0 53 2.3\n";

    pub fn parse(text: &str) -> Result<Curve> {
        read(Lines::over(text.as_bytes(), "l.las"), "RHOB")
    }
    fn refused(text: &str) -> String {
        parse(text).unwrap_err().to_string()
    }
    fn with(from: &str, to: &str) -> String {
        assert!(GOOD.contains(from), "{from}");
        refused(&GOOD.replacen(from, to, 1))
    }

    #[test]
    fn reads_a_curve_unwrapped_wrapped_and_with_carriage_returns() {
        let plain = parse(GOOD).unwrap();
        assert_eq!(plain.values, [2.0, 2.1, 2.2, 2.3]);
        assert_eq!(plain.depths, [100.0, 101.0, 102.0, 103.0]);
        assert_eq!(plain.unit, "G/C3");
        assert_eq!(plain.lines, [20, 21, 22, 23]);
        let wrapped = GOOD
            .replace("WRAP. NO", "WRAP. YES")
            .replace("100.0 50 2.0", "100.0\n50\n2.0")
            .replace("101.0 51 2.1", "101.0\n51 2.1");
        assert_eq!(parse(&wrapped).unwrap().values, plain.values);
        assert_eq!(parse(&GOOD.replace('\n', "\r\n")).unwrap().values, plain.values);
        let feet = parse(
            &GOOD
                .replace("STRT.M", "STRT.F")
                .replace("STOP.M", "STOP.FT")
                .replace("STEP.M", "STEP.FT")
                .replace("DEPT.M", "DEPT.FT"),
        );
        assert!((feet.unwrap().depths[3] - 103.0 * 0.3048).abs() < 1e-12);
        let nulls = parse(&GOOD.replace("51 2.1", "51 -999.25")).unwrap();
        assert!(nulls.values[1].is_nan());
        let irregular = parse(&GOOD.replace("STEP.M 1.0", "STEP.M 0").replace("101.0 51", "100.2 51")).unwrap();
        assert_eq!(irregular.depths[1], 100.2);
    }

    #[test]
    fn what_is_no_las_2_0_is_refused_with_its_line() {
        assert!(refused("").contains("the file is empty"));
        assert!(refused("a,b\n1,2\n").starts_with("l.las, line 1: this is not a LAS file"));
        assert!(refused("~W\n").contains("not a LAS file"));
        assert!(with("VERS. 2.0", "VERS. 1.20").contains("LAS version 1.20, and version 2.0 is read"));
        assert!(with("VERS. 2.0", "VERS. 3.0").contains("convert the file"));
        assert!(with("VERS.", "VARS.").contains("VERS is missing in section ~V"));
        assert!(with("WRAP. NO", "WRAP. MAYBE").contains("neither YES nor NO"));
        assert!(with("~PARAMETER", "~TOPS").contains("no section of LAS 2.0"));
        assert!(with("~PARAMETER", "~CURVE").contains("stands twice"));
        assert!(
            with("STRT.M", "STRT").contains("\"STRT 100.0 : START\" has no colon")
                || with("STRT.M 100.0 : START", "STRT M 100 : START").contains("has no dot")
        );
        assert!(with("STRT.M 100.0 : START", "STRT.M 100.0").contains("no colon"));
        assert!(with("STRT.M", "STRT.F").contains("is not the depth's"));
        assert!(with("DEPT.M", "DEPT.KM").contains("depth in \"KM\" is not read"));
        assert!(with("DEPT.M", "TIME.S").contains("not a depth"));
        assert!(with("NULL. -999.25", "NULL. none").contains("not a number"));
        assert!(with("NULL.", "NIL.").contains("NULL is missing"));
        assert!(with("STEP.M 1.0", "STEP.M -1.0").contains("runs upward"));
        assert!(GOOD.split_once("~A").map(|(head, _)| refused(head)).unwrap().contains("ends before its data section"));
    }

    #[test]
    fn curves_and_rows_that_do_not_fit_are_refused() {
        assert!(with("RHOB.", "RHOZ.").contains("column \"RHOB\": there is no such curve; there are: GR, RHOZ"));
        assert!(with("GR.GAPI", "RHOB.K/M3").contains("two curves"));
        assert!(
            with("103.0 53 2.3\n", "103.0 53")
                .starts_with("l.las, line 23: the row has 2 values for 3 curves; get the file again")
        );
        assert!(with("103.0 53 2.3\n", "").contains("the data end at 102 m and STOP says 103 m"));
        assert!(with("102.0 52", "102.0 52 7").contains("list every curve"));
        assert!(with("102.0 52 2.2", "102,0;52;2,2").contains("separate values by spaces"));
        assert!(with("52 2.2", "52 two").contains("\"two\" is not a number"));
        assert!(with("52 2.2", "52 2,2").contains("decimal comma"));
        assert!(with("102.0 52", "101.0 52").contains("does not lie below"));
        assert!(with("102.0 52", "102.5 52").contains("STEP says 1"));
        assert!(with("100.0 50", "99.0 50").contains("STRT says 100"));
        assert!(with("103.0 53 2.3", "103.0 53 2.3\n~A").contains("stands after the data"));
        let empty = format!("{}~A\n", GOOD.split_once("~A").unwrap().0);
        assert!(refused(&empty).contains("is empty"));
        let cut = GOOD.replace("WRAP. NO", "WRAP. YES").replace("103.0 53 2.3", "103.0 53");
        assert!(refused(&cut).contains("2 of 3 values"));
        let over = GOOD.replace("WRAP. NO", "WRAP. YES").replace("103.0 53 2.3", "103.0 53 2.3 4\n5");
        assert!(refused(&over).contains("4 values for 3 curves"));
    }

    /// Rows without end, made as they are read: refused by count, not by memory.
    struct Endless(Vec<u8>, usize);
    impl Read for Endless {
        fn read(&mut self, into: &mut [u8]) -> std::io::Result<usize> {
            while self.0.len() < into.len() {
                self.0.extend_from_slice(format!("{} 1 2\n", 100 + self.1).as_bytes());
                self.1 += 1;
            }
            let rest = self.0.split_off(into.len());
            into.copy_from_slice(&self.0);
            self.0 = rest;
            Ok(into.len())
        }
    }

    #[test]
    fn a_log_without_end_is_refused_by_its_rows() {
        let head = GOOD.split_once("~A").unwrap().0;
        let start = format!("{head}~A\n").into_bytes();
        let e = read(Lines::over(Endless(start, 0), "l.las"), "RHOB").unwrap_err().to_string();
        assert!(e.contains("more than 2000000 rows"), "{e}");
    }

    proptest! {
        #[test]
        fn never_panics_on_any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..2000)) {
            let _ = read(Lines::over(bytes.as_slice(), "x"), "RHOB");
        }

        #[test]
        fn never_panics_on_near_misses(cut in 0..600_usize, junk in "[ -~\n]{0,60}") {
            let cut = cut.min(GOOD.len());
            let (head, tail) = GOOD.split_at(cut);
            let _ = parse(&format!("{head}{junk}{tail}"));
            let _ = parse(&format!("{head}{junk}"));
        }
    }
}
