//! A density log: bulk density against depth, with its gaps and its datum.

use std::path::Path;
use std::sync::Arc;

use serde::{Deserialize, Serialize};

use super::column::{HEAVIEST, LIGHTEST, require_rock};
use super::las::{self, Curve};
use super::las_header::{Entry, find};
use super::overburden::{Overburden, OverburdenInputs};
use crate::error::{Error, Result};
use crate::frames::{Datum, DatumTie, Name};
use crate::lines::{number, shown};
use crate::units::{Density, Length, Quantity, require_between, require_not_negative, with_typed_unit};

/// A bulk-density log. Its depths are taken as true vertical depths: the log must come from a
/// vertical hole, or be brought to TVD first. Copies share the samples.
#[derive(Clone, Debug, PartialEq)]
pub struct DensityLog {
    data: Arc<LogData>,
}

#[derive(Clone, Debug, PartialEq)]
pub(super) struct LogData {
    pub about: LogAbout,
    /// Depths of the samples that hold a value, metres below the datum, rising.
    pub depths: Vec<f64>,
    /// Their densities, kg/m³.
    pub densities: Vec<f64>,
    pub gaps: Vec<Gap>,
    /// The longest gap that is bridged, by the engineer's choice.
    pub bridged: Option<Length>,
}

/// What a log says about itself besides its samples.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct LogAbout {
    pub hole: Option<Name>,
    pub source: LogSource,
    pub datum: Datum,
    pub tie: Option<DatumTie>,
    pub tie_in_file: bool,
}

/// Where the samples of a log came from.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "from", rename_all = "snake_case")]
pub enum LogSource {
    /// They were typed, or computed, in the notebook.
    Typed,
    /// They were read from a file.
    File {
        /// The path as it was given.
        path: String,
        /// The SHA-256 of what was read.
        sha256: String,
        /// The curve.
        curve: String,
    },
}

/// A stretch of a log without values, between the samples above and below it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Gap {
    /// The depth of the last value above.
    pub top: Length,
    /// The depth of the first value below.
    pub bottom: Length,
}

/// No log reaches deeper than this, metres; beyond it a unit was mistaken.
const DEEPEST: f64 = 20_000.0;

impl Gap {
    /// Its length.
    pub fn length(self) -> Length {
        self.bottom - self.top
    }
}

impl DensityLog {
    /// Reads one curve of a LAS 2.0 file (Canadian Well Logging Society, 2014) as bulk density in
    /// G/C3, G/CC, G/CM3, K/M3 or KG/M3, against a depth in M, F or FT that counts from `datum`.
    ///
    /// The section ~P may state the levels of the hole: `EREF` (elevation of the depth reference,
    /// here the rotary table; also `EKB`, `EDF`) and `EGL` (of the ground), above mean sea level;
    /// and `DREF`, the reference itself, which must agree with `datum`. Read line by line; at most
    /// two million rows.
    ///
    /// # Errors
    /// With file, line and what to change: no such file, not LAS 2.0, cut short, no such curve, an
    /// unknown unit, depths that do not rise or do not fit STRT, STOP and STEP, a density that no
    /// rock has, another datum in the file, fewer than two values.
    pub fn read_las(path: impl AsRef<Path>, curve: &str, datum: Datum) -> Result<Self> {
        from_curve(las::read_file(path.as_ref(), curve)?, curve, datum)
    }

    /// A log from samples, in order of depth below a datum.
    ///
    /// # Errors
    /// With fewer than two samples, depths that do not rise or lie beyond 20 km, or a density outside 500–6000 kg/m³.
    pub fn from_samples(samples: &[(Length, Density)], datum: Datum) -> Result<Self> {
        let mut last = f64::NEG_INFINITY;
        for (depth, density) in samples {
            depth.finite("depth")?;
            require_rock(*density)?;
            if depth.si() <= last {
                return Err(Error::not_physical(
                    format!("Depth {}", with_typed_unit(*depth)),
                    "it does not lie below the one before; sort the samples by depth.",
                ));
            }
            last = depth.si();
        }
        let about = LogAbout { hole: None, source: LogSource::Typed, datum, tie: None, tie_in_file: false };
        let (depths, densities) = samples.iter().map(|(z, rho)| (z.si(), rho.si())).unzip();
        DensityLog::build(about, depths, densities, Vec::new())
    }

    fn build(about: LogAbout, depths: Vec<f64>, densities: Vec<f64>, gaps: Vec<Gap>) -> Result<Self> {
        if depths.len() < 2 {
            return Err(Error::out_of_range("the number of density samples", depths.len().to_string(), "two or more"));
        }
        for end in [depths.first(), depths.last()].into_iter().flatten() {
            require_between("depth of the log", Length::m(*end), Length::m(-DEEPEST), Length::m(DEEPEST))?;
        }
        Ok(DensityLog { data: Arc::new(LogData { about, depths, densities, gaps, bridged: None }) })
    }

    fn changed(&self, change: impl FnOnce(&mut LogData)) -> Self {
        let mut data = (*self.data).clone();
        change(&mut data);
        DensityLog { data: Arc::new(data) }
    }

    /// The same under the name of its hole.
    pub fn named(&self, hole: &str) -> Self {
        self.changed(|data| data.about.hole = Some(Name::new(hole)))
    }

    /// With the levels of the hole the log was run in.
    ///
    /// # Errors
    /// When the file states other levels.
    pub fn tied(&self, tie: DatumTie) -> Result<Self> {
        match self.data.about.tie {
            Some(stated) if stated == tie => Ok(self.clone()),
            Some(stated) if self.data.about.tie_in_file => Err(Error::not_physical(
                format!("The levels of the log's hole ({})", tie.words()),
                format!("the log file states others: {}; correct one of the two.", stated.words()),
            )),
            _ => Ok(self.changed(|data| {
                data.about.tie = Some(tie);
                data.about.tie_in_file = false;
            })),
        }
    }

    /// Lets gaps up to a length be bridged by a straight line between the values above and below.
    /// It is a choice of the engineer and printed as one.
    ///
    /// # Errors
    /// When the length is negative or not finite.
    pub fn bridge_gaps_up_to(&self, length: Length) -> Result<Self> {
        let length = require_not_negative("the longest gap to bridge", length)?;
        Ok(self.changed(|data| data.bridged = Some(length)))
    }

    /// The gaps inside the log, from the top.
    pub fn gaps(&self) -> Vec<Gap> {
        self.data.gaps.clone()
    }

    /// The depths of the first and the last value, below the datum of the log.
    pub fn range(&self) -> (Length, Length) {
        let ends = (self.data.depths.first(), self.data.depths.last());
        (Length::m(*ends.0.unwrap_or(&f64::NAN)), Length::m(*ends.1.unwrap_or(&f64::NAN)))
    }

    /// The datum of its depths.
    pub fn datum(&self) -> Datum {
        self.data.about.datum
    }

    /// The levels of the hole the log was run in.
    ///
    /// # Errors
    /// When neither the file nor the notebook stated them.
    pub fn tie(&self) -> Result<DatumTie> {
        self.data.about.tie.ok_or_else(|| {
            Error::undeclared(
                "This log does not say how high its rotary table is",
                "write EREF and EGL into section ~P of the file, or add .tied(DatumTie::rotary_table_at(…)?.with_ground_at(…)?)?.",
            )
        })
    }

    /// The total vertical stress at a depth: the weight of everything above it.
    ///
    /// # Errors
    /// When the depth is outside the log (nothing is extrapolated), a gap above it may not be
    /// bridged, a level that is needed was not stated, or the top density is none of rock.
    pub fn overburden(&self, inputs: OverburdenInputs) -> Result<Overburden> {
        Overburden::of_log(self, inputs)
    }

    pub(super) fn data(&self) -> &LogData {
        &self.data
    }
}

/// Kilograms per cubic metre in one unit of the file.
fn density_unit(unit: &str) -> Option<f64> {
    match unit.to_uppercase().as_str() {
        "G/C3" | "G/CC" | "G/CM3" => Some(1000.0),
        "K/M3" | "KG/M3" => Some(1.0),
        _ => None,
    }
}

fn from_curve(curve: Curve, name: &str, datum: Datum) -> Result<DensityLog> {
    let bad = |line: Option<usize>, column: &str, why: String, fix: &str| Error::Unreadable {
        path: curve.path.clone(),
        line,
        column: Some(column.to_owned()),
        why,
        fix: fix.to_owned(),
    };
    let Some(unit) = density_unit(&curve.unit) else {
        return Err(bad(
            Some(curve.unit_line),
            name,
            format!("\"{}\" is no unit of density that is known here", shown(&curve.unit)),
            "write the unit of the curve as G/C3 or K/M3",
        ));
    };
    let mut depths = Vec::with_capacity(curve.depths.len());
    let mut densities = Vec::with_capacity(curve.depths.len());
    let mut gaps = Vec::new();
    let mut missing = false;
    for ((depth, value), line) in curve.depths.iter().zip(&curve.values).zip(&curve.lines) {
        if value.is_nan() {
            missing = true;
            continue;
        }
        let density = value * unit;
        if !(LIGHTEST..=HEAVIEST).contains(&density) {
            return Err(bad(
                Some(*line as usize),
                name,
                format!("at depth {depth} m the density is {density} kg/m³, and rock has {LIGHTEST} to {HEAVIEST}"),
                "correct the unit of the curve, or mark bad values with NULL",
            ));
        }
        if let (true, Some(top)) = (missing, depths.last()) {
            gaps.push(Gap { top: Length::m(*top), bottom: Length::m(*depth) });
        }
        missing = false;
        depths.push(*depth);
        densities.push(density);
    }
    if depths.len() < 2 {
        return Err(bad(
            None,
            name,
            format!("the curve holds {} values", depths.len()),
            "give a curve with at least two",
        ));
    }
    let entry = |e: &Entry, why: String, fix: &str| bad(Some(e.line), &e.mnemonic, why, fix);
    if let Some(reference) = find(&curve.parameters, "DREF") {
        match Datum::from_words(&reference.value) {
            Some(stated) if stated == datum => {}
            Some(stated) => {
                return Err(entry(
                    reference,
                    format!("the file counts depth from {} and {} was asked for", stated.words(), datum.words()),
                    "ask for the datum the file states",
                ));
            }
            None => {
                let why = format!("\"{}\" is no depth reference that is known here", shown(&reference.value));
                return Err(entry(reference, why, "write RT, KB, DF, GL, MSL or ML"));
            }
        }
    }
    let level = |names: &[&str]| -> Result<Option<(Length, &Entry)>> {
        let mut found: Option<(Length, &Entry)> = None;
        for e in names.iter().filter_map(|n| find(&curve.parameters, n)) {
            let value = number(&e.value).map_err(|(why, fix)| entry(e, why, &fix))?;
            let value = match e.unit.to_uppercase().as_str() {
                "M" => Length::m(value),
                "F" | "FT" => Length::ft(value),
                _ => return Err(entry(e, "the elevation has no unit".to_owned(), "write its unit as M or FT")),
            };
            if let Some((other, _)) = found.filter(|(other, _)| *other != value) {
                return Err(entry(
                    e,
                    format!("the elevation is {value} here and {other} above"),
                    "keep one of the two",
                ));
            }
            found = Some((value, e));
        }
        Ok(found)
    };
    let reference: &[&str] = if datum == Datum::RotaryTable { &["EREF", "EKB", "EDF"] } else { &["EKB", "EDF"] };
    let plain =
        |e: &Entry, error: Error| entry(e, error.to_string().trim_end_matches('.').to_owned(), "correct the elevation");
    let (rotary, ground) = (level(reference)?, level(&["EGL"])?);
    let tie = match rotary {
        None => None,
        Some((rotary, e)) => {
            let tie = DatumTie::rotary_table_at(rotary).map_err(|error| plain(e, error))?;
            Some(match ground {
                Some((ground, e)) => tie.with_ground_at(ground).map_err(|error| plain(e, error))?,
                None => tie,
            })
        }
    };
    let hole = find(&curve.well, "WELL").map(|e| e.value.as_str()).filter(|v| !v.is_empty());
    let about = LogAbout {
        hole: hole.map(|name| Name::new(&shown(name))),
        source: LogSource::File { path: curve.path.clone(), sha256: curve.sha256.clone(), curve: name.to_uppercase() },
        datum,
        tie,
        tie_in_file: tie.is_some(),
    };
    DensityLog::build(about, depths, densities, gaps)
}

#[cfg(test)]
pub(super) mod tests {
    use super::super::las::tests::{GOOD, parse};
    use super::*;
    use crate::units::Units;

    pub fn log(text: &str) -> Result<DensityLog> {
        from_curve(parse(text)?, "RHOB", Datum::RotaryTable)
    }
    fn with(from: &str, to: &str) -> String {
        assert!(GOOD.contains(from), "{from}");
        log(&GOOD.replacen(from, to, 1)).unwrap_err().to_string()
    }

    #[test]
    fn reads_units_levels_and_the_name_of_the_hole() {
        let log_g = log(GOOD).unwrap();
        assert_eq!(log_g.tie().unwrap().words(), "rotary table 31.8 m and ground 25.0 m above mean sea level");
        assert_eq!(log_g.data().about.hole.unwrap().text(), "X-1");
        assert_eq!(log_g.range(), (100.m(), 103.m()));
        let log_k =
            log(&GOOD.replace("G/C3", "K/M3").replace(" 2.", " 2").replace("VERS. 20 ", "VERS. 2.0 ")).unwrap_err();
        assert!(log_k.to_string().contains("20 kg/m³"), "{log_k}");
        assert!(log(&GOOD.replace("EREF.M 31.8", "EREF.FT 104.33")).is_ok());
    }

    #[test]
    fn unknown_units_datums_and_levels_are_refused() {
        assert!(with("G/C3", "PPG").contains("\"PPG\" is no unit of density"));
        assert!(with("RHOB.G/C3", "RHOB.").contains("write the unit of the curve"));
        assert!(with("DREF. RT", "DREF. GL").contains("from the ground and the rotary table was asked for"));
        assert!(with("DREF. RT", "DREF. TOP").contains("write RT"));
        assert!(with("EREF.M 31.8", "EREF. 31.8").contains("has no unit"));
        assert!(with("EREF.M 31.8", "EREF.M high").contains("not a number"));
        assert!(with("EGL.M 25.0", "EGL.M 50").contains("above the rotary table"));
        assert!(with("EGL.M 25.0", "EKB.M 30").contains("31.8 m above"));
        let heavy = with("51 2.1", "51 0.0021");
        assert!(heavy.starts_with("l.las, line 21") && heavy.contains("mark bad values with NULL"), "{heavy}");
        let loose = log(&GOOD.replace("EREF.M 31.8", "NOTE.M 31.8")).unwrap();
        assert!(loose.tie().unwrap_err().to_string().contains("EREF"));
        let tie = DatumTie::rotary_table_at(31.8.m()).unwrap();
        assert!(loose.tied(tie).unwrap().tie().is_ok());
        assert!(log(GOOD).unwrap().tied(tie).unwrap_err().to_string().contains("states others"));
    }

    #[test]
    fn gaps_are_reported_and_values_at_the_ends_left_off() {
        let text = GOOD.replace("51 2.1", "51 -999.25");
        assert_eq!(log(&text).unwrap().gaps(), [Gap { top: 100.m(), bottom: 102.m() }]);
        let ends = GOOD.replace("50 2.0", "50 -999.25").replace("53 2.3", "53 -999.25");
        let log_e = log(&ends).unwrap();
        assert_eq!((log_e.gaps().len(), log_e.range()), (0, (101.m(), 102.m())));
        let none = ends.replace("51 2.1", "51 -999.25");
        assert!(log(&none).unwrap_err().to_string().contains("holds 1 values"));
    }

    #[test]
    fn samples_are_held_to_the_same_rules() {
        let make = |s: &[(Length, Density)]| DensityLog::from_samples(s, Datum::Ground);
        assert!(make(&[(1.m(), 2000.kg_m3())]).is_err());
        assert!(
            make(&[(1.m(), 2000.kg_m3()), (1.m(), 2000.kg_m3())]).unwrap_err().to_string().contains("sort the samples")
        );
        assert!(make(&[(1.m(), 2.kg_m3()), (2.m(), 2.kg_m3())]).is_err());
        let log = make(&[(1.m(), 2000.kg_m3()), (2.m(), 2000.kg_m3())]).unwrap();
        assert!(log.bridge_gaps_up_to((-1).m()).is_err());
        assert_eq!(log.datum(), Datum::Ground);
        assert!(make(&[(1e16.m(), 2000.kg_m3()), ((1e16 + 4.0).m(), 2000.kg_m3())]).unwrap_err().is_range());
    }
}
